package smoothers

import (
	"math"
	"math/big"
	"os"
	"slices"
	"testing"

	"gonum.org/v1/gonum/floats"
)

// The exact reference of the local families, for designs on which least squares in
// double precision is none: normal equations in numbers of exactBits bits, weights
// and widths included. With BENDTEST_SLOW there are more bits, for gaussian weights
// of e^−400, and more df and targets.
var (
	exactSlow = os.Getenv("BENDTEST_SLOW") != ""
	exactBits = map[bool]int{false: 300, true: 2000}[exactSlow]
)

func num(v float64) *big.Float       { return new(big.Float).SetPrec(uint(exactBits)).SetFloat64(v) }
func mul(a, b *big.Float) *big.Float { return num(0).Mul(a, b) }
func add(a, b *big.Float) *big.Float { return num(0).Add(a, b) }
func sub(a, b *big.Float) *big.Float { return num(0).Sub(a, b) }
func quo(a, b *big.Float) *big.Float { return num(0).Quo(a, b) }

// exactExp returns e^−v, v ≥ 0, from the series at v/2^k, and 0 from v = 10⁵ on.
func exactExp(v *big.Float) *big.Float {
	if v.Cmp(num(1e5)) > 0 {
		return num(0)
	}
	k := max(0, v.MantExp(nil)+20)
	r := num(0).SetMantExp(v, -k)
	sum, term := num(1), num(1)
	for i := 1; term.Sign() != 0 && term.MantExp(nil) > -exactBits; i++ {
		term = quo(mul(term, r), num(float64(i)))
		sum = add(sum, term)
	}
	for range k {
		sum = mul(sum, sum)
	}
	return quo(num(1), sum)
}

// exactFit is the local problem at t.
type exactFit struct {
	kernel string
	degree int
	w, u   []*big.Float
}

func newExactFit(s Smoother, x []float64, tuning, t float64) *exactFit {
	f := &exactFit{}
	h := num(tuning)
	switch s := s.(type) {
	case *Kernel:
		f.kernel = s.Kernel
	case *Local:
		f.kernel, f.degree = s.Kernel, s.Degree
		if s.Width == "neighbours" {
			h = exactWidth(x, t, tuning)
		}
	}
	for _, v := range x {
		u := quo(sub(num(v), num(t)), h)
		f.u = append(f.u, u)
		a := num(0).Abs(u)
		rest := sub(num(1), mul(a, a))
		switch {
		case f.kernel == "gaussian":
			f.w = append(f.w, exactExp(mul(mul(u, u), num(0.5))))
		case a.Cmp(num(1)) >= 0:
			f.w = append(f.w, num(0))
		case f.kernel == "epanechnikov":
			f.w = append(f.w, rest)
		case f.kernel == "biweight":
			f.w = append(f.w, mul(rest, rest))
		default:
			c := sub(num(1), mul(a, mul(a, a)))
			f.w = append(f.w, mul(c, mul(c, c)))
		}
	}
	return f
}

// exactWidth is the distance from t to its q-th nearest observation. Of q the value
// in double precision is meant, that of the distances the exact one.
func exactWidth(x []float64, t, fraction float64) *big.Float {
	d := make([]*big.Float, len(x))
	for i, v := range x {
		d[i] = num(0).Abs(sub(num(v), num(t)))
	}
	slices.SortFunc(d, func(a, b *big.Float) int { return a.Cmp(b) })
	q := min(fraction*float64(len(x)), float64(len(x)))
	k := int(q)
	h := d[k-1]
	if k < len(d) {
		h = add(h, mul(num(q-float64(k)), sub(d[k], h)))
	}
	return h
}

// row returns the weights with which the fit takes y, observation without left out
// (−1 for none), or nil if the normal equations are singular, or so graded by their
// weights that the bits do not reach.
func (f *exactFit) row(without int) []*big.Float {
	p := f.degree
	if !f.regular(without) {
		return nil
	}
	m := make([][]*big.Float, p+1) // moments, and e₀ as a further column
	for i := range m {
		m[i] = make([]*big.Float, p+2)
		for j := range m[i] {
			m[i][j] = num(0)
		}
	}
	m[0][p+1] = num(1)
	for k, w := range f.w {
		if k == without {
			continue
		}
		pow := w
		for s := 0; s <= 2*p; s++ {
			for i := max(0, s-p); i <= min(p, s); i++ {
				m[i][s-i] = add(m[i][s-i], pow)
			}
			pow = mul(pow, f.u[k])
		}
	}
	for c := range p + 1 {
		if m[c][c].Sign() == 0 {
			return nil
		}
		for r := range p + 1 {
			if r == c {
				continue
			}
			q := quo(m[r][c], m[c][c])
			for j := c; j <= p+1; j++ {
				m[r][j] = sub(m[r][j], mul(q, m[c][j]))
			}
		}
	}
	row := make([]*big.Float, len(f.w))
	for k, w := range f.w {
		v := num(0)
		for i := p; i >= 0; i-- {
			v = add(mul(v, f.u[k]), quo(m[i][p+1], m[i][i]))
		}
		row[k] = mul(v, w)
		if k == without {
			row[k] = num(0)
		}
	}
	return row
}

