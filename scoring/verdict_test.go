package scoring

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"bendtest/results"
)

// asePick is a pick with an ASE, or a failed one if ase is negative.
func asePick(cell string, replicate int, smoother, rule string, ase float64) results.Pick {
	p := results.Pick{Cell: cell, Replicate: replicate, Smoother: smoother, Rule: rule, Status: "ok"}
	if ase < 0 {
		p.Status = "rank-deficient"
		return p
	}
	p.ASEHeldout, p.Regret = results.Num(ase), results.Num(1)
	return p
}

// appraise makes the appraisal of a cell from each method's ASE by replicate.
func appraise(cell string, methods []string, ase map[string][]float64) *Appraisal {
	a := NewAppraisal(cell, len(ase[methods[0]]))
	for r := range ase[methods[0]] {
		for _, m := range methods {
			p := asePick(cell, r, m, "r", ase[m][r])
			a.Add(&p)
		}
		oracle := asePick(cell, r, methods[0], Oracle, 1e-9)
		a.Add(&oracle)
	}
	return a
}

// judge gives every cell a source of its own.
func judge(cells ...*Appraisal) []results.Verdict {
	var sources []rand.Source
	for c := range cells {
		sources = append(sources, rand.NewPCG(3, uint64(c)))
	}
	return JudgeMethods(cells, sources)
}

func TestPairedDifferencesByHand(t *testing.T) {
	p := NewPairs("c")
	for r, ase := range [][3]float64{{1, 2, 5}, {3, -1, 5}, {2, 1, 5}, {4, 4, 5}} {
		for m, v := range ase {
			pick := asePick("c", r, []string{"a", "b", "c"}[m], "r", v)
			p.Add(&pick)
		}
		oracle := asePick("c", r, "a", Oracle, 0)
		p.Add(&oracle)
	}
	rows := p.Rows()
	if len(rows) != 3 {
		t.Fatalf("%d rows", len(rows))
	}
	ab := rows[0] // differences −1, 1, 0: mean 0, sd 1
	if ab.Smoother != "a" || ab.ThanSmoother != "b" || ab.Replicates != 3 || ab.ASEDifference.Value != 0 ||
		!near(ab.MCSE.Value, 1/math.Sqrt(3), 1e-15) || ab.Better.Value != 0.5 {
		t.Errorf("a and b: %+v", ab)
	}
	ac := rows[1] // −4, −2, −3, −1
	if ac.ThanSmoother != "c" || ac.Replicates != 4 || ac.ASEDifference.Value != -2.5 || ac.Better.Value != 1 {
		t.Errorf("a and c: %+v", ac)
	}
}

func TestVerdictByHand(t *testing.T) {
	methods := []string{"a", "b", "c", "silent"}
	flat := func(v float64) []float64 { return slices.Repeat([]float64{v}, 10) }
	first := appraise("first", methods, map[string][]float64{"a": flat(1), "b": flat(1.5), "c": flat(1.5), "silent": flat(-1)})
	second := appraise("second", methods, map[string][]float64{
		"a": flat(4), "b": append([]float64{-1, -1}, slices.Repeat([]float64{2}, 8)...), "c": flat(-1), "silent": flat(-1),
	})
	rows := judge(first, second)
	if len(rows) != 3 {
		t.Fatalf("%d rows: the silent method is no method", len(rows))
	}
	b := rows[0] // 0.5 and 0 behind
	if b.Smoother != "b" || b.MeanExcess.Value != 0.25 || b.WorstExcess.Value != 0.5 || b.WorstCell != "first" || b.Cells != 2 {
		t.Errorf("b: %+v", b)
	}
	if b.MeanRank.Value != (2.5+1)/2 || b.WorstRank.Value != 2.5 {
		t.Errorf("ranks of b: %g, %g; want ties averaged", b.MeanRank.Value, b.WorstRank.Value)
	}
	if b.Failed != 2 || b.Replicates != 18 || b.Failure != "rank-deficient" || b.WorstFailureRate.Value != 0.2 {
		t.Errorf("failures of b: %+v", b)
	}
	if b.Behind.Value != 0 || !b.Tied || b.MeanWins.Value != 1 || b.MinimaxWins.Value != 1 {
		t.Errorf("wins of b: %+v", b)
	}
	a := rows[1] // 0 and 1 behind
	if a.Smoother != "a" || a.MeanExcess.Value != 0.5 || a.WorstExcess.Value != 1 || a.WorstCell != "second" ||
		!near(a.Behind.Value, 1.5/1.25-1, 1e-15) || a.Tied {
		t.Errorf("a: %+v", a)
	}
	if c := rows[2]; c.Smoother != "c" || c.Cells != 1 || c.Tied || c.MeanWins.Value != 0 {
		t.Errorf("c, which has no pick in a cell: %+v", c)
	}
	Tie(rows, 0.3)
	if !rows[1].Tied || rows[2].Tied {
		t.Error("with a margin of 0.3 a is tied, and c is not, which was not judged everywhere")
	}
}

