package scenarios

import (
	"strings"
	"testing"
	"time"
)

// TestHostileFilesEndSoon gives the parser the most of what its size limit lets
// through. The time is thirty times what an idle machine needs, so that a busy one
// does not fail; a quadratic walk takes minutes.
func TestHostileFilesEndSoon(t *testing.T) {
	fill := func(part string) string { return strings.Repeat(part, mostBytes/len(part)) }
	var keys strings.Builder
	for i := 0; keys.Len() < mostBytes-20; i++ {
		keys.WriteString("k" + number(float64(i)) + "=1\n")
	}
	tests := map[string]string{
		"unknown keys":    keys.String(),
		"one key":         fill("a=1\n"),
		"headers":         fill("[a]\n"),
		"lists of tables": fill("[[smoother]]\n"),
		"dots":            "a" + fill(".a"),
		"brackets":        "a=" + fill("["),
		"numbers":         "[cells]\nn=[" + fill("1,"),
		"names":           "[cells]\nn=[3]\ntruth=[" + strings.Repeat("\"a\",", mostBytes/5) + "]",
		"quotes":          fill("\""),
		"no lines":        fill("a"),
		"blank lines":     fill("\n"),
		"long strings":    "title=\"" + fill("x")[20:] + "\"",
		"zeros":           fill("\x00"),
		"open tables":     "a=" + fill("{a="),
		"comments":        fill("#\n"),
		"keys of keys":    "truth = {" + fill("a.b={},")[20:] + "}",
	}
	for name, src := range tests {
		t.Run(name, func(t *testing.T) {
			start := time.Now()
			_, faults := Parse("a.toml", []byte(src[:min(len(src), mostBytes)]), vocabulary(""))
			text := faults.Error()
			if took := time.Since(start); took > 30*time.Second {
				t.Errorf("took %v", took)
			} else {
				t.Logf("took %v for %d faults", took, len(faults))
			}
			if len(faults) == 0 || len(text) > 1_000_000 {
				t.Errorf("%d faults in %d bytes", len(faults), len(text))
			}
		})
	}
}
