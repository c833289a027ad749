package smoothers

import "math"

// An end of a bracket is tr S seen from one width: v is log width, f a transform of
// tr S − df that is nearly linear in v both where tr S is near its least and near
// its greatest value, and df its derivative by v.
type end struct{ v, f, df float64 }

// dfTight is the relative precision to which tr S is driven: well inside dfTolerance,
// so that the trace summed from leverages keeps that too.
const dfTight = 1e-10

// root solves tr S = df in the cell between grid nodes i − 1 and i, by cubic Hermite
// interpolation of the bracket's two ends, falling back to halving it.
func (l *localLadder) root(df float64, i int) float64 {
	g := &l.grid
	low, high := float64(l.degree+1), float64(len(l.z))
	if !(low < min(l.node(i-1), df)) {
		low = 0
	}
	if !(high > max(l.node(i), df)) {
		high = math.Inf(1)
	}
	view := func(width, tr, slope float64) end {
		e := end{v: math.Log(width), f: math.Log((tr - low) / (df - low)), df: slope / (tr - low)}
		if !math.IsInf(high, 1) {
			e.f -= math.Log((high - tr) / (high - df))
			e.df += slope / (high - tr)
		}
		return e
	}
	a := view(g.width[i-1], g.trace[i-1], g.slope[i-1]) // wide, f < 0
	b := view(g.width[i], g.trace[i], g.slope[i])       // narrow, f ≥ 0
	width := g.width[i]
	for try := range 80 {
		v := hermiteRoot(a, b)
		if try > 4 && try%3 == 0 || !(v > b.v && v < a.v) { // or tr S has met low or high, and f is no number
			v = (a.v + b.v) / 2
		}
		width = math.Exp(v)
		tr, slope := l.trace(width)
		if math.Abs(tr-df) <= dfTight*df || a.v-b.v < 1e-15 {
			break
		}
		if c := view(width, tr, slope); tr < df {
			a = c
		} else {
			b = c
		}
	}
	return width
}

// hermiteRoot returns the root between a and b of the cubic through both ends with
// their slopes, to the precision that the next evaluation can use.
func hermiteRoot(a, b end) float64 {
	h := b.v - a.v
	lo, hi := 0.0, 1.0 // cubic < 0 at lo, ≥ 0 at hi
	s := a.f / (a.f - b.f)
	for range 40 {
		r := 1 - s
		f := r*r*((1+2*s)*a.f+s*h*a.df) + s*s*((1+2*r)*b.f-r*h*b.df)
		d := 6*s*r*(b.f-a.f) + h*(r*(r-2*s)*a.df+s*(s-2*r)*b.df)
		if f < 0 {
			lo = s
		} else {
			hi = s
		}
		next := s - f/d
		if !(next > lo && next < hi) {
			next = (lo + hi) / 2
		}
		if math.Abs(next-s) < 1e-14 {
			s = next
			break
		}
		s = next
	}
	return a.v + s*h
}
