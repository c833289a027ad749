package smoothers

import (
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"slices"
	"testing"
)

// slow says that the checks that take long are wanted.
var slow = os.Getenv("BENDTEST_SLOW") != ""

// digits is how far, relatively, figures of the smoothing spline may be off the exact
// ones: all is added up from terms of one sign, so that the 1e-16 of each operation is
// met a few dozen times. It holds for what is next to 0 too, as 1 − S_ii at df near n.
const digits = 2e-14

func TestSmoothingSplineIsExactToRounding(t *testing.T) {
	for name, x := range hostileDesigns() {
		m := float64(distinct(x))
		dfs := []float64{2.0001, m / 2, m - 1e-3}
		if slow {
			dfs = append(dfs, 2.5, 4, 8, m-0.5)
		}
		for _, order := range []int{1, 2} {
			s := &SmoothingSpline{Order: order, Beyond: "extend"}
			for _, r := range s.On(x, nil).AtDF(dfs) {
				if r.Status != OK {
					t.Errorf("%s, order %d, df %g: %v", name, order, r.DF, r.Status)
					continue
				}
				label := fmt.Sprintf("%s, order %d, df %g", name, order, r.DF)
				e := newExactSpline(order, x, r.Tuning)
				checkExactFigures(t, label, &r, e)
				checkExactFit(t, label, &r, e, x)
			}
		}
	}
}

// Many observations with ties and near ties.
func TestSmoothingSplineIsExactAtSize(t *testing.T) {
	n := 100
	if slow {
		n = 400
		defer func(bits int) { exactBits = bits }(exactBits)
		exactBits = 200 // near ties 1e-9 apart take 90 bits
	}
	rng := rand.New(rand.NewPCG(4, 400))
	x := make([]float64, n)
	for i := range x {
		x[i] = rng.Float64()
		switch i % 10 {
		case 1:
			x[i] = x[i-1]
		case 2:
			x[i] = x[i-1] + 1e-9
		}
	}
	slices.Sort(x)
	for _, r := range NewSmoothingSpline().On(x, nil).AtDF([]float64{12, float64(n) / 2}) {
		e := newExactSpline(2, x, r.Tuning)
		checkExactFigures(t, fmt.Sprintf("df %g", r.DF), &r, e)
		checkExactFit(t, fmt.Sprintf("df %g", r.DF), &r, e, x)
	}
}

// checkExactFigures compares what a rung states of S.
func checkExactFigures(t *testing.T, label string, r *Rung, e *exactSpline) {
	t.Helper()
	off := func(what string, got, want float64) {
		if !(math.Abs(got-want) <= digits*math.Abs(want)) {
			t.Errorf("%s: %s = %.17g, exactly %.17g", label, what, got, want)
		}
	}
	s, rest := e.smoother()
	trace, norms := 0.0, 0.0
	for i := range s {
		norm := 0.0
		for _, v := range s[i] {
			norm += v * v
		}
		off(fmt.Sprint("leverage ", i), r.Leverage[i], s[i][i])
		off(fmt.Sprint("remainder ", i), r.Remainder[i], rest[i])
		off(fmt.Sprint("row norm ", i), r.RowNorm2[i], norm)
		trace += s[i][i]
		norms += norm
	}
	off("tr S", r.TrS, trace)
	off("tr SᵀS", r.TrSTS, norms)
	if e.order == 2 {
		// A sum of n logs, each off by rounding relative to its own factor.
		if !r.HasLogDet || math.Abs(r.LogDet-e.logDet) > 1e-13*float64(len(s)) {
			t.Errorf("%s: log det %.15g, exactly %.15g", label, r.LogDet, e.logDet)
		}
	}
}

// checkExactFit compares a fit of readings of size 2 at the data, between and beyond.
func checkExactFit(t *testing.T, label string, r *Rung, e *exactSpline, x []float64) {
	t.Helper()
	n := len(x)
	span := x[n-1] - x[0]
	_, y := evenReadings(n)
	at := []float64{x[0] - 3*span, x[0] - 0.1*span, x[0], x[0] + 0.1234*span, x[0] + 0.7123*span, x[n-1], x[n-1] + 0.3*span}
	var f Fit
	r.Fit(y, &f)
	got := make([]float64, len(at))
	f.Curve.At(got, at)
	got = append(got, f.Fitted...)
	for i, want := range e.curve(y, append(at, x...), x[0]) {
		// Beyond the data the line multiplies the rounding of its slope.
		if !(math.Abs(got[i]-want) <= digits*max(2, math.Abs(want))) {
			t.Errorf("%s: value %d = %.17g, exactly %.17g", label, i, got[i], want)
		}
	}
}
