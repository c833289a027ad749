package scoring

import (
	"testing"

	"bendtest/results"
	"bendtest/sim"
	"bendtest/sim/expr"
	"bendtest/smoothers"
)

// testCell returns a cell with a curved truth.
func testCell(t testing.TB, law sim.DesignLaw, n, heldOut int) *sim.Cell {
	t.Helper()
	sd := 0.4
	return cellOf(t, "3*exp(-2*x) + sin(2*pi*x)", law, &sim.Noise{Law: &sim.NormalNoise{}, SD: &sd}, n, heldOut)
}

// cellOf returns a cell on [0, 1].
func cellOf(t testing.TB, curve string, law sim.DesignLaw, noise *sim.Noise, n, heldOut int) *sim.Cell {
	t.Helper()
	f, err := expr.Compile(curve)
	if err != nil {
		t.Fatal(err)
	}
	truth, err := sim.NewTruth(f, 0, 1)
	if err != nil {
		t.Fatal(err)
	}
	cell, err := sim.NewCell(truth, &sim.Design{Law: law, Redraw: true}, noise, n, heldOut)
	if err != nil {
		t.Fatal(err)
	}
	return cell
}

// everyFamily enters every family at its defaults, and every rule.
func everyFamily() *Contest {
	c := &Contest{}
	for _, f := range smoothers.Families() {
		c.Entrants = append(c.Entrants, Entrant{Name: f.Name, Smoother: f.New(), DF: []float64{2, 3, 4, 5, 6, 8, 10}})
	}
	for _, k := range Rules() {
		r := k.New()
		if f, ok := r.(*FixedDF); ok {
			f.DF = 5
		}
		c.Rules = append(c.Rules, NamedRule{k.Name, r})
	}
	return c
}

// training is a fit row without what the held-out set and the truth may touch.
func training(f results.Fit) results.Fit {
	var none results.Number
	f.ASETrain, f.HeldoutMSE, f.HeldoutNoise = none, none, none
	f.Coverage, f.CoverageBayes = none, none
	f.ASEHeldout, f.ASEInside, f.ASEOutside = none, none, none
	return f
}

// Criteria and picks must not change when the held-out set and the truth do, the
// training readings staying the same.
func TestNoCriterionReadsTheHeldOutSetOrTheTruth(t *testing.T) {
	cell := testCell(t, &sim.UniformDesign{}, 40, 2000)
	contest := everyFamily()
	var sample sim.Sample
	cell.Draw(1, 3, &sample)
	honest := NewBench("c", cell, contest, 1)
	honest.Score(3, &sample)
	before := honest.Rows()

	for i := range sample.Held.Y {
		sample.Held.Y[i] = 7 - sample.Held.Y[i]
		sample.Held.F[i] *= -3
	}
	for i := range sample.Train.F {
		sample.Train.F[i] += 11
	}
	altered := NewBench("c", cell, contest, 1)
	altered.Score(3, &sample)
	after := altered.Rows()

	changed := 0
	for i := range before.Fits {
		if before.Fits[i].HeldoutMSE != after.Fits[i].HeldoutMSE {
			changed++
		}
		if a, b := training(before.Fits[i]), training(after.Fits[i]); a != b {
			t.Errorf("%s at df %g: %+v became %+v", a.Smoother, a.DF, a, b)
		}
	}
	if changed < len(before.Fits)/2 {
		t.Errorf("only %d held-out errors changed: the alteration did not reach them", changed)
	}
	for i, p := range before.Picks {
		q := after.Picks[i]
		if p.Rule != Oracle && (p.DF != q.DF || p.AtEdge != q.AtEdge || p.Status != q.Status) {
			t.Errorf("%s, %s: picked %v, then %v", p.Smoother, p.Rule, p.DF, q.DF)
		}
	}
}
