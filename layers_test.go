package bendtest_test

import (
	"go/parser"
	"go/token"
	"io/fs"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
)

const module = "bendtest"

// mayImport lists, for each top-level folder, the project's folders whose packages
// it may import besides its own. Only cmd, at the top, may import all.
var mayImport = map[string][]string{
	"smoothers": {},
	"sim":       {},
	"scenarios": {"sim", "smoothers"},
	"results":   {},
	"scoring":   {"sim", "smoothers", "results"},
	"cmd":       {"smoothers", "sim", "scenarios", "results", "scoring"},
}

// onlyIn confines third-party modules to the folders that may know of them.
var onlyIn = map[string][]string{
	"github.com/apache/arrow":        {"results"},
	"golang.org/x/exp/rand":          {"sim"},
	"github.com/pelletier/go-toml":   {"scenarios"},
	"github.com/spf13":               {"cmd"},
	"github.com/jedib0t/go-pretty":   {"cmd"},
	"gonum.org/v1/gonum":             {"smoothers", "sim", "scoring"},
	"golang.org/x/term":              {"cmd"},
	"golang.org/x/sys":               {"results"},
	"github.com/schollz/progressbar": {"cmd"},
}

// TestImportsPointOneWay holds the layering of the packages. Test files may import
// more, but not Arrow.
func TestImportsPointOneWay(t *testing.T) {
	files := 0
	err := filepath.WalkDir(".", func(path string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		if d.IsDir() && strings.HasPrefix(d.Name(), ".") && path != "." {
			return filepath.SkipDir
		}
		folder, _, nested := strings.Cut(filepath.ToSlash(path), "/")
		if !nested || !strings.HasSuffix(path, ".go") {
			return nil
		}
		files++
		return checkFile(t, path, folder)
	})
	if err != nil {
		t.Fatal(err)
	}
	if files < 20 {
		t.Errorf("only %d files were looked at", files)
	}
}

// checkFile reports the imports of one file that its folder may not have.
func checkFile(t *testing.T, path, folder string) error {
	allowed, known := mayImport[folder]
	if !known {
		t.Errorf("%s: folder %q is not in the design", path, folder)
		return nil
	}
	file, err := parser.ParseFile(token.NewFileSet(), path, nil, parser.ImportsOnly)
	if err != nil {
		return err
	}
	isTest := strings.HasSuffix(path, "_test.go")
	for _, imp := range file.Imports {
		name, err := strconv.Unquote(imp.Path.Value)
		if err != nil {
			return err
		}
		if to, ok := strings.CutPrefix(name, module+"/"); ok && !isTest {
			to, _, _ = strings.Cut(to, "/")
			if to != folder && !slices.Contains(allowed, to) {
				t.Errorf("%s imports %s: %s may import only %v", path, name, folder, allowed)
			}
		}
		for prefix, homes := range onlyIn {
			confined := !isTest || strings.Contains(prefix, "arrow")
			if confined && strings.HasPrefix(name, prefix) && !slices.Contains(homes, folder) {
				t.Errorf("%s imports %s, which belongs to %v", path, name, homes)
			}
		}
	}
	return nil
}
