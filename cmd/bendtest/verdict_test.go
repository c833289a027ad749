package main

import (
	"path/filepath"
	"strings"
	"testing"
)

func TestVerdictSpeaksPlainly(t *testing.T) {
	for _, keep := range []string{"fits", "summary"} {
		dir := runStudy(t, "keep = \""+keep+"\"\n"+smallStudy+"[[rule]]\nkind = \"reml\"\n")
		code, stdout, stderr := command(t, "verdict", dir.Path())
		if code != exitDone || stderr != "" {
			t.Fatalf("exit %d: %s", code, stderr)
		}
		for _, want := range []string{
			"judged in 4 cells", "This study supports ", "behind on average", "kernel with reml is not judged",
			"What this cannot say:", "qualified", "statistician under the rules",
		} {
			if !strings.Contains(stdout, want) {
				t.Errorf("keep = %s: %q is not said in\n%s", keep, want, stdout)
			}
		}
		for _, line := range strings.Split(stdout, "\n") {
			if strings.HasSuffix(line, " ") {
				t.Errorf("blanks at the end of %q", line)
			}
		}
	}
}

func TestVerdictTakesOtherMargins(t *testing.T) {
	dir := runStudy(t, smallStudy)
	_, narrow, _ := command(t, "verdict", dir.Path(), "--margin", "0", "--floor", "0")
	_, wide, _ := command(t, "verdict", dir.Path(), "--margin", "1000", "--floor", "1000")
	if !strings.Contains(narrow, "No other method is within") || !strings.Contains(narrow, "No method is good enough in 4 cells") {
		t.Errorf("with no margin at all:\n%s", narrow)
	}
	if !strings.Contains(wide, "Tied with it") || !strings.Contains(wide, "In every cell the best method's") {
		t.Errorf("with a margin for everybody:\n%s", wide)
	}
}

func TestVerdictRefusesWhatItCannotJudge(t *testing.T) {
	dir := runStudy(t, smallStudy)
	unfinished := runStudy(t, smallStudy)
	if err := unfinished.RemoveTable("verdict"); err != nil {
		t.Fatal(err)
	}
	for want, args := range map[string][]string{
		"is not a run directory": {"verdict", filepath.Join(t.TempDir(), "none")},
		"has no verdict yet":     {"verdict", unfinished.Path()},
		"--margin -0.1":          {"verdict", dir.Path(), "--margin", "-0.1"},
		"--floor NaN":            {"verdict", dir.Path(), "--floor", "nan"},
		"usage: bendtest":        {"verdict"},
	} {
		code, stdout, stderr := command(t, args...)
		if code != exitRequest || stdout != "" || !strings.Contains(stderr, want) || strings.Count(strings.TrimSpace(stderr), "\n") > 0 {
			t.Errorf("%v: exit %d, %q, want one line with %q", args, code, stderr, want)
		}
	}
}
