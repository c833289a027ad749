package smoothers

import "math"

// A traceGrid holds tr S and its derivative by the log of the width at widths of
// falling size. The widths depend on the design alone, so the rung found for one df
// does not depend on what other df were asked for.
//
// tr S need not fall as the width grows, for degree 1 and 2 on uneven designs. The
// smoothest root is sought: in the first cell from the wide end at whose narrow
// end tr S has reached df. Cells inside which tr S turns round are split, so that
// a root between two turning points is not stepped over.
type traceGrid struct {
	width, trace, slope []float64
	next                int  // number of the next step of the plain grid
	done                bool // the narrow end is reached
}

// gridRoom is the number of nodes that need no allocation.
const gridRoom = 96

func (g *traceGrid) init(mem *Arena) {
	g.width = mem.floats(gridRoom)[:0]
	g.trace = mem.floats(gridRoom)[:0]
	g.slope = mem.floats(gridRoom)[:0]
}

// wideSteps are the first bandwidths of the grid, in octaves of the data range. At
// 2^17 ranges tr S exceeds degree + 1 by no more than rounding and 1e-10.
var wideSteps = [...]float64{17, 12, 8, 5, 3}

const (
	stepsPerOctave = 4
	splits         = 8 // parts of a cell in which tr S turns round
)

// extend adds the next node, or several where a cell is split. It reports false
// when there are no more.
func (l *localLadder) extend() bool {
	g := &l.grid
	if g.done {
		return false
	}
	w := l.step(g.next)
	g.next++
	last := len(g.width) - 1
	if !(w > l.narrowest()) {
		w, g.done = l.narrowest(), true
		if last >= 0 && !(w < g.width[last]) {
			return false
		}
	}
	tr, slope := l.trace(w)
	if last >= 0 && slope*g.slope[last] < 0 {
		ratio := math.Pow(w/g.width[last], 1.0/splits)
		v := g.width[last]
		for range splits - 1 {
			v *= ratio
			t, s := l.trace(v)
			g.push(v, t, s)
		}
	}
	g.push(w, tr, slope)
	return true
}

func (g *traceGrid) push(w, tr, slope float64) {
	g.width = append(g.width, w)
	g.trace = append(g.trace, tr)
	g.slope = append(g.slope, slope)
}

// step returns width number i of the plain grid.
func (l *localLadder) step(i int) float64 {
	if l.neighbours {
		return math.Exp2(-float64(i) / stepsPerOctave)
	}
	octaves := wideSteps[min(i, len(wideSteps)-1)]
	octaves -= float64(max(0, i-len(wideSteps)+1)) / stepsPerOctave
	return l.extent() * math.Exp2(octaves)
}

// narrowest returns the tuning at which the grid ends: just above the floor, or
// where a gaussian no longer reaches from one x to the next.
func (l *localLadder) narrowest() float64 {
	const above = 1 + 1e-9
	if l.neighbours {
		return l.floor * above / float64(len(l.x))
	}
	if l.shape.compact() {
		return l.floor * above
	}
	gap := l.extent()
	for i, z := range l.z[1:] {
		gap = min(gap, z-l.z[i])
	}
	return gap / 16
}

// trace returns tr S at a tuning and its derivative by the log of the tuning.
func (l *localLadder) trace(tuning float64) (tr, slope float64) {
	if l.wide(tuning) {
		s := l.sumsOn(tuning, nil)
		for i, t := range l.z {
			var lev, d float64
			if s.at(t, true) {
				lev, d = s.leverage()
			} else {
				lev, d = l.fit.leverage(&s.gaze, t)
			}
			tr += l.count[i] * lev
			slope += l.count[i] * d * s.gaze.growth(tuning)
		}
		return tr, slope
	}
	g := l.gaze(tuning)
	for i, t := range l.z {
		g.at(t)
		lev, d := l.fit.leverage(&g, t)
		tr += l.count[i] * lev
		slope += l.count[i] * d * g.growth(tuning)
	}
	return tr, slope
}

