package scenarios

import (
	"flag"
	"fmt"
	"go/ast"
	"go/parser"
	"go/token"
	"io"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"

	"bendtest/scoring"
)

var update = flag.Bool("update", false, "write what is found into the golden files")

const badDir = "../testdata/scenarios/bad"

// vocabulary is the real one, with files from a folder.
func vocabulary(dir string) Vocabulary {
	voc := Vocabulary{Open: func(path string) (io.ReadCloser, error) { return os.DirFS(dir).Open(path) }}
	for _, k := range scoring.Rules() {
		voc.Rules = append(voc.Rules, Kind{k.Name, k.Doc, func() any { return k.New() }})
	}
	return voc
}

// golden compares text with a golden file, or writes it there.
func golden(t *testing.T, file, got string) {
	t.Helper()
	if *update {
		if err := os.WriteFile(file, []byte(got), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	if got != string(want) {
		t.Errorf("%s:\ngot:\n%s\nwant:\n%s", file, got, want)
	}
}

// badStudies returns the bad files, and those too long to keep, which are made here.
func badStudies(t *testing.T) map[string][]byte {
	t.Helper()
	paths, err := filepath.Glob(badDir + "/*.toml")
	if err != nil || len(paths) == 0 {
		t.Fatalf("no bad files: %v", err)
	}
	studies := make(map[string][]byte)
	for _, path := range paths {
		src, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		studies[strings.TrimSuffix(filepath.Base(path), ".toml")] = src
	}
	base := string(studies["label-taken"])
	base = base[:strings.LastIndex(base, "[[rule]]")]
	ns := make([]string, 1001)
	for i := range ns {
		ns[i] = strconv.Itoa(30 + i)
	}
	var named strings.Builder
	for i := range 10 {
		fmt.Fprintf(&named, "[truth.w%d]\nf=\"x\"\n[design.d%d]\nlaw=\"even\"\n[noise.n%d]\nlaw=\"normal\"\nsd=%d\n", i, i, i, i+1)
	}
	cells := strings.Replace(base, "[30, 100]", "["+strings.Join(ns, ", ")+"]", 1) + named.String()
	studies["too-many-cells"] = []byte(cells)
	studies["too-many-df"] = []byte(strings.Replace(base, `"3..9"`, "["+strings.Join(ns, ", ")+"]", 1))
	studies["too-large"] = []byte(base + strings.Repeat("#\n", mostBytes/2))
	studies["more"] = []byte(base + "[rules]\n" + strings.Repeat("[rules]\n", 300))
	return studies
}

// TestBadStudiesAreRefusedInWords compares what is said of each bad file. A file is
// named for the kind of its faults, and has no others.
func TestBadStudiesAreRefusedInWords(t *testing.T) {
	for name, src := range badStudies(t) {
		t.Run(name, func(t *testing.T) {
			study, faults := Parse(name+".toml", src, vocabulary(badDir))
			if study != nil || len(faults) == 0 {
				t.Fatal("no fault was found")
			}
			if len(faults) <= 20 {
				golden(t, filepath.Join(badDir, name+".want"), faults.Error()+"\n")
			}
			found := false
			for _, f := range faults {
				found = found || strings.HasPrefix(name, string(f.kind))
				if f.Want == "" && f.kind != badOption {
					t.Errorf("no word on what is allowed: %s", f.brief())
				}
				if !strings.HasPrefix(name, string(f.kind)) && name != "ten-mistakes" && name != "more" {
					t.Errorf("a fault of another kind: %s", f.brief())
				}
			}
			if !found && name != "ten-mistakes" {
				t.Errorf("no fault of the kind that the file is named for")
			}
		})
	}
}

// TestTenMistakesAreAllShown is the promise that all faults of a file come at once.
func TestTenMistakesAreAllShown(t *testing.T) {
	src, err := os.ReadFile(badDir + "/ten-mistakes.toml")
	if err != nil {
		t.Fatal(err)
	}
	_, faults := Parse("ten-mistakes.toml", src, vocabulary(badDir))
	lines := []int{}
	for _, f := range faults {
		lines = append(lines, f.Line)
	}
	if want := []int{2, 4, 8, 11, 16, 19, 21, 25, 26, 31}; !slices.Equal(lines, want) {
		t.Errorf("faults on lines %v, want %v", lines, want)
	}
}

// TestEveryKindOfFaultHasABadFile reads the constructors from the source, so that
// none can be added without an example.
func TestEveryKindOfFaultHasABadFile(t *testing.T) {
	file, err := parser.ParseFile(token.NewFileSet(), "faultkinds.go", nil, 0)
	if err != nil {
		t.Fatal(err)
	}
	kinds := map[string]string{} // constant → word
	constructors := map[string]string{}
	ast.Inspect(file, func(n ast.Node) bool {
		switch n := n.(type) {
		case *ast.ValueSpec:
			if of, ok := n.Type.(*ast.Ident); ok && of.Name == "faultKind" {
				kinds[n.Names[0].Name], _ = strconv.Unquote(n.Values[0].(*ast.BasicLit).Value)
			}
		case *ast.FuncDecl:
			ast.Inspect(n, func(m ast.Node) bool {
				if pair, ok := m.(*ast.KeyValueExpr); ok && pair.Key.(*ast.Ident).Name == "kind" {
					kind := pair.Value.(*ast.Ident).Name
					if other, taken := constructors[kind]; taken {
						t.Errorf("%s and %s share the kind %s", other, n.Name.Name, kind)
					}
					constructors[kind] = n.Name.Name
				}
				return true
			})
		}
		return true
	})
	found := map[string]bool{}
	for name, src := range badStudies(t) {
		_, faults := Parse(name+".toml", src, vocabulary(badDir))
		for _, f := range faults {
			found[string(f.kind)] = true
		}
	}
	if len(kinds) < 20 || len(kinds) != len(constructors) {
		t.Errorf("%d kinds but %d constructors", len(kinds), len(constructors))
	}
	for constant, word := range kinds {
		if !found[word] {
			t.Errorf("no bad file shows a fault of kind %q, made by %s", word, constructors[constant])
		}
	}
}
