package scenarios

import (
	"strings"
	"testing"
)

func TestCaretKeepsTabsAndCountsBytes(t *testing.T) {
	tests := []struct {
		src  string
		col  int
		want string
	}{
		{"\tlaw = \"unifrom\"", 8, "\n\t\tlaw = \"unifrom\"\n\t\t      ^"},
		{"title = \"é\" x", 14, "\n\ttitle = \"é\" x\n\t            ^"},
		{"a\x1b[31m\xff\xfe b", 10, "\n\ta?[31m\uFFFD\uFFFD b\n\t         ^"},
		{"short", 6, "\n\tshort\n\t     ^"},
	}
	for _, tt := range tests {
		f := Fault{File: "a.toml", Line: 1, Col: tt.col, Src: tt.src, Msg: "wrong", Want: "want right"}
		if got, want := f.Error(), "a.toml:1:"+number(float64(tt.col))+": wrong (want right)"+tt.want; got != want {
			t.Errorf("got\n%s\nwant\n%s", got, want)
		}
	}
}

func TestLongLinesAreShownAboutTheColumn(t *testing.T) {
	src := strings.Repeat("é", 500) + "@" + strings.Repeat("é", 500)
	f := Fault{File: "a.toml", Line: 1, Col: 1001, Src: src, Msg: "wrong", Want: "want right"}
	lines := strings.Split(f.Error(), "\n")
	if len(lines) != 3 || len(lines[1]) > shown+5 {
		t.Fatalf("%d lines: %q", len(lines), lines)
	}
	runes := []rune(lines[1])
	if caret := len([]rune(lines[2])) - 1; runes[caret] != '@' {
		t.Errorf("the caret is under %q:\n%s\n%s", runes[caret], lines[1], lines[2])
	}
}

func TestFaultsAreSortedOnceAndBounded(t *testing.T) {
	src := newSource("a.toml", []byte(strings.Repeat("x\n", 500)))
	fs := []Fault{syntaxFault(8, "b", "want b"), syntaxFault(2, "a", "want a"), syntaxFault(8, "b", "want b")}
	got := settle(fs, src)
	if len(got) != 2 || got[0].Line != 2 || got[1].Line != 5 || got[1].Col != 1 {
		t.Errorf("got %v", got)
	}
	var many []Fault
	for i := range 500 {
		many = append(many, syntaxFault(2*i, "a", "want a"))
	}
	got = settle(many, src)
	if len(got) != mostFaults+1 || got[mostFaults].Line != mostFaults+1 || !strings.Contains(got[mostFaults].Msg, "300 more") {
		t.Errorf("%d faults, the last %v", len(got), got[len(got)-1])
	}
}
