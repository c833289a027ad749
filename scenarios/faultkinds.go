package scenarios

import (
	"fmt"
	"slices"
	"strings"

	"bendtest/sim/expr"
)

// A faultKind is what sort of thing is wrong. There is one constructor for each.
type faultKind string

const (
	syntax        faultKind = "syntax"
	tooLarge      faultKind = "too-large"
	tooDeep       faultKind = "too-deep"
	tooMany       faultKind = "too-many"
	duplicate     faultKind = "duplicate"
	repeatedEntry faultKind = "repeated-entry"
	unknownKey    faultKind = "unknown-key"
	unknownWord   faultKind = "unknown-word"
	undeclared    faultKind = "undeclared"
	wrongType     faultKind = "wrong-type"
	outOfRange    faultKind = "out-of-range"
	missing       faultKind = "missing"
	clash         faultKind = "clash"
	badExpression faultKind = "expression"
	badOption     faultKind = "option"
	badGrid       faultKind = "grid"
	offGrid       faultKind = "off-grid"
	badName       faultKind = "name"
	labelTaken    faultKind = "label-taken"
	unreadable    faultKind = "unreadable"
	badColumn     faultKind = "column"
	more          faultKind = "more"
)

// syntaxFault reports text that is not TOML.
func syntaxFault(at int, msg, want string) Fault {
	return Fault{kind: syntax, at: at, Msg: msg, Want: want}
}

// fileTooLarge reports a file beyond the limit.
func fileTooLarge(size int) Fault {
	return Fault{kind: tooLarge, Msg: fmt.Sprintf("the file has %d bytes", size), Want: fmt.Sprintf("want at most %d", mostBytes)}
}

// nestedTooDeep reports lists or tables within each other beyond the limit.
func nestedTooDeep(at int) Fault {
	return Fault{kind: tooDeep, at: at, Msg: "lists and tables nested too deep", Want: fmt.Sprintf("want at most %d levels", mostLevels)}
}

// tooManyOf reports more entries than the limit.
func tooManyOf(at int, what string, found, most int) Fault {
	return Fault{kind: tooMany, at: at, Msg: fmt.Sprintf("%d %s", found, what), Want: fmt.Sprintf("want at most %d", most)}
}

// defined reports a key or table that is there already.
func defined(at int, what string, firstLine int) Fault {
	return Fault{kind: duplicate, at: at, Msg: what + " again", Want: fmt.Sprintf("want it once; it stands on line %d", firstLine)}
}

// repeated reports an entry that its list holds already.
func repeated(at int, key, entry string) Fault {
	return Fault{kind: repeatedEntry, at: at, Msg: fmt.Sprintf("%s again in %s", entry, key), Want: "want each entry once"}
}

// keyUnknown reports a key that means nothing where it stands.
func keyUnknown(at int, key, where string, known []string) Fault {
	return Fault{kind: unknownKey, at: at, Msg: fmt.Sprintf("unknown key %q %s", shorten(key), where), Want: knownList(known), Near: expr.Nearest(key, known)}
}

// wordUnknown reports a word that is none of those allowed; what is, say, "design law".
func wordUnknown(at int, what, got string, known []string) Fault {
	return Fault{kind: unknownWord, at: at, Msg: fmt.Sprintf("unknown %s %q", what, shorten(got)), Want: knownList(known), Near: expr.Nearest(got, known)}
}

// nameUndeclared reports a name in [cells] without an entry.
func nameUndeclared(at int, what, got string, known []string) Fault {
	return Fault{kind: undeclared, at: at, Msg: fmt.Sprintf("no [%s.%s] in this file", what, shorten(keyText(got))), Want: knownList(known), Near: expr.Nearest(got, known)}
}

// typeWrong reports a value of the wrong sort.
func typeWrong(n *node, key, want string) Fault {
	return Fault{kind: wrongType, at: n.at, Msg: valueText(n, key), Want: "want " + want}
}

