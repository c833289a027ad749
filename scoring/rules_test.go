package scoring

import (
	"testing"

	"bendtest/smoothers"
)

// ladderPath is a path of n = 100 with df 2 to 6 whose RSS falls to a bend at 4.
func ladderPath() *Path {
	p := &Path{N: 100, Noise: Variances{Known: 0.09}}
	for i, rss := range []float64{20, 12, 9, 8.9, 8.85} {
		df := float64(i + 2)
		p.Steps = append(p.Steps, Step{
			DF: df, TrS: df, DFResidual: 100 - df, RSS: rss, LOOCV: rss/100 + df/1000,
			Likelihood: Likelihood{Quad: rss, LogDet: -2 * df, Known: true},
			Next:       PValue{P: []float64{0.001, 0.01, 0.3, 0.02, 0}[i], Known: i < 4},
		})
	}
	return p
}

func TestEveryRulePicksTheBend(t *testing.T) {
	p := ladderPath()
	p.Folds = []Folds{{K: 10, Steps: []FoldScore{
		{0.3, 0.01, true}, {0.2, 0.01, true}, {0.1, 0.01, true}, {0.11, 0.01, true}, {0.12, 0.01, true},
	}}}
	for _, kind := range Rules() {
		r := kind.New()
		if f, ok := r.(*FixedDF); ok {
			f.DF = 4
		}
		step, verdict := r.Pick(p)
		if verdict != Picked || p.Steps[step].DF != 4 {
			t.Errorf("%s picks step %d (%s), want df 4", kind.Name, step, verdict)
		}
	}
}

func TestExactTiesGoToTheSmallerDF(t *testing.T) {
	p := ladderPath()
	for i := range p.Steps {
		p.Steps[i].LOOCV = 1
	}
	if step, _ := (&ByLOOCV{}).Pick(p); step != 0 {
		t.Errorf("tie picked step %d, want 0", step)
	}
}

func TestRungsWithAStatusAreSkipped(t *testing.T) {
	p := ladderPath()
	p.Steps[2].Status = smoothers.RankDeficient
	for _, r := range []Rule{&ByGCV{Gamma: 1}, &ByAIC{}, &ByREML{}} {
		if step, _ := r.Pick(p); step == 2 || step < 0 {
			t.Errorf("%T picked step %d", r, step)
		}
	}
	if _, verdict := (&FixedDF{DF: 4}).Pick(p); verdict != "rank-deficient" {
		t.Errorf("fixed df on a failed rung says %q", verdict)
	}
	for i := range p.Steps {
		p.Steps[i].Status = smoothers.EmptyWindow
	}
	if _, verdict := (&ByGCV{Gamma: 1}).Pick(p); verdict != NoRung {
		t.Errorf("gcv without a usable rung says %q, want %q", verdict, NoRung)
	}
}

func TestRulesWithoutMeaningAreNotApplicable(t *testing.T) {
	p := ladderPath()
	for i := range p.Steps {
		p.Steps[i].Likelihood = Likelihood{}
		p.Steps[i].DFResidual = 0
	}
	for name, r := range map[string]Rule{
		"reml of a family without the form": &ByREML{},
		"ml of such a family":               &ByML{},
		"kfold without folds":               &ByKFold{K: 10},
		"cp without a difference variance":  &ByCP{Gamma: 1, Variance: "difference"},
		"cp without a first difference":     &ByCP{Gamma: 1, Variance: "rice"},
		"cp with nothing left at the end":   &ByCP{Gamma: 1, Variance: "largest"},
		"a fixed df off the grid":           &FixedDF{DF: 4.5},
	} {
		if step, verdict := r.Pick(p); verdict != NotApplicable || step != -1 {
			t.Errorf("%s: step %d, verdict %q", name, step, verdict)
		}
	}
}

// Two rungs differ by 0.02 in RSS/n and one df, so cp switches from the larger to
// the smaller where 2γσ²/n passes 0.02: at γσ² = 1.
func TestCPWeighsDFByItsVariance(t *testing.T) {
	p := &Path{N: 100, Noise: Variances{Known: 0.9, Difference: 1.1, HasDiff: true, Rice: 0.9, HasRice: true}}
	p.Steps = []Step{{DF: 3, TrS: 3, RSS: 12}, {DF: 4, TrS: 4, RSS: 10, DFResidual: 8}}
	for _, c := range []struct {
		rule ByCP
		want int
	}{
		{ByCP{1, "known"}, 1},
		{ByCP{1.2, "known"}, 0},
		{ByCP{1, "difference"}, 0},
		{ByCP{1, "rice"}, 1},
		{ByCP{1, "largest"}, 0}, // 10/8 = 1.25
	} {
		if got, _ := c.rule.Pick(p); got != c.want {
			t.Errorf("%+v picks step %d, want %d", c.rule, got, c.want)
		}
	}
}

func TestOneSETakesTheSmallestDFWithinTheBand(t *testing.T) {
	p := ladderPath()
	p.Folds = []Folds{{K: 5, Steps: []FoldScore{
		{0.30, 0.01, true}, {0.118, 0.01, true}, {0.11, 0.01, false}, {0.10, 0.02, true}, {0.2, 0.01, true},
	}}}
	if step, _ := (&ByKFold{K: 5}).Pick(p); step != 3 {
		t.Errorf("kfold picks step %d, want 3", step)
	}
	if step, _ := (&ByKFold{K: 5, OneSE: true}).Pick(p); step != 1 {
		t.Errorf("one-se picks step %d, want 1", step)
	}
}
