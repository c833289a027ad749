package sim

// UniformDesign is uniform on the domain.
type UniformDesign struct{}

// Check finds nothing wrong.
func (*UniformDesign) Check() error { return nil }

func (*UniformDesign) on(lo, hi float64) (xLaw, error) { return &uniformLaw{lo: lo, hi: hi}, nil }

func (*UniformDesign) describe() string { return "uniform" }

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

// continuous is what laws of continuous x have in common.
type continuous struct{}

func (continuous) atoms() []float64 { return nil }

// uniformLaw is uniform on [lo, hi].
type uniformLaw struct {
	continuous
	lo, hi float64
}

func (l *uniformLaw) draw(x []float64, s *Stream) { s.ascending(x, l.lo, l.hi) }

func (l *uniformLaw) mean(g integrand, within float64) (float64, error) {
	sum, err := integrate(g, l.lo, l.hi, within)
	return sum / (l.hi - l.lo), err
}

func (l *uniformLaw) cdf(x float64) float64 { return share(x, l.lo, l.hi) }

// share is the part of [lo, hi] that lies below x.
func share(x, lo, hi float64) float64 { return min(max((x-lo)/(hi-lo), 0), 1) }
