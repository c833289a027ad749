package sim

import (
	"fmt"
	"math"

	"bendtest/sim/expr"
)

// A Truth is a true mean curve on an interval. It is immutable and may be used by
// many goroutines.
type Truth struct {
	Lo, Hi    float64 // the domain
	eval      func(dst, x []float64, s *expr.Scratch)
	content   string
	integrals integrals
}

// NewTruth returns the truth given by an expression on [lo, hi]. It refuses an
// empty domain and a curve that is not finite somewhere on a fine grid.
func NewTruth(f *expr.Expression, lo, hi float64) (*Truth, error) {
	t := &Truth{Lo: lo, Hi: hi, eval: f.Eval, content: "f " + f.String()}
	return t.checked()
}

// Eval writes the curve at x into dst, of x's length.
func (t *Truth) Eval(dst, x []float64, s *expr.Scratch) { t.eval(dst, x, s) }

// checked returns the truth, but for an empty domain and a curve that is not finite
// on it.
func (t *Truth) checked() (*Truth, error) {
	if !(t.Lo < t.Hi) || math.IsInf(t.Hi-t.Lo, 0) {
		return nil, fmt.Errorf("domain [%g, %g] is empty; want two ascending finite numbers", t.Lo, t.Hi)
	}
	if err := t.finiteAt(t.probes()); err != nil {
		return nil, err
	}
	return t, nil
}

// probes are the ends of the domain and a fine grid between.
func (t *Truth) probes() []float64 {
	const n = 4097
	x := make([]float64, n)
	for i := range x {
		x[i] = t.Lo + (t.Hi-t.Lo)*float64(i)/(n-1)
	}
	x[n-1] = t.Hi
	return x
}

// finiteAt names the first of some x at which the curve is not finite.
func (t *Truth) finiteAt(x []float64) error {
	y := make([]float64, len(x))
	t.Eval(y, x, new(expr.Scratch))
	for i, v := range y {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return fmt.Errorf("the curve is %s at x = %g; want it finite on all of [%g, %g]", inWords(v), x[i], t.Lo, t.Hi)
		}
	}
	return nil
}

// inWords writes a number that is not finite.
func inWords(v float64) string {
	switch {
	case v > 0:
		return "+inf"
	case v < 0:
		return "-inf"
	}
	return "not a number"
}

// describe is the truth's part of a cell's content.
func (t *Truth) describe() string { return fmt.Sprintf("%s on %v %v", t.content, t.Lo, t.Hi) }
