package smoothers

import (
	"fmt"
	"math"
)

// RegressionSpline is least squares on a spline with few knots. Its tuning is the
// number of interior knots: df − degree − 1 for B-splines, df − 2 for the natural
// cubic spline, whose boundary knots are the ends of the data.
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

// Check refuses a natural spline that is not cubic, and unknown words.
func (s *RegressionSpline) Check() error {
	switch {
	case s.Degree < 1 || s.Degree > maxDegree:
		return &OptionError{"degree", fmt.Sprint(s.Degree), fmt.Sprintf("1 to %d", maxDegree)}
	case s.Natural && s.Degree != 3:
		return &OptionError{"degree", fmt.Sprint(s.Degree), "3 with natural = true"}
	case s.Knots != "quantiles" && s.Knots != "equispaced":
		return &OptionError{"knots", fmt.Sprintf("%q", s.Knots), "one of quantiles, equispaced"}
	}
	return checkBeyond(s.Beyond)
}

// On lays the smoother out on x.
func (s *RegressionSpline) On(x []float64, mem *Arena) Ladder {
	l := &knotLadder{
		spline: *s, mem: mem,
		line: polyLadder{design: gather(x, mem), mem: mem, hold: s.Beyond == "hold"},
	}
	z := l.line.design.z
	l.lo, l.hi = z[0], z[len(z)-1]
	return l
}

// A knotLadder is a regression spline on a design. Points are counted from the
// design's origin.
type knotLadder struct {
	spline RegressionSpline
	mem    *Arena
	line   polyLadder // the polynomials that stand in below the smallest spline
	lo, hi float64    // ends of the basis: those of the data
}

// smallest is the df of the spline without interior knots.
func (l *knotLadder) smallest() int {
	if l.spline.Natural {
		return 2
	}
	return l.spline.Degree + 1
}

// AtDF takes whole df from 1 to the number of distinct x. Up to the smallest spline
// it is the polynomial of that many coefficients, which the note says.
func (l *knotLadder) AtDF(dfs []float64) []Rung {
	rungs := make([]Rung, len(dfs))
	for i, df := range dfs {
		switch {
		case !l.line.attainable(df):
			rungs[i] = Rung{DF: df, Status: DFUnattainable}
		case df <= float64(l.smallest()):
			rungs[i] = l.line.AtDF([]float64{df})[0]
			rungs[i].Tuning = 0
			if df < float64(l.smallest()) {
				rungs[i].Note = "polynomial: too few df for the spline"
			}
		default:
			rungs[i] = l.rung(int(df))
		}
	}
	return rungs
}

// AtTuning takes numbers of interior knots.
func (l *knotLadder) AtTuning(knots []float64) []Rung {
	dfs := make([]float64, len(knots))
	for i, k := range knots {
		dfs[i] = k + float64(l.smallest())
		if !(k >= 0) {
			dfs[i] = math.NaN()
		}
	}
	rungs := l.AtDF(dfs)
	for i := range rungs {
		if rungs[i].Status != OK {
			rungs[i].DF, rungs[i].Tuning = max(dfs[i], 0), max(knots[i], 0)
		}
	}
	return rungs
}

// rung makes the rung with interior knots.
func (l *knotLadder) rung(df int) Rung {
	interior := df - l.smallest()
	basis := bspline{degree: l.spline.Degree, knots: l.mem.floats(interior + 2*l.spline.Degree + 2)}
	d := l.spline.Degree
	for k := range d + 1 {
		basis.knots[k] = l.lo
		basis.knots[d+1+interior+k] = l.hi
	}
	l.place(basis.knots[d+1 : d+1+interior])
	r := Rung{DF: float64(df), Tuning: float64(interior)}
	if !supports(&basis, l.line.design.z) {
		r.Status = RankDeficient
		return r
	}
	s := newBandedFit(&basis, &l.line.design, l.spline.Natural, l.mem)
	s.hold = l.spline.Beyond == "hold"
	if !s.factor(l.mem) {
		r.Status = RankDeficient
		return r
	}
	n := len(l.line.design.x)
	r.TrS, r.TrSTS, r.DFResidual = r.DF, r.DF, float64(n)-r.DF
	r.Leverage, r.Remainder = l.mem.floats(n), l.mem.floats(n)
	s.leverages(r.Leverage[:len(l.line.design.z)], l.mem)
	l.line.design.spread(r.Leverage, r.Leverage[:len(l.line.design.z)])
	projectionRemainder(r.Remainder, r.Leverage)
	r.RowNorm2 = r.Leverage // S is a projection
	r.solver = s
	return r
}

// place writes the interior knots: sample quantiles at j/(K+1) with linear
// interpolation between order statistics, position p(n−1), or equal spacing.
func (l *knotLadder) place(knots []float64) {
	x := l.line.design.x
	for j := range knots {
		p := float64(j+1) / float64(len(knots)+1)
		if l.spline.Knots == "equispaced" {
			knots[j] = l.lo + p*(l.hi-l.lo)
			continue
		}
		at := p * float64(len(x)-1)
		i := int(at)
		knots[j] = x[i]
		if i+1 < len(x) {
			knots[j] += (at - float64(i)) * (x[i+1] - x[i])
		}
	}
}

// supports reports whether each basis function can be given a distinct x of its own
// within its support: the Schoenberg–Whitney condition for the spline to be
// determined (de Boor 2001, ch. XIII). The end functions are 1 at their ends.
func supports(b *bspline, z []float64) bool {
	i := 0
	for j := range b.size() {
		lo, hi := b.knots[j], b.knots[j+b.degree+1]
		for i < len(z) && !(z[i] > lo || z[i] == lo && b.knots[j+b.degree] == lo) {
			i++
		}
		last := b.knots[j+1] == hi // the last function is 1 at the upper end
		if i == len(z) || !(z[i] < hi || z[i] == hi && last) {
			return false
		}
		i++
	}
	return true
}
