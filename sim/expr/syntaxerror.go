package expr

import (
	"fmt"
	"strings"
)

// A SyntaxError is the first fault of an expression.
type SyntaxError struct {
	At    int    // byte offset in the text
	Found string // what stands there
	Want  string // what is allowed
	Near  string // the nearest known name, or ""
}

func (e *SyntaxError) Error() string {
	if e.Near != "" {
		return fmt.Sprintf("found %s (did you mean %q? %s)", e.Found, e.Near, e.Want)
	}
	return fmt.Sprintf("found %s (%s)", e.Found, e.Want)
}

// Offset is the byte offset of the fault in the text.
func (e *SyntaxError) Offset() int { return e.At }

// unknownName makes the error for a name that means nothing.
func unknownName(t token) error {
	known := []string{"x"}
	for _, c := range constants {
		known = append(known, c.name)
	}
	for _, f := range Functions() {
		known = append(known, f.Name)
	}
	return &SyntaxError{At: t.at, Found: t.String(), Want: "known: " + strings.Join(known, ", "), Near: Nearest(t.text, known)}
}
