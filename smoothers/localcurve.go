package smoothers

import "math"

// A localCurve evaluates a local polynomial fit point by point, from its definition.
type localCurve struct {
	rung *localRung
	sums []float64 // sum of y at each distinct x
	fit  localFit

	maker panelMaker
}

// drawn lays out panels for the curve itself. It reports false if there is no end.
func (c *localCurve) drawn(y, diff []float64) bool {
	b, l := &c.maker, c.rung.l
	b.l, b.basis, b.fit, b.sums = l, l.basis(), &c.fit, c.sums
	b.room = 2 * panelsMost * b.basis.order
	b.diff = diff[:1]
	b.diff[0] = 0
	lo, hi := y[0], y[0]
	for _, v := range y {
		lo, hi = min(lo, v), max(hi, v)
	}
	// Where y varies less than a thousandth of its level, rounding is what limits.
	b.scale = max((hi-lo)/2, 1e-3*max(hi, -lo), math.SmallestNonzeroFloat64)
	return b.make(c.rung.tuning)
}

// At implements Curve.
func (c *localCurve) At(dst, t []float64) {
	if len(dst) != len(t) {
		panic("smoothers: dst and t differ in length")
	}
	l := c.rung.l
	g := l.gaze(c.rung.tuning)
	for i, ti := range t {
		ti -= l.origin
		if l.hold {
			ti = min(max(ti, l.z[0]), l.z[len(l.z)-1])
		}
		dst[i] = c.value(&g, ti)
	}
}

// value returns the fit at t from the design's origin.
func (c *localCurve) value(g *gaze, t float64) float64 {
	g.at(t)
	if !c.fit.at(g, t, everyone) {
		c.fit.through(g, t)
	}
	return c.fit.dot(c.sums)
}

// through makes f the polynomial through the means at the degree + 1 distinct x
// nearest to t, where too few are in the window: beyond the data, the limit of
// the fit as the last of them loses its weight.
func (f *localFit) through(g *gaze, t float64) {
	z, p := f.l.z, f.l.degree
	lo := 0
	for lo+p+1 < len(z) && z[lo+p+1]-t < t-z[lo] {
		lo++
	}
	f.lo, f.hi = lo, lo+p+1
	f.s0 = 0
	var mean float64
	for i := range p + 1 {
		c := f.l.count[lo+i]
		f.u[i], f.w[i], f.a[i] = (z[lo+i]-t)/g.h, 1, c
		f.s0 += c
		mean += c * f.u[i]
	}
	f.c0, f.c1, f.c2 = 1/f.s0, 0, 0
	if p > 0 {
		f.line(g.h, t, mean/f.s0)
	}
	if p == 2 {
		f.parabola(g.h, t)
	}
}
