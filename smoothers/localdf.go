package smoothers

import "math"

// A traceGrid holds tr S and its derivative by the log of the width at widths of
// falling size, as far as they have been asked for. The widths depend on the design
// alone, so that the rung for one df does not depend on what other df were asked for.
//
// tr S falls as the width grows, for every degree and design: K(d/h) grows with h,
// so the matrix M = Σ K(d/h) p pᵀ of the local problem, p the powers of x − t, grows
// in the order of positive definite matrices, its inverse falls, and S_ii = K(0) e₀ᵀM⁻¹e₀
// with it. So there is one width per df, if any.
type traceGrid struct {
	width, trace, slope []float64
	known               []float64 // 1 where the others are filled in
}

const (
	stepsPerOctave = 4
	// widestOctaves is the first bandwidth of the grid, in octaves of the data range:
	// tr S exceeds degree + 1 by no more than rounding and 1e−10 there.
	widestOctaves = 17
)

// layGrid makes room for the grid, from the widest width to the narrowest.
func (l *localLadder) layGrid() {
	octaves := 0.0
	if narrow := l.narrowest(); narrow > 0 {
		octaves = max(0, math.Log2(l.widest()/narrow))
	}
	n := int(octaves*stepsPerOctave) + 2
	g := &l.grid
	g.width, g.trace = l.mem.floats(n), l.mem.floats(n)
	g.slope, g.known = l.mem.floats(n), l.mem.floats(n)
	for i := range n - 1 {
		g.width[i] = l.widest() * math.Exp2(-float64(i)/stepsPerOctave)
	}
	g.width[n-1] = l.narrowest()
}

// node returns tr S at node i of the grid.
func (l *localLadder) node(i int) float64 {
	g := &l.grid
	if g.known[i] == 0 {
		g.trace[i], g.slope[i] = l.trace(g.width[i])
		g.known[i] = 1
	}
	return g.trace[i]
}

// widest returns the tuning at which the grid begins.
func (l *localLadder) widest() float64 {
	if l.neighbours {
		return 1
	}
	return l.extent() * (1 << widestOctaves)
}

// narrowest returns the tuning at which the grid ends: just above the floor, or
// where a gaussian no longer reaches from one x to the next.
func (l *localLadder) narrowest() float64 {
	const above = 1 + 1e-9
	if l.neighbours {
		return min(l.floor*above/float64(len(l.x)), 1)
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
	wide := l.wide(tuning)
	s := l.sumsOn(tuning, nil)
	for i, t := range l.z {
		var lev, d float64
		switch {
		case wide && s.at(t, true):
			lev, d = s.leverage(l.degree)
		case wide:
			lev, d = l.fit.leverageAt(&s.gaze, t)
		default:
			s.gaze.at(t)
			if l.fit.quick(&s.gaze, t, nil, true) {
				lev, d = l.fit.leverage(l.degree)
			} else {
				lev, d = l.fit.leverageAt(&s.gaze, t)
			}
		}
		tr += l.count[i] * lev
		slope += l.count[i] * d * s.gaze.growth(tuning)
	}
	return tr, slope
}

// leverageAt returns S_ii at an x = t and its derivative by log h. With κ the weights
// of the fit free of w, S_ii = κ(t) and its derivative is −Σ_g (∂a_g/∂log h) κ_g².
func (f *localFit) leverageAt(g *gaze, t float64) (lev, slope float64) {
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

// tune finds the tuning with tr S = df, or says why there is none.
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
	case l.extent() == 0: // tr S is 1 whatever the bandwidth: no df to solve for
		return 0, DFUnattainable, noteEqual
	case math.IsInf(l.floor, 1) || l.neighbours && l.floor >= float64(len(l.x)):
		return 0, EmptyWindow, noteNarrow
	}
	g := &l.grid
	if g.width == nil {
		l.layGrid()
	}
	last := len(g.width) - 1
	i := l.bracket(df)
	switch {
	case i == 0 && math.Abs(l.node(0)-df) <= dfTolerance*df:
		return g.width[0], OK, ""
	case i == 0:
		return 0, DFUnattainable, noteTooFew
	case i <= last:
		return l.root(df, i), OK, ""
	case math.Abs(l.node(last)-df) <= dfTolerance*df:
		return g.width[last], OK, ""
	case l.shape.compact():
		return 0, EmptyWindow, noteNarrow
	}
	return 0, DFUnattainable, noteTooBig
}

// bracket returns the first node of the grid with tr S ≥ df, or the number of nodes. It
// starts where tr S is about range/h, or 2/fraction, and strides away from there.
func (l *localLadder) bracket(df float64) int {
	n := len(l.grid.width)
	start := stepsPerOctave * math.Log2(df/2)
	if !l.neighbours {
		start = stepsPerOctave * (math.Log2(df) + widestOctaves)
	}
	lo, hi := -1, n // tr S < df at lo, ≥ df at hi
	for i, stride := max(0, min(int(start), n-1)), 1; lo+1 < hi; stride *= 2 {
		if l.node(i) >= df {
			hi = i
			i -= stride
		} else {
			lo = i
			i += stride
		}
		if i <= lo || i >= hi {
			i = (lo + hi) / 2
		}
	}
	return hi
}
