package smoothers

import "math"

// A localSums evaluates local fits in wide windows at a cost that does not depend on
// how many x the window holds. About a centre c it keeps the sums of powers
//
//	Σ count·v^k  and  Σ Y·v^k,  v = (z − c)/unit,
//
// over the points of the window, and with the sign of z − t where the kernel has
// |u|³: of K(u) = 1 − 3|u|³ + 3u⁶ − |u|⁹ the odd powers take those. A kernel of
// compact support is then a polynomial in v; for the gaussian e^−v²/2 goes into the
// sums and e^(sv), s = (t − c)/unit, is a power series, with e^−s²/2 common to all
// weights. So the moments of the window at t are combinations of the sums.
// Points enter and leave as t ascends, and the sums are made anew, about a new
// centre, before |s| or the change of width costs digits. (Seifert, Brockmann, Engel
// & Gasser 1994, J. Comput. Graph. Stat. 3:192, update sums for polynomial kernels.)
type localSums struct {
	l    *localLadder
	gaze gaze
	y    []float64 // sums of y per distinct x, or nil

	squared     bool // the kernel is K²
	c, unit     float64
	lo, mid, hi int // the sums hold z[lo:hi]; those from mid on have sign +
	made        bool
	even, odd   powerSums // without and with the sign
	tops        [2]int    // powers kept, of count and of y

	moments
}

// powerSums holds sums of powers, of the counts and of y.
type powerSums struct{ n, y [powersMost]float64 }

// powersMost is the number of powers for the longest sums, those of the gaussian kernel.
const powersMost = seriesMost + 6

const (
	// windowWide is the number of points in a window from which sums pay.
	windowWide = 24
	// gaussianWide is the number of points per bandwidth from which they do.
	gaussianWide = 2
)

// sumsOn returns a localSums at the left of everything; y may be nil.
func (l *localLadder) sumsOn(tuning float64, y []float64) localSums {
	s := localSums{l: l, gaze: l.gaze(tuning), y: y}
	s.keep()
	return s
}

// squaredSumsOn returns a localSums for the kernel K².
func (l *localLadder) squaredSumsOn(tuning float64) localSums {
	s := localSums{l: l, gaze: l.gaze(tuning), squared: true}
	if l.shape == gaussian {
		s.gaze.width /= math.Sqrt2 // e^−u² is the gaussian of a narrower width
	}
	s.keep()
	return s
}

// keep decides which powers are kept.
func (s *localSums) keep() {
	terms := seriesMost
	if s.l.shape.compact() {
		even, odd := s.l.shape.powers(s.squared)
		terms = max(coefficients(even), coefficients(odd))
	}
	s.tops[0] = terms + 2*s.l.degree
	if s.l.shape == gaussian {
		s.tops[0] += 2 // for the derivative
	}
	if s.y != nil {
		s.tops[1] = terms + s.l.degree
	}
}

// window returns about how many x a window at a tuning holds.
func (l *localLadder) window(tuning float64) float64 {
	n := float64(len(l.x))
	w := tuning * n
	if !l.neighbours {
		w *= 2 / l.extent()
	}
	if l.shape == gaussian {
		w *= 8
	}
	return min(w, float64(len(l.z)))
}

// wide says whether sums pay at a tuning. For the gaussian kernel that takes some targets
// within the reach of one centre, and one width for the series.
func (l *localLadder) wide(tuning float64) bool {
	if l.shape == gaussian {
		return !l.neighbours && tuning*float64(len(l.x)) > gaussianWide*l.extent()
	}
	return l.window(tuning) > windowWide
}

// at moves to t and works out the fit there. It reports false beyond the data and
// where the window is too thin for sums to be safe; gaze is then at t all the same.
func (s *localSums) at(t float64, slope bool) bool {
	return s.gather(t, slope) && s.solve(s.l.degree)
}

// gather moves to t and works out the moments there, like at.
func (s *localSums) gather(t float64, slope bool) bool {
	g, z := &s.gaze, s.l.z
	g.at(t)
	if t < z[0] || t > z[len(z)-1] {
		return false
	}
	if s.l.shape == gaussian {
		if !s.made || math.Abs(t-s.c) > centreMost*s.unit {
			s.renewSeries(t)
		}
		return s.series(t, slope)
	}
	if !s.follow(t) {
		s.renew(t)
	}
	return s.polynomial(t, slope)
}

