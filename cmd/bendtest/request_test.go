package main

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func TestTenMistakesAreAllListedAndNothingIsWritten(t *testing.T) {
	const study = `titel = "Ten mistakes"
held-out = 5
replicates = "many"
[cells]
n = [30, -4]
truth = ["bend", "missing"]
[truth.bend]
f = "sinn(x) + 2"
[design.even]
law = "unifrom"
[noise.sensor]
law = "normal"
sd = 0.4
variance = 0.2
[[smoother]]
family = "kernel"
kernel = "epanechnikow"
df = "9..3"
[[rule]]
kind = "gcv"
gama = 1.4
`
	path, out := studyIn(t, study), filepath.Join(t.TempDir(), "out")
	code, stdout, stderr := command(t, "run", path, "-o", out)
	if code != exitRequest || stdout != "" {
		t.Errorf("exit %d, stdout %q", code, stdout)
	}
	at := -1
	for _, place := range []string{":1:1:", ":2:12:", ":3:14:", ":5:10:", ":6:18:", ":8:6:", ":10:7:", ":14:1:", ":17:10:", ":18:10:", ":21:1:"} {
		found := strings.Index(stderr, path+place)
		if found < 0 {
			t.Errorf("no mistake at %s in:\n%s", place, stderr)
		} else if found < at {
			t.Errorf("the mistake at %s is out of order", place)
		}
		at = found
	}
	if !strings.Contains(stderr, `unknown design law "unifrom" (did you mean "uniform"? known: beta, even, from-file, gap, normal, uniform)`) {
		t.Errorf("no way out for the law:\n%s", stderr)
	}
	if _, err := os.Stat(out); err == nil {
		t.Error("something was written")
	}
}

// Every wrong request exits with 2, says why in a line or two, and prints nothing to
// stdout.
func TestWrongRequests(t *testing.T) {
	data := filepath.Join(t.TempDir(), "d.csv")
	if err := os.WriteFile(data, []byte("x,y\n1,2\n2,x\n"), 0o644); err != nil {
		t.Fatal(err)
	}
	good := filepath.Join(t.TempDir(), "g.csv")
	if err := os.WriteFile(good, []byte("x,y\n1,2\n2,3\n4,1\n5,2\n7,3\n"), 0o644); err != nil {
		t.Fatal(err)
	}
	foreign := t.TempDir()
	if err := os.WriteFile(filepath.Join(foreign, "thesis.txt"), nil, 0o644); err != nil {
		t.Fatal(err)
	}
	study := studyIn(t, smallStudy)
	for _, c := range []struct {
		args string
		says string
	}{
		{"rnu", `did you mean "run"`},
		{"run a b", "accepts between 0 and 1 arg"},
		{"run " + filepath.Join(foreign, "none.toml"), "none.toml"},
		{"run --wokers 3", "unknown flag"},
		{"run --workers 0", "want at least 1"},
		{"run --workers x", "invalid argument"},
		{"run " + study + " -o " + foreign, "not empty and not a run directory"},
		{"plan " + study + " --workers 0", "want at least 1"},
		{"fit", "accepts 1 arg"},
		{"fit none.csv", "none.csv"},
		{"fit " + data, "d.csv:3:3"},
		{"fit " + good + " --y 3", "3"},
		{"fit " + good + " --family splines", "unknown family"},
		{"fit " + good + " --kernel gausian --family kernel", "gaussian"},
		{"fit " + good + " --family kernel --degree 1", "none of kernel has this option"},
		{"fit " + good + " --df 2 --tuning 3", "exclude each other"},
		{"fit " + good + " --df 2..x", "--df"},
		{"fit " + good + " --tuning x", "--tuning"},
		{"fit " + good + " --format xml", "unknown format"},
		{"fit " + good + " --gamma 0", "above 0"},
		{"fit " + good + " --at 1", "between 2"},
		{"export " + foreign + " fits", "not a run directory"},
		{"describe famlies", `did you mean "families"`},
		{"describe table fit", "known: cells, fits"},
		{"describe table", "takes one name"},
	} {
		code, stdout, stderr := command(t, strings.Fields(c.args)...)
		if code != exitRequest || stdout != "" || !strings.Contains(stderr, c.says) {
			t.Errorf("bendtest %s: exit %d, stdout %q, stderr %q; want 2 and %q", c.args, code, stdout, stderr, c.says)
		}
	}
}

func TestExportRefusesUnknownTablesAndForms(t *testing.T) {
	dir := runStudy(t, smallStudy)
	if code, _, stderr := command(t, "export", dir.Path(), "fit"); code != exitRequest || !strings.Contains(stderr, "fits") {
		t.Errorf("exit %d, %q", code, stderr)
	}
	if code, _, stderr := command(t, "export", dir.Path(), "fits", "--format", "xls"); code != exitRequest || !strings.Contains(stderr, "csv, arrow") {
		t.Errorf("exit %d, %q", code, stderr)
	}
	code, stdout, _ := command(t, "export", dir.Path(), "picks", "--format", "json")
	if code != exitDone || strings.Count(stdout, "\n") != 4*25*2*3 {
		t.Errorf("exit %d, %d lines", code, strings.Count(stdout, "\n"))
	}
	file := filepath.Join(t.TempDir(), "c.csv")
	if code, stdout, _ := command(t, "export", dir.Path(), "cells", "-o", file); code != exitDone || stdout != "" {
		t.Errorf("exit %d, stdout %q", code, stdout)
	}
	if text, err := os.ReadFile(file); err != nil || !strings.HasPrefix(string(text), "cell,hash,") {
		t.Errorf("file %q, %v", text, err)
	}
}

func TestHelpIsHelpful(t *testing.T) {
	for _, name := range []string{"", "run", "plan", "fit", "export", "describe", "version"} {
		args := []string{"--help"}
		if name != "" {
			args = []string{name, "--help"}
		}
		code, stdout, _ := command(t, args...)
		if code != exitDone || !strings.Contains(stdout, "bendtest") || strings.Contains(stdout, "%!") {
			t.Errorf("help %q: exit %d\n%s", name, code, stdout)
		}
	}
}

func TestDescribeCoversEveryTopic(t *testing.T) {
	for _, topic := range topics() {
		code, stdout, _ := command(t, "describe", topic.name)
		if code != exitDone || len(stdout) < 200 {
			t.Errorf("describe %s: exit %d, %d bytes", topic.name, code, len(stdout))
		}
	}
	for _, table := range tableNames() {
		if code, stdout, _ := command(t, "describe", "table", table); code != exitDone || !strings.Contains(stdout, "meaning") {
			t.Errorf("describe table %s: exit %d, %q", table, code, stdout)
		}
	}
}
