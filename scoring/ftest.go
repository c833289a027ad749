package scoring

import (
	"math"

	"gonum.org/v1/gonum/mathext"

	"bendtest/smoothers"
)

// A spread is what a test takes of a rung: with Q = (I−S)ᵀ(I−S), delta1 = tr Q, the
// residual degrees of freedom, and delta2 = tr Q².
type spread struct {
	delta1, delta2 float64
	known          bool // whether delta2 is
}

// free is the degrees of freedom δ1²/δ2 of a residual variance RSS/δ1, or δ1 where δ2 is
// not known.
func (s spread) free() float64 {
	if s.known && s.delta2 > 0 {
		return s.delta1 * s.delta1 / s.delta2
	}
	return s.delta1
}

// A comparison is what the F test of one fit N within a more flexible one A takes of the
// design: nu1 = tr(Q_N − Q_A), nu2 = tr (Q_N − Q_A)².
type comparison struct {
	nu1, nu2 float64
	known    bool
}

// compare works out a comparison from both spreads and cross = tr Q_N Q_A. Where A is no
// more flexible than N there is nothing to test.
func compare(n, a spread, cross, observations float64) comparison {
	c := comparison{nu1: n.delta1 - a.delta1, nu2: n.delta2 - 2*cross + a.delta2}
	least := 1e-9 * observations // below, all is rounding
	c.known = n.known && a.known && c.nu1 > least && c.nu2 > least && a.delta1 > least && a.delta2 > least
	return c
}

// pValue is the probability of an F as large as that of the residual sums of squares rssN
// and rssA when N is enough:
//
//	F = ((RSS_N − RSS_A)/ν1) / (RSS_A/δ1)  on (ν1²/ν2, δ1²/δ2) degrees of freedom
//
// (Cleveland & Devlin 1988, JASA 83:596). For projections of which one contains the
// other, ν1 = ν2 and δ1 = δ2, and the law is exact under normal errors of one variance.
func (c comparison) pValue(rssN, rssA float64, a spread) float64 {
	gain := rssN - rssA
	switch {
	case !(gain > 0):
		return 1
	case rssA <= 0:
		return 0
	}
	return fTail(gain/c.nu1*a.delta1/rssA, c.nu1*c.nu1/c.nu2, a.free())
}

// fTail is the probability that an F variate on (u, v) degrees of freedom exceeds f.
func fTail(f, u, v float64) float64 {
	x := v / (v + u*f)
	if math.IsInf(f, 1) || !(x > 0) {
		return 0
	}
	return mathext.RegIncBeta(v/2, u/2, x)
}

// ridgeCross is tr Q_N Q_A of two rungs of one ridge ladder, N the stiffer. Their
// eigenvalues γ of one eigenvector satisfy γ_N γ_A = (γ_N − ργ_A)/(1 − ρ), ρ = λ_A/λ_N, so
// that sums of products follow from tr S and tr SᵀS of both.
func ridgeCross(n, a *smoothers.Rung) float64 {
	rho := a.Tuning / n.Tuning
	c11 := (n.TrS - rho*a.TrS) / (1 - rho)
	c21 := (n.TrSTS - rho*c11) / (1 - rho)
	c12 := (c11 - rho*a.TrSTS) / (1 - rho)
	c22 := (n.TrSTS - 2*rho*c11 + rho*rho*a.TrSTS) / ((1 - rho) * (1 - rho))
	count := float64(len(n.Leverage))
	return count - 2*(n.TrS+a.TrS) + n.TrSTS + a.TrSTS + 4*c11 - 2*(c12+c21) + c22
}
