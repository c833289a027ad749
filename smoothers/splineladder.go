package smoothers

import "math"

// A splineLadder is a smoothing spline on a design. Within, λ is in units of the range
// of x, and θ = log λ.
type splineLadder struct {
	design  tied
	mem     *Arena
	order   int
	hold    bool
	span    float64   // range of x, or 1 where that is 0
	logUnit float64   // log of the unit of λ: span to the power 2·order − 1
	gap     []float64 // distances of neighbouring knots ÷ span, length m − 1
	filter  splineFilter
	scratch []float64 // of the filter

	value, change, rest []float64 // what filter.spread wrote last, length m
	theta               float64   // where
	known               bool      // if anywhere
}

// Bounds on θ. Beyond them nothing changes in double precision: below, the spline
// interpolates, above, it is the polynomial.
const (
	leastLogLambda = -200
	mostLogLambda  = 200
)

// gainsKept bounds the gains that a rung keeps, in floats. Larger ones are worked out
// again in each fit, which then takes about twice as long.
const gainsKept = 1 << 16

// AtDF solves λ for each df. The polynomial of `order` coefficients is the rung of
// df = order, with λ = +Inf; interpolation is the rung of as many df as there are
// distinct x, with λ = 0.
func (l *splineLadder) AtDF(dfs []float64) []Rung {
	rungs, solvers := make([]Rung, len(dfs)), make([]splineSolver, len(dfs))
	least, most := float64(l.order), float64(len(l.design.z))
	finder := newDFFinder(least, most, leastLogLambda, mostLogLambda, l.trace, l.mem)
	for i, df := range dfs {
		r := &rungs[i]
		*r = Rung{DF: df, Status: DFUnattainable}
		switch {
		case l.overflows(r), !(df >= least && df <= most):
		case df == least:
			l.lay(r, &solvers[i], math.Inf(1))
		case df == most:
			l.lay(r, &solvers[i], math.Inf(-1))
		default:
			if theta, found := finder.find(df, l.guess(df)); found {
				l.lay(r, &solvers[i], theta)
			}
		}
	}
	return rungs
}

// AtTuning takes values of λ in the units of x; +Inf is the polynomial.
func (l *splineLadder) AtTuning(tunings []float64) []Rung {
	rungs, solvers := make([]Rung, len(tunings)), make([]splineSolver, len(tunings))
	for i, lambda := range tunings {
		r := &rungs[i]
		*r = Rung{Tuning: lambda, Status: DFUnattainable}
		if !l.overflows(r) && lambda >= 0 && len(l.design.z) >= l.order {
			l.lay(r, &solvers[i], math.Log(lambda)-l.logUnit)
			r.DF, r.Tuning = r.TrS, lambda
		}
	}
	return rungs
}

// overflows gives a rung its status if the range of x is no number.
func (l *splineLadder) overflows(r *Rung) bool {
	if !math.IsInf(l.span, 1) {
		return false
	}
	r.Status, r.Note = NotFinite, "the range of x overflows"
	return true
}

// guess is θ from the trace on an even design in the limit of many points, where the
// eigenvalues of I + λK are 1 + (λ/n)(πj)^(2·order) (Speckman 1985, Ann. Stat. 13:970):
// Σ 1/(1 + (cj)^2p) → (π/2p)/(c sin(π/2p)).
func (l *splineLadder) guess(df float64) float64 {
	p := float64(l.order)
	c := 1 / (2 * p * math.Sin(math.Pi/(2*p)) * max(df-p+0.5, 0.2))
	return math.Log(float64(len(l.design.x))) + 2*p*math.Log(c)
}

// trace returns tr S and its derivative by θ.
func (l *splineLadder) trace(theta float64) (t, slope float64) {
	if !l.known || theta != l.theta {
		l.spread(theta)
	}
	for i, count := range l.design.count {
		t += count * l.value[i]
		slope += count * l.change[i]
	}
	return t, slope
}

// spread fills value, change and rest. Interpolation is exact.
func (l *splineLadder) spread(theta float64) {
	l.theta, l.known = theta, true
	if theta >= leastLogLambda {
		l.filter.spread(math.Exp(-theta), l.value, l.change, l.rest, l.scratch)
		return
	}
	for i, count := range l.design.count {
		l.value[i], l.change[i], l.rest[i] = 1/count, 0, 0
	}
}

// lay fills in the rung at θ, which is −Inf for interpolation.
func (l *splineLadder) lay(r *Rung, s *splineSolver, theta float64) {
	n := len(l.design.x)
	r.Status, r.Form, r.Lines = OK, Ridge, l.order == 2
	r.TrS, r.TrSTS = l.trace(theta)
	r.TrSTS += r.TrS
	r.DFResidual = float64(n) - 2*r.TrS + r.TrSTS
	r.Tuning = math.Exp(theta + l.logUnit)
	r.Leverage, r.RowNorm2, r.Remainder = l.mem.floats(n), l.mem.floats(n), l.mem.floats(n)
	for i, count := range l.design.count {
		l.rest[i] += (count - 1) * l.value[i] // 1 − S_ii of one observation among ties
		l.change[i] += l.value[i]
	}
	l.known = false // the two are spoilt
	l.design.spread(r.Leverage, l.value)
	l.design.spread(r.RowNorm2, l.change)
	l.design.spread(r.Remainder, l.rest)

	*s = splineSolver{ladder: l, q: math.Exp(-max(theta, leastLogLambda))}
	gains := l.scratch
	if len(gains) <= gainsKept {
		gains = l.mem.floats(len(gains))
		s.gains = gains
	}
	r.LogDet = l.filter.gains(s.q, gains)
	r.HasLogDet = l.order == 2 && theta >= leastLogLambda
	if !r.HasLogDet {
		r.LogDet = 0
	}
	r.solver = s
}
