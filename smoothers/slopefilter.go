package smoothers

// A slopeFilter is the smoothing spline of order 1 as the posterior mean of a Wiener
// process with a flat prior, from both ends as in curveFilter. What is known of g at
// a knot from one side is one number a; over a gap h it becomes a/(1 + qha).
type slopeFilter struct {
	design *tied
	gap    []float64
	ahead  []float64 // two values per knot: what lies below it, and its change
}

// spread implements splineFilter.
func (f *slopeFilter) spread(q float64, value, change, rest []float64) {
	count := f.design.count
	m := len(count)
	var a, da float64
	for i, w := range count {
		f.ahead[2*i], f.ahead[2*i+1] = a, da
		if i < m-1 {
			a, da = fade(a+w, da, q*f.gap[i])
		}
	}
	a, da = 0, 0
	for i := m - 1; i >= 0; i-- {
		w := count[i]
		known := f.ahead[2*i] + a
		value[i] = 1 / (known + w)
		rest[i] = known * value[i]
		change[i] = -(f.ahead[2*i+1] + da) * value[i] * value[i]
		if i > 0 {
			a, da = fade(a+w, da, q*f.gap[i-1])
		}
	}
}

// fade moves a over a gap with p = qh, and its derivative by log λ.
func fade(a, da, p float64) (float64, float64) {
	factor := 1 + p*a
	return a / factor, (da + p*a*a) / (factor * factor)
}

// logDet implements splineFilter: the form is defined about the straight line, which
// this spline does not leave alone.
func (f *slopeFilter) logDet(float64) (float64, bool) { return 0, false }

// slopeGains holds per knot the factor over the gap above it, below it, and the
// posterior variance.
type slopeGains struct{ up, down, final []float64 }

// gains implements splineFilter.
func (f *slopeFilter) gains(q float64, mem *Arena) splineGains {
	count := f.design.count
	m := len(count)
	g := &slopeGains{up: mem.floats(m), down: mem.floats(m), final: mem.floats(m)}
	a := 0.0
	for i, w := range count {
		g.final[i] = a
		if i < m-1 {
			g.up[i] = 1 / (1 + q*f.gap[i]*(a+w))
			a = (a + w) * g.up[i]
		}
	}
	a = 0
	for i := m - 1; i >= 0; i-- {
		w := count[i]
		g.final[i] = 1 / (g.final[i] + a + w)
		if i > 0 {
			g.down[i] = 1 / (1 + q*f.gap[i-1]*(a+w))
			a = (a + w) * g.down[i]
		}
	}
	return g
}

// smooth implements splineGains.
func (g *slopeGains) smooth(r, value, slope, work []float64) {
	z := 0.0
	for i, v := range r {
		work[i] = z
		z = (z + v) * g.up[i]
	}
	z = 0
	for i := len(r) - 1; i >= 0; i-- {
		value[i], slope[i] = (work[i]+z+r[i])*g.final[i], 0
		z = (z + r[i]) * g.down[i]
	}
}
