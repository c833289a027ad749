package scenarios

import (
	"strings"
	"testing"
)

// marker stands in a test's input before the byte that the fault is to point at.
const marker = "▸"

// unmark takes the marker out and returns where it was.
func unmark(t *testing.T, marked string) (src string, line, col int) {
	t.Helper()
	before, after, ok := strings.Cut(marked, marker)
	if !ok || strings.Contains(after, marker) {
		t.Fatalf("want one marker in %q", marked)
	}
	line = 1 + strings.Count(before, "\n")
	return before + after, line, len(before) - strings.LastIndex(before, "\n")
}

func TestFaultsPointAtTheirByte(t *testing.T) {
	tests := []struct{ name, from, to string }{
		{"key", "[cells]", "  ▸sead = 3\n[cells]"},
		{"value behind blanks", "sd = 0.4", "sd \t=\t ▸-1"},
		{"dotted key", "[cells]", "cells.▸m = [3]\n[cells.x]"},
		{"table by dotted header", "[cells]", "[cells.▸x]\n[cells]"},
		{"quoted key", "[cells]", "▸\"sead\" = 3\n[cells]"},
		{"entry of a list", "[30, 100]", "[30, # a comment, and [brackets]\n\n\t▸-5,\n 100]"},
		{"list in a list", "[30, 100]", "[30, ▸[100], 5]"},
		{"list behind a comment", "[30, 100]", "[30, # a comment, [and] brackets\n # another\n ▸[100]]"},
		{"list after a list", "[30, 100]", "[30, [\n1,], ▸[]]"},
		{"key in an inline table", "f = \"1 - 0.8*x\"", "knots = { x = [0, 0.5, 1], ▸z = 3, y = [1, 2, 3] }"},
		{"list in an inline table", "f = \"1 - 0.8*x\"", "knots = { x = [0, 0.5, 1], y = [1, ▸true, 2] }"},
		{"inside an expression", "1 - 0.8*x", "1 - 0.8*▸y"},
		{"end of an expression", "1 - 0.8*x\"", "1 - 0.8*▸\""},
		{"an expression with escapes", "\"1 - 0.8*x\"", "▸\"1 - 0.8*\\u0079\""},
		{"a literal string", "\"1 - 0.8*x\"", "'1 - 0.8*▸y'"},
		{"a multi-line string", "\"1 - 0.8*x\"", "▸\"\"\"1 - 0.8*y\"\"\""},
		{"inside a range", "3..9", "3..▸2"},
		{"step of a range", "3..9", "3..9 by ▸0.0"},
		{"after letters of two bytes", "[cells]", "title = \"é\" ▸oops\n[cells]"},
		{"header", "[[rule]]\nkind = \"gcv\"", "[[ ▸rule ]]"},
		{"windows line ends", "sd = 0.4", "sd = 0.4\r\n\r\n  ▸ds = 3\r"},
		{"the second of two tables", "[noise.sensor]", "[noise.sensor]\nlaw = \"normal\"\nsd = 0.4\n[▸noise.sensor]"},
		{"a value added to", "[cells]", "truth.x = {f = \"x\"}\n[▸truth.x]\n[cells]"},
		{"a value of a dotted table", "[cells]", "truth.x.f = \"x\"\n[▸truth.x]\n[cells]"},
		{"a value taken for a table", "[cells]", "seed = 3\n▸seed.a = 3\n[cells]"},
		{"a value taken for a header", "[cells]", "seed = 3\n[▸seed.a]\n[cells]"},
		{"a table taken for a list of tables", "[[rule]]", "[[▸cells]]\n[[rule]]"},
		{"a list of tables, in its last", "[[rule]]", "[[rule]]\nkind = \"gcv\"\nname = \"a\"\n[▸rule.gamma]\n[[rule]]"},
		{"a table as a list", "[cells]", "[[▸cells]]\n[cells]"},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			src, line, col := unmark(t, strings.Replace(small, tt.from, tt.to, 1))
			_, faults := Parse("small.toml", []byte(src), vocabulary("testdata"))
			for _, f := range faults {
				if f.Line == line && f.Col == col {
					return
				}
			}
			t.Errorf("no fault at %d:%d but\n%s", line, col, faults.Error())
		})
	}
}
