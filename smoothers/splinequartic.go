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
func (f *curveFilter) determinantRates(q float64) (third, fourth float64) {
	count, gap := f.design.count, f.gap
	var a, b, c, d jet
	var sum3, sum4 float64
	for i, w := range count {
		a[0] += w
		d = d.plus(c.by(w))
		if i == len(count)-1 {
			break
		}
		h := gap[i]
		e := decay(q * h)
		de := d.times(e)
		factor := e.times(c.plus(b.by(h)).plus(a.plus(de.by(0.25)).by(h * h / 3)))
		factor[0]++
		r := factor.inverse()
		factor.logRates(r[0], &sum3, &sum4)
		c = c.plus(b.by(2 * h)).plus(a.plus(de.by(1.0 / 3)).by(h * h)).times(r)
		b = b.plus(a.plus(de.by(0.5)).by(h)).times(r)
		a = a.plus(de).times(r)
		d = d.times(r)
	}
	d.logRates(1/d[0], &sum3, &sum4)
	return -6 * sum3, -24 * sum4
}

// determinantRates implements splineFilter, as for curveFilter.
func (f *slopeFilter) determinantRates(q float64) (third, fourth float64) {
	count, gap := f.design.count, f.gap
	var a jet
	var sum3, sum4 float64
	for i, w := range count {
		a[0] += w
		if i == len(count)-1 {
			break
		}
		factor := decay(q * gap[i]).times(a)
		factor[0]++
		r := factor.inverse()
		factor.logRates(r[0], &sum3, &sum4)
		a = a.times(r)
	}
	a.logRates(1/a[0], &sum3, &sum4)
	return -6 * sum3, -24 * sum4
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
