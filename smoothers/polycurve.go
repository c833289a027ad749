package smoothers

// cubic writes a polynomial of degree 3 or less as pieces: one, or three where the
// value is held beyond the data.
func (s *polySolver) cubic(p *Piecewise, c []float64) {
	b := s.basis
	lo, hi := b.design.origin+b.design.z[0], b.design.origin+b.design.z[len(b.design.z)-1]
	power := b.powers(c)
	p.grow(1, s.p)
	copy(p.Break, []float64{lo, hi})
	width := b.half
	if width == 0 {
		width = 1
	}
	if s.hold {
		p.grow(3, s.p)
		copy(p.Break, []float64{lo, lo, hi, hi})
		clear(p.Coef)
		sign := 1.0
		for _, v := range power[:s.p] {
			p.Coef[0] += sign * v
			p.Coef[2*s.p] += v
			sign = -sign
		}
	}
	middle := len(p.Origin) / 2
	copy(p.Coef[middle*s.p:], power[:s.p])
	for k := range p.Origin {
		p.Origin[k], p.Width[k] = lo+width, width
	}
}

// powers turns up to four coefficients on the basis into powers of t.
func (b *arnoldi) powers(c []float64) (sum [4]float64) {
	var before, last [4]float64
	last[0] = b.rate[0]
	for k, ck := range c {
		if k > 0 {
			next := [4]float64{}
			for d := range next {
				next[d] = -b.alpha[k-1]*last[d] - b.beta[k-1]*before[d]
				if d > 0 {
					next[d] += last[d-1]
				}
				next[d] *= b.rate[k]
			}
			before, last = last, next
		}
		for d := range sum {
			sum[d] += ck * last[d]
		}
	}
	return sum
}

// A polyCurve is a polynomial on an Arnoldi basis, evaluated by its recurrence.
type polyCurve struct {
	basis *arnoldi
	c     []float64
	hold  bool
}

// At implements Curve.
func (p *polyCurve) At(dst, t []float64) {
	if len(dst) != len(t) {
		panic("smoothers: dst and t differ in length")
	}
	b := p.basis
	for i, v := range t {
		u := b.position(v - b.design.origin)
		if p.hold {
			u = min(max(u, -1), 1)
		}
		before, last := 0.0, b.rate[0]
		sum := p.c[0] * last
		for k := 1; k < len(p.c); k++ {
			before, last = last, b.next(k, u, last, before)
			sum += p.c[k] * last
		}
		dst[i] = sum
	}
}
