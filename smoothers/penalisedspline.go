package smoothers

import (
	"fmt"
	"math"
)

// PenalisedSpline minimises Σ (y_i − g(x_i))² + λ Σ (c_k − 2c_{k+1} + c_{k+2})² over the
// cubic splines g = Σ c_k B_k on equal segments of the data range (O'Sullivan 1986,
// Stat. Sci. 1:502; Eilers & Marx 1996, Stat. Sci. 11:89). Its tuning is λ, which has
// no unit. Beyond the data the last segment's cubic goes on.
type PenalisedSpline struct {
	Segments int    `option:"segments" min:"1" max:"500" doc:"equal segments of the data range, each with one cubic; laying out a design costs their number cubed"`
	Beyond   string `option:"beyond" oneof:"extend hold" doc:"beyond the data: go on as the last piece does, or hold the value at the end"`
}

// mostSegments bounds the segments: laying out 500 takes a second.
const mostSegments = 500

// NewPenalisedSpline returns the family at its defaults.
func NewPenalisedSpline() *PenalisedSpline {
	return &PenalisedSpline{Segments: 20, Beyond: "extend"}
}

// Check implements Smoother.
func (s *PenalisedSpline) Check() error {
	if s.Segments < 1 || s.Segments > mostSegments {
		return &OptionError{"segments", fmt.Sprint(s.Segments), fmt.Sprintf("1 to %d", mostSegments)}
	}
	return oneOf("beyond", s.Beyond, "extend", "hold")
}

// On implements Smoother. It panics on options that Check refuses.
func (s *PenalisedSpline) On(x []float64, mem *Arena) Ladder {
	if err := s.Check(); err != nil {
		panic("smoothers: " + err.Error())
	}
	d := gather(x, mem)
	return s.between(d, d.z[0], d.z[len(d.z)-1], mem)
}

// A penaltyLadder is a penalised spline on a design.
type penaltyLadder struct {
	design tied
	mem    *Arena
	hold   bool
	status Status // of all rungs, where the design bears none
	note   string

	basis   splineBasis
	qr      windowQR
	rank    int // of B: df go up to it
	reinsch reinschBasis
	rows    penaltyRows
	finder  *dfFinder
}

// between lays the spline out with segments from lo to hi, counted from the design's
// origin.
func (s *PenalisedSpline) between(d tied, lo, hi float64, mem *Arena) *penaltyLadder {
	l := &penaltyLadder{design: d, mem: mem, hold: s.Beyond == "hold"}
	width := hi - lo
	switch {
	case width == 0:
		l.status, l.note = DFUnattainable, noteEqual
		return l
	case math.IsInf(width, 1) || math.IsInf(float64(s.Segments)/width, 1):
		l.status, l.note = NotFinite, noteRange
		return l
	}
	l.basis.degree = 3
	l.basis.knots = mem.floats(s.Segments + 7)
	for i := range l.basis.knots {
		l.basis.knots[i] = lo + width*(float64(i-3)/float64(s.Segments))
	}
	l.basis.knots[3+s.Segments] = hi
	l.qr = l.basis.on(&l.design, rowsKeptAsTheyAre, mem)
	rank := l.qr.rank()
	l.qr.compress()
	l.qr.upwards(mem)
	l.reinsch = newReinschBasis(&l.qr, rank, mem)
	l.rank = l.reinsch.rank()
	l.rows = newPenaltyRows(&l.qr, &l.reinsch, l.rank, mem)
	if l.rank > 2 {
		lo, hi := 2*math.Log(l.sigma(l.rank-1)), 2*math.Log(l.sigma(2))
		l.finder = newDFFinder(2, float64(l.rank), lo-farOff, hi+farOff, l.trace, mem)
	}
	return l
}

// farOff is how far log λ goes beyond the log σ_k²: there S is the line or the limit of λ
// = 0 to within rounding.
const farOff = 36

// rowsKeptAsTheyAre is the number of rows up to which a segment's leverages are worked out
// one by one from the Demmler–Reinsch basis. With more, that goes by a 4 × 4 matrix.
const rowsKeptAsTheyAre = 16

// AtDF implements Ladder.
func (l *penaltyLadder) AtDF(dfs []float64) []Rung {
	rungs := make([]Rung, len(dfs))
	solvers := make([]penaltySolver, len(dfs))
	for i, df := range dfs {
		r := &rungs[i]
		r.DF = df
		lambda := 0.0
		if lambda, r.Status, r.Note = l.tune(df); r.Status == OK {
			l.lay(r, &solvers[i], lambda)
		}
	}
	return rungs
}

// AtTuning implements Ladder. It takes values of λ; 0 is the limit, +Inf the line.
func (l *penaltyLadder) AtTuning(lambdas []float64) []Rung {
	rungs := make([]Rung, len(lambdas))
	solvers := make([]penaltySolver, len(lambdas))
	for i, lambda := range lambdas {
		r := &rungs[i]
		switch {
		case l.status != OK:
			r.Status, r.Note = l.status, l.note
		case !(lambda >= 0):
			r.Status, r.Note = DFUnattainable, noteNegative
		default:
			l.lay(r, &solvers[i], lambda)
		}
		r.Tuning, r.DF = lambda, r.TrS
	}
	return rungs
}

// The notes of rungs of a penalised spline.
const (
	noteNegative = "λ is at least 0"
	noteLine     = "df is at least 2, the straight line"
	noteSegments = "more df than segments + 3 coefficients"
	noteUnseen   = "more df than the coefficients that the x determine"
)

// tune finds λ for a df.
func (l *penaltyLadder) tune(df float64) (lambda float64, status Status, note string) {
	r := float64(l.rank)
	switch {
	case l.status != OK:
		return 0, l.status, l.note
	case !(df >= 2):
		return 0, DFUnattainable, noteLine
	case df > float64(l.reinsch.columns):
		return 0, DFUnattainable, noteSegments
	case df > float64(len(l.design.z)):
		return 0, DFUnattainable, noteDistinct
	case df > r:
		return 0, DFUnattainable, noteUnseen
	case df == 2:
		return math.Inf(1), OK, ""
	case df == r:
		return 0, OK, ""
	}
	sigma := l.reinsch.sigma[min(int(df)-2, l.rank-3)]
	theta, found := l.finder.find(df, 2*math.Log(sigma))
	if !found {
		return 0, DFUnattainable, noteUnseen
	}
	return math.Exp(theta), OK, ""
}

// trace returns tr S and its derivative by log λ = theta.
func (l *penaltyLadder) trace(theta float64) (t, slope float64) {
	lambda := math.Exp(theta)
	t = 2
	for _, s := range l.reinsch.sigma[:l.rank-2] {
		f := s * s / (s*s + lambda)
		t += f
		slope -= f * lambda / (s*s + lambda)
	}
	return t, slope
}
