package results

import (
	"bufio"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
)

// A disk is what a run directory needs of the file system. Tests put one that
// fails in its place.
type disk interface {
	CreateTemp(dir, pattern string) (tempFile, error)
	Rename(from, to string) error
	SyncDir(dir string) error
}

// A tempFile is a file being written.
type tempFile interface {
	io.WriteCloser
	Name() string
	Sync() error
}

// temporary marks files in the making; a crash may leave some behind.
const temporary = ".partial-"

// commit writes a file so that path holds either what it held before or all of the
// new content, whatever happens in between: a temporary file in the same folder,
// synced, renamed, and the folder synced.
func commit(d disk, path string, write func(io.Writer) error) (err error) {
	dir, base := filepath.Split(path)
	f, err := d.CreateTemp(filepath.Clean(dir), base+temporary+"*")
	if err != nil {
		return err
	}
	defer func() {
		if err != nil {
			f.Close()
			os.Remove(f.Name())
		}
	}()
	buffer := bufio.NewWriterSize(f, 1<<16)
	if err = write(buffer); err != nil {
		return err
	}
	if err = buffer.Flush(); err != nil {
		return err
	}
	if err = f.Sync(); err != nil {
		return err
	}
	if err = f.Close(); err != nil {
		return err
	}
	if err = d.Rename(f.Name(), path); err != nil {
		return err
	}
	return d.SyncDir(filepath.Clean(dir))
}

// WriteFile writes a file anywhere so that it appears whole or not at all.
func WriteFile(path string, write func(io.Writer) error) error { return commit(osDisk{}, path, write) }

// osDisk is the real file system.
type osDisk struct{}

func (osDisk) CreateTemp(dir, pattern string) (tempFile, error) {
	f, err := os.CreateTemp(dir, pattern)
	if err != nil {
		return nil, err
	}
	if err := f.Chmod(0o644); err != nil {
		f.Close()
		os.Remove(f.Name())
		return nil, err
	}
	return f, nil
}

func (osDisk) Rename(from, to string) error { return os.Rename(from, to) }

func (osDisk) SyncDir(dir string) error {
	d, err := os.Open(dir)
	if err != nil {
		return err
	}
	defer d.Close()
	return d.Sync()
}

// sweepTemporaries removes what a crash left in the making below root.
func sweepTemporaries(root string) error {
	return filepath.WalkDir(root, func(path string, e fs.DirEntry, err error) error {
		if err != nil || e.IsDir() || !strings.Contains(e.Name(), temporary) {
			return err
		}
		return os.Remove(path)
	})
}
