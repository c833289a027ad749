package smoothers

import "math"

// A localFit is the weighted polynomial fit at one target t, as far as the design
// settles it. With p0 = 1, p1, p2 the polynomials orthogonal under the weights a
// of the distinct x, s_k = Σ a p_k², the fitted value at t is
//
//	Σ_g w_g (c0 + c1 p1(z_g) + c2 p2(z_g)) Y_g,   c_k = p_k(t)/s_k,
//
// Y_g the sum of the y observed at z_g. No power of x is ever summed about a far
// origin, so neither offsets nor near ties cost digits; where the plain recurrences
// would, careful takes over (see there).
type localFit struct {
	l      *localLadder
	lo, hi int // the window is z[lo:hi]

	// Per distinct x of the window, at index g − lo.
	u      []float64 // (z_g − t)/h
	w      []float64 // kernel weight of one observation
	a      []float64 // weight of all observations there
	p1, p2 []float64

	s0, s1, s2 float64
	t1, t2     float64 // p1(t), p2(t)
	c0, c1, c2 float64
	far        float64 // log of the gaussian weight of the nearest point used, which is scaled to 1
	points     int     // distinct x with weight

	moments // of the quick way
}

// scratch is the number of floats a localFit works on.
func (l *localLadder) scratch() int { return 5 * len(l.z) }

// fitOn returns a localFit that works on mem, of length scratch().
func (l *localLadder) fitOn(mem []float64) localFit {
	m := len(l.z)
	f := localFit{l: l}
	f.u, f.w, f.a = mem[0:m:m], mem[m:2*m:2*m], mem[2*m:3*m:3*m]
	f.p1, f.p2 = mem[3*m:4*m:4*m], mem[4*m:5*m:5*m]
	return f
}

// At the depth faded[degree], the gaussian weights e^−depth of far points change no
// digit of a local fit whose spread is not small (see spreadLow), even when 10⁵ of
// them are summed and multiplied by u^(2·degree).
var faded = [...]float64{0: 42, 1: 52, 2: 60}

const (
	// centreFar bounds s1/(s0·ū²), below which ū is so far from the spread that
	// the plain recurrences would lose more than two digits.
	centreFar = 1e-4
	// spreadLow bounds the spread in units of h, below which truncated gaussian
	// tails might count.
	spreadLow = 1e-2
	// curveLow bounds s2/Σ a p1⁴ likewise.
	curveLow = 1e-4
	// selfNear bounds the depth of the nearest other point when an observation is
	// left out: truncation was measured from the one left out.
	selfNear = 4
	// everyone: no observation is left out.
	everyone = -1
)

// at fits at t as g sees it. One observation at the distinct x number self can be
// left out. It reports false where fewer than degree + 1 distinct x have weight.
func (f *localFit) at(g *gaze, t float64, self int) bool {
	f.lo, f.hi = g.lo, g.hi
	f.weigh(g, t, self)
	if f.points <= f.l.degree && f.l.shape.compact() {
		return false
	}
	if f.points <= f.l.degree || self >= 0 && f.far > selfNear {
		return f.careful(g, t, self)
	}
	u, a := f.u[:f.hi-f.lo], f.a[:f.hi-f.lo]
	var s0, m float64
	for i, a := range a {
		s0 += a
		m += a * u[i]
	}
	f.s0, f.c0, f.c1, f.c2 = s0, 1/s0, 0, 0
	if f.l.degree == 0 {
		return true
	}
	m /= s0
	p1 := f.p1[:len(a)]
	var s1, s3, s4 float64
	for i, a := range a {
		e := u[i] - m
		p1[i] = e
		q := a * e * e
		s1 += q
		s3 += q * e
		s4 += q * e * e
	}
	f.s1, f.t1 = s1, -m
	truncated := !f.l.shape.compact() && f.hi-f.lo < len(f.l.z)
	if !(s1 > centreFar*s0*m*m) || truncated && s1 < spreadLow*s0 {
		return f.careful(g, t, self)
	}
	f.c1 = -m / s1
	if f.l.degree == 1 {
		return true
	}
	beta, gamma := s3/s1, s1/s0
	p2 := f.p2[:len(a)]
	var s2 float64
	for i, a := range a {
		e := p1[i]
		p2[i] = e*(e-beta) - gamma
		s2 += a * p2[i] * p2[i]
	}
	f.s2, f.t2 = s2, m*(m+beta)-gamma
	if !(s2 > curveLow*s4) || !(s2 > centreFar*s0*f.t2*f.t2) || truncated && s2 < spreadLow*spreadLow*s0 {
		return f.careful(g, t, self)
	}
	f.c2 = f.t2 / s2
	return true
}

