package sim

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/mathext"
	"gonum.org/v1/gonum/stat/distuv"
)

// UniformDesign is uniform on the domain.
type UniformDesign struct{}

// Check finds nothing wrong.
func (*UniformDesign) Check() error { return nil }

func (*UniformDesign) draw(x []float64, lo, hi float64, s *Stream) {
	s.ascending(x)
	for i, u := range x {
		x[i] = lo + (hi-lo)*u
	}
}

func (*UniformDesign) mean(g func(dst, x []float64), lo, hi float64) float64 {
	return integrate(g, lo, hi) / (hi - lo)
}

func (*UniformDesign) cdf(x, lo, hi float64) float64 { return clip01((x - lo) / (hi - lo)) }
func (*UniformDesign) describe() string              { return "uniform" }

// EvenDesign places the training x evenly, the same in every replicate. Its
// held-out x are uniform.
type EvenDesign struct{ UniformDesign }

func (*EvenDesign) describe() string { return "even" }

func (*EvenDesign) fixed(n int, lo, hi float64) ([]float64, error) {
	x := make([]float64, n)
	for i := range x {
		x[i] = lo + (float64(i)+0.5)*(hi-lo)/float64(n)
	}
	return x, nil
}

// BetaDesign is beta(a, b) stretched over the domain.
type BetaDesign struct {
	A float64 `option:"a" required:"true" min:"0.05" max:"1000" doc:"first shape; below 1 crowds the lower end"`
	B float64 `option:"b" required:"true" min:"0.05" max:"1000" doc:"second shape; below 1 crowds the upper end"`
}

// Check finds nothing that the bounds of the options leave.
func (*BetaDesign) Check() error { return nil }

func (d *BetaDesign) draw(x []float64, lo, hi float64, s *Stream) {
	law := distuv.Beta{Alpha: d.A, Beta: d.B, Src: s}
	for i := range x {
		x[i] = lo + (hi-lo)*law.Rand()
	}
	slices.Sort(x)
}

func (d *BetaDesign) mean(g func(dst, x []float64), lo, hi float64) float64 {
	left := betaHalf(d.A, d.B, func(dst, v []float64) {
		for i, u := range v {
			v[i] = lo + (hi-lo)*u
		}
		g(dst, v)
	})
	right := betaHalf(d.B, d.A, func(dst, v []float64) {
		for i, u := range v {
			v[i] = hi - (hi-lo)*u
		}
		g(dst, v)
	})
	return (left + right) * math.Exp(-mathext.Lbeta(d.A, d.B))
}

// betaHalf is ∫ g(v) v^(a−1) (1−v)^(b−1) dv over [0, ½]; g may overwrite its v.
// Where a < 1 the density has a pole at 0, which t = v^a takes away.
func betaHalf(a, b float64, g func(dst, v []float64)) float64 {
	pole := a < 1
	to := 0.5
	if pole {
		to = math.Pow(to, a)
	}
	v, weight := make([]float64, nodes), make([]float64, nodes)
	return integrate(func(dst, t []float64) {
		for i := range t {
			if pole {
				v[i] = math.Pow(t[i], 1/a)
				weight[i] = math.Pow(1-v[i], b-1) / a
			} else {
				v[i] = t[i]
				weight[i] = math.Pow(v[i], a-1) * math.Pow(1-v[i], b-1)
			}
		}
		g(dst, v[:len(t)])
		for i := range dst {
			dst[i] *= weight[i]
		}
	}, 0, to)
}

func (d *BetaDesign) cdf(x, lo, hi float64) float64 {
	return mathext.RegIncBeta(d.A, d.B, clip01((x-lo)/(hi-lo)))
}

func (d *BetaDesign) describe() string { return fmt.Sprintf("beta %v %v", d.A, d.B) }

// NormalDesign is a normal law kept to the domain.
type NormalDesign struct {
	Mean float64 `option:"mean" required:"true" doc:"mean before it is kept to the domain" unit:"x"`
	SD   float64 `option:"sd" required:"true" above:"0" doc:"standard deviation before it is kept to the domain" unit:"x"`
}

// Check finds nothing that the bounds of the options leave.
func (*NormalDesign) Check() error { return nil }

