package smoothers

import "math"

// A localCurve evaluates a local fit from its definition, point by point.
type localCurve struct {
	rung *localRung
	sums []float64 // sum of y at each distinct x
	fit  localFit

	low, high float64 // of y
	tried     bool    // pieces have been asked for,
	drawn     bool    // and are there
	pieces    *Piecewise
	maker     panelMaker
}

// pieceworthy is the number of points from which a curve is drawn in pieces first.
const pieceworthy = 1000

// At implements Curve. At many points it evaluates Pieces.
func (c *localCurve) At(dst, t []float64) {
	if len(dst) != len(t) {
		panic("smoothers: dst and t differ in length")
	}
	if len(t) >= pieceworthy {
		if p := c.Pieces(); p != nil {
			p.At(dst, t)
			return
		}
	}
	l := c.rung.l
	lo, hi := math.Inf(-1), math.Inf(1)
	if l.hold {
		lo, hi = l.z[0], l.z[len(l.z)-1]
	}
	s := c.sweep(len(t))
	for i, t := range t {
		dst[i] = c.value(&s, min(max(t-l.origin, lo), hi))
	}
}

// Pieces returns the curve as polynomial pieces, at most panelTol times half the range
// of y away from it, or nil if that would take about as many evaluations as a held-out
// set has points.
func (c *localCurve) Pieces() *Piecewise {
	if c.tried {
		if c.drawn {
			return c.pieces
		}
		return nil
	}
	c.tried = true
	b, l := &c.maker, c.rung.l
	b.l, b.basis, b.fit, b.sums = l, l.basis(), &c.fit, c.sums
	b.diff = resize(b.diff, 1)
	b.diff[0] = 0
	b.room = 2 * panelsMost * b.basis.order
	// Where y varies less than a thousandth of its level, rounding is what limits.
	b.scale = max((c.high-c.low)/2, 1e-3*max(c.high, -c.low), math.SmallestNonzeroFloat64)
	if !b.make(c.rung.tuning) {
		return nil
	}
	c.drawn = true
	l.draw(c.pieces, b.ends, b.weight, c)
	return c.pieces
}

// fewTargets is the number of targets up to which a wide window is summed for each.
const fewTargets = 8

// A sweep follows targets over a design, with sums if wide.
type sweep struct {
	wide bool
	sums localSums
}

// sweep starts a sweep over a number of targets.
func (c *localCurve) sweep(targets int) sweep {
	l, tuning := c.rung.l, c.rung.tuning
	return sweep{
		wide: targets > fewTargets && l.wide(tuning),
		sums: l.sumsOn(tuning, c.sums),
	}
}

// value returns the fit at t from the design's origin.
func (c *localCurve) value(s *sweep, t float64) float64 {
	if s.wide && s.sums.at(t, false) {
		return s.sums.value(s.sums.l.degree)
	}
	g := &s.sums.gaze
	if !s.wide {
		g.at(t)
	}
	return c.fit.valueAt(g, t, c.sums)
}

// valueAt returns the fit at t, where g is, from the sums of y.
func (f *localFit) valueAt(g *gaze, t float64, sums []float64) float64 {
	if f.quick(g, t, sums, false) {
		return f.value(f.l.degree)
	}
	f.safe(g, t)
	return f.dot(sums)
}

// safe fits at t, where g is, in every case.
func (f *localFit) safe(g *gaze, t float64) {
	if !f.at(g, t, everyone) {
		f.through(g, t)
	}
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
