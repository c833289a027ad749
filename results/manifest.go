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
	Study         string   `json:"study"`      // title
	StudyHash     string   `json:"study_hash"` // SHA-256 of study.toml
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

// ReadManifest reads the directory's manifest. On a directory that was just made
// the error is fs.ErrNotExist.
func (d *Dir) ReadManifest() (*Manifest, error) {
	path := filepath.Join(d.path, manifestFile)
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

// WriteManifest replaces the directory's manifest.
func (d *Dir) WriteManifest(m *Manifest) error {
	text, err := json.MarshalIndent(m, "", "  ")
	if err != nil {
		return err
	}
	return d.writeFile(manifestFile, append(text, '\n'))
}

// WriteStudy keeps the text of the study as it is run.
func (d *Dir) WriteStudy(text []byte) error { return d.writeFile(studyFile, text) }

// writeFile commits a small file of the directory.
func (d *Dir) writeFile(name string, text []byte) error {
	return commit(d.disk, filepath.Join(d.path, name), func(w io.Writer) error {
		_, err := w.Write(text)
		return err
	})
}
