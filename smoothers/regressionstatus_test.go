package smoothers

import (
	"math"
	"testing"
)

// What a regression spline cannot be has a status that says why.
func TestRegressionSplineSaysWhatIsMissing(t *testing.T) {
	tied := []float64{0, 1, 1, 1, 1, 1, 1, 2, 3, 4, 5}
	crowd := []float64{0, 1e-3, 2e-3, 3e-3, 4e-3, 5e-3, 6e-3, 0.99, 1}
	near := make([]float64, 20) // pairs 1e-12 apart that two knots would have to tell apart
	for i := range near {
		near[i] = float64(i/2) + 1e-12*float64(i%2)
	}
	for _, c := range []struct {
		x      []float64
		spline RegressionSpline
		df     float64
		status Status
		note   string
	}{
		{tied, RegressionSpline{Degree: 1, Knots: "quantiles", Beyond: "extend"}, 6, RankDeficient, noteCoincide},
		{crowd, RegressionSpline{Degree: 3, Knots: "equispaced", Beyond: "extend"}, 8, RankDeficient, noteSparse},
		{near, RegressionSpline{Degree: 3, Knots: "quantiles", Beyond: "extend"}, 19, RankDeficient, noteDigits},
		{crowd, RegressionSpline{Degree: 3, Knots: "quantiles", Beyond: "extend"}, 10, DFUnattainable, noteDistinct},
		{crowd, RegressionSpline{Degree: 3, Knots: "quantiles", Beyond: "extend"}, 5.5, DFUnattainable, noteWhole},
		{[]float64{-1.5e308, 0, 1.5e308}, RegressionSpline{Degree: 3, Knots: "quantiles", Beyond: "extend"}, 2, NotFinite, noteRange},
	} {
		if r := c.spline.On(c.x, nil).AtDF([]float64{c.df})[0]; r.Status != c.status || r.Note != c.note {
			t.Errorf("%+v, df %g: %v, %q; want %v, %q", c.spline, c.df, r.Status, r.Note, c.status, c.note)
		}
	}
}

// A reading far from all others has a leverage close to 1, and what that leaves must not
// come out as a difference: it is 1/(1 + v), v the variance that the others leave to the
// value there, for a line through ±e, ±3e and the distance 1 equal to 1/4 + 1/(20e²).
func TestRemainderOfAFarReadingHasItsDigits(t *testing.T) {
	const e = 1e-5
	x := []float64{-3 * e, -e, e, 3 * e, 1}
	r := NewRegressionSpline().On(x, nil).AtDF([]float64{2})[0]
	want := 1 / (1 + 0.25 + 1/(20*e*e))
	if math.Abs(r.Remainder[4]/want-1) > 1e-9 {
		t.Errorf("1 − S_ii = %.15g, want %.15g", r.Remainder[4], want)
	}
}
