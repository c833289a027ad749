package sim

import "fmt"

// A DesignLaw is how the x of a sample arise, given by its options.
type DesignLaw interface {
	// Check returns an *OptionError for the first option that makes no sense in
	// itself or beside the others.
	Check() error

	// on returns the law on a domain; the error is an *OptionError.
	on(lo, hi float64) (xLaw, error)
	// describe is the law's part of a cell's content.
	describe() string
}

// An xLaw is a law of x on its domain. Many goroutines may use it.
type xLaw interface {
	// draw fills x with independent draws, ascending.
	draw(x []float64, s *Stream)
	// mean returns E g(X), or why it cannot be worked out; within is the precision of
	// an integration (see integrate).
	mean(g integrand, within float64) (float64, error)
	// atoms are the values that x can take, ascending, or nil where x is continuous.
	atoms() []float64
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

// describe is the content of the law of x: what training and held-out x share.
func (d *Design) describe() string {
	return fmt.Sprintf("%s resolution %v", d.Law.describe(), d.Resolution)
}

// on returns the law of x on a domain, rounding included.
func (d *Design) on(lo, hi float64) (xLaw, error) {
	for _, options := range []any{d, d.Law} {
		if err := checkBounds(options); err != nil {
			return nil, err
		}
	}
	if err := d.Law.Check(); err != nil {
		return nil, err
	}
	law, err := d.Law.on(lo, hi)
	if err != nil || d.Resolution == 0 {
		return law, err
	}
	l := lattice{d.Resolution, lo, hi}
	if err := l.check(); err != nil {
		return nil, err
	}
	switch law := law.(type) {
	case continuousLaw:
		return &roundedLaw{law, l}, nil
	case *valuesLaw:
		l.round(law.values)
	}
	return law, nil
}

// fixed returns the training x where they are the same in every replicate without
// being drawn, rounded, else nil.
func (d *Design) fixed(n int, lo, hi float64) ([]float64, error) {
	law, ok := d.Law.(fixedLaw)
	if !ok {
		return nil, nil
	}
	x, err := law.fixed(n, lo, hi)
	if err == nil && d.Resolution != 0 {
		lattice{d.Resolution, lo, hi}.round(x)
	}
	return x, err
}