// weigh fills u, w and a, and counts the points with weight.
func (f *localFit) weigh(g *gaze, t float64, self int) {
	f.weights(g, t, self)
	w, a := f.w[:f.hi-f.lo], f.a[:f.hi-f.lo]
	count := f.l.count[f.lo:f.hi]
	f.points = len(a)
	for i, w := range w {
		a[i] = w * count[i]
	}
	if self >= 0 {
		i := self - f.lo
		a[i] = w[i] * (count[i] - 1)
		if a[i] == 0 {
			f.points--
		}
	}
}

// weights fills u and w, and a with 1 − |u| if the kernel has compact support.
func (f *localFit) weights(g *gaze, t float64, self int) {
	z := f.l.z[f.lo:f.hi]
	u, w, a := f.u[:len(z)], f.w[:len(z)], f.a[:len(z)]
	inv := 1 / g.h
	for i, z := range z {
		u[i] = (z - t) * inv
	}
	f.far = 0
	if f.l.shape.compact() {
		for i, z := range z {
			s := (g.h - math.Abs(z-t)) * inv
			if s < slackTight {
				s = g.slack(z, t) * inv
			}
			a[i] = s
		}
		f.l.shape.weigh(w, a)
	} else {
		f.gaussian(g, t, self)
	}
}

// gaussian fills w with gaussian weights relative to the nearest point that is not
// left out, so that the sum of weights is at least 1 wherever t lies. The exponent
// is a product of differences, which stays exact when t is far from all x.
func (f *localFit) gaussian(g *gaze, t float64, self int) {
	near := f.nearest(g.near, t, self)
	if near < f.lo || near >= f.hi {
		f.far = math.Inf(1)
		return
	}
	z, zn, un := f.l.z[f.lo:f.hi], f.l.z[near], f.u[near-f.lo]
	f.far = un * un / 2
	half := 0.5 / g.h
	w := f.w[:len(z)]
	for i, u := range f.u[:len(z)] {
		w[i] = (zn - z[i]) * half * (un + u)
	}
	expAll(w)
}

// nearest returns the distinct x nearest to t when self is left out: near itself,
// or a neighbour of it if near is self and was observed once. It is −1 if none is left.
func (f *localFit) nearest(near int, t float64, self int) int {
	if near != self || f.l.count[self] > 1 {
		return near
	}
	z := f.l.z
	switch {
	case len(z) == 1:
		return -1
	case self == 0 || self+1 < len(z) && z[self+1]-t < t-z[self-1]:
		return self + 1
	default:
		return self - 1
	}
}

// kappa returns w_g-free weight of the distinct x at window index i: the fitted
// value weighs one observation there with w[i]·kappa(i).
func (f *localFit) kappa(i int) float64 {
	switch f.l.degree {
	case 0:
		return f.c0
	case 1:
		return f.c0 + f.c1*f.p1[i]
	default:
		return f.c0 + f.c1*f.p1[i] + f.c2*f.p2[i]
	}
}

// dot returns the fitted value from the sums of y per distinct x.
func (f *localFit) dot(sums []float64) float64 {
	sums = sums[f.lo:f.hi]
	w := f.w[:len(sums)]
	var v float64
	switch f.l.degree {
	case 0:
		for i, y := range sums {
			v += w[i] * y
		}
		return v * f.c0
	case 1:
		p1 := f.p1[:len(sums)]
		for i, y := range sums {
			v += w[i] * y * (f.c0 + f.c1*p1[i])
		}
	default:
		p1, p2 := f.p1[:len(sums)], f.p2[:len(sums)]
		for i, y := range sums {
			v += w[i] * y * (f.c0 + f.c1*p1[i] + f.c2*p2[i])
		}
	}
	return v
}

// variance returns Σ_k p_k(t)²/s_k, the variance of the fitted value at t were
// each observation's 1/w: the leverage of an observation at t, whose weight is 1.
func (f *localFit) variance() float64 {
	switch f.l.degree {
	case 0:
		return f.c0
	case 1:
		return f.c0 + f.c1*f.t1
	default:
		return f.c0 + f.c1*f.t1 + f.c2*f.t2
	}
}
