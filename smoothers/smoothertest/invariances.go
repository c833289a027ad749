package smoothertest

import (
	"math"
	"slices"

	"bendtest/smoothers"
)

// tuningTolerance is how far, relatively, tunings may be apart that are equal in exact
// arithmetic: tr S on target to 1e-8 leaves a tuning to about that over dlog df/dlog tuning.
const tuningTolerance = 1e-6

// compareRungs reports where the rung got differs from want, whose observations it has
// in the order given, and whose tuning is to be multiplied by a factor.
func compareRungs(r *report, where string, got, want *smoothers.Rung, order func([]float64) []float64, factor float64) {
	if got.Status != want.Status {
		r.faultf("%s: status %v instead of %v", where, got.Status, want.Status)
		return
	}
	if got.Status != smoothers.OK {
		return
	}
	if !(math.Abs(got.TrS-want.TrS) <= 2*dfTolerance*want.TrS) {
		r.faultf("%s: tr S %.12g instead of %.12g", where, got.TrS, want.TrS)
	}
	limit := rounding + math.Abs(got.TrS-want.TrS) // what df allows, leverages and fits may show
	if d, i := apart(got.Leverage, order(want.Leverage)); d > limit {
		r.faultf("%s: leverage %d differs by %.2g", where, i, d)
	}
	if d, i := apart(got.RowNorm2, order(want.RowNorm2)); d > limit {
		r.faultf("%s: row norm %d differs by %.2g", where, i, d)
	}
	tuning := want.Tuning * factor
	if got.Tuning != tuning && !(math.Abs(got.Tuning-tuning) <= tuningTolerance*math.Abs(tuning)) {
		r.faultf("%s: tuning %.9g instead of %.9g", where, got.Tuning, tuning)
	}
	y := make([]float64, len(want.Leverage))
	for i := range y {
		y[i] = math.Sin(float64(i * i))
	}
	if d, i := apart(fitted(got, order(y)), order(fitted(want, y))); d > limit {
		r.faultf("%s: fit %d differs by %.2g", where, i, d)
	}
}

func xAffine(tr *trial, r *report) {
	for _, c := range tr.on() {
		// Powers of two change no digit of x.
		tr.moved(r, c, "x times 1024", 1024, 0)
		tr.moved(r, c, "x divided by 4096", 1.0/4096, 0)
		if c.plain {
			tr.moved(r, c, "0.37 x + 11", 0.37, 11)
		}
	}
}

// moved compares the rungs on scale·x + shift with those on x.
func (tr *trial) moved(r *report, c *trialCase, name string, scale, shift float64) {
	x := transformed(c.x, func(v float64) float64 { return scale*v + shift })
	rungs := tr.smoother.On(x, nil).AtDF(tr.claims.DF)
	for k := range rungs {
		compareRungs(r, c.at(k)+": "+name, &rungs[k], &c.rungs[k], slices.Clone[[]float64], math.Pow(scale, tr.claims.TuningPower))
	}
}

// reversed returns v from its end.
func reversed(v []float64) []float64 {
	w := slices.Clone(v)
	slices.Reverse(w)
	return w
}

func xReflected(tr *trial, r *report) {
	for _, c := range tr.on() {
		x := reversed(transformed(c.x, func(v float64) float64 { return -v }))
		rungs := tr.smoother.On(x, nil).AtDF(tr.claims.DF)
		for k := range rungs {
			compareRungs(r, c.at(k)+": reflected", &rungs[k], &c.rungs[k], reversed, 1)
		}
	}
}

func tiesInterchangeable(tr *trial, r *report) {
	tr.each(func(c *trialCase, k int, rung *smoothers.Rung) {
		y := readings(c.x, 1)
		fit, shuffled := fitted(rung, y), slices.Clone(y)
		for from := 0; from < len(c.x); {
			to := from + 1
			for to < len(c.x) && c.x[to] == c.x[from] {
				to++
			}
			slices.Reverse(shuffled[from:to])
			for i := from + 1; i < to; i++ {
				same := rung.Leverage[i] == rung.Leverage[from] && rung.RowNorm2[i] == rung.RowNorm2[from] &&
					rung.Remainder[i] == rung.Remainder[from] && fit[i] == fit[from]
				if !same {
					r.faultf("%s: observations %d and %d are tied, yet differ", c.at(k), from, i)
				}
			}
			from = to
		}
		if d, i := apart(fitted(rung, shuffled), fit); d > rounding {
			r.faultf("%s: exchanging readings within ties moves fit %d by %.2g", c.at(k), i, d)
		}
	})
}
