//go:build unix

package results

import (
	"errors"
	"os"

	"golang.org/x/sys/unix"
)

var errLocked = errors.New("locked by another process")

// A lock is an advisory lock on an open file: the system lets go of it when the
// process ends, however it ends.
type lock struct{ file *os.File }

// takeLock locks a file, making it if need be: for this process alone, or shared with
// others that share it. The error is errLocked if another process holds it otherwise.
func takeLock(path string, shared bool) (*lock, error) {
	how := unix.LOCK_EX
	if shared {
		how = unix.LOCK_SH
	}
	f, err := os.OpenFile(path, os.O_CREATE|os.O_RDWR, 0o644)
	if err != nil {
		return nil, err
	}
	err = unix.Flock(int(f.Fd()), how|unix.LOCK_NB)
	if errors.Is(err, unix.EWOULDBLOCK) {
		err = errLocked
	}
	if err != nil {
		f.Close()
		return nil, err
	}
	return &lock{f}, nil
}

// release lets go. The file stays: removing it could let two processes in.
func (l *lock) release() error { return l.file.Close() }
