package smoothers

import (
	"fmt"
	"math"
)

// SmoothingSpline minimises Σ (y_i − g(x_i))² + λ ∫ (g^(order))² over all g: the
// natural cubic spline with all distinct x as knots for order 2, a broken line for
// order 1 (Green & Silverman 1994, Nonparametric Regression and Generalized Linear
// Models, ch. 2). Its tuning is λ, in units of x to the power 2·order − 1.
type SmoothingSpline struct {
	Order  int    `option:"order" min:"1" max:"2" doc:"derivative whose square is penalised: 2 for curvature, 1 for slope"`
	Beyond string `option:"beyond" oneof:"extend hold" doc:"beyond the data: go on as the spline does (a line; level for order 1), or hold the value at the end"`
}

// NewSmoothingSpline returns the family at its defaults.
func NewSmoothingSpline() *SmoothingSpline { return &SmoothingSpline{Order: 2, Beyond: "extend"} }

// Check refuses other orders than 1 and 2, and other words for beyond.
func (s *SmoothingSpline) Check() error {
	if s.Order != 1 && s.Order != 2 {
		return &OptionError{"order", fmt.Sprint(s.Order), "1 or 2"}
	}
	return checkBeyond(s.Beyond)
}

// checkBeyond refuses other words than extend and hold.
func checkBeyond(word string) error {
	if word != "extend" && word != "hold" {
		return &OptionError{"beyond", fmt.Sprintf("%q", word), "one of extend, hold"}
	}
	return nil
}

// On lays the smoother out on x.
func (s *SmoothingSpline) On(x []float64, mem *Arena) Ladder {
	l := &splineLadder{design: gather(x, mem), mem: mem, order: s.Order, hold: s.Beyond == "hold"}
	m := len(l.design.z)
	l.span = l.design.z[m-1] - l.design.z[0]
	if m > 1 {
		l.gap = mem.floats(m - 1)
		for i := range l.gap {
			l.gap[i] = (l.design.z[i+1] - l.design.z[i]) / l.span
		}
	}
	if s.Order == 1 {
		l.filter = &slopeFilter{design: &l.design, gap: l.gap, ahead: mem.floats(2 * m)}
	} else {
		l.filter = &curveFilter{design: &l.design, gap: l.gap, ahead: mem.floats(8 * m)}
	}
	l.value, l.change, l.rest = mem.floats(m), mem.floats(m), mem.floats(m)
	return l
}

// A splineFilter works the posterior of g at the knots, given a signal of λ⁻¹ = q in
// units of the range of x, for unit noise. Values are per distinct x.
type splineFilter interface {
	// spread writes the posterior variances V_ii, their derivatives by log λ, and
	// 1 − count·V_ii. Then S_ii = V_ii and (SSᵀ)_ii = V_ii + dV_ii/dlog λ for each
	// observation, since V = (W + λK)⁻¹ has dV/dlog λ = −V + VWV.
	spread(q float64, value, change, rest []float64)
	// logDet returns log det⁺(I − S), and whether the filter defines it.
	logDet(q float64) (float64, bool)
	// gains returns what fitting at q takes of x, in memory from mem.
	gains(q float64, mem *Arena) splineGains
}

// splineGains turn readings into a spline, their x being done with.
type splineGains interface {
	// smooth writes g and its derivative (0 for order 1) at the knots, the latter
	// by x ÷ range. r holds the sums of the readings at each knot; work has room
	// for 2m values.
	smooth(r, g, slope, work []float64)
}

// A splineLadder is a smoothing spline on a design.
type splineLadder struct {
	design tied
	mem    *Arena
	order  int
	hold   bool
	span   float64   // range of x
	gap    []float64 // distances of neighbouring knots ÷ span, length m − 1
	filter splineFilter

	value, change, rest []float64 // scratch of the filter, length m
}

// Bounds on log λ in units of the range. Beyond them nothing changes in double
// precision: below, the spline interpolates; above, it is the polynomial.
const (
	leastLogLambda = -200
	mostLogLambda  = 200
)

