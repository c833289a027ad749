package smoothers

import "math"

// residualQuartic implements quartic. With γ the eigenvalues of S between 0 and 1,
// P_k = Σ γ^k and D = log det⁺(I − S), dγ/dθ = −γ(1−γ) and dD/dθ = P_1, so that
//
//	D‴ = P_1 − 3P_2 + 2P_3,   D⁗ = −P_1 + 7P_2 − 12P_3 + 6P_4.
//
// P_1 and P_2 come from the leverages, and the two derivatives from one pass of jets.
func (s *splineSolver) residualQuartic(r *Rung) float64 {
	if r.Tuning == 0 { // S takes the means at the distinct x
		return r.DFResidual
	}
	n, order := float64(len(r.Leverage)), float64(s.ladder.order)
	p1, p2 := r.TrS-order, r.TrSTS-order
	third, fourth := s.ladder.filter.determinantRates(s.q)
	p3 := (third - p1 + 3*p2) / 2
	p4 := (fourth + p1 - 7*p2 + 12*p3) / 6
	return n - order - 4*p1 + 6*p2 - 4*p3 + p4
}

// determinantRates implements splineFilter: log det⁺(I − S) is log of the last
// determinant and the factors of the steps, all with a minus sign, and constants.
func (l *curveFilter) determinantRates(q float64) (third, fourth float64) {
	count, gap := l.design.count, l.gap
	var a, b, c, d jet
	for i, w := range count {
		a[0] += w
		d.add(w, &c)
		if i == len(count)-1 {
			break
		}
		// As in info.step, with f the factor and e = qh:
		//   c ← (c + 2hb + h²(a + de/3))/f,  b ← (b + h(a + de/2))/f,  a ← (a + de)/f,  d ← d/f.
		h := gap[i]
		e := decay(q * h)
		de := d
		de.times(&e)
		f := c
		f.add(h, &b)
		f.add(h*h/3, &a)
		f.add(h*h/12, &de)
		f.times(&e)
		f[0]++
		f.logRates(&third, &fourth)
		f.invert()
		c.add(2*h, &b)
		c.add(h*h, &a)
		c.add(h*h/3, &de)
		b.add(h, &a)
		b.add(h/2, &de)
		a.add(1, &de)
		a.times(&f)
		b.times(&f)
		c.times(&f)
		d.times(&f)
	}
	d.logRates(&third, &fourth)
	return -6 * third, -24 * fourth
}

// determinantRates implements splineFilter, as for curveFilter.
func (l *slopeFilter) determinantRates(q float64) (third, fourth float64) {
	count, gap := l.design.count, l.gap
	var a jet
	for i, w := range count {
		a[0] += w
		if i == len(count)-1 {
			break
		}
		f := decay(q * gap[i])
		f.times(&a)
		f[0]++
		f.logRates(&third, &fourth)
		f.invert()
		a.times(&f)
	}
	a.logRates(&third, &fourth)
	return -6 * third, -24 * fourth
}

// residualQuartic implements quartic.
func (s *penaltySolver) residualQuartic(r *Rung) float64 {
	l := s.ladder
	sum := float64(len(r.Leverage) - l.rank)
	for k := 2; k < l.rank; k++ {
		g := 1.0
		if !math.IsInf(r.Tuning, 1) {
			g = r.Tuning * s.gain[k]
		}
		sum += g * g * g * g
	}
	return sum
}
