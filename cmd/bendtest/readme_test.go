package main

import (
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"bendtest/results"
	"bendtest/scoring"
	"bendtest/smoothers"
)

var update = flag.Bool("update", false, "rewrite the generated sections of the README")

const readme = "../../README.md"

// section returns what stands between the marks of a generated section.
func section(t *testing.T, name string) string {
	t.Helper()
	text, err := os.ReadFile(readme)
	if err != nil {
		t.Fatal(err)
	}
	_, rest, found := strings.Cut(string(text), "<!-- begin "+name+" -->\n")
	body, _, ended := strings.Cut(rest, "<!-- end "+name+" -->")
	if !found || !ended {
		t.Fatalf("the README has no section %s", name)
	}
	return body
}

// expectSection compares a section with what it should be, or rewrites it.
func expectSection(t *testing.T, name, want string) {
	t.Helper()
	have := section(t, name)
	if have == want {
		return
	}
	if !*update {
		t.Errorf("section %s of the README is stale (go test ./cmd/bendtest -update rewrites it):\n%s\nshould be\n%s", name, have, want)
		return
	}
	text, err := os.ReadFile(readme)
	if err != nil {
		t.Fatal(err)
	}
	mark := "<!-- begin " + name + " -->\n"
	fresh := strings.Replace(string(text), mark+have, mark+want, 1)
	if err := os.WriteFile(readme, []byte(fresh), 0o644); err != nil {
		t.Fatal(err)
	}
}

// indented makes a literal block of lines, blanks at their ends taken off.
func indented(text string) string {
	var b strings.Builder
	for line := range strings.Lines(text) {
		b.WriteString(strings.TrimRight("    "+line, " \n") + "\n")
	}
	return b.String()
}

func TestReadmeListsFamiliesAndRules(t *testing.T) {
	families := "| family | what it is | tuning |\n|---|---|---|\n"
	for _, f := range smoothers.Families() {
		families += fmt.Sprintf("| `%s` | %s | %s |\n", f.Name, f.Doc, f.Tuning)
	}
	expectSection(t, "families", families)
	rules := "| rule | criterion |\n|---|---|\n"
	for _, r := range scoring.Rules() {
		rules += fmt.Sprintf("| `%s` | %s |\n", r.Name, r.Doc)
	}
	expectSection(t, "rules", rules)
	tables := "| table | what it holds |\n|---|---|\n"
	for _, d := range results.Tables() {
		tables += fmt.Sprintf("| `%s` | %s |\n", d.Name, d.Doc)
	}
	expectSection(t, "tables", tables)
}

// readmeStudy is the study file that the README shows.
func readmeStudy(t *testing.T) string {
	t.Helper()
	text, err := os.ReadFile(readme)
	if err != nil {
		t.Fatal(err)
	}
	_, rest, found := strings.Cut(string(text), "## A study of your own\n\n")
	body, _, ended := strings.Cut(rest, "\nSave it as")
	if !found || !ended {
		t.Fatal("the README shows no study")
	}
	return strings.ReplaceAll("\n"+body, "\n    ", "\n")
}

func TestReadmeStudyRuns(t *testing.T) {
	study := strings.Replace(readmeStudy(t), "replicates = 200", "replicates = 3", 1)
	dir := runStudy(t, study)
	if code, stdout, _ := command(t, "export", dir.Path(), "summary", "--format", "csv"); code != exitDone || !strings.Contains(stdout, "fixed 5") {
		t.Errorf("exit %d", code)
	}
	if code, stdout, stderr := command(t, "plan", studyIn(t, study)); code != exitDone || !strings.Contains(stdout, "2 cells") {
		t.Errorf("exit %d, %s%s", code, stdout, stderr)
	}
}

func TestReadmeFaultsAreWhatTheProgramSays(t *testing.T) {
	study := strings.Replace(readmeStudy(t), `law = "uniform"`, `law = "unifrom"`, 1)
	study = strings.Replace(study, "replicates = 200", "replicats = 200", 1)
	path := studyIn(t, study)
	_, _, stderr := command(t, "plan", path)
	said := strings.ReplaceAll(stderr, path, "night.toml")
	expectSection(t, "faults", indented(strings.ReplaceAll(said, "\t", "        ")))
}

// The commands that the README shows for one data set.
func TestReadmeFitCommandsRun(t *testing.T) {
	data, err := filepath.Abs("../../testdata/fit/random.csv")
	if err != nil {
		t.Fatal(err)
	}
	text, err := os.ReadFile(readme)
	if err != nil {
		t.Fatal(err)
	}
	ran := 0
	for line := range strings.Lines(string(text)) {
		words := strings.Fields(line)
		if len(words) < 3 || words[0] != "bendtest" || words[1] != "fit" {
			continue
		}
		words[2] = data
		if code, stdout, stderr := command(t, words[1:]...); code != exitDone || stdout == "" {
			t.Errorf("%s: exit %d, %s", line, code, stderr)
		}
		ran++
	}
	if ran < 2 {
		t.Errorf("%d commands found", ran)
	}
}

// The demonstration's first table, as the README shows it.
func TestReadmeShowsTheDemonstration(t *testing.T) {
	if os.Getenv("BENDTEST_SLOW") == "" && !*update {
		t.Skip("runs the whole demonstration; BENDTEST_SLOW=1 asks for it")
	}
	out := filepath.Join(t.TempDir(), "demo")
	code, stdout, stderr := command(t, "run", "-o", out)
	if code != exitDone {
		t.Fatalf("exit %d: %s", code, stderr)
	}
	tables := strings.Split(strings.TrimLeft(stdout, "\n"), "\n\n")
	expectSection(t, "demo", indented(tables[0]+"\n"))
	code, stdout, stderr = command(t, "verdict", out)
	if code != exitDone {
		t.Fatalf("exit %d: %s", code, stderr)
	}
	lines := strings.SplitAfter(stdout, "\n")
	expectSection(t, "verdict", indented(strings.Join(lines[:16], "")))
}
