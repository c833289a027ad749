package scenarios

import (
	"fmt"
	"io"
	"strings"
	"testing"
	"testing/fstest"
)

func TestColumnsByNameNumberAndPlace(t *testing.T) {
	tests := []struct {
		why, text string
		columns   []string
		want      string
	}{
		{"by place", "x,y\n1,2\n3,4\n", []string{"", ""}, "[[1 3] [2 4]]"},
		{"by name", "x, y\n1, 2\n3, 4\n", []string{"y", "x"}, "[[2 4] [1 3]]"},
		{"by number", "x,y\n1,2\n", []string{"2"}, "[[2]]"},
		{"without a header", "1,2\n3,4\n", []string{"2"}, "[[2 4]]"},
		{"one column", "1\n\n# rest\n2e3\n", []string{""}, "[[1 2000]]"},
		{"words elsewhere", "a,1\nb,2\n", []string{"2"}, "[[1 2]]"},
		{"a name that is a number", "2000,2010\n1,2\n", []string{"2010"}, "[[2010 2]]"},
		{"byte order mark", "\ufeffx\n5\n", []string{"x"}, "[[5]]"},
		{"quotes", "\"x\"\n\"5\"\n", []string{"x"}, "[[5]]"},
		{"windows line ends", "x\r\n5\r\n", []string{"x"}, "[[5]]"},
	}
	for _, tt := range tests {
		got, faults := ReadColumns("a.csv", strings.NewReader(tt.text), tt.columns...)
		if len(faults) > 0 || fmt.Sprint(got) != tt.want {
			t.Errorf("%s: %v %v, want %s", tt.why, got, faults, tt.want)
		}
	}
}

func TestBadColumnsNameTheirLine(t *testing.T) {
	tests := []struct{ why, text, column, want string }{
		{"a word", "x\n1\nb\n", "x", `a.csv:3:1: "b" is not a finite number (want one)`},
		{"a word further right", "x,y\n1,2\n3, b\n", "y", `a.csv:3:4: "b" is not a finite number (want one)`},
		{"a missing number", "NA\n1\n", "", `a.csv:1:1: "NA" is not a finite number (want one)`},
		{"a slip in the first line", "1.2.3\n1\n", "", `a.csv:1:1: "1.2.3" is not a finite number (want one)`},
		{"infinity", "x\n1\nInf\n", "x", `a.csv:3:1: "Inf" is not a finite number (want one)`},
		{"an empty field", "x,y\n1,\n", "y", `a.csv:2:3: "" is not a finite number (want one)`},
		{"a short line", "x,y\n1,2\n3\n", "y", `a.csv:3:1: another number of fields (want 2, as on line 1)`},
		{"a quote", "x\n\"1\n", "x", `a.csv:`},
		{"nothing", "", "", `a.csv:1:1: no line of values (want at least one)`},
		{"a header alone", "# about\nx\n", "", `a.csv:2:1: no line of values under the header (want at least one)`},
		{"no such name", "time,temp\n1,2\n", "tmp", `a.csv:1:1: unknown column "tmp" (did you mean "temp"? known: 1, 2, temp, time)`},
		{"no such number", "1,2\n", "3", `a.csv:1:1: unknown column "3" (known: 1, 2)`},
	}
	for _, tt := range tests {
		values, faults := ReadColumns("a.csv", strings.NewReader(tt.text), tt.column)
		if len(faults) == 0 || !strings.HasPrefix(faults.Error(), tt.want) {
			t.Errorf("%s: %v %q, want %q", tt.why, values, faults.Error(), tt.want)
		}
	}
}

func TestFaultsOfAColumnAreBounded(t *testing.T) {
	_, faults := ReadColumns("a.csv", strings.NewReader("x\n"+strings.Repeat("b\n", 1000)), "x")
	if len(faults) != mostCSVFaults {
		t.Errorf("%d faults, want %d", len(faults), mostCSVFaults)
	}
}

// TestFilesAreRelativeToTheStudy reads values through Open and sees them in the cell.
func TestFilesAreRelativeToTheStudy(t *testing.T) {
	files := fstest.MapFS{"nights/data/hours.csv": {Data: []byte("hour,residual\n0.2,-1\n0.4,2\n0.9,0\n")}}
	voc := vocabulary("")
	voc.Open = func(path string) (io.ReadCloser, error) { return files.Open(path) }
	src := strings.NewReplacer(
		"law = \"uniform\"", "law = \"from-file\"\nfile = \"data/hours.csv\"\nresample = false",
		"law = \"normal\"", "law = \"from-file\"\nfile = \"../nights/data/hours.csv\"\ncolumn = \"residual\"",
		"[30, 100]", "[3]",
	).Replace(small)
	s, faults := Parse("nights/small.toml", []byte(src), voc)
	if len(faults) > 0 {
		t.Fatal(faults.Error())
	}
	if !s.Cells[0].Sim.FixedDesign() {
		t.Error("the design is not the file's values")
	}
	files["nights/data/hours.csv"].Data = []byte("hour,residual\n0.2,-1\n0.4,2\n0.8,0\n")
	other, faults := Parse("nights/small.toml", []byte(src), voc)
	if len(faults) > 0 {
		t.Fatal(faults.Error())
	}
	if other.Hash == s.Hash {
		t.Error("another file of values leaves the study's hash as it was")
	}
}