// regular says whether degree + 1 distinct x have weights within a quarter of the bits.
func (f *exactFit) regular(without int) bool {
	best := -big.MaxExp
	for k, w := range f.w {
		if k != without && w.Sign() != 0 {
			best = max(best, w.MantExp(nil))
		}
	}
	seen, last := 0, -1
	for k, w := range f.w {
		if k == without || w.Sign() == 0 || w.MantExp(nil) < best-exactBits/4 {
			continue
		}
		if last < 0 || f.u[k].Cmp(f.u[last]) != 0 {
			seen++
		}
		last = k
	}
	return seen > f.degree
}

func float(v *big.Float) float64 { f, _ := v.Float64(); return f }

// crampedDesigns are those on which shortcuts lose digits, by name.
func crampedDesigns() map[string][]float64 {
	d := map[string][]float64{
		"near ties": {0, 0.1, 0.1 + 1e-9, 0.2, 0.35, 0.35 + 1e-9, 0.35 + 2e-9, 0.5, 0.62, 0.8, 0.8 + 1e-9, 0.95, 1},
		"triples":   {0, 1e-9, 2e-9, 0.3, 0.3 + 1e-9, 0.3 + 3e-9, 0.6, 0.6 + 1e-9, 0.6 + 2e-9, 1, 1 + 1e-9, 1 + 2e-9},
		"ties":      {0, 0, 0, 0.2, 0.2, 0.4, 0.4, 0.4, 0.4, 0.7, 0.8, 0.8, 1, 1},
		"gap":       {0, 0.01, 0.02, 0.03, 0.04, 0.05, 0.95, 0.96, 0.97, 0.98, 0.99, 1},
		"three":     {0, 0.4, 1},
		"two":       {0, 1},
	}
	var ends []float64
	for i := range 8 {
		ends = append(ends, math.Pow(10, -float64(i)), 1-math.Pow(10, -float64(i))/3, 0.5)
	}
	slices.Sort(ends)
	d["crowded"] = ends
	for name, f := range map[string]func(float64) float64{
		"offset": func(v float64) float64 { return 1e4 + v },
		"tiny":   func(v float64) float64 { return 1e-6 * v },
		"huge":   func(v float64) float64 { return -1e8 * (1 - v) },
	} {
		var x []float64
		for _, v := range d["near ties"] {
			x = append(x, f(v))
		}
		slices.Sort(x)
		d[name] = x
	}
	return d
}

func TestLocalOnHostileDesigns(t *testing.T) {
	for design, x := range crampedDesigns() {
		n := float64(len(x))
		for name, s := range allLocal() {
			t.Run(design+"/"+name, func(t *testing.T) {
				dfs := []float64{n / 3, n / 2}
				if exactSlow {
					dfs = append(dfs, 1, 2, 2.5, 3, 3.5, 2*n/3, n-1, n)
				}
				rungs := s.On(x, nil).AtDF(dfs)
				for i := range rungs {
					if rungs[i].Status == OK {
						compareExact(t, s, x, &rungs[i])
					}
				}
			})
		}
	}
}

// compareExact holds a rung, its fit and its curve against the exact reference, each
// relative to what rounding of y alone would do to it.
func compareExact(t *testing.T, s Smoother, x []float64, r *Rung) {
	t.Helper()
	const tol = 1e-9
	if math.Abs(r.TrS-r.DF) > 1e-8*r.DF {
		t.Errorf("df %g: tr S = %.12g", r.DF, r.TrS)
	}
	y := wiggle(x, 5)
	var f Fit
	r.Fit(y, &f)
	for i, v := range x {
		fit := newExactFit(s, x, r.Tuning, v)
		row := fit.row(-1)
		if row == nil {
			continue // the limit of such weights is taken, see weighAll
		}
		var norm, value, size float64
		for j, w := range row {
			norm += float(w) * float(w)
			value += float(w) * y[j]
			size += math.Abs(float(w) * y[j])
		}
		lev, rem := float(row[i]), float(sub(num(1), row[i]))
		if math.Abs(r.Leverage[i]-lev) > tol || math.Abs(r.RowNorm2[i]-norm) > tol*max(1, norm) {
			t.Errorf("df %g at x_%d: leverage %.12g, row norm %.12g, want %.12g, %.12g", r.DF, i, r.Leverage[i], r.RowNorm2[i], lev, norm)
		}
		if math.Abs(r.Remainder[i]-rem) > tol*rem && rem > 1e-40 {
			t.Errorf("df %g at x_%d: 1 − leverage = %.12g, want %.12g", r.DF, i, r.Remainder[i], rem)
		}
		if math.Abs(f.Fitted[i]-value) > tol*size {
			t.Errorf("df %g at x_%d: fitted %.12g, want %.12g", r.DF, i, f.Fitted[i], value)
		}
	}
	at := targets(x, 9)
	if !exactSlow {
		at = at[20:32]
	}
	lo, span := x[0], x[len(x)-1]-x[0]
	at = append(append([]float64{lo - 50*span}, at...), lo+1e4*span)
	got := make([]float64, len(at))
	f.Curve.At(got, at)
	for i, v := range at {
		row := newExactFit(s, x, r.Tuning, v).row(-1)
		if row == nil {
			continue // beyond the reach of the window: TestLocalContinuesBeyondData
		}
		var value float64
		w := make([]float64, len(row))
		for j, l := range row {
			w[j] = float(l)
			value += w[j] * y[j]
		}
		if size := floats.Norm(w, 1) * floats.Norm(y, math.Inf(1)); math.Abs(got[i]-value) > tol*size {
			t.Errorf("df %g: at %g the curve is %.12g, want %.12g", r.DF, v, got[i], value)
		}
	}
}
