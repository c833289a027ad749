package main

import (
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

// The script is run as the batch system would run its tasks, one after the other, in a
// folder whose name has to be quoted.
func TestArrayScriptWorksTheStudy(t *testing.T) {
	folder := filepath.Join(t.TempDir(), "it's a 100 % shared folder")
	if err := os.Mkdir(folder, 0o755); err != nil {
		t.Fatal(err)
	}
	program, study := filepath.Join(folder, "bendtest"), filepath.Join(folder, "night.toml")
	if text, err := exec.Command("go", "build", "-o", program, ".").CombinedOutput(); err != nil {
		t.Fatalf("%v: %s", err, text)
	}
	if err := os.WriteFile(study, []byte(manyUnits), 0o644); err != nil {
		t.Fatal(err)
	}
	at := func(env string, name string, args ...string) (string, error) {
		c := exec.Command(name, args...)
		c.Dir, c.Env = folder, append(os.Environ(), env)
		text, err := c.CombinedOutput()
		return string(text), err
	}
	if text, err := at("", program, "array", "night.toml", "-o", "night", "--tasks", "3"); err != nil || !strings.Contains(text, "sbatch night.sh") {
		t.Fatalf("%v: %s", err, text)
	}
	if text, err := at("SLURM_ARRAY_TASK_ID=", "sh", "night.sh"); err == nil {
		t.Errorf("the script runs outside of an array: %s", text)
	}
	if text, err := at("", "sh", "-n", "night.sh"); err != nil {
		t.Errorf("%v: %s", err, text)
	}
	for task := 1; task <= 3; task++ {
		if text, err := at(fmt.Sprint("SLURM_ARRAY_TASK_ID=", task), "sh", filepath.Join(folder, "night.sh")); err != nil || !strings.Contains(text, fmt.Sprintf("Part %d of 3 is done", task)) {
			t.Fatalf("task %d: %v: %s", task, err, text)
		}
	}
	if text, err := at("", program, "gather", "night", "--quiet"); err != nil {
		t.Fatalf("%v: %s", err, text)
	}
	if text, err := at("", program, "run", "night.toml", "-o", "alone", "--quiet"); err != nil {
		t.Fatalf("%v: %s", err, text)
	}
	sameTables(t, filepath.Join(folder, "night"), filepath.Join(folder, "alone"))
}

func TestArrayRefusesWhatRunWould(t *testing.T) {
	study := studyIn(t, strings.Replace(manyUnits, "law = \"even\"", "law = \"evem\"", 1))
	out := filepath.Join(t.TempDir(), "out")
	for want, args := range map[string][]string{
		"unknown design law": {"array", study, "-o", out},
		"-o DIR is missing":  {"array", studyIn(t, manyUnits)},
		"want at least 1":    {"array", studyIn(t, manyUnits), "-o", out, "--tasks", "0"},
	} {
		code, stdout, stderr := command(t, args...)
		if _, err := os.Stat(out + ".sh"); code != exitRequest || stdout != "" || !strings.Contains(stderr, want) || err == nil {
			t.Errorf("%v: exit %d, %s", args, code, stderr)
		}
	}
}
