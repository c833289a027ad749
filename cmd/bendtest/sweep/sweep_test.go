package sweep

import (
	"context"
	"errors"
	"path/filepath"
	"strings"
	"testing"

	"bendtest/results"
	"bendtest/scenarios"
	"bendtest/scoring"
	"bendtest/smoothers"
)

const text = `title = "Sweep"
seed = 3
held-out = 200
replicates = 2000
[cells]
n = [12, 20]
[truth.a]
f = "x"
[design.a]
law = "uniform"
[noise.a]
law = "normal"
sd = 1
[[smoother]]
family = "polynomial"
df = [1, 2, 3]
[[rule]]
kind = "gcv"
`

func parse(t *testing.T, src string) *scenarios.Study {
	t.Helper()
	var voc scenarios.Vocabulary
	for _, k := range scoring.Rules() {
		voc.Rules = append(voc.Rules, scenarios.Kind{Name: k.Name, New: func() any { return k.New() }})
	}
	study, faults := scenarios.Parse("s.toml", []byte(src), voc)
	if len(faults) > 0 {
		t.Fatal(faults)
	}
	return study
}

func TestUnitsCoverEveryReplicateOnce(t *testing.T) {
	plan := NewPlan(parse(t, strings.Replace(text, "2000", "12345", 1)), "v")
	next, cell := 0, 0
	keys := map[string]bool{}
	for _, u := range plan.Units {
		if u.Cell != cell {
			if next != 12345 {
				t.Errorf("cell %d ends at %d", cell, next)
			}
			cell, next = u.Cell, 0
		}
		if u.From != next || u.To <= u.From {
			t.Errorf("unit %+v after %d", u, next)
		}
		next = u.To
		if keys[u.Key] {
			t.Errorf("key %s twice", u.Key)
		}
		keys[u.Key] = true
	}
	if next != 12345 || cell != 1 || len(plan.Units) < 10 {
		t.Errorf("%d units, the last ends at %d of cell %d", len(plan.Units), next, cell)
	}
	if plan.Fits() != 3*12345*2 {
		t.Errorf("%d fits", plan.Fits())
	}
}

// A part may be reused exactly where its rows would be the same.
func TestPartsAreNamedByWhatTheirRowsDependOn(t *testing.T) {
	first := NewPlan(parse(t, text), "v").Units[0].Key
	same := map[string]string{
		"title":          strings.Replace(text, "Sweep", "Other", 1),
		"another cell":   strings.Replace(text, "[12, 20]", "[12, 20, 30]", 1),
		"spacing":        strings.Replace(text, "sd = 1", "sd   =  1.0", 1),
		"more in a cell": strings.Replace(text, "replicates = 2000", "replicates = 5000", 1),
	}
	for what, src := range same {
		if src == text || NewPlan(parse(t, src), "v").Units[0].Key != first {
			t.Errorf("%s: the part gets another name", what)
		}
	}
	other := map[string]string{
		"seed":     strings.Replace(text, "seed = 3", "seed = 4", 1),
		"held-out": strings.Replace(text, "200", "300", 1),
		"truth":    strings.Replace(text, `"x"`, `"2*x"`, 1),
		"noise":    strings.Replace(text, "sd = 1", "sd = 2", 1),
		"smoother": strings.Replace(text, "df = [", "beyond = \"hold\"\ndf = [", 1),
		"df":       strings.Replace(text, "[1, 2, 3]", "[1, 2, 4]", 1),
		"rule":     strings.Replace(text, `"gcv"`, "\"gcv\"\ngamma = 1.4", 1),
		"label":    strings.Replace(text, `"gcv"`, "\"gcv\"\nname = \"g\"", 1),
		"keep":     "keep = \"picks\"\n" + text,
	}
	for what, src := range other {
		if NewPlan(parse(t, src), "v").Units[0].Key == first {
			t.Errorf("%s: the part keeps its name", what)
		}
	}
	if NewPlan(parse(t, text), "another build").Units[0].Key == first {
		t.Error("another build reuses the part")
	}
}

// A broken smoother: it panics on the larger design.
type broken struct{ smoothers.Smoother }

func (b broken) On(x []float64, mem *smoothers.Arena) smoothers.Ladder {
	if len(x) > 12 {
		panic("a bug")
	}
	return b.Smoother.On(x, mem)
}

func TestAPanicEndsTheSweepAndNamesItsUnit(t *testing.T) {
	study := parse(t, strings.Replace(text, "2000", "10", 1))
	plan := NewPlan(study, "v")
	plan.Contest.Entrants[0].Smoother = broken{study.Smoothers[0].Smoother}
	dir, err := results.Create(filepath.Join(t.TempDir(), "run"))
	if err != nil {
		t.Fatal(err)
	}
	defer dir.Close()
	watch := &counter{}
	report, err := Run(context.Background(), plan, dir, plan.Units, 1, watch)
	var fault *PanicError
	if !errors.As(err, &fault) || fault.Cell != "a/a/a/n=20" || len(fault.Stack) == 0 || !strings.Contains(err.Error(), "replicates 0 to 9: a bug") {
		t.Errorf("error = %v", err)
	}
	if report.Worked != 1 || watch.units != 1 {
		t.Errorf("%+v, %d units observed", report, watch.units)
	}
	if ok, err := dir.CheckPart(plan.Units[0].Key); !ok || err != nil {
		t.Errorf("the part before the fault is not kept: %v", err)
	}
}

// A counter counts units.
type counter struct{ units int }

func (*counter) Begin(int, int, int) {}
func (c *counter) Done(int, int)     { c.units++ }

func TestPredictionCoversEveryCell(t *testing.T) {
	plan := NewPlan(parse(t, text), "v")
	e, err := Predict(plan)
	if err != nil {
		t.Fatal(err)
	}
	if len(e.Cells) != 2 || e.Fits != 12000 || !(e.Seconds > 0) || e.Bytes < 12000*20 || e.Cells[1].Cell != "a/a/a/n=20" {
		t.Errorf("%+v", e)
	}
}
