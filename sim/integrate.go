package sim

import (
	"math"

	"gonum.org/v1/gonum/integrate/quad"
)

// panels is the number of equal panels that an integration starts from: enough to
// see a feature of a thousandth of the interval.
const panels = 512

// nodes is the order of the Gauss–Legendre rule on a panel.
const nodes = 10

// legendre holds the rule's points and weights on [−1, 1].
type legendre struct{ x, w []float64 }

func newLegendre() legendre {
	l := legendre{make([]float64, nodes), make([]float64, nodes)}
	quad.Legendre{}.FixedLocations(l.x, l.w, -1, 1)
	return l
}

// An integrator sums a vector function by adaptive bisection: a panel is halved
// until its rule and its halves' agree to rounding. Jumps are cornered in some
// forty halvings.
type integrator struct {
	rule  legendre
	f     func(dst, x []float64)
	x, y  []float64
	scale float64 // ∫|f| so far, by which agreement is judged
	left  int     // panels that may still be halved
}

// integrate returns ∫ f over [lo, hi], relative to ∫|f| good to about 1e-13 for
// piecewise smooth f.
func integrate(f func(dst, x []float64), lo, hi float64) float64 {
	in := &integrator{rule: newLegendre(), f: f, x: make([]float64, nodes), y: make([]float64, nodes), left: 200_000}
	var whole [panels]float64
	edge := func(k int) float64 { return lo + (hi-lo)*float64(k)/panels }
	for k := range panels {
		v, size := in.panel(edge(k), edge(k+1))
		whole[k] = v
		in.scale += size
	}
	sum := 0.0
	for k, v := range whole {
		sum += in.refine(edge(k), edge(k+1), v, 60)
	}
	return sum
}

// panel applies the rule to [a, b], for f and for |f|.
func (in *integrator) panel(a, b float64) (value, size float64) {
	mid, half := a+(b-a)/2, (b-a)/2
	for i, x := range in.rule.x {
		in.x[i] = mid + half*x
	}
	in.f(in.y, in.x)
	for i, w := range in.rule.w {
		value += half * w * in.y[i]
		size += half * w * math.Abs(in.y[i])
	}
	return value, size
}

// refine halves [a, b] until value, the rule on it, is as good as its halves.
func (in *integrator) refine(a, b, value float64, depth int) float64 {
	mid := a + (b-a)/2
	left, _ := in.panel(a, mid)
	right, _ := in.panel(mid, b)
	if math.Abs(left+right-value) <= 1e-15*in.scale || depth == 0 || in.left == 0 {
		return left + right
	}
	in.left--
	return in.refine(a, mid, left, depth-1) + in.refine(mid, b, right, depth-1)
}
