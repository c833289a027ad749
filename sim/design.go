package sim

import (
	"fmt"
	"math"
	"slices"
)

// A DesignLaw is how the x of a sample arise on a domain [lo, hi].
type DesignLaw interface {
	// Check returns an *OptionError for the first option that makes no sense.
	Check() error

	// draw fills x with independent draws, ascending.
	draw(x []float64, lo, hi float64, s *Stream)
	// mean returns E g(X); g is vectorised.
	mean(g func(dst, x []float64), lo, hi float64) float64
	// cdf returns P(X ≤ x).
	cdf(x, lo, hi float64) float64
	// describe is the law's part of a cell's content.
	describe() string
}

// A fixedLaw is a law that can give a training design without drawing.
type fixedLaw interface {
	// fixed returns the n training x on [lo, hi], ascending, or nil if they are
	// to be drawn after all.
	fixed(n int, lo, hi float64) ([]float64, error)
}

// A DesignKind is one kind of design law.
type DesignKind struct {
	Name string
	Doc  string
	New  func() DesignLaw // a pointer to the options struct, at its defaults
}

// Designs returns all design laws, in the order in which they are listed to people.
func Designs() []DesignKind {
	return []DesignKind{
		{"beta", "beta(a, b) stretched over the domain", func() DesignLaw { return &BetaDesign{A: 1, B: 1} }},
		{"even", "x_i = lo + (i − ½)(hi − lo)/n, the same in every replicate; held-out x uniform", func() DesignLaw { return &EvenDesign{} }},
		{"from-file", "drawn from a file of x values", func() DesignLaw { return &FileDesign{Resample: true} }},
		{"gap", "uniform on the domain outside an interval without any x", func() DesignLaw { return &GapDesign{} }},
		{"normal", "normal, kept to the domain", func() DesignLaw { return &NormalDesign{} }},
		{"uniform", "uniform on the domain", func() DesignLaw { return &UniformDesign{} }},
	}
}

// A Design is a law with the options that all laws share.
type Design struct {
	Law        DesignLaw
	Redraw     bool    `option:"redraw" doc:"draw x anew in each replicate; false keeps the first draw"`
	Resolution float64 `option:"resolution" min:"0" doc:"round x to multiples of this, which makes ties; 0 does not round"`
}

// describe is the design's part of a cell's content.
func (d *Design) describe() string {
	return fmt.Sprintf("%s redraw %v resolution %v", d.Law.describe(), d.Redraw, d.Resolution)
}

// round rounds ascending x to multiples of the resolution, kept to [lo, hi].
func (d *Design) round(x []float64, lo, hi float64) {
	if d.Resolution == 0 {
		return
	}
	for i, v := range x {
		x[i] = d.rounded(v, lo, hi)
	}
}

// rounded is the multiple of the resolution nearest to v, kept to [lo, hi].
func (d *Design) rounded(v, lo, hi float64) float64 {
	return min(max(math.Round(v/d.Resolution)*d.Resolution, lo), hi)
}

// maxLattice bounds the number of values that a rounded x can take.
const maxLattice = 1_000_000

// mean returns E g(X) for x as they come out, rounding included.
func (d *Design) mean(g func(dst, x []float64), lo, hi float64) float64 {
	file, listed := d.Law.(*FileDesign)
	switch {
	case listed:
		x := slices.Clone(file.Values)
		d.round(x, lo, hi)
		return average(g, x)
	case d.Resolution == 0:
		return d.Law.mean(g, lo, hi)
	}
	first, last := math.Round(lo/d.Resolution), math.Round(hi/d.Resolution)
	var x, p []float64
	below := 0.0
	for k := first; k <= last; k++ {
		up := 1.0
		if k < last {
			up = d.Law.cdf((k+0.5)*d.Resolution, lo, hi)
		}
		x, p = append(x, min(max(k*d.Resolution, lo), hi)), append(p, up-below)
		below = up
	}
	v := make([]float64, len(x))
	g(v, x)
	sum := 0.0
	for i, q := range p {
		sum += q * v[i]
	}
	return sum
}

// check refuses a design that makes no sense on a domain.
func (d *Design) check(lo, hi float64) error {
	if err := d.Law.Check(); err != nil {
		return err
	}
	if on, ok := d.Law.(interface{ checkOn(lo, hi float64) error }); ok {
		if err := on.checkOn(lo, hi); err != nil {
			return err
		}
	}
	if r := d.Resolution; r < 0 || math.IsNaN(r) || r > 0 && !((hi-lo)/r < maxLattice && (hi-lo)/r > 1) {
		return &OptionError{"resolution", fmt.Sprint(r), fmt.Sprintf("0, or between %g and %g for the domain [%g, %g]", (hi-lo)/maxLattice, hi-lo, lo, hi)}
	}
	return nil
}

// average returns the mean of g over x.
func average(g func(dst, x []float64), x []float64) float64 {
	v := make([]float64, len(x))
	g(v, x)
	sum := 0.0
	for _, y := range v {
		sum += y / float64(len(v))
	}
	return sum
}

// An OptionError reports an option that makes no sense.
type OptionError struct {
	Option string // the option's name in the study file
	Found  string
	Want   string
}

func (e *OptionError) Error() string {
	return fmt.Sprintf("%s = %s; want %s", e.Option, e.Found, e.Want)
}
