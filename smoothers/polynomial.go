package smoothers

import "math"

// Polynomial is least squares on a global polynomial of degree df − 1. Its tuning is
// the degree.
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
	rungs, solvers := make([]Rung, len(dfs)), make([]polySolver, len(dfs))
	most := 0
	for _, df := range dfs {
		if l.attainable(df) {
			most = max(most, int(df))
		}
	}
	basis := newArnoldi(&l.design, most, l.mem)
	for i, df := range dfs {
		r := &rungs[i]
		*r = Rung{DF: df, Tuning: df - 1}
		switch {
		case !l.attainable(df):
			r.Status, r.Tuning = DFUnattainable, 0
		case math.IsInf(basis.half, 1):
			r.Status, r.Note = NotFinite, "the range of x overflows"
		case int(df) > basis.size:
			r.Status, r.Note = RankDeficient, "a polynomial of this degree has no digits left on these x"
		default:
			basis.lay(r, int(df))
			solvers[i] = polySolver{basis, int(df), l.hold}
			r.solver = &solvers[i]
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

// lay fills in the rung of the first p polynomials of the basis.
func (b *arnoldi) lay(r *Rung, p int) {
	n, m := len(b.design.x), len(b.design.z)
	r.TrS, r.TrSTS, r.DFResidual = float64(p), float64(p), float64(n-p)
	r.Form, r.Lines = Nested, p >= 2
	r.Leverage, r.Remainder = b.mem.floats(n), b.mem.floats(n)
	r.RowNorm2 = r.Leverage // S is a projection
	copy(r.Leverage, b.lever[(p-1)*m:p*m])
	for i, h := range r.Leverage[:m] {
		r.Remainder[i] = b.remainder(i, p, h)
	}
	b.design.spread(r.Leverage, r.Leverage)
	b.design.spread(r.Remainder, r.Remainder)
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
