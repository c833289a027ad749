package smoothers

import (
	"fmt"
	"math"
)

// RegressionSpline is least squares on a spline with few knots (de Boor 2001, A
// Practical Guide to Splines, ch. XIV). Its tuning is the number of interior knots:
// df − degree − 1, or df − 2 for the natural cubic spline, whose boundary knots are
// the ends of the data.
type RegressionSpline struct {
	Degree  int    `option:"degree" min:"1" max:"10" doc:"degree of the pieces; a natural spline has 3"`
	Knots   string `option:"knots" oneof:"quantiles equispaced" doc:"interior knots at sample quantiles j/(K+1), or equally spaced over the data"`
	Natural bool   `option:"natural" doc:"no curvature at the ends and a line beyond"`
	Beyond  string `option:"beyond" oneof:"extend hold" doc:"beyond the data: go on as the last piece does, or hold the value at the end"`
}

// NewRegressionSpline returns the family at its defaults.
func NewRegressionSpline() *RegressionSpline {
	return &RegressionSpline{Degree: 3, Knots: "quantiles", Beyond: "extend"}
}

// Check implements Smoother.
func (s *RegressionSpline) Check() error {
	if s.Degree < 1 || s.Degree > maxDegree {
		return &OptionError{"degree", fmt.Sprint(s.Degree), fmt.Sprintf("1 to %d", maxDegree)}
	}
	if s.Natural && s.Degree != 3 {
		return &OptionError{"degree", fmt.Sprint(s.Degree), "3 where natural = true"}
	}
	if err := oneOf("knots", s.Knots, "quantiles", "equispaced"); err != nil {
		return err
	}
	return oneOf("beyond", s.Beyond, "extend", "hold")
}

// On implements Smoother. It panics on options that Check refuses.
func (s *RegressionSpline) On(x []float64, mem *Arena) Ladder {
	if err := s.Check(); err != nil {
		panic("smoothers: " + err.Error())
	}
	l := &knotLadder{spline: *s, design: gather(x, mem), mem: mem}
	l.lo, l.hi = l.design.z[0], l.design.z[len(l.design.z)-1]
	return l
}

// A knotLadder is a regression spline on a design. Places are counted from the
// design's origin.
type knotLadder struct {
	spline RegressionSpline
	design tied
	mem    *Arena
	lo, hi float64 // ends of the basis: those of the data
	spread windowSpread
}

// The notes of rungs of a regression spline.
const (
	notePolynomial = "fewer df than the smallest spline has: a polynomial"
	noteWhole      = "df is a whole number here"
	noteFewDF      = "df is at least 1"
	noteDistinct   = "more df than distinct x"
	noteCoincide   = "knots coincide"
	noteSparse     = "too few distinct x between the knots"
	noteDigits     = "the x determine the spline to fewer than nine digits"
	noteRange      = "the range of x is too large or too small for its reciprocal"
)

// AtDF implements Ladder.
func (l *knotLadder) AtDF(dfs []float64) []Rung {
	rungs := make([]Rung, len(dfs))
	solvers := make([]knotSolver, len(dfs))
	for i, df := range dfs {
		r := &rungs[i]
		r.DF = df
		if r.Status, r.Note = l.admit(df); r.Status == OK {
			l.lay(r, &solvers[i])
		}
	}
	return rungs
}

// AtTuning implements Ladder. Where a status stands in for the rung, DF is 0.
func (l *knotLadder) AtTuning(knots []float64) []Rung {
	rungs := make([]Rung, len(knots))
	solvers := make([]knotSolver, len(knots))
	for i, k := range knots {
		r := &rungs[i]
		r.DF = k + float64(l.smallest())
		if r.Status, r.Note = l.admit(r.DF); r.Status == OK && !(k >= 0) {
			r.Status, r.Note = DFUnattainable, noteFewDF
		}
		if r.Status == OK {
			l.lay(r, &solvers[i])
		}
		r.Tuning, r.DF = k, r.TrS
	}
	return rungs
}

// smallest is the df of the spline without interior knots.
func (l *knotLadder) smallest() int {
	if l.spline.Natural {
		return 2
	}
	return l.spline.Degree + 1
}

