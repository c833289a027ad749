package smoothers

import "math"

// Polynomial is least squares on a global polynomial of degree df − 1. The basis is
// orthonormal on the data, made by the Arnoldi process with reorthogonalisation
// (Brubeck, Nakatsukasa & Trefethen 2021, SIAM Rev. 63:405), so that high degrees
// keep their digits. Its tuning is the degree.
type Polynomial struct {
	Beyond string `option:"beyond" oneof:"extend hold" doc:"beyond the data: go on as the polynomial does, or hold the value at the end"`
}

// NewPolynomial returns the family at its defaults.
func NewPolynomial() *Polynomial { return &Polynomial{Beyond: "extend"} }

// Check refuses other words for beyond.
func (p *Polynomial) Check() error { return checkBeyond(p.Beyond) }

// On lays the smoother out on x.
func (p *Polynomial) On(x []float64, mem *Arena) Ladder {
	return &polyLadder{design: gather(x, mem), mem: mem, hold: p.Beyond == "hold"}
}

// A polyLadder is the global polynomials on a design.
type polyLadder struct {
	design tied
	mem    *Arena
	hold   bool
}

// AtDF takes whole df from 1 to the number of distinct x.
func (l *polyLadder) AtDF(dfs []float64) []Rung {
	most := 0
	for _, df := range dfs {
		if l.attainable(df) {
			most = max(most, int(df))
		}
	}
	basis := newArnoldi(&l.design, most, l.mem)
	rungs := make([]Rung, len(dfs))
	for i, df := range dfs {
		switch {
		case !l.attainable(df):
			rungs[i] = Rung{DF: df, Status: DFUnattainable}
		case int(df) > basis.size:
			rungs[i] = Rung{DF: df, Status: RankDeficient}
		default:
			rungs[i] = basis.rung(int(df), l.hold)
			rungs[i].Tuning = df - 1
		}
	}
	return rungs
}

// AtTuning takes degrees.
func (l *polyLadder) AtTuning(degrees []float64) []Rung {
	dfs := make([]float64, len(degrees))
	for i, d := range degrees {
		dfs[i] = d + 1
	}
	return l.AtDF(dfs)
}

func (l *polyLadder) attainable(df float64) bool {
	return df >= 1 && df <= float64(len(l.design.z)) && df == math.Trunc(df)
}

// An arnoldi is a basis of polynomials q_0, q_1, … orthonormal over the observations
// of a design, with t the position scaled to [−1, 1]:
//
//	t q_k = Σ_{j ≤ k+1} h_jk q_j.
type arnoldi struct {
	design *tied
	mem    *Arena
	half   float64   // half the range of x
	size   int       // polynomials that there are: fewer than asked for if one more has no digits
	q      []float64 // size × m: values at the distinct x
	h      []float64 // size × (size+1), row k: h_0k … h_{k+1,k}
	stride int       // of h
}

// leastNorm is how small, relative to t q_k, what is new in it may be: below, the
// new polynomial would carry fewer than eight digits.
const leastNorm = 1e-8

// newArnoldi makes up to size polynomials.
func newArnoldi(design *tied, size int, mem *Arena) *arnoldi {
	m := len(design.z)
	b := &arnoldi{design: design, mem: mem, half: (design.z[m-1] - design.z[0]) / 2, stride: size + 1}
	if size == 0 {
		return b
	}
	b.q, b.h = mem.floats(size*m), mem.floats(size*(size+1))
	first := 1 / math.Sqrt(float64(len(design.x)))
	for i := range m {
		b.q[i] = first
	}
	for b.size = 1; b.size < size; b.size++ {
		if !b.extend() {
			break
		}
	}
	return b
}

// position scales a point, counted from the design's origin, to [−1, 1].
func (b *arnoldi) position(z float64) float64 {
	if b.half == 0 {
		return 0
	}
	return (z-b.design.z[0])/b.half - 1
}

// extend makes one more polynomial, and says whether it has its digits.
func (b *arnoldi) extend() bool {
	m, k := len(b.design.z), b.size-1
	v, last := b.q[(k+1)*m:(k+2)*m], b.q[k*m:(k+1)*m]
	for i, z := range b.design.z {
		v[i] = b.position(z) * last[i]
	}
	before := math.Sqrt(b.dot(v, v))
	h := b.h[k*b.stride:]
	for range 2 { // twice is enough
		for j := range b.size {
			q := b.q[j*m : (j+1)*m]
			c := b.dot(q, v)
			h[j] += c
			for i := range v {
				v[i] -= c * q[i]
			}
		}
	}
	norm := math.Sqrt(b.dot(v, v))
	if !(norm > leastNorm*before) {
		return false
	}
	h[b.size] = norm
	for i := range v {
		v[i] /= norm
	}
	return true
}