// With a rival of constant ASE 1, relative excess is the mean ASE less 1, whose interval
// is about ±1.96 standard errors. The bootstrap's own error with 1,000 resamplings of 100
// batches is some 10 %.
func TestIntervalsAreThoseOfAMean(t *testing.T) {
	rng := rand.New(rand.NewPCG(8, 8))
	const r = 400
	rival, varying := slices.Repeat([]float64{1}, r), make([]float64, r)
	for i := range varying {
		varying[i] = 2 + rng.ExpFloat64()
	}
	rows := judge(appraise("c", []string{"rival", "varying"}, map[string][]float64{"rival": rival, "varying": varying}))
	e, v := Mean(varying), rows[1]
	half := 1.96 * e.MCSE.Value
	if !near(v.MeanExcess.Value, e.Value.Value-1, 1e-12) ||
		!near(v.MeanExcess.Value-v.MeanLo.Value, half, 0.2*half) || !near(v.MeanHi.Value-v.MeanExcess.Value, half, 0.2*half) {
		t.Errorf("interval [%g, %g] about %g, want ±%g", v.MeanLo.Value, v.MeanHi.Value, v.MeanExcess.Value, half)
	}
}

// Two methods that share most of their error are told apart although either alone is
// hardly known.
func TestVerdictKeepsThePairing(t *testing.T) {
	rng := rand.New(rand.NewPCG(9, 9))
	const r = 200
	good, bad := make([]float64, r), make([]float64, r)
	for i := range good {
		good[i] = math.Exp(2 * rng.NormFloat64())
		bad[i] = 1.2 * good[i]
	}
	rows := judge(appraise("c", []string{"bad", "good"}, map[string][]float64{"bad": bad, "good": good}))
	if rows[0].Smoother != "good" || rows[0].MeanWins.Value != 1 {
		t.Errorf("%+v", rows[0])
	}
	if v := rows[1]; !near(v.BehindLo.Value, 0.2, 1e-9) || !near(v.BehindHi.Value, 0.2, 1e-9) {
		t.Errorf("behind by %g to %g, want 0.2 in every resampling", v.BehindLo.Value, v.BehindHi.Value)
	}
}

// The sums depend on how replicates fall into batches, not on when they come.
func TestVerdictIsTheSameAgain(t *testing.T) {
	make2 := func() []results.Verdict {
		rng := rand.New(rand.NewPCG(1, 1))
		a, b := make([]float64, 77), make([]float64, 77)
		for i := range a {
			a[i], b[i] = rng.ExpFloat64(), rng.ExpFloat64()
		}
		return judge(appraise("c", []string{"a", "b"}, map[string][]float64{"a": a, "b": b}))
	}
	if !slices.Equal(make2(), make2()) {
		t.Error("two verdicts on the same picks differ")
	}
}

func TestShortfallsNameTheBestMethod(t *testing.T) {
	summary := func(cell, smoother, rule string, ratio, failures float64) []results.Summary {
		return []results.Summary{
			{Cell: cell, Smoother: smoother, Rule: rule, Measure: "floor_ratio", Value: results.Number{Value: ratio, Known: ratio > 0}},
			{Cell: cell, Smoother: smoother, Rule: rule, Measure: "failure_rate", Value: results.Num(failures)},
		}
	}
	rows := slices.Concat(
		summary("good", "a", "r", 1.2, 0), summary("good", "a", Oracle, 1.1, 0),
		summary("far", "a", "r", 1.9, 0), summary("far", "b", "r", 1.5, 0.5), summary("far", "a", Oracle, 1.01, 0),
		summary("failing", "a", "r", 1.1, 0.02), summary("failing", "b", "r", 1.2, 0.5),
		summary("empty", "a", "r", -1, 1),
	)
	cells := []results.Cell{{Cell: "good"}, {Cell: "far"}, {Cell: "failing"}, {Cell: "empty"}}
	short := Shortfalls(cells, rows, 0.25)
	if len(short) != 3 {
		t.Fatalf("%+v", short)
	}
	if s := short[0]; s.Cell != "far" || s.Smoother != "b" || s.Above.Value.Value != 0.5 || s.Failing {
		t.Errorf("far: %+v", s)
	}
	if s := short[1]; s.Cell != "failing" || s.Smoother != "a" || !s.Failing {
		t.Errorf("failing: %+v", s)
	}
	if s := short[2]; s.Cell != "empty" || s.Smoother != "" {
		t.Errorf("empty: %+v", s)
	}
	if n := len(Shortfalls(cells, rows, 0.6)); n != 2 {
		t.Errorf("with a floor of 0.6: %d cells", n)
	}
}
