package sim

import (
	"fmt"
	"math"
	"strings"

	"gonum.org/v1/gonum/interp"

	"bendtest/sim/expr"
)

// A Truth is a true mean curve on an interval. It is immutable and may be used by
// many goroutines.
type Truth struct {
	Lo, Hi  float64 // the domain
	eval    func(dst, x []float64, s *expr.Scratch)
	content string
}

// NewTruth returns the truth given by an expression on [lo, hi]. It refuses an
// empty domain and a curve that is not finite somewhere on a fine grid.
func NewTruth(f *expr.Expression, lo, hi float64) (*Truth, error) {
	t := &Truth{Lo: lo, Hi: hi, eval: f.Eval, content: "f " + f.String()}
	return t, t.check()
}

// NewSplineTruth returns the natural cubic spline through the points (x_i, y_i), x
// strictly ascending, on [lo, hi] within their range.
func NewSplineTruth(x, y []float64, lo, hi float64) (*Truth, error) {
	if len(x) != len(y) {
		return nil, fmt.Errorf("%d x but %d y; want as many of each", len(x), len(y))
	}
	if len(x) < 3 {
		return nil, fmt.Errorf("%d points; want at least 3", len(x))
	}
	for i := range x[1:] {
		if !(x[i] < x[i+1]) {
			return nil, fmt.Errorf("x not ascending at entry %d (%g after %g)", i+2, x[i+1], x[i])
		}
	}
	if lo < x[0] || hi > x[len(x)-1] {
		return nil, fmt.Errorf("domain [%g, %g] reaches beyond the points; want it within [%g, %g]", lo, hi, x[0], x[len(x)-1])
	}
	var spline interp.NaturalCubic
	if err := spline.Fit(x, y); err != nil {
		return nil, fmt.Errorf("no natural cubic spline through the points: %w", err)
	}
	t := &Truth{Lo: lo, Hi: hi, content: fmt.Sprintf("knots %v %v", x, y)}
	t.eval = func(dst, at []float64, _ *expr.Scratch) {
		for i, v := range at {
			dst[i] = spline.Predict(v)
		}
	}
	return t, t.check()
}

// Eval writes the curve at x into dst, of x's length.
func (t *Truth) Eval(dst, x []float64, s *expr.Scratch) { t.eval(dst, x, s) }

// probes is the number of grid points at which a curve is checked to be finite.
const probes = 4097

// check refuses an empty domain and a curve that is not finite on it.
func (t *Truth) check() error {
	if !(t.Lo < t.Hi) || math.IsInf(t.Hi-t.Lo, 0) {
		return fmt.Errorf("domain [%g, %g] is empty; want two ascending finite numbers", t.Lo, t.Hi)
	}
	return finiteOn(t.Lo, t.Hi, t.eval, "the curve")
}

// finiteOn refuses a function that is not finite somewhere on a grid over [lo, hi].
func finiteOn(lo, hi float64, f func(dst, x []float64, s *expr.Scratch), what string) error {
	x, y := make([]float64, probes), make([]float64, probes)
	for i := range x {
		x[i] = lo + (hi-lo)*float64(i)/(probes-1)
	}
	f(y, x, new(expr.Scratch))
	for i, v := range y {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return fmt.Errorf("%s is %s at x = %g; want it finite on all of [%g, %g]", what, strings.ToLower(fmt.Sprint(v)), x[i], lo, hi)
		}
	}
	return nil
}

// describe is the truth's part of a cell's content.
func (t *Truth) describe() string { return fmt.Sprintf("%s on %v %v", t.content, t.Lo, t.Hi) }