// checkOn refuses a law that all but misses the domain.
func (d *NormalDesign) checkOn(lo, hi float64) error {
	if a, b := d.tails(lo, hi); !(b-a > 1e-6) {
		return &OptionError{"mean", fmt.Sprint(d.Mean), fmt.Sprintf("a normal law that puts more than a millionth of itself on the domain [%g, %g]", lo, hi)}
	}
	return nil
}

// tails returns the probabilities below lo and below hi before truncation.
func (d *NormalDesign) tails(lo, hi float64) (a, b float64) {
	z := func(x float64) float64 { return math.Erfc(-(x-d.Mean)/d.SD/math.Sqrt2) / 2 }
	return z(lo), z(hi)
}

func (d *NormalDesign) draw(x []float64, lo, hi float64, s *Stream) {
	a, b := d.tails(lo, hi)
	s.ascending(x)
	for i, u := range x {
		x[i] = min(max(d.Mean+d.SD*mathext.NormalQuantile(a+(b-a)*u), lo), hi)
	}
}

func (d *NormalDesign) mean(g func(dst, x []float64), lo, hi float64) float64 {
	a, b := d.tails(lo, hi)
	from, to := max(lo, d.Mean-40*d.SD), min(hi, d.Mean+40*d.SD) // no mass beyond
	return integrate(func(dst, x []float64) {
		g(dst, x)
		for i, v := range x {
			z := (v - d.Mean) / d.SD
			dst[i] *= math.Exp(-z * z / 2)
		}
	}, from, to) / (d.SD * math.Sqrt(2*math.Pi) * (b - a))
}

func (d *NormalDesign) cdf(x, lo, hi float64) float64 {
	a, b := d.tails(lo, hi)
	_, p := d.tails(lo, x)
	return clip01((p - a) / (b - a))
}

func (d *NormalDesign) describe() string { return fmt.Sprintf("normal %v %v", d.Mean, d.SD) }

// GapDesign is uniform on the parts of the domain left and right of a gap.
type GapDesign struct {
	From float64  `option:"from" required:"true" doc:"where the gap begins" unit:"x"`
	To   float64  `option:"to" required:"true" doc:"where the gap ends" unit:"x"`
	Left *float64 `option:"left" above:"0" below:"1" doc:"share of x to the left of the gap; by default as its length"`
}

// Check refuses a gap without length.
func (d *GapDesign) Check() error {
	if !(d.From < d.To) {
		return &OptionError{"to", fmt.Sprint(d.To), fmt.Sprintf("a number above from = %g", d.From)}
	}
	return nil
}

// checkOn refuses a gap that is not inside the domain.
func (d *GapDesign) checkOn(lo, hi float64) error {
	if !(lo < d.From && d.To < hi) {
		return &OptionError{"from", fmt.Sprint(d.From), fmt.Sprintf("a gap inside the domain [%g, %g]", lo, hi)}
	}
	return nil
}

// left is the probability of the part left of the gap.
func (d *GapDesign) left(lo, hi float64) float64 {
	if d.Left != nil {
		return *d.Left
	}
	return (d.From - lo) / (d.From - lo + hi - d.To)
}

func (d *GapDesign) draw(x []float64, lo, hi float64, s *Stream) {
	p := d.left(lo, hi)
	s.ascending(x)
	for i, u := range x {
		if u < p {
			x[i] = lo + (d.From-lo)*u/p
		} else {
			x[i] = d.To + (hi-d.To)*(u-p)/(1-p)
		}
	}
}

func (d *GapDesign) mean(g func(dst, x []float64), lo, hi float64) float64 {
	p := d.left(lo, hi)
	return p*integrate(g, lo, d.From)/(d.From-lo) + (1-p)*integrate(g, d.To, hi)/(hi-d.To)
}

func (d *GapDesign) cdf(x, lo, hi float64) float64 {
	p := d.left(lo, hi)
	return p*clip01((x-lo)/(d.From-lo)) + (1-p)*clip01((x-d.To)/(hi-d.To))
}

func (d *GapDesign) describe() string {
	if d.Left != nil {
		return fmt.Sprintf("gap %v %v left %v", d.From, d.To, *d.Left)
	}
	return fmt.Sprintf("gap %v %v", d.From, d.To)
}

func clip01(v float64) float64 { return min(max(v, 0), 1) }
