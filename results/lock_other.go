//go:build !unix

package results

import (
	"errors"
	"io/fs"
	"os"
)

var errLocked = errors.New("locked by another process")

// A lock is a file that no one else may open; the system removes nothing after a
// crash, so where one is left behind it has to be deleted by hand.
type lock struct {
	file *os.File
	path string
}

// A shared lock is none here: processes that share a directory write different files.
func takeLock(path string, shared bool) (*lock, error) {
	if shared {
		return &lock{}, nil
	}
	f, err := os.OpenFile(path, os.O_CREATE|os.O_EXCL|os.O_RDWR, 0o644)
	if errors.Is(err, fs.ErrExist) {
		return nil, errLocked
	}
	if err != nil {
		return nil, err
	}
	return &lock{f, path}, nil
}

func (l *lock) release() error {
	if l.file == nil {
		return nil
	}
	l.file.Close()
	return os.Remove(l.path)
}
