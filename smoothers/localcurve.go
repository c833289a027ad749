package smoothers

// A localCurve evaluates a local polynomial fit point by point, from its definition.
type localCurve struct {
	rung *localRung
	sums []float64 // sum of y at each distinct x
	fit  localFit
}

// At implements Curve.
func (c *localCurve) At(dst, t []float64) {
	if len(dst) != len(t) {
		panic("smoothers: dst and t differ in length")
	}
	l := c.rung.l
	g := l.gaze(c.rung.tuning)
	for i, ti := range t {
		if l.hold {
			ti = min(max(ti, l.z[0]), l.z[len(l.z)-1])
		}
		dst[i] = c.value(&g, ti)
	}
}

// value returns the fit at t, which must not be left of where g was.
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
