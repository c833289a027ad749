package smoothers

import (
	"math"
	"math/big"
)

// An exactSpline is the smoothing spline of order 1 or 2 in its reproducing-kernel form
// (Wahba 1990, Spline Models for Observational Data, §1.3) in exactBits bits, where even near
// ties and λ at the ends of what can be asked for leave plenty of digits: with
// K_ij = ∫(x_i − u)₊^(p−1) (x_j − u)₊^(p−1) du from the lowest x (p the order; the factorial
// is 1 for both), M = K + λI and T = [1 x], or [1] for order 1,
//
//	I − S = λ (M⁻¹ − M⁻¹T(TᵀM⁻¹T)⁻¹TᵀM⁻¹).
type exactSpline struct {
	order  int
	x      []*big.Float // from the lowest
	lambda *big.Float
	rest   [][]*big.Float // (I − S)/λ
	logDet float64        // log det⁺(I − S)
}

func plain(v *big.Float) float64 { f, _ := v.Float64(); return f }

// logOf is the natural log of v > 0 of any size.
func logOf(v *big.Float) float64 {
	m := new(big.Float)
	e := v.MantExp(m)
	return math.Log(plain(m)) + float64(e)*math.Ln2
}

// newExactSpline lays out the spline on x with λ > 0.
func newExactSpline(order int, x []float64, lambda float64) *exactSpline {
	n := len(x)
	e := &exactSpline{order: order, lambda: num(lambda), x: make([]*big.Float, n)}
	for i := range x {
		e.x[i] = sub(num(x[i]), num(x[0]))
	}
	m := make([][]*big.Float, n)
	for i := range m {
		m[i] = make([]*big.Float, n)
		for j := range m {
			m[i][j] = e.kernel(e.x[i], e.x[j])
		}
		m[i][i].Add(m[i][i], e.lambda)
	}
	logM := invert(m)
	t := e.trend()
	mt := product2(m, t) // M⁻¹T, n × p
	inner := product2(transpose(t), mt)
	logT := invert(inner)
	corr := product2(product2(mt, inner), transpose(mt))
	for i := range m {
		for j := range m {
			m[i][j].Sub(m[i][j], corr[i][j])
		}
	}
	e.rest = m
	tt := product2(transpose(t), t)
	// det⁺(I − S) = λ^(n−p) det TᵀT/(det M det TᵀM⁻¹T).
	e.logDet = float64(n-order)*logOf(e.lambda) + invert(tt) - logM - logT
	return e
}

// kernel is K of two points, zero where one lies below the lowest x.
func (e *exactSpline) kernel(s, t *big.Float) *big.Float {
	if s.Cmp(t) > 0 {
		s, t = t, s
	}
	if s.Sign() <= 0 {
		return num(0)
	}
	if e.order == 1 {
		return add(s, num(0))
	}
	// ∫₀^s (s − u)(t − u) du = s²(3t − s)/6
	return quo(mul(mul(s, s), sub(mul(num(3), t), s)), num(6))
}

// trend is T.
func (e *exactSpline) trend() [][]*big.Float {
	t := make([][]*big.Float, len(e.x))
	for i, x := range e.x {
		t[i] = []*big.Float{num(1), x}[:e.order]
	}
	return t
}

// smoother returns S and, without cancellation, 1 − S_ii.
func (e *exactSpline) smoother() (s [][]float64, rest []float64) {
	n := len(e.x)
	s, rest = make([][]float64, n), make([]float64, n)
	for i := range s {
		s[i] = make([]float64, n)
		for j := range s[i] {
			v := mul(e.lambda, e.rest[i][j])
			if i == j {
				rest[i] = plain(v)
				s[i][j] = plain(sub(num(1), v))
			} else {
				s[i][j] = -plain(v)
			}
		}
	}
	return s, rest
}

// curve returns the spline through y at t, and so the fitted values at x.
func (e *exactSpline) curve(y, t []float64, lowest float64) []float64 {
	n := len(e.x)
	c := make([]*big.Float, n) // (I − S)y/λ
	left := make([]*big.Float, n)
	for i := range c {
		c[i] = num(0)
		for j := range y {
			c[i].Add(c[i], mul(e.rest[i][j], num(y[j])))
		}
	}
	for i := range left { // y − λc − Kc is the trend
		left[i] = sub(num(y[i]), mul(e.lambda, c[i]))
		for j := range c {
			left[i].Sub(left[i], mul(e.kernel(e.x[i], e.x[j]), c[j]))
		}
	}
	level, slope := left[0], num(0)
	if e.order == 2 {
		slope = quo(sub(left[n-1], left[0]), e.x[n-1])
	}
	v := make([]float64, len(t))
	for k := range t {
		u := sub(num(t[k]), num(lowest))
		g := add(level, mul(slope, u))
		for j := range c {
			g.Add(g, mul(e.kernel(u, e.x[j]), c[j]))
		}
		v[k] = plain(g)
	}
	return v
}

// invert replaces a positive definite matrix by its inverse and returns the log of its
// determinant (Gauss–Jordan).
func invert(m [][]*big.Float) (logDet float64) {
	t := num(0)
	for k, row := range m {
		p := row[k]
		logDet += logOf(p)
		row[k] = num(1)
		for _, v := range row {
			v.Quo(v, p)
		}
		for i, other := range m {
			if i == k {
				continue
			}
			f := other[k]
			other[k] = num(0)
			for j, v := range other {
				v.Sub(v, t.Mul(f, row[j]))
			}
		}
	}
	return logDet
}

func product2(a, b [][]*big.Float) [][]*big.Float {
	c := make([][]*big.Float, len(a))
	t := num(0)
	for i := range a {
		c[i] = make([]*big.Float, len(b[0]))
		for j := range c[i] {
			c[i][j] = num(0)
			for k := range b {
				c[i][j].Add(c[i][j], t.Mul(a[i][k], b[k][j]))
			}
		}
	}
	return c
}

func transpose(a [][]*big.Float) [][]*big.Float {
	c := make([][]*big.Float, len(a[0]))
	for j := range c {
		c[j] = make([]*big.Float, len(a))
		for i := range a {
			c[j][i] = a[i][j]
		}
	}
	return c
}