// AtDF solves λ for each df. The polynomial of `order` coefficients is the rung of
// df = order, with λ = +Inf; interpolation is the rung of as many df as there are
// distinct x.
func (l *splineLadder) AtDF(dfs []float64) []Rung {
	rungs := make([]Rung, len(dfs))
	m, least := float64(len(l.design.z)), float64(l.order)
	finder := newDFFinder(least, m, leastLogLambda, mostLogLambda, l.trace, l.mem)
	for i, df := range dfs {
		switch {
		case !(df >= least && df <= m) || m < 2:
			rungs[i] = Rung{DF: df, Status: DFUnattainable}
		case df == least:
			rungs[i] = l.rung(df, math.Inf(1))
		case df == m:
			rungs[i] = l.rung(df, leastLogLambda)
		default:
			theta, found := finder.find(df, l.guess(df))
			if !found {
				rungs[i] = Rung{DF: df, Status: DFUnattainable}
				continue
			}
			rungs[i] = l.rung(df, theta)
		}
	}
	return rungs
}

// AtTuning takes values of λ in the units of x; +Inf is the polynomial.
func (l *splineLadder) AtTuning(tunings []float64) []Rung {
	rungs := make([]Rung, len(tunings))
	for i, lambda := range tunings {
		if !(lambda >= 0) || len(l.design.z) < 2 {
			rungs[i] = Rung{Tuning: max(lambda, 0), Status: DFUnattainable}
			continue
		}
		theta := max(math.Log(lambda)-l.unit(), leastLogLambda)
		rungs[i] = l.rung(0, theta)
		rungs[i].DF, rungs[i].Tuning = rungs[i].TrS, lambda
	}
	return rungs
}

// unit is the log of the unit of λ: the range of x to the power 2·order − 1.
func (l *splineLadder) unit() float64 { return float64(2*l.order-1) * math.Log(l.span) }

// guess is log λ from the trace on an even design in the limit of many points,
// where the eigenvalues of I + λK are 1 + (λ/n)(πj)^(2·order) (Speckman 1985, Ann.
// Stat. 13:970): Σ 1/(1 + (cj)^2p) → (π/2p)/(c sin(π/2p)).
func (l *splineLadder) guess(df float64) float64 {
	p := float64(l.order)
	c := 1 / (2 * p * math.Sin(math.Pi/(2*p)) * max(df-p+0.5, 0.2))
	return math.Log(float64(len(l.design.x))) + 2*p*math.Log(c)
}

// trace returns tr S and its derivative by log λ.
func (l *splineLadder) trace(theta float64) (t, slope float64) {
	l.filter.spread(math.Exp(-theta), l.value, l.change, l.rest)
	for i, count := range l.design.count {
		t += count * l.value[i]
		slope += count * l.change[i]
	}
	return t, slope
}

// rung makes the rung at log λ = theta.
func (l *splineLadder) rung(df, theta float64) Rung {
	n := len(l.design.x)
	t, slope := l.trace(theta)
	if math.IsNaN(t + slope) {
		return Rung{DF: df, Status: NotFinite}
	}
	r := Rung{
		DF: df, Tuning: math.Exp(theta + l.unit()), TrS: t, TrSTS: t + slope,
		Leverage: l.mem.floats(n), RowNorm2: l.mem.floats(n), Remainder: l.mem.floats(n),
	}
	if theta == leastLogLambda {
		r.Tuning = 0
	}
	r.DFResidual = float64(n) - 2*r.TrS + r.TrSTS
	for i, count := range l.design.count {
		l.rest[i] += (count - 1) * l.value[i] // 1 − S_ii of one observation among ties
		l.change[i] += l.value[i]
	}
	l.design.spread(r.Leverage, l.value)
	l.design.spread(r.RowNorm2, l.change)
	l.design.spread(r.Remainder, l.rest)
	q := math.Exp(-theta)
	r.LogDet, r.HasLogDet = l.filter.logDet(q)
	r.solver = &splineSolver{ladder: l, gains: l.filter.gains(q, l.mem)}
	return r
}
