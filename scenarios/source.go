package scenarios

import (
	"bytes"
	"sort"
	"strings"
)

// A source is the text of a file, for turning byte offsets into places.
type source struct {
	name  string
	text  []byte
	whole string // the same text, of which faults show lines without copying them
	lines []int  // offset of the start of each line
}

func newSource(name string, text []byte) *source {
	s := &source{name: name, text: text, whole: string(text), lines: []int{0}}
	for i, c := range text {
		if c == '\n' {
			s.lines = append(s.lines, i+1)
		}
	}
	return s
}

// line returns the 1-based line of an offset; the end of the text counts as part of
// its last line.
func (s *source) line(at int) int {
	return sort.Search(len(s.lines), func(i int) bool { return s.lines[i] > at })
}

// place returns the 1-based line and column (in bytes) of an offset, and the line's
// text without its end.
func (s *source) place(at int) (line, col int, text string) {
	line = s.line(at)
	start := s.lines[line-1]
	text, _, _ = strings.Cut(s.whole[start:], "\n")
	return line, at - start + 1, strings.TrimSuffix(text, "\r")
}

// skipBlank returns the offset of the first byte at or after at that belongs to no
// blank, line end, comma or comment: where the next value stands in a list.
func (s *source) skipBlank(at int) int {
	for at < len(s.text) {
		switch s.text[at] {
		case ' ', '\t', '\r', '\n', ',':
			at++
		case '#':
			at = s.nextLine(at)
		default:
			return at
		}
	}
	return at
}

// nextLine returns the offset of the start of the line after at's, or the end.
func (s *source) nextLine(at int) int {
	if i := bytes.IndexByte(s.text[at:], '\n'); i >= 0 {
		return at + i + 1
	}
	return len(s.text)
}
