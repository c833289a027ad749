package smoothers

import (
	"fmt"
	"math"
)

// SmoothingSpline minimises Σ (y_i − g(x_i))² + λ ∫ (g^(order))² over all g: the
// natural cubic spline with all distinct x as knots for order 2, a broken line for
// order 1 (Green & Silverman 1994, Nonparametric Regression and Generalized Linear
// Models, ch. 2). Its tuning is λ, in units of x to the power 2·order − 1.
type SmoothingSpline struct {
	Order  int    `option:"order" min:"1" max:"2" doc:"derivative whose square is penalised: 2 for curvature, 1 for slope"`
	Beyond string `option:"beyond" oneof:"extend hold" doc:"beyond the data: go on as the spline does (a line; level for order 1), or hold the value at the end"`
}

// NewSmoothingSpline returns the family at its defaults.
func NewSmoothingSpline() *SmoothingSpline { return &SmoothingSpline{Order: 2, Beyond: "extend"} }

// Check refuses other orders than 1 and 2, and other words for beyond.
func (s *SmoothingSpline) Check() error {
	if s.Order != 1 && s.Order != 2 {
		return &OptionError{"order", fmt.Sprint(s.Order), "1 or 2"}
	}
	return checkBeyond(s.Beyond)
}

// checkBeyond refuses other words than extend and hold.
func checkBeyond(word string) error {
	if word != "extend" && word != "hold" {
		return &OptionError{"beyond", fmt.Sprintf("%q", word), "one of extend, hold"}
	}
	return nil
}

// On lays the smoother out on x.
func (s *SmoothingSpline) On(x []float64, mem *Arena) Ladder {
	l := &splineLadder{design: gather(x, mem), mem: mem, order: s.Order, hold: s.Beyond == "hold"}
	m := len(l.design.z)
	l.span = 1
	if m > 1 {
		l.span = l.design.z[m-1] - l.design.z[0]
		l.gap = mem.floats(m - 1)
		for i := range l.gap {
			l.gap[i] = (l.design.z[i+1] - l.design.z[i]) / l.span
		}
	}
	l.logUnit = float64(2*s.Order-1) * math.Log(l.span)
	if s.Order == 1 {
		l.filter = &slopeFilter{design: &l.design, gap: l.gap}
	} else {
		l.filter = &curveFilter{design: &l.design, gap: l.gap}
	}
	l.scratch = mem.floats(l.filter.room())
	l.value, l.change, l.rest = mem.floats(m), mem.floats(m), mem.floats(m)
	return l
}

// A splineFilter works the posterior of g at the knots, given a signal of λ⁻¹ = q in
// units of the range of x, for unit noise. Values are per distinct x.
type splineFilter interface {
	// room is the size of scratch, and of what gains writes.
	room() int
	// spread writes the posterior variances V_ii, their derivatives by log λ, and
	// 1 − count·V_ii. Then S_ii = V_ii and (SSᵀ)_ii = V_ii + dV_ii/dlog λ for each
	// observation, since V = (W + λK)⁻¹ has dV/dlog λ = −V + VWV.
	spread(q float64, value, change, rest, scratch []float64)
	// gains writes what fitting at q takes of x, and returns log det⁺(I − S), or
	// 0 where the filter has none.
	gains(q float64, gains []float64) (logDet float64)
	// determinantRates returns the third and the fourth derivative of log det⁺(I − S)
	// by log λ.
	determinantRates(q float64) (third, fourth float64)
	// smooth writes g and its derivative (0 for order 1) at the knots, the latter
	// by x ÷ range, from the sums of the readings at each knot. work has length 2m.
	smooth(gains, sums, value, slope, work []float64)
}
