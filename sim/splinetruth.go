package sim

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/interp"

	"bendtest/sim/expr"
)

// NewSplineTruth returns the natural cubic spline through the points (x_i, y_i), x
// strictly ascending, on [lo, hi] within their range.
func NewSplineTruth(x, y []float64, lo, hi float64) (*Truth, error) {
	if len(x) != len(y) {
		return nil, fmt.Errorf("%d x but %d y; want as many of each", len(x), len(y))
	}
	if len(x) < 3 {
		return nil, fmt.Errorf("%d points; want at least 3", len(x))
	}
	for i := range x {
		if math.IsNaN(y[i]) || math.IsInf(y[i], 0) || math.IsInf(x[i], 0) {
			return nil, fmt.Errorf("point %d is (%g, %g); want finite numbers", i+1, x[i], y[i])
		}
		if i > 0 && !(x[i-1] < x[i]) {
			return nil, fmt.Errorf("x not ascending at entry %d (%g after %g)", i+1, x[i], x[i-1])
		}
	}
	if !(x[0] <= lo && hi <= x[len(x)-1]) {
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
	return t.checked()
}
