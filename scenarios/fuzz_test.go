package scenarios

import (
	"bytes"
	"os"
	"path/filepath"
	"testing"
	"testing/fstest"

	"io"
)

// FuzzParse throws texts at the parser. It must not panic, its faults must lie inside
// the file, and a study it accepts must come back from its canonical form.
func FuzzParse(f *testing.F) {
	f.Add([]byte(small))
	f.Add([]byte(everything))
	_, demo := Demo()
	f.Add(demo)
	paths, err := filepath.Glob(badDir + "/*.toml")
	if err != nil || len(paths) == 0 {
		f.Fatalf("no bad files: %v", err)
	}
	for _, path := range paths {
		src, err := os.ReadFile(path)
		if err != nil {
			f.Fatal(err)
		}
		f.Add(src)
	}
	voc := vocabulary("")
	files := fstest.MapFS{"hours.csv": {Data: []byte("0.1\n0.5\n0.9\n")}}
	voc.Open = func(path string) (io.ReadCloser, error) { return files.Open(path) }
	f.Fuzz(func(t *testing.T, src []byte) {
		if len(src) > 4096 { // the time goes into the cells of large factorials
			return
		}
		s, faults := Parse("a.toml", src, voc)
		if (s == nil) != (len(faults) > 0) {
			t.Fatalf("a study and faults, or neither: %v %v", s, faults)
		}
		lines := bytes.Split(src, []byte("\n"))
		for _, fault := range faults {
			if fault.File != "a.toml" {
				continue
			}
			if fault.Line < 1 || fault.Line > len(lines) || fault.Col < 1 || fault.Col > len(lines[fault.Line-1])+1 {
				t.Errorf("%d:%d is outside the file: %s", fault.Line, fault.Col, fault.Msg)
			}
			if fault.Error() == "" || fault.Msg == "" {
				t.Error("a fault without words")
			}
		}
		if s == nil {
			return
		}
		again, faults := Parse("a.toml", s.Canonical(), voc)
		if len(faults) > 0 {
			t.Fatalf("the canonical form has faults:\n%s\n%s", faults.Error(), s.Canonical())
		}
		if !bytes.Equal(again.Canonical(), s.Canonical()) || again.Hash != s.Hash {
			t.Errorf("the canonical form changes:\n%s\nthen\n%s", s.Canonical(), again.Canonical())
		}
	})
}