// rangeExceeded reports a number that is too small or too large.
func rangeExceeded(n *node, key, want string) Fault {
	return Fault{kind: outOfRange, at: n.at, Msg: valueText(n, key), Want: "want " + want}
}

// keyMissing reports a key or table that has to be there; want says what it would be.
func keyMissing(at int, key, where, want string) Fault {
	return Fault{kind: missing, at: at, Msg: fmt.Sprintf("no %s %s", key, where), Want: want}
}

// keysClash reports keys that exclude each other.
func keysClash(at int, key, other, want string) Fault {
	return Fault{kind: clash, at: at, Msg: fmt.Sprintf("%s beside %s", key, other), Want: "want " + want}
}

// expressionFault reports an expression that cannot be compiled.
func expressionFault(at int, key string, err *expr.SyntaxError) Fault {
	return Fault{kind: badExpression, at: at, Msg: fmt.Sprintf("%s: found %s", key, shorten(err.Found)), Want: err.Want, Near: err.Near}
}

// optionRefused reports a value that a truth, design, noise, family or rule refuses.
func optionRefused(at int, msg, want string) Fault {
	return Fault{kind: badOption, at: at, Msg: msg, Want: want}
}

// gridFault reports a list of df that is none.
func gridFault(at int, msg, want string) Fault {
	return Fault{kind: badGrid, at: at, Msg: msg, Want: "want " + want}
}

// dfOffGrid reports a fixed df that no smoother has.
func dfOffGrid(at int, df float64, grid []float64) Fault {
	return Fault{kind: offGrid, at: at, Msg: fmt.Sprintf("df = %v is on no smoother's grid", df), Want: "known: " + gridText(grid)}
}

// nameFault reports a name or label that tables could not carry.
func nameFault(at int, name, want string) Fault {
	return Fault{kind: badName, at: at, Msg: fmt.Sprintf("%q as a name", shorten(name)), Want: "want " + want}
}

// labelIsTaken reports a label that another smoother or rule has.
func labelIsTaken(at int, what, label string, line int) Fault {
	return Fault{kind: labelTaken, at: at, Msg: fmt.Sprintf("%s %q again", what, shorten(label)), Want: fmt.Sprintf("want labels that differ: set name; the first is on line %d", line)}
}

// fileUnreadable reports a file named in the study that cannot be read.
func fileUnreadable(at int, file, reason string) Fault {
	return Fault{kind: unreadable, at: at, Msg: fmt.Sprintf("cannot read %q: %s", shorten(file), reason), Want: "want a file, its path relative to the study file"}
}

// columnFault reports something wrong at a place in a file of values.
func columnFault(file string, line, col int, msg, want string) Fault {
	return Fault{kind: badColumn, File: file, Line: line, Col: col, Msg: msg, Want: "want " + want}
}

// manyMore stands for the faults that are not listed.
func manyMore(at, n int) Fault {
	return Fault{kind: more, at: at, Msg: fmt.Sprintf("%d more faults from here on", n), Want: "want those above mended first"}
}

// knownList names the allowed words.
func knownList(known []string) string {
	if len(known) == 0 {
		return "known: none"
	}
	return "known: " + alphabetical(known)
}

// alphabetical lists words in alphabetical order, the end of a long list left out.
func alphabetical(words []string) string {
	const most = 40
	sorted := slices.Sorted(slices.Values(words))
	if len(sorted) > most {
		return fmt.Sprintf("%s, … (%d in all)", strings.Join(sorted[:most], ", "), len(sorted))
	}
	return strings.Join(sorted, ", ")
}

// valueText says what stands at a key.
func valueText(n *node, key string) string {
	switch n.kind {
	case listNode:
		return key + " is a list"
	case tableNode:
		return key + " is a table"
	case textNode:
		return fmt.Sprintf("%s = %q", key, shorten(n.text))
	}
	return key + " = " + shorten(n.text)
}
