package results

import (
	"encoding/json"
	"fmt"
	"io"
	"os"
	"path/filepath"
)

// A Manifest says what ran in a directory. The study's text lies beside it in
// study.toml.
type Manifest struct {
	SchemaVersion string   `json:"schema_version"`
	Study         string   `json:"study"`                // title
	StudyHash     string   `json:"study_hash"`           // SHA-256 of study.toml
	StudyFile     string   `json:"study_file,omitempty"` // where it was read from; files it names are relative to that
	Seed          uint64   `json:"seed"`
	Starts        []Start  `json:"starts"` // one per start, resumptions included
	Parts         []string `json:"parts"`  // keys of the parts of the tables, in order; empty until they are whole
}

// A Start is one process that worked on the run.
type Start struct {
	Version string `json:"version"` // of bendtest
	Go      string `json:"go"`
	Host    string `json:"host"`
	System  string `json:"system"` // operating system and architecture
	Workers int    `json:"workers"`
	Began   string `json:"began"`           // RFC 3339
	Ended   string `json:"ended,omitempty"` // empty if it was killed
	Outcome string `json:"outcome,omitempty"`
}

// ReadManifest reads the manifest that this process writes. On a directory that was just
// made the error is fs.ErrNotExist.
func (d *Dir) ReadManifest() (*Manifest, error) {
	return readManifest(filepath.Join(d.path, d.manifest))
}

// TaskManifests reads the manifests of all tasks, in the order of their names.
func (d *Dir) TaskManifests() ([]*Manifest, error) {
	paths, err := filepath.Glob(filepath.Join(d.path, taskFiles+"*.json"))
	if err != nil {
		return nil, err
	}
	var all []*Manifest
	for _, path := range paths {
		m, err := readManifest(path)
		if err != nil {
			return nil, err
		}
		all = append(all, m)
	}
	return all, nil
}

func readManifest(path string) (*Manifest, error) {
	text, err := os.ReadFile(path)
	if err != nil {
		return nil, err
	}
	m := &Manifest{}
	if err := json.Unmarshal(text, m); err != nil {
		return nil, fmt.Errorf("%s: %w", path, err)
	}
	return m, nil
}

// WriteManifest replaces it.
func (d *Dir) WriteManifest(m *Manifest) error {
	text, err := json.MarshalIndent(m, "", "  ")
	if err != nil {
		return err
	}
	return d.writeFile(d.manifest, append(text, '\n'))
}

// WriteStudy keeps the text of the study as it is run.
func (d *Dir) WriteStudy(text []byte) error { return d.writeFile(studyFile, text) }

// ReadStudy returns the text of the study that was run, and where it lies.
func (d *Dir) ReadStudy() (path string, text []byte, err error) {
	path = filepath.Join(d.path, studyFile)
	text, err = os.ReadFile(path)
	return path, text, err
}

// writeFile commits a small file of the directory.
func (d *Dir) writeFile(name string, text []byte) error {
	return commit(d.disk, filepath.Join(d.path, name), func(w io.Writer) error {
		_, err := w.Write(text)
		return err
	})
}
