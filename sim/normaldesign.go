package sim

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/mathext"
)

// NormalDesign is a normal law kept to the domain.
type NormalDesign struct {
	Mean float64 `option:"mean" required:"true" doc:"mean before it is kept to the domain" unit:"x"`
	SD   float64 `option:"sd" required:"true" above:"0" doc:"standard deviation before it is kept to the domain" unit:"x"`
}

// Check finds nothing that the bounds of the options leave.
func (*NormalDesign) Check() error { return nil }

func (d *NormalDesign) on(lo, hi float64) (xLaw, error) {
	l := &normalLaw{centre: d.Mean, sd: d.SD, side: 1, lo: lo, hi: hi}
	if lo > d.Mean {
		l.side = -1
	}
	l.from, l.to = l.tail(lo), l.tail(hi)
	if !(math.Abs(l.to-l.from) > 1e-6) {
		return nil, &OptionError{"mean", fmt.Sprint(d.Mean), fmt.Sprintf("a normal law that puts more than a millionth of itself on the domain [%g, %g]", lo, hi)}
	}
	return l, nil
}

func (d *NormalDesign) describe() string { return fmt.Sprintf("normal %v %v", d.Mean, d.SD) }

// normalLaw is a normal law on [lo, hi]. Probabilities are counted from below, or
// from above where the domain lies in the upper tail, so that they lose no digits.
type normalLaw struct {
	continuous
	centre, sd float64 // mean and standard deviation before truncation
	lo, hi     float64
	side       float64 // 1 counting from below, −1 from above
	from, to   float64 // tails at lo and hi
}

// tail is the probability on the counted side of x, before truncation.
func (l *normalLaw) tail(x float64) float64 {
	return math.Erfc(-l.side*(x-l.centre)/l.sd/math.Sqrt2) / 2
}

func (l *normalLaw) draw(x []float64, s *Stream) {
	s.ascending(x, 0, 1)
	for i, u := range x {
		z := l.side * mathext.NormalQuantile(l.from+(l.to-l.from)*u)
		x[i] = min(max(l.centre+l.sd*z, l.lo), l.hi)
	}
}

func (l *normalLaw) mean(g integrand, within float64) (float64, error) {
	from, to := max(l.lo, l.centre-40*l.sd), min(l.hi, l.centre+40*l.sd) // no mass beyond
	sum, err := integrate(func(dst, x []float64) {
		g(dst, x)
		for i, v := range x {
			z := (v - l.centre) / l.sd
			dst[i] *= math.Exp(-z * z / 2)
		}
	}, from, to, within)
	return sum / (l.sd * math.Sqrt(2*math.Pi) * math.Abs(l.to-l.from)), err
}

func (l *normalLaw) cdf(x float64) float64 {
	return min(max((l.tail(x)-l.from)/(l.to-l.from), 0), 1)
}
