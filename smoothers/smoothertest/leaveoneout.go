package smoothertest

import (
	"math"
	"slices"

	"bendtest/smoothers"
)

// leastRemainder is the smallest 1 − S_ii at which the short cut is compared: below,
// its residual is mostly rounding.
const leastRemainder = 1e-4

// leaveOneOut refits without each observation at the same tuning.
func leaveOneOut(tr *trial, r *report) {
	if tr.claims.LeaveOneOut == Nowhere {
		r.notef("the leave-one-out short cut is not claimed")
		return
	}
	compared := 0
	tr.each(func(c *trialCase, k int, rung *smoothers.Rung) {
		y := readings(c.x, 1)
		fit := fitted(rung, y)
		for i := range c.x {
			x := slices.Delete(slices.Clone(c.x), i, i+1)
			if tr.claims.LeaveOneOut == Inside && (x[0] != c.x[0] || x[len(x)-1] != c.x[len(c.x)-1]) {
				continue
			}
			without := tr.smoother.On(x, nil).AtTuning([]float64{rung.Tuning})[0]
			if without.Status != smoothers.OK || rung.Remainder[i] < leastRemainder {
				continue
			}
			var f smoothers.Fit
			without.Fit(slices.Delete(slices.Clone(y), i, i+1), &f)
			var at [1]float64
			f.Curve.At(at[:], c.x[i:i+1])
			short := (y[i] - fit[i]) / rung.Remainder[i]
			compared++
			// Rounding of the fit is divided by the remainder too; a fit far off the
			// readings rounds at its own size.
			if d := math.Abs(y[i] - at[0] - short); !(d <= rounding*max(1, math.Abs(short))/math.Sqrt(rung.Remainder[i])) {
				r.faultf("%s: without observation %d the error is %.12g, by the short cut %.12g", c.at(k), i, y[i]-at[0], short)
			}
		}
	})
	if compared == 0 {
		r.faultf("no observation could be compared")
	}
}
