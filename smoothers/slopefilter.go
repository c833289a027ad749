package smoothers

// A slopeFilter is the smoothing spline of order 1 as the posterior mean of a Wiener
// process with a flat prior, from both ends as in curveFilter. What is known of g at
// a knot from one side is one number a; over a gap h it becomes a/(1 + qha).
type slopeFilter struct {
	design *tied
	gap    []float64
}

// spread implements splineFilter.
func (f *slopeFilter) spread(q float64, value, change, rest, scratch []float64) {
	count, gap := f.design.count, f.gap
	m := len(count)
	var a, da float64
	for i, w := range count {
		scratch[2*i], scratch[2*i+1] = a, da
		if i < m-1 {
			a, da = fade(a+w, da, q*gap[i])
		}
	}
	a, da = 0, 0
	for i := m - 1; i >= 0; i-- {
		w := count[i]
		known := scratch[2*i] + a
		v := 1 / (known + w)
		value[i] = v
		rest[i] = known * v
		change[i] = -(scratch[2*i+1] + da) * v * v
		if i > 0 {
			a, da = fade(a+w, da, q*gap[i-1])
		}
	}
}

// fade moves a over a gap with p = qh, and its derivative by log λ.
func fade(a, da, p float64) (float64, float64) {
	r := 1 / (1 + p*a)
	return a * r, (da + p*a*a) * r * r
}

// slopeRoom is what gains keep per knot: the factor over the gap above it, the one over
// the gap below, and the variance of g there.
const slopeRoom = 3

// room implements splineFilter.
func (f *slopeFilter) room() int { return slopeRoom * len(f.design.count) }

// gains implements splineFilter. The determinant is of no use: the mixed-model form is
// one about the straight line, which this spline doesn't leave alone.
func (f *slopeFilter) gains(q float64, g []float64) (logDet float64) {
	count, gap := f.design.count, f.gap
	m := len(count)
	a := 0.0
	for i, w := range count {
		p := (*[slopeRoom]float64)(g[slopeRoom*i:])
		p[2] = a
		if i < m-1 {
			p[0] = 1 / (1 + q*gap[i]*(a+w))
			a = (a + w) * p[0]
		}
	}
	a = 0
	for i := m - 1; i >= 0; i-- {
		w, p := count[i], (*[slopeRoom]float64)(g[slopeRoom*i:])
		p[2] = 1 / (p[2] + a + w)
		if i > 0 {
			p[1] = 1 / (1 + q*gap[i-1]*(a+w))
			a = (a + w) * p[1]
		}
	}
	return 0
}

// smooth implements splineFilter.
func (f *slopeFilter) smooth(g, sums, value, slope, work []float64) {
	z := 0.0
	for i, v := range sums {
		work[i] = z
		z = (z + v) * g[slopeRoom*i]
	}
	z = 0
	for i := len(sums) - 1; i >= 0; i-- {
		p := (*[slopeRoom]float64)(g[slopeRoom*i:])
		value[i], slope[i] = (work[i]+z+sums[i])*p[2], 0
		z = (z + sums[i]) * p[1]
	}
}
