package scenarios

import (
	"strings"
	"testing"
)

// TestDemoIsTheStudyItSays holds the embedded study to its comments.
func TestDemoIsTheStudyItSays(t *testing.T) {
	name, src := Demo()
	s, faults := Parse(name, src, vocabulary(""))
	if len(faults) > 0 {
		t.Fatal(faults.Error())
	}
	families := map[string]bool{}
	for _, m := range s.Smoothers {
		families[m.Family] = true
	}
	if len(s.Cells) != 16 || len(families) != 4 || len(s.Rules) != 6 {
		t.Errorf("%d cells, %d families, %d rules; want 16, 4, 6", len(s.Cells), len(families), len(s.Rules))
	}
	if !strings.Contains(string(src), "qualified") {
		t.Error("the caution is gone")
	}
	sameAgain(t, s)
}