// admit says whether there can be a rung at df.
func (l *knotLadder) admit(df float64) (Status, string) {
	width := l.hi - l.lo
	switch {
	case !(df >= 1):
		return DFUnattainable, noteFewDF
	case df > float64(len(l.design.z)):
		return DFUnattainable, noteDistinct
	case df != math.Trunc(df):
		return DFUnattainable, noteWhole
	case df > 1 && (math.IsInf(width, 1) || math.IsInf(1/width, 1)):
		return NotFinite, noteRange
	}
	return OK, ""
}

// mostCondition bounds the magnification of rounding errors by the least-squares
// problem: 9 digits of 16 are to be left.
const mostCondition = 1e6

// lay works out all of a rung that y does not touch.
func (l *knotLadder) lay(r *Rung, s *knotSolver) {
	n, m := len(l.design.x), len(l.design.z)
	df := int(r.DF)
	degree, interior := l.spline.Degree, df-l.smallest()
	natural := l.spline.Natural && interior > 0
	if l.spline.Natural && interior == 0 || interior < 0 {
		degree = df - 1
	}
	if interior < 0 {
		interior, r.Note = 0, notePolynomial
	}
	*s = knotSolver{ladder: l}
	if !l.place(&s.basis.bspline, degree, interior) {
		*r = Rung{DF: r.DF, Tuning: float64(interior), Status: RankDeficient, Note: noteCoincide}
		return
	}
	if natural {
		s.basis.ends = newNaturalEnds(&s.basis.bspline)
	}
	s.qr = s.basis.on(&l.design, min(degree+1, df), l.mem)
	if s.qr.rank() < df {
		*r = Rung{DF: r.DF, Tuning: float64(interior), Status: RankDeficient, Note: noteSparse}
		return
	}
	s.qr.compress()
	leverage, rest := l.mem.floats(n), l.mem.floats(n)
	l.spread.on(&s.qr, l.mem)
	if c := l.spread.factor(leverage[:m], rest[:m]); !(c <= mostCondition) {
		*r = Rung{DF: r.DF, Tuning: float64(interior), Status: RankDeficient, Note: noteDigits}
		return
	}
	l.design.share(leverage, rest)
	r.Tuning, r.TrS, r.TrSTS, r.DFResidual = float64(interior), r.DF, r.DF, float64(n)-r.DF
	r.Leverage, r.RowNorm2, r.Remainder = leverage, leverage, rest // S is a projection
	r.Form, r.Lines = Projection, df >= 2 && degree >= 1
	r.solver = s
}

// leastRemainder is the least 1 − leverage that is told from 0: with less, a residual
// is all rounding.
const leastRemainder = 1e-13

// share turns the leverages of the distinct x, and what they leave, into those of
// the observations, in place.
func (d *tied) share(leverage, rest []float64) {
	for i, c := range d.count {
		leverage[i] /= c
		if rest[i] = (c - 1 + rest[i]) / c; rest[i] < leastRemainder {
			rest[i] = 0
		}
	}
	m := len(d.z)
	d.spread(leverage, leverage[:m])
	d.spread(rest, rest[:m])
}

// place lays the knots, and reports whether they all differ.
func (l *knotLadder) place(b *bspline, degree, interior int) bool {
	b.degree = degree
	b.knots = l.mem.floats(interior + 2*degree + 2)
	inner := b.knots[degree+1 : degree+1+interior]
	for k := range degree + 1 {
		b.knots[k] = l.lo
		b.knots[degree+1+interior+k] = l.hi
	}
	if l.spline.Knots == "equispaced" {
		for j := range inner {
			inner[j] = l.lo + (l.hi-l.lo)*float64(j+1)/float64(interior+1)
		}
	} else {
		quantiles(inner, l.design.x)
	}
	for k := degree; k <= degree+interior; k++ {
		if !(b.knots[k] < b.knots[k+1]) && interior > 0 {
			return false
		}
	}
	return true
}

// quantiles writes the sample quantiles j/(K+1), j = 1 … K, of the ascending x: at
// position j(n−1)/(K+1) among them, counted from 0, linear between order statistics.
func quantiles(dst, x []float64) {
	for j := range dst {
		steps, parts := (j+1)*(len(x)-1), len(dst)+1
		i, part := steps/parts, steps%parts
		dst[j] = x[i]
		if part > 0 {
			dst[j] += float64(part) / float64(parts) * (x[i+1] - x[i])
		}
	}
}