// follow brings the sums up to date for t; false if they must be made anew.
func (s *localSums) follow(t float64) bool {
	g := &s.gaze
	if !s.made || math.Abs(t-s.c) > s.unit/4 || math.Abs(g.h-s.unit) > s.unit/5 ||
		g.lo < s.lo || g.hi < s.hi || g.lo-s.lo+g.hi-s.hi > (g.hi-g.lo)/2 {
		return false
	}
	for ; s.hi < g.hi; s.hi++ {
		s.add(&s.even, s.hi, 1)
		if s.l.shape == tricube {
			s.add(&s.odd, s.hi, 1)
		}
	}
	if s.l.shape == tricube {
		for ; s.mid < s.hi && s.l.z[s.mid] < t; s.mid++ {
			s.add(&s.odd, s.mid, -2)
		}
		for lo := s.lo; lo < g.lo; lo++ {
			s.add(&s.odd, lo, 1) // it was left of t
		}
	}
	for ; s.lo < g.lo; s.lo++ {
		s.add(&s.even, s.lo, -1)
	}
	return true
}

// renew makes the sums anew, with the centre a little ahead of t.
func (s *localSums) renew(t float64) {
	g, z := &s.gaze, s.l.z
	s.made = true
	s.unit, s.c = g.h, min(t+0.2*g.h, z[len(z)-1])
	s.lo, s.mid, s.hi = g.lo, g.hi, g.hi
	s.even = powerSums{}
	if s.l.shape != tricube {
		s.addAll(&s.even, s.lo, s.hi)
		return
	}
	s.mid = g.lo
	for s.mid < g.hi && z[s.mid] < t {
		s.mid++
	}
	s.odd = powerSums{}
	s.addAll(&s.even, s.lo, s.mid)
	s.addAll(&s.odd, s.mid, s.hi)
	for k, left := range s.even.n[:s.tops[0]] {
		s.even.n[k], s.odd.n[k] = s.odd.n[k]+left, s.odd.n[k]-left
	}
	for k, left := range s.even.y[:s.tops[1]] {
		s.even.y[k], s.odd.y[k] = s.odd.y[k]+left, s.odd.y[k]-left
	}
}

// add adds the powers of the distinct x number i, times factor.
func (s *localSums) add(p *powerSums, i int, factor float64) {
	v := (s.l.z[i] - s.c) / s.unit
	w := factor * s.l.count[i]
	for k := range p.n[:s.tops[0]] {
		p.n[k] += w
		w *= v
	}
	if s.y == nil {
		return
	}
	w = factor * s.y[i]
	for k := range p.y[:s.tops[1]] {
		p.y[k] += w
		w *= v
	}
}

// addAll adds the powers of the distinct x number lo to hi − 1, under the weights of
// the series if the kernel is gaussian.
func (s *localSums) addAll(p *powerSums, lo, hi int) {
	const lanes = 4 // side by side, so that no product waits for the last
	var v, w, y [lanes]float64
	for ; lo < hi; lo += lanes {
		n := min(lanes, hi-lo)
		w, y = [lanes]float64{}, [lanes]float64{}
		for i := range n {
			v[i] = (s.l.z[lo+i] - s.c) / s.unit
			w[i] = 1
		}
		if s.l.shape == gaussian {
			for i := range n {
				w[i] = -v[i] * v[i] / 2
			}
			expAll(w[:n])
		}
		if s.y != nil {
			for i := range n {
				y[i] = w[i] * s.y[lo+i]
			}
			addPowers(p.y[:s.tops[1]], &v, y)
		}
		for i := range n {
			w[i] *= s.l.count[lo+i]
		}
		addPowers(p.n[:s.tops[0]], &v, w)
	}
}

// addPowers adds Σ w v^k to p[k].
func addPowers(p []float64, v *[4]float64, w [4]float64) {
	v0, v1, v2, v3 := v[0], v[1], v[2], v[3]
	w0, w1, w2, w3 := w[0], w[1], w[2], w[3]
	for k := range p {
		p[k] += (w0 + w1) + (w2 + w3)
		w0, w1, w2, w3 = w0*v0, w1*v1, w2*v2, w3*v3
	}
}
