package main

import (
	"bytes"
	"context"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"

	"bendtest/results"
)

// A small study: two truths, two designs, two smoothers, several rules.
const smallStudy = `title = "Small"
seed = 7
held-out = 500
replicates = 25

[cells]
n = [20]

[truth.bend]
f = "sin(5*x)"
[truth.line]
f = "1 - x"

[design.even]
law = "even"
[design.random]
law = "uniform"

[noise.sensor]
law = "normal"
sd = 0.3

[[smoother]]
family = "kernel"
df = [2, 4, 7]
[[smoother]]
family = "local"
df = [3, 5, 19.9]

[[rule]]
kind = "gcv"
[[rule]]
kind = "kfold"
k = 5
`

// command runs the program in this process.
func command(t *testing.T, args ...string) (code int, stdout, stderr string) {
	t.Helper()
	var out, err bytes.Buffer
	code = run(context.Background(), args, &out, &err)
	return code, out.String(), err.String()
}

// studyIn writes a study file and returns its path.
func studyIn(t *testing.T, text string) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), "study.toml")
	if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	return path
}

// runStudy runs a study into a fresh directory.
func runStudy(t *testing.T, text string, flags ...string) *results.Dir {
	t.Helper()
	out := filepath.Join(t.TempDir(), "out")
	code, _, stderr := command(t, append([]string{"run", studyIn(t, text), "-o", out, "--quiet"}, flags...)...)
	if code != exitDone {
		t.Fatalf("exit %d: %s", code, stderr)
	}
	dir, err := results.Open(out)
	if err != nil {
		t.Fatal(err)
	}
	return dir
}

// reproducible are the tables that may not vary from run to run.
var reproducible = []string{
	"cells", "fits", "picks", "summary", "choices", "differences", "rungs", "curves", "tests", "audit", "verdict", "columns",
}

func TestTablesDoNotDependOnWorkers(t *testing.T) {
	want := map[string][]byte{}
	for _, workers := range []int{1, 2, 5} {
		dir := runStudy(t, smallStudy, "--workers", strconv.Itoa(workers))
		for _, table := range reproducible {
			data, err := os.ReadFile(dir.TablePath(table))
			if err != nil {
				t.Fatal(err)
			}
			if workers > 1 && !bytes.Equal(data, want[table]) {
				t.Errorf("%d workers: table %s differs", workers, table)
			}
			want[table] = data
		}
	}
}

// rows reads the fits and picks of a run.
func rows(t *testing.T, dir *results.Dir) ([]results.Fit, []results.Pick) {
	t.Helper()
	return tableRows(t, dir, results.Fits), tableRows(t, dir, results.Picks)
}

// tableRows reads a table of a run.
func tableRows[R any](t *testing.T, dir *results.Dir, table *results.Table[R]) []R {
	t.Helper()
	rows, err := results.ReadRows(dir, table)
	if err != nil {
		t.Fatal(err)
	}
	return rows
}

// Whatever is added to a study, rows that were there stay to the last bit: other units
// are cut then, so this is a test of how sums over replicates are made, too.
func TestAdditionsLeaveEarlierRowsUnchanged(t *testing.T) {
	before := runStudy(t, smallStudy)
	for name, text := range map[string]string{
		"cell":     strings.Replace(smallStudy, "n = [20]", "n = [10, 20, 30]", 1),
		"truth":    strings.Replace(smallStudy, "[truth.bend]", "[truth.another]\nf = \"exp(x)\"\n[truth.bend]", 1),
		"smoother": strings.Replace(smallStudy, "[[smoother]]", "[[smoother]]\nfamily = \"kernel\"\nkernel = \"tricube\"\ndf = \"3..6\"\n[[smoother]]", 1),
		"rule":     strings.Replace(smallStudy, "[[rule]]", "[[rule]]\nkind = \"aicc\"\n[[rule]]", 1),
		"test":     strings.Replace(smallStudy, "[[rule]]", "[[rule]]\nkind = \"ftest\"\n[[rule]]", 1),
	} {
		after := runStudy(t, text)
		grows := name != "rule" && name != "test"
		stays(t, name, before, after, results.Fits, grows)
		stays(t, name, before, after, results.Picks, true)
		stays(t, name, before, after, results.Summaries, true)
		stays(t, name, before, after, results.Rungs, grows)
		stays(t, name, before, after, results.Curves, grows)
		stays(t, name, before, after, results.Tests, grows)
		stays(t, name, before, after, results.Audits, grows)
	}
}

