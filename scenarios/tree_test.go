package scenarios

import (
	"bytes"
	"math"
	"reflect"
	"testing"

	"github.com/pelletier/go-toml/v2"
)

// plain turns a tree into what an ordinary decoder makes of the same text. It reports
// false where the tree holds what is left for later to judge: dates, and numbers
// beyond their type.
func plain(n *node) (v any, ok bool) {
	switch n.kind {
	case textNode:
		return n.text, true
	case boolNode:
		return n.text == "true", true
	case integerNode:
		x, ok := n.number()
		return int64(x), ok && math.Abs(x) < 1<<53
	case decimalNode:
		return n.number()
	case listNode:
		list := make([]any, len(n.items))
		for i, item := range n.items {
			if list[i], ok = plain(item); !ok {
				return nil, false
			}
		}
		return list, true
	case tableNode:
		table := make(map[string]any)
		for _, k := range n.keys {
			if table[k.name], ok = plain(k.value); !ok {
				return nil, false
			}
		}
		return table, true
	}
	return nil, false
}

// agree compares the tree of a text with what go-toml's ordinary decoder says of it.
func agree(t *testing.T, text []byte) {
	t.Helper()
	root, faults, _ := readTree(newSource("a.toml", text))
	for _, f := range faults {
		if f.kind == tooDeep { // our own limit
			return
		}
	}
	got, judged := plain(root)
	var want map[string]any
	err := toml.Unmarshal(text, &want)
	switch {
	case err == nil && len(faults) > 0:
		t.Errorf("a fault in what is TOML: %s", settle(faults, newSource("a.toml", text)).Error())
	case err != nil && len(faults) == 0 && judged:
		t.Errorf("no fault in what is not TOML: %v", err)
	case err == nil && judged && !reflect.DeepEqual(got, any(want)) && !bytes.Contains(text, []byte("nan")):
		t.Errorf("the tree holds %v, want %v", got, want)
	}
}

// TestTreeAgreesWithAnOrdinaryDecoder goes through forms that a study seldom has.
func TestTreeAgreesWithAnOrdinaryDecoder(t *testing.T) {
	for _, text := range []string{
		small, everything, "", "\n", "a = 1", "a = 1 # b",
		"a.b.c = 1\na.b.d = 2\n[a.e]\nf = 3", "a.b = 1\na = 2", "a = 1\na.b = 2", "a = {b = 1}\na.c = 2", "[a.b]\n[a]\nc = 1", "[a]\n[a]",
		"[a]\nb.c = 1\n[a.b]", "[a]\nb.c = 1\n[a.b.d]", "[a.b.c]\n[a]\nb.d = 1", "[[a]]\n[a.b]\n[[a]]\n[a.b]", "a = [{b = 1}]\n[[a]]", "[[a]]\n[a]", "[a]\n[[a]]",
		"[[a.b]]\nc = 1\n[[a.b]]\nc = 2", "[a.b]\n[[a]]", "a = [[1, 2], [], [{}], # c\n[3,],\n]", "a = {b = {c = [1, {d = 2}]}, e.f = 3}", "a = {b = 1, b = 2}", "a = {b.c = 1, b.d = 2}",
		"\"a b\" = 1\n'c' . \"d\" = 2", "a = \"\"\"x\n  y\"\"\"\nb = '''z'''", "a = \"\\u00e9\\t\\\"\"", "a = 0x_1", "a = 0b101\nb = 0o17\nc = 1_000\nd = 1e3\ne = -0.5E-2\nf = inf", "a = 01", "a = 1.", "a = [1 2]",
		"a = 1\r\nb = 2\r\n", "a = 1 b = 2", "[a", "[a]]", "[[a]", "[]", "a", "= 1", "a = ", "a = \"x", "a = tru", "a = truee", "# \xff", "a = \"\xff\"", "\x00",
	} {
		t.Run(text, func(t *testing.T) { agree(t, []byte(text)) })
	}
}

// FuzzTree does the same for texts from nowhere.
func FuzzTree(f *testing.F) {
	f.Add([]byte(everything))
	f.Add([]byte("[a]\nb.c = 1\n[a.b.d]\n[[e]]\n[e.f]\ng = {h = [1, {i = 'j'}]}"))
	f.Fuzz(func(t *testing.T, text []byte) {
		if len(text) < 4096 && !bytes.HasPrefix(text, []byte("\xef\xbb\xbf")) {
			agree(t, text)
		}
	})
}
