package smoothers

import "math"

// A curveFilter is the cubic smoothing spline as the posterior mean of an integrated
// Wiener process g with a flat prior on (g, g′) (Wahba 1978, JRSSB 40:364; Wecker &
// Ansley 1983, JASA 78:81), worked in information form from both ends.
//
// What is known of the state (g, g′) at a knot from one side is the matrix Λ = [a b;
// b c]. Over a gap h the state moves by F = [1 h; 0 1] and noise of covariance
// Q = q[h³/3 h²/2; h²/2 h], so that
//
//	Λ ← F⁻ᵀ (Λ⁻¹ + F⁻¹QF⁻ᵀ)⁻¹ F⁻¹.
//
// Starting from Λ = 0 both ways, and measuring the derivative outwards, b ≤ 0 holds
// throughout, and with det Λ carried along as a fourth number every formula below
// adds terms of one sign: no digits cancel, however close or far apart knots lie.
// Nothing is divided by h. The banded forms of the spline divide by h² and fail on
// near ties.
type curveFilter struct {
	design *tied
	gap    []float64
	ahead  []float64 // eight values per knot: what lies below it, and its changes
}

// info is Λ and its determinant.
type info struct{ a, b, c, det float64 }

// observe adds w observations of g.
func (s info) observe(w float64) info {
	s.a += w
	s.det += w * s.c
	return s
}

// cross returns q times the quadratic form of step's factor.
func (s info) cross(q, h float64) float64 {
	return q * (s.a*h*h*h/3 - s.b*h*h + s.c*h)
}

// step moves over a gap; factor is det(I + F⁻¹QF⁻ᵀ Λ).
func (s info) step(q, h float64) (next info, factor float64) {
	dq := s.det * q * h
	factor = 1 + s.cross(q, h) + dq*q*h*h*h/12
	return info{
		(s.a + dq) / factor,
		(s.b - h*s.a - dq*h/2) / factor,
		(s.c - 2*h*s.b + h*h*s.a + dq*h*h/3) / factor,
		s.det / factor,
	}, factor
}

// stepChange is the derivative of step by log λ, given that of s, with what step
// returned.
func (s info) stepChange(ds info, q, h float64, next info, factor float64) info {
	dq := s.det * q * h
	ddq := ds.det*q*h - dq // dq/dlog λ = −q
	dfactor := ds.cross(q, h) - s.cross(q, h) + (ddq-dq)*q*h*h*h/12
	return info{
		(ds.a + ddq - next.a*dfactor) / factor,
		(ds.b - h*ds.a - ddq*h/2 - next.b*dfactor) / factor,
		(ds.c - 2*h*ds.b + h*h*ds.a + ddq*h*h/3 - next.c*dfactor) / factor,
		(ds.det - next.det*dfactor) / factor,
	}
}

// join returns det(A + B) for what is known from below and from above, whose
// derivatives point opposite ways.
func join(lower, upper info) float64 {
	return lower.det + upper.det + lower.a*upper.c + upper.a*lower.c + 2*lower.b*upper.b
}

// joinChange is the derivative of join.
func joinChange(lower, upper, dlower, dupper info) float64 {
	return dlower.det + dupper.det +
		dlower.a*upper.c + lower.a*dupper.c + dupper.a*lower.c + upper.a*dlower.c +
		2*(dlower.b*upper.b+lower.b*dupper.b)
}

// spread implements splineFilter.
func (f *curveFilter) spread(q float64, value, change, rest []float64) {
	count := f.design.count
	m := len(count)
	var s, ds info
	for i, w := range count {
		copy(f.ahead[8*i:8*i+8], []float64{s.a, s.b, s.c, s.det, ds.a, ds.b, ds.c, ds.det})
		if i < m-1 {
			s, ds = s.observe(w), ds.observeChange(w)
			next, factor := s.step(q, f.gap[i])
			ds = s.stepChange(ds, q, f.gap[i], next, factor)
			s = next
		}
	}
	s, ds = info{}, info{}
	for i := m - 1; i >= 0; i-- {
		w, p := count[i], f.ahead[8*i:8*i+8]
		lower, dlower := info{p[0], p[1], p[2], p[3]}, info{p[4], p[5], p[6], p[7]}
		without := join(lower, s)
		c, dc := lower.c+s.c, dlower.c+ds.c
		det := without + w*c
		value[i] = c / det
		rest[i] = without / det
		change[i] = (dc - value[i]*(joinChange(lower, s, dlower, ds)+w*dc)) / det
		if i > 0 {
			s, ds = s.observe(w), ds.observeChange(w)
			next, factor := s.step(q, f.gap[i-1])
			ds = s.stepChange(ds, q, f.gap[i-1], next, factor)
			s = next
		}
	}
}

