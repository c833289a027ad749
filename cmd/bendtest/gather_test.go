package main

import (
	"bytes"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"bendtest/results"
)

// manyUnits has several units in each of its two cells, and costs little.
const manyUnits = `seed = 9
held-out = 100
replicates = 600
[cells]
n = [20]
[truth.bend]
f = "sin(5*x)"
[truth.line]
f = "1 - x"
[design.even]
law = "even"
[noise.sensor]
law = "normal"
sd = 0.3
[[smoother]]
family = "polynomial"
df = "2..12"
[[rule]]
kind = "gcv"
`

// sameTables compares the tables of two runs byte for byte.
func sameTables(t *testing.T, got, want string) {
	t.Helper()
	for _, table := range reproducible {
		a, errA := os.ReadFile(filepath.Join(got, "tables", table+".parquet"))
		b, errB := os.ReadFile(filepath.Join(want, "tables", table+".parquet"))
		if errA != nil || errB != nil || !bytes.Equal(a, b) {
			t.Errorf("table %s differs (%v, %v)", table, errA, errB)
		}
	}
}

// runPart works one share of a study into a directory.
func runPart(t *testing.T, study, dir, part string) {
	t.Helper()
	if code, stdout, stderr := command(t, "run", study, "-o", dir, "--part", part, "--workers", "1"); code != exitDone || !strings.Contains(stdout, "bendtest gather") {
		t.Fatalf("part %s: exit %d, %s%s", part, code, stdout, stderr)
	}
}

func TestSharesGatherToTheSameTables(t *testing.T) {
	whole := runStudy(t, manyUnits)
	study := studyIn(t, manyUnits)
	shared := filepath.Join(t.TempDir(), "shared")
	for _, part := range []string{"3/3", "1/3", "2/3"} {
		runPart(t, study, shared, part)
	}
	if code, stdout, stderr := command(t, "gather", shared); code != exitDone || !strings.Contains(stdout, "audit: ") {
		t.Fatalf("exit %d: %s", code, stderr)
	}
	sameTables(t, shared, whole.Path())
	dir, err := results.Open(shared)
	if err != nil {
		t.Fatal(err)
	}
	manifest, err := dir.ReadManifest()
	if err != nil || len(manifest.Starts) != 4 || len(manifest.Parts) != 6 {
		t.Errorf("manifest %+v (%v)", manifest, err)
	}

	apart := []string{filepath.Join(t.TempDir(), "a"), filepath.Join(t.TempDir(), "b")}
	runPart(t, study, apart[0], "1/2")
	runPart(t, study, apart[1], "2/2")
	together := filepath.Join(t.TempDir(), "together")
	if code, _, stderr := command(t, "gather", apart[0], apart[1], "-o", together, "--quiet"); code != exitDone {
		t.Fatalf("exit %d: %s", code, stderr)
	}
	sameTables(t, together, whole.Path())
	// What is gathered is a run like any other: nothing is left to work.
	if code, _, stderr := command(t, "run", study, "-o", together); code != exitDone || !strings.Contains(stderr, "6 of 6 units are there") {
		t.Errorf("exit %d: %s", code, stderr)
	}
}

func TestGatherSaysWhatIsMissing(t *testing.T) {
	study, dir := studyIn(t, manyUnits), filepath.Join(t.TempDir(), "out")
	runPart(t, study, dir, "1/2")
	code, stdout, stderr := command(t, "gather", dir)
	if code != exitRequest || stdout != "" || !strings.Contains(stderr, "3 of 6 units are missing, first cell bend/even/sensor/n=20, replicates 256 to 511") {
		t.Errorf("exit %d: %s", code, stderr)
	}
	runPart(t, study, dir, "2/2")
	parts, err := filepath.Glob(filepath.Join(dir, "parts", "*.part"))
	if err != nil || len(parts) != 6 {
		t.Fatalf("%d parts (%v)", len(parts), err)
	}
	if err := os.Truncate(parts[3], 100); err != nil {
		t.Fatal(err)
	}
	if code, _, stderr = command(t, "gather", dir); code != exitRequest || !strings.Contains(stderr, "1 of 6 units are missing") {
		t.Errorf("a broken part: exit %d: %s", code, stderr)
	}
}

func TestOnlySharesShareADirectory(t *testing.T) {
	study, dir := studyIn(t, smallStudy), filepath.Join(t.TempDir(), "out")
	first, err := results.Join(dir, "1-of-2")
	if err != nil {
		t.Fatal(err)
	}
	defer first.Close()
	second, err := results.Join(dir, "2-of-2")
	if err != nil {
		t.Fatalf("a second share: %v", err)
	}
	second.Close()
	if code, _, stderr := command(t, "run", study, "-o", dir); code != exitRequest || !strings.Contains(stderr, "another process is writing") {
		t.Errorf("a whole run among shares: exit %d, %s", code, stderr)
	}
}

// Files that a study names lie beside the study, wherever the run directory is.
func TestGatherFindsTheStudysFiles(t *testing.T) {
	folder := t.TempDir()
	text := strings.Replace(smallStudy, "[design.random]\nlaw = \"uniform\"", "[design.random]\nlaw = \"from-file\"\nfile = \"x.csv\"", 1)
	if text == smallStudy {
		t.Fatal("the study has no such design")
	}
	study := filepath.Join(folder, "study.toml")
	for path, content := range map[string]string{study: text, filepath.Join(folder, "x.csv"): "x\n0.1\n0.2\n0.35\n0.5\n0.8\n0.9\n"} {
		if err := os.WriteFile(path, []byte(content), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	dir := filepath.Join(t.TempDir(), "out")
	runPart(t, study, dir, "1/1")
	if code, _, stderr := command(t, "gather", dir, "--quiet"); code != exitDone {
		t.Errorf("exit %d: %s", code, stderr)
	}
}

func TestPartIsRefusedUnlessItIsOne(t *testing.T) {
	study := studyIn(t, smallStudy)
	for _, part := range []string{"0/2", "3/2", "1", "a/b", "1/0", "-1/2", "1/2/3"} {
		code, _, stderr := command(t, "run", study, "-o", filepath.Join(t.TempDir(), "out"), "--part", part)
		if code != exitRequest || !strings.Contains(stderr, "want K/N") {
			t.Errorf("--part %s: exit %d, %s", part, code, stderr)
		}
	}
	for _, args := range [][]string{{"gather"}, {"gather", filepath.Join(t.TempDir(), "none")}} {
		if code, _, stderr := command(t, args...); code != exitRequest || slices.Contains(strings.Split(strings.TrimSpace(stderr), ""), "\n") {
			t.Errorf("%v: exit %d, %q", args, code, stderr)
		}
	}
}
