package scenarios

import (
	"fmt"
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"
)

// A Fault is one thing wrong with a study file, or with a file that it names.
type Fault struct {
	File string
	Line int    // 1-based
	Col  int    // 1-based, in bytes, as editors count
	Src  string // the line at fault, without its end
	Msg  string // what is wrong
	Want string // what is allowed: "want …" or "known: …"
	Near string // the nearest valid word, or ""

	kind faultKind
	at   int // byte offset in the study file, by which faults are sorted
}

// shown is how much of a long line is shown, in bytes about the column.
const shown = 160

// Error is the place and the fault in one line, then the source line and a caret.
func (f *Fault) Error() string {
	var b strings.Builder
	fmt.Fprintf(&b, "%s:%d:%d: %s", f.File, f.Line, f.Col, f.brief())
	if f.Src == "" {
		return b.String()
	}
	src, n := f.Src, min(f.Col-1, len(f.Src))
	if len(src) > shown {
		from := max(0, min(n-shown/2, len(src)-shown))
		src, n = src[from:from+shown], n-from
	}
	fmt.Fprintf(&b, "\n\t%s\n\t%s^", visible(src), under(src, n))
	return b.String()
}

// brief is the fault without its place.
func (f *Fault) brief() string {
	switch {
	case f.Near != "":
		return fmt.Sprintf("%s (did you mean %q? %s)", f.Msg, f.Near, f.Want)
	case f.Want != "":
		return fmt.Sprintf("%s (%s)", f.Msg, f.Want)
	}
	return f.Msg
}

// visible returns a line with what cannot be printed replaced, escape sequences of
// terminals for one.
func visible(src string) string {
	return strings.Map(func(c rune) rune {
		if c == '\t' || unicode.IsPrint(c) {
			return c
		}
		return '?'
	}, src)
}

// under returns blanks that line up under src[:n], keeping its tabs.
func under(src string, n int) string {
	var b strings.Builder
	for _, r := range src[:n] {
		if r == '\t' {
			b.WriteByte('\t')
		} else {
			b.WriteByte(' ')
		}
	}
	return b.String()
}

// Faults are all faults of a study file, in the order of their places.
type Faults []Fault

// Error lists all faults.
func (fs Faults) Error() string {
	lines := make([]string, len(fs))
	for i := range fs {
		lines[i] = fs[i].Error()
	}
	return strings.Join(lines, "\n")
}

// Placed is the same text as Error; it marks an error that brings its own place.
func (fs Faults) Placed() string { return fs.Error() }

// mostFaults bounds the list of faults of one file; what is beyond is counted.
const mostFaults = 200

// settle sorts faults by place, drops repetitions, bounds the list, and writes out the
// places.
func settle(fs []Fault, src *source) Faults {
	slices.SortStableFunc(fs, func(a, b Fault) int { return a.at - b.at })
	seen := make(map[Fault]bool)
	fs = slices.DeleteFunc(fs, func(f Fault) bool {
		repeated := seen[f]
		seen[f] = true
		return repeated
	})
	if len(fs) > mostFaults {
		fs = append(fs[:mostFaults], manyMore(fs[mostFaults].at, len(fs)-mostFaults))
	}
	for i := range fs {
		if f := &fs[i]; f.File == "" {
			f.File = src.name
			f.Line, f.Col, f.Src = src.place(f.at)
		}
	}
	return fs
}

// shorten cuts text for a message at 40 bytes.
func shorten(text string) string {
	const most = 40
	if len(text) <= most {
		return text
	}
	cut := most
	for cut > 0 && !utf8.RuneStart(text[cut]) {
		cut--
	}
	return text[:cut] + "…"
}
