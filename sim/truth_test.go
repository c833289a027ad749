package sim

import (
	"math"
	"testing"
)

// Three points have a natural cubic spline known in closed form: through (0, 0),
// (1, 1), (2, 0) it is 1.5u − 0.5u³ on [0, 1].
func TestSplineTruth(t *testing.T) {
	truth, err := NewSplineTruth([]float64{0, 1, 2}, []float64{0, 1, 0}, 0, 2)
	if err != nil {
		t.Fatal(err)
	}
	x := []float64{0, 0.25, 0.5, 1, 1.5, 2}
	got := make([]float64, len(x))
	truth.Eval(got, x, nil)
	for i, v := range x {
		u := min(v, 2-v)
		if want := 1.5*u - 0.5*u*u*u; math.Abs(got[i]-want) > 1e-15 {
			t.Errorf("at %g: %v, want %v", v, got[i], want)
		}
	}
	for name, bad := range map[string]func() error{
		"lengths":    func() error { _, err := NewSplineTruth([]float64{0, 1}, []float64{0}, 0, 1); return err },
		"two points": func() error { _, err := NewSplineTruth([]float64{0, 1}, []float64{0, 1}, 0, 1); return err },
		"order":      func() error { _, err := NewSplineTruth([]float64{0, 2, 1}, []float64{0, 1, 2}, 0, 1); return err },
		"infinite": func() error {
			_, err := NewSplineTruth([]float64{0, 1, 2}, []float64{0, math.Inf(1), 2}, 0, 2)
			return err
		},
		"domain": func() error { _, err := NewSplineTruth([]float64{0, 1, 2}, []float64{0, 1, 2}, 0, 3); return err },
	} {
		if bad() == nil {
			t.Errorf("%s: accepted", name)
		}
	}
}
