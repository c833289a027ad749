package smoothers

import "math"

// careful repeats the fit of f where the plain recurrences would lose digits: few
// or crowded points in the window, or a target far from all of them. It differs in
// three ways, each exact to rounding whatever the weights and spacings.
//
// Gaussian weights are not truncated, and what they leave singular in floating
// point is told apart again (see weighAll).
//
// p1 is taken about the x nearest to the weighted mean and then centred once more:
// differences of nearby x are exact, and that x is within one standard deviation.
//
// p2 starts from (x − r1)(x − r2) with r1, r2 the x nearest to the roots of p2.
// Since |x − r| ≤ 2|x − root| at every x, its norm is at most four times that of
// p2, so making it orthogonal cancels next to nothing.
func (f *localFit) careful(g *gaze, t float64, self int) bool {
	if !f.l.shape.compact() {
		f.lo, f.hi = 0, len(f.l.z)
		if !f.weighAll(g, t, self) {
			return false
		}
	}
	a := f.a[:f.hi-f.lo]
	var s0, m float64
	for i, a := range a {
		s0 += a
		m += a * f.u[i]
	}
	f.s0, f.c0, f.c1, f.c2 = s0, 1/s0, 0, 0
	if f.l.degree == 0 {
		return true
	}
	f.line(g.h, t, m/s0)
	if f.l.degree == 2 {
		f.parabola(g.h, t)
	}
	return true
}

// line sets p1 and what belongs to it; mean is the weighted mean of u.
func (f *localFit) line(h, t, mean float64) {
	a := f.a[:f.hi-f.lo]
	z := f.l.z[f.lo:f.hi]
	p1 := f.p1[:len(a)]
	ref := z[f.closest(f.u, mean)]
	var m float64
	for i, a := range a {
		p1[i] = (z[i] - ref) / h
		m += a * p1[i]
	}
	m /= f.s0
	f.s1, f.t1 = 0, (t-ref)/h-m
	for i, a := range a {
		p1[i] -= m
		f.s1 += a * p1[i] * p1[i]
	}
	f.c1 = f.t1 / f.s1
}

// parabola sets p2 and what belongs to it, after line.
func (f *localFit) parabola(h, t float64) {
	a := f.a[:f.hi-f.lo]
	z := f.l.z[f.lo:f.hi]
	p1, p2 := f.p1[:len(a)], f.p2[:len(a)]
	var s3 float64
	for i, a := range a {
		s3 += a * p1[i] * p1[i] * p1[i]
	}
	beta, gamma := s3/f.s1, f.s1/f.s0 // p2 = p1² − beta p1 − gamma
	for range 4 {
		d := math.Sqrt(max(beta*beta+4*gamma, 0))
		i1, i2 := f.closest(p1, (beta-d)/2), f.closest(p1, (beta+d)/2)
		var start float64
		for i, a := range a {
			p2[i] = (z[i] - z[i1]) / h * ((z[i] - z[i2]) / h)
			start += a * p2[i] * p2[i]
		}
		f.t2 = (t - z[i1]) / h * ((t - z[i2]) / h)
		var b0, b1 float64
		for range 2 { // once more for what the first pass leaves
			var r0, r1 float64
			for i, a := range a {
				r0 += a * p2[i]
				r1 += a * p2[i] * p1[i]
			}
			r0, r1 = r0/f.s0, r1/f.s1
			for i := range p2 {
				p2[i] -= r0 + r1*p1[i]
			}
			f.t2 -= r0 + r1*f.t1
			b0, b1 = b0+r0, b1+r1
		}
		f.s2 = 0
		for i, a := range a {
			f.s2 += a * p2[i] * p2[i]
		}
		if f.s2 > curveLow*start {
			break
		}
		beta, gamma = p1[i1]+p1[i2]+b1, b0-p1[i1]*p1[i2]
	}
	f.c2 = f.t2 / f.s2
}

// closest returns the index of the weighted point of the window whose v is nearest to at.
func (f *localFit) closest(v []float64, at float64) int {
	best, dist := 0, math.Inf(1)
	for i, a := range f.a[:f.hi-f.lo] {
		if d := math.Abs(v[i] - at); a > 0 && d < dist {
			best, dist = i, d
		}
	}
	return best
}

// weighAll fills u, w and a with gaussian weights over all distinct x, relative to the
// nearest point not left out, so that degree + 1 of them never vanish. In order of
// distance, a step of more than clearDepth between the log weights decides the
// fit as if it were infinite: the points before it are met first, the ones after
// it settle only what is then still free. Such a step can be shortened to clearDepth
// without changing a digit, which keeps the weights after it above underflow.
func (f *localFit) weighAll(g *gaze, t float64, self int) bool {
	z := f.l.z
	near := f.nearest(g.near, t, self)
	if near < 0 {
		return false
	}
	for i := range z {
		f.u[i] = (z[i] - t) / g.h
		f.w[i], f.a[i] = 0, 0
	}
	un := f.u[near]
	f.far, f.points = un*un/2, 0
	var depth float64
	last := near
	for left, right := near, near+1; left >= 0 || right < len(z); {
		i := left
		if left < 0 || right < len(z) && z[right]-t < t-z[left] {
			i = right
			right++
		} else {
			left--
		}
		n := f.l.count[i]
		if i == self {
			n--
		}
		if n == 0 {
			continue
		}
		step := (z[i] - z[last]) / g.h * ((f.u[i] + f.u[last]) / 2)
		if f.points <= f.l.degree {
			step = min(step, clearDepth)
		}
		last = i
		depth += step
		f.w[i] = math.Exp(-depth)
		if f.w[i] == 0 {
			break
		}
		f.a[i] = n * f.w[i]
		f.points++
	}
	return f.points > f.l.degree
}

// clearDepth is a step between log weights that decides: e^−200 ≈ 1e−87 leaves
// nothing of what comes after it, even next to near ties.
const clearDepth = 200
