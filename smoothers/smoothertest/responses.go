package smoothertest

import (
	"slices"

	"bendtest/smoothers"
)

func linear(tr *trial, r *report) {
	tr.each(func(c *trialCase, k int, rung *smoothers.Rung) {
		y := readings(c.x, 1)
		want := make([]float64, len(y))
		for j, column := range c.matrix(k) {
			for i, v := range column {
				want[i] += v * y[j]
			}
		}
		if d, i := apart(fitted(rung, y), want); d > rounding {
			r.faultf("%s: fit %d is off S y by %.2g", c.at(k), i, d)
		}
	})
}

func constants(tr *trial, r *report) {
	tr.each(func(c *trialCase, k int, rung *smoothers.Rung) {
		one := transformed(c.x, func(float64) float64 { return 1 })
		if d, i := apart(fitted(rung, one), one); d > rounding {
			r.faultf("%s: fit %d of a constant is off by %.2g", c.at(k), i, d)
		}
	})
}

// unitLine is the line that goes from −1 to 1 over x.
func unitLine(x []float64) []float64 {
	first, last := x[0], x[len(x)-1]
	return transformed(x, func(v float64) float64 { return ((v - first) - (last - v)) / (last - first) })
}

func lines(tr *trial, r *report) {
	if !tr.claims.Lines {
		r.notef("lines are not claimed")
		return
	}
	tr.each(func(c *trialCase, k int, rung *smoothers.Rung) {
		if rung.DF < 2 {
			return
		}
		line := unitLine(c.x)
		if d, i := apart(fitted(rung, line), line); d > rounding {
			r.faultf("%s: fit %d of a straight line is off by %.2g", c.at(k), i, d)
		}
	})
}

func inputsUntouched(tr *trial, r *report) {
	for _, d := range designs() {
		x, y := slices.Clone(d.x), readings(d.x, 1)
		before := slices.Clone(y)
		rungs := tr.smoother.On(x, nil).AtDF(tr.claims.DF)
		for k := range rungs {
			if rungs[k].Status != smoothers.OK {
				continue
			}
			var f smoothers.Fit
			rungs[k].Fit(y, &f)
			f.Curve.At(make([]float64, len(x)), x)
			if !sameBits(y, before) {
				r.faultf("%s, df %g: Fit changes y", d.name, rungs[k].DF)
				return
			}
		}
		if !sameBits(x, d.x) {
			r.faultf("%s: x is changed", d.name)
		}
	}
}

func yAffine(tr *trial, r *report) {
	const scale, shift = -250.0, 1e6
	// The readings near 1e6 have a grain of 1.2e-10, and so has all that is computed
	// from them; times a hundred for what adds up.
	const grains = 1.2e-8
	tr.each(func(c *trialCase, k int, rung *smoothers.Rung) {
		y := readings(c.x, 1)
		affine := func(v float64) float64 { return shift + scale*v }
		want := transformed(fitted(rung, y), affine)
		if d, i := apart(fitted(rung, transformed(y, affine)), want); d > -scale*rounding+grains {
			r.faultf("%s: fit %d of shifted and scaled readings is off by %.2g", c.at(k), i, d)
		}
	})
}

func yPlusLine(tr *trial, r *report) {
	if !tr.claims.Lines {
		r.notef("lines are not claimed")
		return
	}
	const slope = 1000.0
	tr.each(func(c *trialCase, k int, rung *smoothers.Rung) {
		if rung.DF < 2 {
			return
		}
		y, line := readings(c.x, 1), unitLine(c.x)
		want := fitted(rung, y)
		for i, v := range line {
			y[i] += slope * v
			want[i] += slope * v
		}
		if d, i := apart(fitted(rung, y), want); d > slope*rounding {
			r.faultf("%s: fit %d of readings plus a line is off by %.2g", c.at(k), i, d)
		}
	})
}
