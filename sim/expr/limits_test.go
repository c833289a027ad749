package expr

import (
	"strings"
	"testing"
)

// Each limit is met by one text just within it and one just beyond.
func TestLimitsAreRefusals(t *testing.T) {
	in, out := strings.Repeat("(", maxDepth), strings.Repeat(")", maxDepth)
	terms := strings.Repeat("x+", maxNodes/2-1) + "-x" // maxNodes/2 x and as many operations
	towers := strings.Repeat("x^", maxDepth) + "x"
	choices := strings.Repeat("x?1:", maxDepth) + "0"
	for _, c := range []struct {
		name, within, beyond string
	}{
		{"text", strings.Repeat(" ", maxText-1) + "x", strings.Repeat(" ", maxText) + "x"},
		{"parentheses", in + "x" + out, "(" + in + "x" + out + ")"},
		{"powers", towers, "x^" + towers},
		{"choices", choices, "x?1:" + choices},
		{"operations", terms, terms + "+x"},
		{"signs", strings.Repeat("-", maxNodes-1) + "x", strings.Repeat("-", maxNodes) + "x"},
	} {
		if _, err := Compile(c.within); err != nil {
			t.Errorf("%s: %.60v", c.name, err)
		}
		if _, err := Compile(c.beyond); err == nil {
			t.Errorf("%s: too much is accepted", c.name)
		}
	}
}