// leverage returns S_ii at an x = t and its derivative by log h. With κ the weights
// of the fit free of w, S_ii = κ(t) and its derivative is −Σ_g (∂a_g/∂log h) κ_g².
func (f *localFit) leverage(g *gaze, t float64) (lev, slope float64) {
	f.at(g, t, everyone)
	for i, c := range f.l.count[f.lo:f.hi] {
		k := f.kappa(i)
		slope -= c * f.l.shape.widen(f.u[i], f.w[i]) * k * k
	}
	return f.variance(), slope
}

// growth returns d log h/d log tuning.
func (g *gaze) growth(tuning float64) float64 {
	if g.k == 0 || g.k == len(g.l.x) {
		return 1
	}
	return g.spread / g.h * tuning * float64(len(g.l.x))
}

// dfTight is the relative precision to which tr S is driven: well inside dfTolerance,
// so that the trace summed from leverages keeps that too.
const dfTight = 1e-10

// tune finds the widest tuning with tr S = df, or says why there is none.
func (l *localLadder) tune(df float64) (float64, Status, string) {
	low, high := float64(l.degree+1), float64(len(l.z))
	switch {
	case math.IsNaN(df) || math.IsInf(df, 0):
		return 0, NotFinite, ""
	case high < low && l.shape.compact():
		return 0, EmptyWindow, noteFew
	case high < low:
		return 0, RankDeficient, noteFew
	case df < low*(1-dfTolerance):
		return 0, DFUnattainable, noteTooFew
	case df > high*(1+dfTolerance):
		return 0, DFUnattainable, noteTooBig
	}
	if l.extent() == 0 { // the mean, at any bandwidth, unless
		return 0, DFUnattainable, noteFew
	}
	g := &l.grid
	for i := 0; i < len(g.width) || l.extend(); i++ {
		off := g.trace[i] - df
		switch {
		case math.Abs(off) <= dfTight*df:
			return g.width[i], OK, ""
		case off < 0:
			continue
		case i > 0:
			return l.root(df, i), OK, ""
		case off <= dfTolerance*df:
			return g.width[i], OK, ""
		}
		return 0, DFUnattainable, noteTooFew
	}
	last := len(g.width) - 1
	switch {
	case last >= 0 && math.Abs(g.trace[last]-df) <= dfTolerance*df:
		return g.width[last], OK, ""
	case l.shape.compact():
		return 0, EmptyWindow, noteNarrow
	}
	return 0, DFUnattainable, noteTooBig
}

// A node is tr S seen from one width: v is log width, f a transform of tr S − df
// that is nearly linear in v both where tr S is near its least and near its
// greatest value, and df its derivative by v.
type node struct{ v, f, df float64 }

// root solves tr S = df in the cell between grid nodes i − 1 and i, by cubic Hermite
// interpolation of the bracket's two ends, falling back to halving it.
func (l *localLadder) root(df float64, i int) float64 {
	g := &l.grid
	low, high := float64(l.degree+1), float64(len(l.z))
	if !(low < min(g.trace[i-1], df)) {
		low = 0
	}
	if !(high > max(g.trace[i], df)) {
		high = math.Inf(1)
	}
	view := func(width, tr, slope float64) node {
		n := node{v: math.Log(width), f: math.Log((tr - low) / (df - low)), df: slope / (tr - low)}
		if !math.IsInf(high, 1) {
			n.f -= math.Log((high - tr) / (high - df))
			n.df += slope / (high - tr)
		}
		return n
	}
	a := view(g.width[i-1], g.trace[i-1], g.slope[i-1]) // wide, f < 0
	b := view(g.width[i], g.trace[i], g.slope[i])       // narrow, f ≥ 0
	width := g.width[i]
	for try := range 80 {
		v := hermiteRoot(a, b)
		if try%3 == 2 {
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
func hermiteRoot(a, b node) float64 {
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
