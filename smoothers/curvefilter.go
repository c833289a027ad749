package smoothers

import "math"

// A curveFilter is the cubic smoothing spline as the posterior mean of an integrated
// Wiener process g with a flat prior on (g, g′) (Wahba 1978, JRSSB 40:364; Wecker &
// Ansley 1983, JASA 78:81), worked in information form from both ends.
//
// What is known of the state (g, g′) at a knot from one side is the matrix
// Λ = [a −b; −b c]. Over a gap h the state moves by F = [1 h; 0 1] and noise of
// covariance Q = q[h³/3 h²/2; h²/2 h], so that
//
//	Λ ← F⁻ᵀ (Λ⁻¹ + F⁻¹QF⁻ᵀ)⁻¹ F⁻¹.
//
// Starting from Λ = 0 both ways, and measuring the derivative outwards, b ≥ 0 holds
// throughout, and with d = det Λ carried along as a fourth number every formula below
// only adds: no digits cancel, however close or far apart knots lie, and nothing is
// divided by h. The banded forms of the spline divide by h² and fail on near ties.
type curveFilter struct {
	design *tied
	gap    []float64
}

// info is Λ = [a −b; −b c] and its determinant d.
type info struct{ a, b, c, d float64 }

// observe adds w observations of g.
func (s info) observe(w float64) info {
	return info{s.a + w, s.b, s.c, s.d + w*s.c}
}

// observeChange is the derivative by log λ of observe, given that of s.
func (s info) observeChange(w float64) info {
	return info{s.a, s.b, s.c, s.d + w*s.c}
}

// step moves over a gap; factor is det(I + F⁻¹QF⁻ᵀ Λ).
func (s info) step(q, h float64) (next info, factor float64) {
	e := q * h
	de := s.d * e
	factor = 1 + e*(s.c+h*(s.b+h*(s.a/3+de/12)))
	r := 1 / factor
	return info{
		(s.a + de) * r,
		(s.b + h*(s.a+de/2)) * r,
		(s.c + h*(2*s.b+h*(s.a+de/3))) * r,
		s.d * r,
	}, factor
}

// stepChange is step together with its derivative by log λ, given that of s.
func (s info) stepChange(ds info, q, h float64) (next, change info) {
	e := q * h // its derivative by log λ is −e
	de := s.d * e
	dde := ds.d*e - de
	u := s.c + h*(s.b+h*(s.a/3+de/12))
	du := ds.c + h*(ds.b+h*(ds.a/3+dde/12))
	r := 1 / (1 + e*u)
	next = info{
		(s.a + de) * r,
		(s.b + h*(s.a+de/2)) * r,
		(s.c + h*(2*s.b+h*(s.a+de/3))) * r,
		s.d * r,
	}
	f := e * (du - u) // the derivative of 1 + eu
	return next, info{
		(ds.a + dde - next.a*f) * r,
		(ds.b + h*(ds.a+dde/2) - next.b*f) * r,
		(ds.c + h*(2*ds.b+h*(ds.a+dde/3)) - next.c*f) * r,
		(ds.d - next.d*f) * r,
	}
}

// spread implements splineFilter. It goes up and down at the same time, which lets the
// processor overlap the two; they meet in the middle, and from there on each finds
// what the other has left behind.
func (f *curveFilter) spread(q float64, value, change, rest, scratch []float64) {
	count, gap := f.design.count, f.gap
	var up, dup, down, ddown info
	for i, j := 0, len(count)-1; j >= 0; i, j = i+1, j-1 {
		there, here := (*[8]float64)(scratch[8*j:]), (*[8]float64)(scratch[8*i:])
		switch {
		case i < j:
			*here = [8]float64{up.a, up.b, up.c, up.d, dup.a, dup.b, dup.c, dup.d}
			*there = [8]float64{down.a, down.b, down.c, down.d, ddown.a, ddown.b, ddown.c, ddown.d}
		case i > j:
			t, dt := info{there[0], there[1], there[2], there[3]}, info{there[4], there[5], there[6], there[7]}
			value[j], change[j], rest[j] = down.posterior(t, ddown, dt, count[j])
			t, dt = info{here[0], here[1], here[2], here[3]}, info{here[4], here[5], here[6], here[7]}
			value[i], change[i], rest[i] = up.posterior(t, dup, dt, count[i])
		default:
			value[i], change[i], rest[i] = up.posterior(down, dup, ddown, count[i])
		}
		if j > 0 {
			up, dup = up.observe(count[i]).stepChange(dup.observeChange(count[i]), q, gap[i])
			down, ddown = down.observe(count[j]).stepChange(ddown.observeChange(count[j]), q, gap[j-1])
		}
	}
}