// stays wants all rows of a table to be there after an addition, and more if it grows.
func stays[R comparable](t *testing.T, name string, before, after *results.Dir, table *results.Table[R], grows bool) {
	t.Helper()
	was, is := tableRows(t, before, table), tableRows(t, after, table)
	if len(was) == 0 || grows && len(is) <= len(was) {
		t.Fatalf("another %s: table %s has %d rows after %d", name, table.Name, len(is), len(was))
	}
	seen := map[R]bool{}
	for _, r := range is {
		seen[r] = true
	}
	for _, r := range was {
		if !seen[r] {
			t.Fatalf("another %s changes in table %s the row %+v", name, table.Name, r)
		}
	}
}

func TestRunningAgainKeepsWhatIsThereAndRedoesWhatIsBroken(t *testing.T) {
	path, out := studyIn(t, smallStudy), filepath.Join(t.TempDir(), "out")
	command(t, "run", path, "-o", out)
	before, err := os.ReadFile(filepath.Join(out, "tables", "fits.parquet"))
	if err != nil {
		t.Fatal(err)
	}
	parts, err := filepath.Glob(filepath.Join(out, "parts", "*"))
	if err != nil || len(parts) != 4 {
		t.Fatalf("parts %v, %v", parts, err)
	}
	if err := os.Truncate(parts[1], 100); err != nil {
		t.Fatal(err)
	}
	if err := os.Remove(parts[2]); err != nil {
		t.Fatal(err)
	}
	code, _, stderr := command(t, "run", path, "-o", out)
	if code != exitDone || !strings.Contains(stderr, "2 of 4 units are there") || !strings.Contains(stderr, "1 parts are broken") {
		t.Errorf("exit %d, said %q", code, stderr)
	}
	after, err := os.ReadFile(filepath.Join(out, "tables", "fits.parquet"))
	if err != nil || !bytes.Equal(before, after) {
		t.Errorf("the table changed (%v)", err)
	}
}

func TestKeepBoundsWhatIsWritten(t *testing.T) {
	small := []string{"audit", "cells", "choices", "columns", "curves", "differences", "rungs", "summary", "tests", "timings", "verdict"}
	for keep, large := range map[string][]string{"fits": {"fits", "picks"}, "picks": {"picks"}, "summary": nil} {
		want := slices.Sorted(slices.Values(append(large, small...)))
		dir := runStudy(t, "keep = \""+keep+"\"\n"+smallStudy)
		names, err := dir.TableNames()
		if err != nil || !slices.Equal(names, want) {
			t.Errorf("keep = %s leaves %v (%v)", keep, names, err)
		}
	}
}

func TestSeedReplacesTheStudys(t *testing.T) {
	first, _ := rows(t, runStudy(t, smallStudy))
	same, _ := rows(t, runStudy(t, smallStudy, "--seed", "7"))
	other, _ := rows(t, runStudy(t, smallStudy, "--seed", "8"))
	if !slices.Equal(first, same) {
		t.Error("the study's own seed changes rows")
	}
	if first[0].HeldoutNoise == other[0].HeldoutNoise {
		t.Error("another seed draws the same")
	}
}

func TestAStopKeepsWhatIsDone(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel() // a signal before the first unit
	path, out := studyIn(t, smallStudy), filepath.Join(t.TempDir(), "out")
	var stdout, stderr bytes.Buffer
	if code := run(ctx, []string{"run", path, "-o", out}, &stdout, &stderr); code != exitStopped {
		t.Errorf("exit %d: %s", code, stderr.String())
	}
	if !strings.Contains(stderr.String(), "run the same command again") {
		t.Errorf("said %q", stderr.String())
	}
	if code, _, _ := command(t, "run", path, "-o", out); code != exitDone {
		t.Errorf("going on: exit %d", code)
	}
}

// Criteria that follow from no other column have one named after their rule.
func TestVariantsOfCriteriaHaveColumns(t *testing.T) {
	dir := runStudy(t, strings.Replace(smallStudy, "[[rule]]", `[[rule]]
kind = "cp"
variance = "rice"
name = "cp of Rice"
[[rule]]
kind = "kfold"
k = 3
[[rule]]
kind = "kfold"
k = 4
name = "bic"
[[rule]]`, 1))
	columns := []string{}
	for _, c := range tableRows(t, dir, results.ColumnDocs) {
		if c.Table == "fits" {
			columns = append(columns, c.Column)
		}
	}
	if got := columns[len(columns)-3:]; !slices.Equal(got, []string{"cp of Rice", "bic (rule)", "kfold k 5"}) {
		t.Errorf("columns %q", got)
	}
	code, stdout, stderr := command(t, "export", dir.Path(), "fits")
	lines := strings.Split(strings.TrimSpace(stdout), "\n")
	fields := strings.Split(lines[1], ",")
	if code != exitDone || !strings.HasSuffix(lines[0], ",cp of Rice,bic (rule),kfold k 5") || slices.Contains(fields[len(fields)-3:], "") {
		t.Errorf("exit %d, %s\n%s\n%s", code, stderr, lines[0], lines[1])
	}
}
