package smoothertest

import (
	"math"

	"bendtest/smoothers"
)

func curveMeetsFit(tr *trial, r *report) {
	tr.each(func(c *trialCase, k int, rung *smoothers.Rung) {
		var f smoothers.Fit
		rung.Fit(readings(c.x, 1), &f)
		v := make([]float64, len(c.x))
		f.Curve.At(v, c.x)
		if d, i := apart(v, f.Fitted); d > rounding {
			r.faultf("%s: the curve misses fit %d by %.2g", c.at(k), i, d)
		}
	})
}

// scan returns points of even distance over the range of x and a tenth of it beyond.
func scan(x []float64, count int) []float64 {
	lo, span := x[0], x[len(x)-1]-x[0]
	t := make([]float64, count)
	for i := range t {
		t[i] = lo + span*(1.2*float64(i)/float64(count-1)-0.1)
	}
	return t
}

// curveContinuous looks for the steepest rises of a scan, and narrows each down to two
// neighbouring numbers: a continuous curve doesn't rise there, a jump stays.
func curveContinuous(tr *trial, r *report) {
	tr.each(func(c *trialCase, k int, rung *smoothers.Rung) {
		var f smoothers.Fit
		rung.Fit(readings(c.x, 1), &f)
		t := scan(c.x, 2000)
		v := make([]float64, len(t))
		f.Curve.At(v, t)
		size := 1.0
		for range 5 {
			worst := 0
			for i := range len(v) - 1 {
				if math.Abs(v[i+1]-v[i]) > math.Abs(v[worst+1]-v[worst]) {
					worst = i
				}
			}
			size = max(size, math.Abs(v[worst]))
			at, rise := steepest(f.Curve, t[worst], t[worst+1])
			// Near x two neighbouring numbers lie an eps of |x|, in units of the range, apart.
			grain := 4e-16 * math.Abs(at) / (c.x[len(c.x)-1] - c.x[0])
			if !(rise <= size*(rounding+1e4*grain)) {
				r.faultf("%s: at %.17g the curve jumps by %.2g", c.at(k), at, rise)
				return
			}
			v[worst+1] = v[worst] // look elsewhere next
		}
	})
}

// steepest halves an interval, keeping the half over which the curve rises or falls
// more, down to two neighbouring numbers.
func steepest(curve smoothers.Curve, lo, hi float64) (at, rise float64) {
	var v [3]float64
	for {
		mid := lo + (hi-lo)/2
		if mid <= lo || mid >= hi {
			curve.At(v[:2], []float64{lo, hi})
			return lo, math.Abs(v[1] - v[0])
		}
		curve.At(v[:], []float64{lo, mid, hi})
		if math.Abs(v[1]-v[0]) > math.Abs(v[2]-v[1]) {
			hi = mid
		} else {
			lo = mid
		}
	}
}

func curveFinite(tr *trial, r *report) {
	tr.each(func(c *trialCase, k int, rung *smoothers.Rung) {
		var f smoothers.Fit
		rung.Fit(readings(c.x, 1), &f)
		lo, span := c.x[0], c.x[len(c.x)-1]-c.x[0]
		t := append([]float64{lo - 10*span, lo - span}, scan(c.x, 501)...)
		t = append(t, lo+2*span, lo+11*span)
		v := make([]float64, len(t))
		f.Curve.At(v, t)
		for i := range v {
			if !finite(v[i]) {
				r.faultf("%s: the curve is %g at %g", c.at(k), v[i], t[i])
				return
			}
		}
	})
}