// observeChange is the derivative of observe: the observations do not depend on λ.
func (s info) observeChange(w float64) info {
	s.det += w * s.c
	return s
}

// logDet implements splineFilter. I − S is the projected inverse of M = I + Σ/λ, Σ
// the covariance of the process, X its flat part: the product of its non-zero
// eigenvalues is det XᵀX / (det M det XᵀM⁻¹X) (Wahba 1985, Ann. Stat. 13:1378), and
// integrating the states out one after the other gives det M det XᵀM⁻¹X as the
// product of the step factors and the last determinant.
func (f *curveFilter) logDet(q float64) (float64, bool) {
	var s, flat info
	sum := 0.0
	for i, w := range f.design.count {
		s, flat = s.observe(w), flat.observe(w)
		if i < len(f.gap) {
			next, factor := s.step(q, f.gap[i])
			s = next
			flat, _ = flat.step(0, f.gap[i])
			sum += math.Log(factor)
		}
	}
	return math.Log(flat.det) - sum - math.Log(s.det), true
}

// curveGains holds, per knot, what smoothing readings takes. Going up, the
// information vector z is moved over the gap above a knot by up[4i:], going down by
// down[4i:] over the gap below it; final holds C/det, B/det and A/det of all that is
// known at a knot.
type curveGains struct {
	up, down, final []float64
}

// gains implements splineFilter.
func (f *curveFilter) gains(q float64, mem *Arena) splineGains {
	count := f.design.count
	m := len(count)
	g := &curveGains{up: mem.floats(4 * m), down: mem.floats(4 * m), final: mem.floats(3 * m)}
	var s info
	for i, w := range count {
		copy(g.final[3*i:], []float64{s.a, s.b, s.c})
		f.ahead[8*i] = s.det
		if i < m-1 {
			s = s.observe(w)
			s = s.move(q, f.gap[i], g.up[4*i:4*i+4])
		}
	}
	s = info{}
	for i := m - 1; i >= 0; i-- {
		w, p := count[i], g.final[3*i:3*i+3]
		lower := info{p[0], p[1], p[2], f.ahead[8*i]}
		det := join(lower, s) + w*(lower.c+s.c)
		p[0], p[1], p[2] = (lower.c+s.c)/det, (lower.b-s.b)/det, (lower.a+s.a+w)/det
		if i > 0 {
			s = s.observe(w)
			s = s.move(q, f.gap[i-1], g.down[4*i:4*i+4])
		}
	}
	return g
}

// move is step, with the matrix that moves z: F⁻ᵀ(I + Λ F⁻¹QF⁻ᵀ)⁻¹, row by row.
func (s info) move(q, h float64, t []float64) info {
	next, factor := s.step(q, h)
	t11 := (1 + q*h*(s.c-s.b*h/2)) / factor
	t12 := q * h * (s.a*h/2 - s.b) / factor
	t21 := q * h * h * (s.c/2 - s.b*h/3) / factor
	t22 := (1 + q*h*h*(s.a*h/3-s.b/2)) / factor
	t[0], t[1], t[2], t[3] = t11, t12, t21-h*t11, t22-h*t12
	return next
}

// smooth implements splineGains.
func (g *curveGains) smooth(r, value, slope, work []float64) {
	var z1, z2 float64
	for i, v := range r {
		work[2*i], work[2*i+1] = z1, z2
		z1 += v
		t := g.up[4*i : 4*i+4]
		z1, z2 = t[0]*z1+t[1]*z2, t[2]*z1+t[3]*z2
	}
	z1, z2 = 0, 0
	for i := len(r) - 1; i >= 0; i-- {
		p := g.final[3*i : 3*i+3]
		one, two := work[2*i]+z1+r[i], work[2*i+1]-z2
		value[i] = p[0]*one - p[1]*two
		slope[i] = p[2]*two - p[1]*one
		z1 += r[i]
		t := g.down[4*i : 4*i+4]
		z1, z2 = t[0]*z1+t[1]*z2, t[2]*z1+t[3]*z2
	}
}
