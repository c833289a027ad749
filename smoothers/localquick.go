package smoothers

// quick works out the moments of the window at t, where g is, point by point: the cheap
// way to a value, or with slope to a leverage and its derivative. sums may be nil. It
// reports false if the window calls for at.
func (f *localFit) quick(g *gaze, t float64, sums []float64, slope bool) bool {
	p := f.l.degree
	f.lo, f.hi = g.lo, g.hi
	if f.hi-f.lo <= p {
		return false
	}
	f.weights(g, t, everyone)
	q := &f.moments
	w, u := f.w[:f.hi-f.lo], f.u[:f.hi-f.lo]
	count := f.l.count[f.lo:f.hi]
	n := 2*p + 1
	truncated := false
	if !f.l.shape.compact() {
		truncated = f.hi-f.lo < len(f.l.z)
		if slope {
			n += 2 // −u K′(u) = u² K(u)
		}
	}
	powerMoments(q.m[:n], w, count, u)
	if !q.solve(p) || truncated && (p > 0 && q.spread < spreadLow*q.m[0] || p > 1 && q.bend < spreadLow*spreadLow*q.m[0]) {
		return false
	}
	if sums != nil {
		powerMoments(q.ym[:p+1], w, sums[f.lo:f.hi], u)
	}
	if !slope {
		return true
	}
	if !f.l.shape.compact() {
		copy(q.dm[:2*p+1], q.m[2:])
		return true
	}
	f.l.shape.widenAll(f.p1[:len(w)], f.a[:len(w)]) // a holds 1 − |u|
	powerMoments(q.dm[:2*p+1], f.p1[:len(w)], count, u)
	return true
}

// powerMoments sets m_j = Σ w c u^j for an odd number of moments, or two of them.
func powerMoments(m, w, c, u []float64) {
	c, u = c[:len(w)], u[:len(w)]
	switch len(m) {
	case 1:
		var m0 float64
		for i, w := range w {
			m0 += w * c[i]
		}
		m[0] = m0
	case 2:
		var m0, m1 float64
		for i, w := range w {
			a := w * c[i]
			m0 += a
			m1 += a * u[i]
		}
		m[0], m[1] = m0, m1
	case 3:
		var m0, m1, m2 float64
		for i, w := range w {
			a, u := w*c[i], u[i]
			b := a * u
			m0, m1, m2 = m0+a, m1+b, m2+b*u
		}
		m[0], m[1], m[2] = m0, m1, m2
	default:
		var m0, m1, m2, m3, m4, m5, m6 float64
		for i, w := range w {
			a, u := w*c[i], u[i]
			u2 := u * u
			b, c := a*u, a*u2
			d := c * u2
			m0, m1, m2, m3, m4 = m0+a, m1+b, m2+c, m3+b*u2, m4+d
			m5, m6 = m5+d*u, m6+d*u2
		}
		copy(m, []float64{m0, m1, m2, m3, m4, m5, m6})
	}
}

// widenAll writes −u K′(u) into d for a kernel of compact support, s = 1 − |u|.
func (k shape) widenAll(d, s []float64) {
	d = d[:len(s)]
	switch k {
	case epanechnikov:
		for i, s := range s {
			d[i] = 2 * (1 - s) * (1 - s)
		}
	case biweight:
		for i, s := range s {
			v := (1 - s) * (1 - s)
			d[i] = 4 * v * (1 - v)
		}
	default:
		for i, s := range s {
			u := 1 - s
			v := u * u * u
			d[i] = 9 * v * (1 - v) * (1 - v)
		}
	}
}