// posterior returns the variance of g at a knot with w observations, from what is
// known from both sides and its derivatives by log λ; its own derivative; and 1 − w times
// the variance.
func (s info) posterior(t, ds, dt info, w float64) (value, change, rest float64) {
	without := s.d + t.d + s.a*t.c + t.a*s.c + 2*s.b*t.b // det of the sum of both
	dwithout := ds.d + dt.d + ds.a*t.c + s.a*dt.c + dt.a*s.c + t.a*ds.c + 2*(ds.b*t.b+s.b*dt.b)
	c, dc := s.c+t.c, ds.c+dt.c
	r := 1 / (without + w*c)
	value = c * r
	return value, (dc - value*(dwithout+w*dc)) * r, without * r
}

// gainRoom is what gains keep per knot: the matrix that moves an information vector over
// the gap above, the one for the gap below, and the covariances C, B, A of all that is
// known there, Λ⁻¹ = [C B; B A].
const gainRoom = 11

// room implements splineFilter.
func (f *curveFilter) room() int { return gainRoom * len(f.design.count) }

// gains implements splineFilter. I − S is the projected inverse of M = I + Σ/λ, Σ the
// covariance of the process, X its flat part: the product of its non-zero eigenvalues is
// det XᵀX / (det M det XᵀM⁻¹X) (Wahba 1985, Ann. Stat. 13:1378), and integrating the
// states out one after the other gives det M det XᵀM⁻¹X as the product of the factors of
// the steps and the last determinant.
func (f *curveFilter) gains(q float64, g []float64) (logDet float64) {
	count, gap := f.design.count, f.gap
	m := len(count)
	var s, flat info
	factors := product{1, 0}
	for i, w := range count {
		p := (*[gainRoom]float64)(g[gainRoom*i:])
		p[8], p[9], p[10], p[7] = s.a, s.b, s.c, s.d
		s, flat = s.observe(w), flat.observe(w)
		if i < m-1 {
			var factor float64
			s, factor = s.move(q, gap[i], (*[4]float64)(p[0:4]))
			flat = flat.shift(gap[i])
			factors.times(factor)
		}
	}
	logDet = math.Log(flat.d/s.d) - factors.log()
	s = info{}
	for i := m - 1; i >= 0; i-- {
		w, p := count[i], (*[gainRoom]float64)(g[gainRoom*i:])
		t := info{p[8], p[9], p[10], p[7]}
		r := 1 / (s.d + t.d + (s.a+w)*t.c + (t.a+w)*s.c + 2*s.b*t.b)
		p[8], p[9], p[10] = (s.c+t.c)*r, (t.b-s.b)*r, (s.a+t.a+w)*r
		if i > 0 {
			s, _ = s.observe(w).move(q, gap[i-1], (*[4]float64)(p[4:8]))
		}
	}
	return logDet
}

// shift is step without noise.
func (s info) shift(h float64) info {
	return info{s.a, s.b + h*s.a, s.c + h*(2*s.b+h*s.a), s.d}
}

// move is step, with the matrix F⁻ᵀ(I + Λ F⁻¹QF⁻ᵀ)⁻¹ that moves an information vector, by
// rows. Only its last entry has terms of both signs: it passes zero.
func (s info) move(q, h float64, t *[4]float64) (info, float64) {
	next, factor := s.step(q, h)
	r := 1 / factor
	e := q * h
	t[0] = (1 + e*(s.c+h*s.b/2)) * r
	t[1] = e * (s.b + h*s.a/2) * r
	t[2] = -h * (1 + e*(s.c/2+h*s.b/6)) * r
	t[3] = (1 - e*h*(s.b/2+h*s.a/6)) * r
	return next, factor
}

// smooth implements splineFilter.
func (f *curveFilter) smooth(g, sums, value, slope, work []float64) {
	var z1, z2 float64
	for i, v := range sums {
		work[2*i], work[2*i+1] = z1, z2
		z1 += v
		t := (*[gainRoom]float64)(g[gainRoom*i:])
		z1, z2 = t[0]*z1+t[1]*z2, t[2]*z1+t[3]*z2
	}
	z1, z2 = 0, 0
	for i := len(sums) - 1; i >= 0; i-- {
		p := (*[gainRoom]float64)(g[gainRoom*i:])
		z1 += sums[i]
		one, two := work[2*i]+z1, work[2*i+1]-z2
		value[i] = p[8]*one + p[9]*two
		slope[i] = p[10]*two + p[9]*one
		z1, z2 = p[4]*z1+p[5]*z2, p[6]*z1+p[7]*z2
	}
}

// A product of many factors ≥ 1, kept from overflow.
type product struct {
	value float64
	logs  float64 // of what was taken out of value
}

func (p *product) times(factor float64) {
	p.value *= factor
	if p.value > 1e100 { // a factor is below 1e200, see leastLogLambda
		p.logs += math.Log(p.value)
		p.value = 1
	}
}

func (p *product) log() float64 { return p.logs + math.Log(p.value) }
