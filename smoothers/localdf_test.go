package smoothers

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"
)

func TestLocalStatusByDF(t *testing.T) {
	even := make([]float64, 20)
	for i := range even {
		even[i] = float64(i)
	}
	gap := []float64{0, 1, 2, 3, 4, 10, 11, 12, 13, 14}
	equal := []float64{3, 3, 3, 3}
	for _, c := range []struct {
		what string
		s    Smoother
		x    []float64
		df   float64
		want Status
	}{
		{"below the mean", NewKernel(), even, 0.99, DFUnattainable},
		{"the mean", NewKernel(), even, 1, OK},
		{"below the line", localOf(1, "bandwidth", "gaussian"), even, 1.5, DFUnattainable},
		{"the line", localOf(1, "bandwidth", "tricube"), even, 2, OK},
		{"the parabola", localOf(2, "bandwidth", "biweight"), even, 3, OK},
		{"above n", NewKernel(), even, 20.1, DFUnattainable},
		{"n", NewKernel(), even, 20, OK},
		{"n for compact support", kernelOf("epanechnikov"), even, 20, OK},
		{"wider than all neighbours", NewLocal(), even, 2.2, DFUnattainable},
		{"ordinary", NewLocal(), even, 5, OK},
		{"across a gap", kernelOf("tricube"), gap, 6, EmptyWindow},
		{"across a gap, gaussian", NewKernel(), gap, 6, OK},
		{"across a gap, neighbours", NewLocal(), gap, 4, OK},
		{"all equal", NewKernel(), equal, 1, DFUnattainable},
		{"all equal, line", localOf(1, "bandwidth", "gaussian"), equal, 2, RankDeficient},
		{"all equal, neighbours", NewLocal(), equal, 2, EmptyWindow},
		{"two x for a parabola", localOf(2, "bandwidth", "gaussian"), []float64{0, 0, 1}, 2, RankDeficient},
		{"one observation", NewKernel(), []float64{5}, 1, DFUnattainable},
		{"not a number", NewKernel(), even, math.NaN(), NotFinite},
		{"infinite", NewLocal(), even, math.Inf(1), NotFinite},
	} {
		r := c.s.On(c.x, nil).AtDF([]float64{c.df})[0]
		if r.Status != c.want {
			t.Errorf("%s: df %g on %v is %v (%s), want %v", c.what, c.df, c.x, r.Status, r.Note, c.want)
		}
		if r.Status == OK && math.Abs(r.TrS-c.df) > 1e-8*c.df {
			t.Errorf("%s: tr S = %.12g, want %g", c.what, r.TrS, c.df)
		}
		if (r.Status == OK) != (r.Leverage != nil) {
			t.Errorf("%s: status %v with leverages %v", c.what, r.Status, r.Leverage)
		}
	}
}

func TestLocalStatusByTuning(t *testing.T) {
	x := []float64{0, 1, 2, 4, 5, 6} // the gap of 2 needs a bandwidth above 1
	for _, c := range []struct {
		s      Smoother
		tuning float64
		want   Status
	}{
		{kernelOf("biweight"), 1, EmptyWindow},
		{kernelOf("biweight"), 1 + 1e-12, OK},
		{kernelOf("gaussian"), 0.01, OK},
		{kernelOf("gaussian"), 0, EmptyWindow},
		{kernelOf("gaussian"), -1, EmptyWindow},
		{kernelOf("gaussian"), math.NaN(), NotFinite},
		{kernelOf("gaussian"), math.Inf(1), NotFinite},
		{kernelOf("gaussian"), 1e300, OK},
		{kernelOf("gaussian"), 1e-300, EmptyWindow},
		// Degree 1: three x may be 3 apart, and the ends need the second x inside.
		{localOf(1, "bandwidth", "tricube"), 1.5, EmptyWindow},
		{localOf(1, "bandwidth", "tricube"), 1.5 + 1e-9, OK},
		// Midway between z_i and z_(i+2) both are at the rim: q must exceed 3.
		{localOf(1, "neighbours", "tricube"), 0.5, EmptyWindow},
		{localOf(1, "neighbours", "tricube"), 0.5 + 1e-9, OK},
		{localOf(2, "neighbours", "tricube"), 4.0 / 6, EmptyWindow},
		{localOf(2, "neighbours", "tricube"), 4.01 / 6, OK},
		{localOf(2, "neighbours", "tricube"), 1, OK},
		{localOf(2, "neighbours", "tricube"), 1.01, DFUnattainable},
		{localOf(1, "neighbours", "gaussian"), 1.0 / 6, EmptyWindow},
		{localOf(1, "neighbours", "gaussian"), 1.1 / 6, OK},
	} {
		r := c.s.On(x, nil).AtTuning([]float64{c.tuning})[0]
		if r.Status != c.want {
			t.Errorf("%+v at %.12g is %v (%s), want %v", c.s, c.tuning, r.Status, r.Note, c.want)
		}
		if r.DF != r.TrS || r.Tuning != c.tuning && !math.IsNaN(c.tuning) {
			t.Errorf("%+v at %g: df %g, tr S %g, tuning %g", c.s, c.tuning, r.DF, r.TrS, r.Tuning)
		}
	}
}

func TestLocalDFDoesNotDependOnOthers(t *testing.T) {
	x := uniformDesign(40, 5)
	for name, s := range allLocal() {
		dfs := []float64{12, 3.3, 7, 4}
		together := s.On(x, nil).AtDF(dfs)
		for i, df := range dfs {
			alone := s.On(x, nil).AtDF([]float64{df})[0]
			if alone.Tuning != together[i].Tuning || alone.Status != together[i].Status {
				t.Errorf("%s: df %g alone %g (%v), with others %g (%v)", name, df, alone.Tuning, alone.Status, together[i].Tuning, together[i].Status)
			}
		}
	}
}

func TestLocalTraceFallsWithWidth(t *testing.T) {
	// By the argument at traceGrid this holds for every design; so a df has one width.
	rng := rand.New(rand.NewPCG(3, 3))
	for range 60 {
		x := make([]float64, 4+rng.IntN(10))
		for i := range x {
			x[i] = math.Round(1000*math.Pow(rng.Float64(), 1+3*rng.Float64())) / 1000 // crowded at 0, with ties
		}
		slices.Sort(x)
		for name, s := range allLocal() {
			l := s.On(x, nil).(*localLadder)
			if math.IsInf(l.floor, 1) || len(l.z) <= l.degree+1 {
				continue
			}
			wide, narrow := min(l.widest(), 4*l.extent()), l.narrowest()
			if l.neighbours {
				wide = 1
			}
			last := 0.0
			for i := range 60 {
				w := wide * math.Pow(narrow/wide, float64(i)/60)
				tr, slope := l.trace(w)
				if tr < last-1e-9 || slope > 1e-9 {
					t.Fatalf("%s on %v: tr S = %.12g after %.12g, slope %g at %g", name, x, tr, last, slope, w)
				}
				last = tr
			}
		}
	}
}