// dot is the inner product over the observations.
func (b *arnoldi) dot(u, v []float64) float64 {
	sum := 0.0
	for i, c := range b.design.count {
		sum += c * u[i] * v[i]
	}
	return sum
}

// rung makes the rung of the first p polynomials.
func (b *arnoldi) rung(p int, hold bool) Rung {
	n, m := len(b.design.x), len(b.design.z)
	df := float64(p)
	r := Rung{DF: df, TrS: df, TrSTS: df, DFResidual: float64(n) - df, Leverage: b.mem.floats(n), Remainder: b.mem.floats(n)}
	lever := r.Leverage[:m]
	for k := range p {
		for i, q := range b.q[k*m : (k+1)*m] {
			lever[i] += q * q
		}
	}
	b.design.spread(r.Leverage, lever)
	projectionRemainder(r.Remainder, r.Leverage)
	r.RowNorm2 = r.Leverage // S is a projection
	r.solver = &polySolver{basis: b, p: p, hold: hold}
	return r
}

// projectionRemainder writes 1 − S_ii. What is below rounding is 0: the point fits
// itself.
func projectionRemainder(dst, leverage []float64) {
	for i, v := range leverage {
		if dst[i] = 1 - v; dst[i] < 1e-13 {
			dst[i] = 0
		}
	}
}

// A polySolver fits the first p polynomials of a basis.
type polySolver struct {
	basis *arnoldi
	p     int
	hold  bool
}

// solve implements solver. A second pass over the residuals recovers what the first
// loses to rounding.
func (s *polySolver) solve(y []float64, f *Fit) {
	b, m := s.basis, len(s.basis.design.z)
	f.work = resize(f.work, 2*m+s.p)
	sums, fit, c := f.work[:m], f.work[m:2*m], f.work[2*m:]
	b.design.sums(sums, y)
	clear(fit)
	clear(c)
	for range 2 {
		for k := range s.p {
			q := b.q[k*m : (k+1)*m]
			d := 0.0
			for i, v := range sums {
				d += q[i] * (v - b.design.count[i]*fit[i])
			}
			c[k] += d
			for i := range fit {
				fit[i] += d * q[i]
			}
		}
	}
	b.design.spread(f.Fitted, fit)
	if s.p <= 4 {
		s.cubic(&f.pieces, c)
		f.Curve = &f.pieces
		return
	}
	f.poly = polyCurve{basis: b, c: append(f.poly.c[:0], c...), hold: s.hold}
	f.Curve = &f.poly
}

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
func (b *arnoldi) powers(c []float64) [4]float64 {
	var q [4][4]float64
	var sum [4]float64
	q[0][0] = b.q[0]
	for k := range c {
		if k > 0 {
			h := b.h[(k-1)*b.stride:]
			for d := range k {
				q[k][d+1] += q[k-1][d] / h[k]
			}
			for j := range k {
				for d := range k {
					q[k][d] -= h[j] * q[j][d] / h[k]
				}
			}
		}
		for d := range q[k] {
			sum[d] += c[k] * q[k][d]
		}
	}
	return sum
}

// A polyCurve is a polynomial on an Arnoldi basis.
type polyCurve struct {
	basis *arnoldi
	c     []float64
	hold  bool
	q     []float64 // scratch
}

// At implements Curve.
func (p *polyCurve) At(dst, t []float64) {
	if len(dst) != len(t) {
		panic("smoothers: dst and t differ in length")
	}
	b := p.basis
	p.q = resize(p.q, len(p.c))
	for i, v := range t {
		u := b.position(v - b.design.origin)
		if p.hold {
			u = min(max(u, -1), 1)
		}
		p.q[0] = b.q[0]
		sum := p.c[0] * p.q[0]
		for k := 1; k < len(p.c); k++ {
			h := b.h[(k-1)*b.stride:]
			next := u * p.q[k-1]
			for j := range k {
				next -= h[j] * p.q[j]
			}
			p.q[k] = next / h[k]
			sum += p.c[k] * p.q[k]
		}
		dst[i] = sum
	}
}
