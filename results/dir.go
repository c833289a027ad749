package results

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"
)

// Names within a run directory.
const (
	manifestFile = "bendtest.json"
	studyFile    = "study.toml"
	partsFolder  = "parts"
	tablesFolder = "tables"
	lockFile     = "lock"
	taskFiles    = "task-" // begins the names of the manifests of tasks
)

// A Dir is a run directory. Methods may be called from several goroutines unless
// they say otherwise.
type Dir struct {
	path     string
	disk     disk
	lock     *lock
	manifest string // name of the manifest that this process writes
}

// A ForeignDirError says that a directory holds something else than a run.
type ForeignDirError struct{ Path string }

func (e *ForeignDirError) Error() string {
	return fmt.Sprintf("%s is not empty and not a run directory; name a new one", e.Path)
}

// A LockedError says that another process writes to the run directory.
type LockedError struct{ Path string }

func (e *LockedError) Error() string {
	return fmt.Sprintf("another process is writing to %s; wait for it or name another directory", e.Path)
}

// Create opens a run directory for writing, making it if need be, and locks it. It
// refuses a directory that holds something else (*ForeignDirError) and one that
// another process writes to (*LockedError). What a crash left half-made is removed.
func Create(path string) (*Dir, error) { return create(path, osDisk{}) }

func create(path string, on disk) (*Dir, error) {
	d, err := enter(path, on, manifestFile, false)
	if err != nil {
		return nil, err
	}
	if err := sweepTemporaries(path); err != nil {
		d.Close()
		return nil, err
	}
	return d, nil
}

// Join opens a run directory for one task among several processes that write different
// parts to it at the same time. Each keeps a manifest of its own; none may write tables.
// Errors are those of Create.
func Join(path, task string) (*Dir, error) {
	return enter(path, osDisk{}, taskFiles+task+".json", true)
}

// enter makes a run directory if need be and locks it.
func enter(path string, on disk, manifest string, shared bool) (*Dir, error) {
	if err := checkForeign(path); err != nil {
		return nil, err
	}
	for _, folder := range []string{partsFolder, tablesFolder} {
		if err := os.MkdirAll(filepath.Join(path, folder), 0o755); err != nil {
			return nil, err
		}
	}
	held, err := takeLock(filepath.Join(path, lockFile), shared)
	if errors.Is(err, errLocked) {
		return nil, &LockedError{path}
	}
	if err != nil {
		return nil, err
	}
	return &Dir{path: path, disk: on, lock: held, manifest: manifest}, nil
}

// checkForeign refuses a directory that is neither empty nor a run.
func checkForeign(path string) error {
	entries, err := os.ReadDir(path)
	if errors.Is(err, fs.ErrNotExist) {
		return nil
	}
	if err != nil {
		return err
	}
	for _, e := range entries {
		switch e.Name() {
		case manifestFile:
			return nil
		case lockFile, partsFolder, tablesFolder, studyFile: // a run that was killed at its very start
		default:
			if !strings.HasPrefix(e.Name(), manifestFile+temporary) && !strings.HasPrefix(e.Name(), studyFile+temporary) && !strings.HasPrefix(e.Name(), taskFiles) {
				return &ForeignDirError{path}
			}
		}
	}
	return nil
}

// Open opens a run directory for reading.
func Open(path string) (*Dir, error) {
	_, err := os.Stat(filepath.Join(path, manifestFile))
	if tasks, _ := filepath.Glob(filepath.Join(path, taskFiles+"*.json")); err != nil && len(tasks) == 0 {
		return nil, fmt.Errorf("%s is not a run directory: %w", path, err)
	}
	return &Dir{path: path, disk: osDisk{}, manifest: manifestFile}, nil
}

// Close lets go of the lock.
func (d *Dir) Close() error {
	if d.lock == nil {
		return nil
	}
	return d.lock.release()
}

// Path is the directory's path.
func (d *Dir) Path() string { return d.path }

// TablePath is where a table lies.
func (d *Dir) TablePath(name string) string {
	return filepath.Join(d.path, tablesFolder, name+".parquet")
}

// RemoveTable removes a table if it is there.
func (d *Dir) RemoveTable(name string) error {
	err := os.Remove(d.TablePath(name))
	if errors.Is(err, fs.ErrNotExist) {
		return nil
	}
	return err
}

// WriteTable writes a table; rows hands its rows to the function it is given. The
// old table stays until the new one is whole.
func WriteTable[R any](d *Dir, t *Table[R], rows func(append func(*R) error) error) error {
	return commit(d.disk, d.TablePath(t.Name), func(w io.Writer) error {
		out, err := t.NewWriter(w)
		if err != nil {
			return err
		}
		if err := rows(out.Append); err != nil {
			return err
		}
		return out.Close()
	})
}

// WriteRows writes a table from a slice of rows.
func WriteRows[R any](d *Dir, t *Table[R], rows []R) error {
	return WriteTable(d, t, func(add func(*R) error) error {
		for i := range rows {
			if err := add(&rows[i]); err != nil {
				return err
			}
		}
		return nil
	})
}

// ReadTable calls yield with each row of a table, in order. The row is overwritten
// by the next.
func ReadTable[R any](d *Dir, t *Table[R], yield func(*R) error) error {
	f, err := os.Open(d.TablePath(t.Name))
	if err != nil {
		return err
	}
	defer f.Close()
	return t.Read(f, yield)
}

// ReadRows returns all rows of a table.
func ReadRows[R any](d *Dir, t *Table[R]) ([]R, error) {
	var rows []R
	err := ReadTable(d, t, func(r *R) error {
		rows = append(rows, *r)
		return nil
	})
	return rows, err
}

// TableNames lists the tables that are there, in alphabetical order.
func (d *Dir) TableNames() ([]string, error) {
	entries, err := os.ReadDir(filepath.Join(d.path, tablesFolder))
	if err != nil {
		return nil, err
	}
	var names []string
	for _, e := range entries {
		if name, ok := strings.CutSuffix(e.Name(), ".parquet"); ok {
			names = append(names, name)
		}
	}
	slices.Sort(names)
	return names, nil
}
