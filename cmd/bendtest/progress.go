package main

import (
	"fmt"
	"io"
	"os"
	"strings"
	"sync"
	"time"

	"golang.org/x/term"
)

// A progress tells how a sweep gets on: on a terminal by one line that is written
// again and again, elsewhere by a plain line now and then.
type progress struct {
	w        io.Writer
	terminal bool
	every    time.Duration

	mu       sync.Mutex
	began    time.Time
	shown    time.Time
	todo     int
	done     int
	fits     int
	failures int
	width    int // of the line on the terminal
}

// newProgress returns a progress that writes to w.
func newProgress(w io.Writer) *progress {
	p := &progress{w: w, every: 10 * time.Second}
	if f, ok := w.(*os.File); ok && term.IsTerminal(int(f.Fd())) {
		p.terminal, p.every = true, 200*time.Millisecond
	}
	return p
}

// Begin starts the clock.
func (p *progress) Begin(todo, kept, broken int) {
	p.mu.Lock()
	defer p.mu.Unlock()
	p.todo, p.began, p.shown = todo, time.Now(), time.Now()
	if kept > 0 {
		fmt.Fprintf(p.w, "%s of %s units are there from before\n", thousands(kept), thousands(kept+todo))
	}
	if broken > 0 {
		fmt.Fprintf(p.w, "%s parts are broken and are worked again\n", thousands(broken))
	}
}

// Done counts a unit, and shows the state if it is time.
func (p *progress) Done(fits, failures int) {
	p.mu.Lock()
	defer p.mu.Unlock()
	p.done++
	p.fits += fits
	p.failures += failures
	if time.Since(p.shown) < p.every {
		return
	}
	p.shown = time.Now()
	p.show()
}

// show writes the state.
func (p *progress) show() {
	spent := time.Since(p.began)
	left := time.Duration(float64(spent) / float64(p.done) * float64(p.todo-p.done))
	line := fmt.Sprintf("units %s of %s, fits %s at %s/s, left %s, without a fit %s",
		thousands(p.done), thousands(p.todo), thousands(p.fits),
		thousands(int(float64(p.fits)/spent.Seconds())), left.Round(time.Second), thousands(p.failures))
	if !p.terminal {
		fmt.Fprintln(p.w, line)
		return
	}
	fmt.Fprintf(p.w, "\r%s%s", line, strings.Repeat(" ", max(0, p.width-len(line))))
	p.width = len(line)
}

// End takes the line off a terminal.
func (p *progress) End() {
	p.mu.Lock()
	defer p.mu.Unlock()
	if p.terminal && p.width > 0 {
		fmt.Fprintf(p.w, "\r%s\r", strings.Repeat(" ", p.width))
	}
}
