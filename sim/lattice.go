package sim

import (
	"fmt"
	"math"
)

// A lattice is the multiples of a resolution, kept to [lo, hi].
type lattice struct{ step, lo, hi float64 }

// mostAtoms bounds the number of values that a rounded x can take.
const mostAtoms = 1_000_000

// check refuses a lattice of too many or too few values.
func (l lattice) check() error {
	if steps := (l.hi - l.lo) / l.step; !(steps < mostAtoms && steps > 1) {
		return &OptionError{"resolution", fmt.Sprint(l.step),
			fmt.Sprintf("0, or between %g and %g for the domain [%g, %g]", (l.hi-l.lo)/mostAtoms, l.hi-l.lo, l.lo, l.hi)}
	}
	return nil
}

// at is the k-th multiple.
func (l lattice) at(k float64) float64 { return min(max(k*l.step, l.lo), l.hi) }

// round rounds ascending x to the nearest multiples.
func (l lattice) round(x []float64) {
	for i, v := range x {
		x[i] = l.at(math.Round(v / l.step))
	}
}

// ends returns the multiples to which lo and hi are rounded.
func (l lattice) ends() (first, last float64) {
	return math.Round(l.lo / l.step), math.Round(l.hi / l.step)
}

// A continuousLaw has a distribution function.
type continuousLaw interface {
	xLaw
	cdf(x float64) float64 // P(X ≤ x)
}

// A roundedLaw is a continuous law rounded to a lattice.
type roundedLaw struct {
	law continuousLaw
	lattice
}

func (r *roundedLaw) draw(x []float64, s *Stream) {
	r.law.draw(x, s)
	r.round(x)
}

func (r *roundedLaw) atoms() []float64 {
	var x []float64
	first, last := r.ends()
	for k := first; k <= last; k++ {
		x = append(x, r.at(k))
	}
	return x
}

// mean is exact: each value has the probability that the law gives to what is
// rounded to it.
func (r *roundedLaw) mean(g integrand, within float64) (float64, error) {
	x := r.atoms()
	v := make([]float64, len(x))
	g(v, x)
	first, last := r.ends()
	sum, below := 0.0, 0.0
	for i := range x {
		k, up := first+float64(i), 1.0
		if k < last {
			up = r.law.cdf((k + 0.5) * r.step)
		}
		sum += (up - below) * v[i]
		below = up
	}
	return sum, nil
}
