package sim

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/mathext"
	"gonum.org/v1/gonum/stat/distuv"
)

// BetaDesign is beta(a, b) stretched over the domain.
type BetaDesign struct {
	A float64 `option:"a" required:"true" min:"0.05" max:"1000" doc:"first shape; below 1 crowds the lower end"`
	B float64 `option:"b" required:"true" min:"0.05" max:"1000" doc:"second shape; below 1 crowds the upper end"`
}

// Check finds nothing that the bounds of the options leave.
func (*BetaDesign) Check() error { return nil }

func (d *BetaDesign) on(lo, hi float64) (xLaw, error) {
	return &betaLaw{a: d.A, b: d.B, lo: lo, hi: hi}, nil
}

func (d *BetaDesign) describe() string { return fmt.Sprintf("beta %v %v", d.A, d.B) }

// betaLaw is beta(a, b) on [lo, hi].
type betaLaw struct {
	continuous
	a, b, lo, hi float64
}

func (l *betaLaw) draw(x []float64, s *Stream) {
	law := distuv.Beta{Alpha: l.a, Beta: l.b, Src: s}
	for i := range x {
		x[i] = min(l.lo+(l.hi-l.lo)*law.Rand(), l.hi)
	}
	slices.Sort(x)
}

// mean divides by the total of the density as it is integrated, so that neither its
// factor's rounding nor its own matters.
func (l *betaLaw) mean(g integrand, within float64) (float64, error) {
	sum, err := l.integral(g, within)
	if err != nil {
		return 0, err
	}
	total, err := l.integral(func(dst, _ []float64) {
		for i := range dst {
			dst[i] = 1
		}
	}, within)
	return sum / total, err
}

// integral is ∫ g times the density, from each end to the middle.
func (l *betaLaw) integral(g integrand, within float64) (float64, error) {
	width := l.hi - l.lo
	low, err := betaHalf(l.a, l.b, g, func(v float64) float64 { return l.lo + width*v }, within)
	if err != nil {
		return 0, err
	}
	high, err := betaHalf(l.b, l.a, g, func(v float64) float64 { return l.hi - width*v }, within)
	return low + high, err
}

// betaHalf is ∫ g(x(v)) v^(a−1) (1−v)^(b−1) dv/B(a, b) over [0, ½]. Where a < 1 the
// density has a pole at 0, which t = v^a takes away. Logarithms keep large shapes
// within the range of numbers.
func betaHalf(a, b float64, g integrand, x func(v float64) float64, within float64) (float64, error) {
	factor := mathext.Lbeta(a, b)
	to := 0.5
	if a < 1 {
		to = math.Pow(0.5, a)
		factor += math.Log(a)
	}
	var at, weight []float64
	return integrate(func(dst, t []float64) {
		at, weight = resize(at, len(t)), resize(weight, len(t))
		for i, v := range t {
			power := 0.0
			switch {
			case a < 1:
				v = math.Pow(v, 1/a)
			case a > 1:
				power = (a - 1) * math.Log(v)
			}
			at[i], weight[i] = x(v), math.Exp(power+(b-1)*math.Log1p(-v)-factor)
		}
		g(dst, at)
		for i, w := range weight {
			dst[i] *= w
		}
	}, 0, to, within)
}

func (l *betaLaw) cdf(x float64) float64 { return mathext.RegIncBeta(l.a, l.b, share(x, l.lo, l.hi)) }
