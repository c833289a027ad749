package main

import (
	"errors"
	"fmt"
	"io"
)

// errStopped marks work that a signal ended with everything so far kept.
var errStopped = errors.New("stopped")

// A requestError says that the request was wrong: exit code 2.
type requestError struct{ err error }

func (e *requestError) Error() string { return e.err.Error() }
func (e *requestError) Unwrap() error { return e.err }

// print writes the error; those that bring their own place (file:line:column) as
// they are, others after the program's name.
func (e *requestError) print(w io.Writer) {
	var placed interface{ Placed() string }
	if errors.As(e.err, &placed) {
		fmt.Fprintln(w, placed.Placed())
		return
	}
	fmt.Fprintf(w, "bendtest: %v\n", e.err)
}

// refuse makes a requestError.
func refuse(format string, args ...any) error {
	return &requestError{fmt.Errorf(format, args...)}
}
