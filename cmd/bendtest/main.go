// Command bendtest puts scatterplot smoothers to the test on data whose true curve
// is known. "bendtest help" lists its commands; the study file is described by
// "bendtest describe study".
package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"os/signal"
	"runtime/debug"
	"syscall"

	"bendtest/cmd/bendtest/sweep"
)

// Exit codes; they are part of the interface.
const (
	exitDone    = 0
	exitFault   = 1 // a fault while working, a panic included
	exitRequest = 2 // the request was wrong; nothing was done
	exitStopped = 3 // stopped by a signal, with everything so far kept
)

// detailsVariable is the environment variable that makes a panic print its stack.
const detailsVariable = "BENDTEST_DETAILS"

func main() {
	signal.Ignore(syscall.SIGPIPE) // so that a closed pipe is an error to handle
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	context.AfterFunc(ctx, stop) // the second signal ends the process at once
	code := run(ctx, os.Args[1:], os.Stdout, os.Stderr)
	stop()
	os.Exit(code)
}

// run carries out one command line and returns the exit code.
func run(ctx context.Context, args []string, stdout, stderr io.Writer) (code int) {
	defer func() {
		if r := recover(); r != nil {
			code = exitFault
			printFault(stderr, fmt.Sprintf("a fault of the program itself: %v", r), debug.Stack())
		}
	}()
	root := newRoot(stdout, stderr)
	root.SetArgs(args)
	err := root.ExecuteContext(ctx)
	if err == nil || errors.Is(err, syscall.EPIPE) {
		return exitDone
	}
	var bad *requestError
	var fault *sweep.PanicError
	switch {
	case errors.Is(err, errStopped):
		fmt.Fprintf(stderr, "bendtest: %v\n", err)
		return exitStopped
	case errors.As(err, &bad):
		bad.print(stderr)
		return exitRequest
	case errors.As(err, &fault):
		printFault(stderr, fault.Error(), fault.Stack)
		return exitFault
	}
	fmt.Fprintf(stderr, "bendtest: %v\n", err)
	return exitFault
}

// printFault reports a panic in one line, with its stack if that is asked for.
func printFault(w io.Writer, what string, stack []byte) {
	if os.Getenv(detailsVariable) == "" {
		fmt.Fprintf(w, "bendtest: %s (set %s=1 for details)\n", what, detailsVariable)
		return
	}
	fmt.Fprintf(w, "bendtest: %s\n%s", what, stack)
}
