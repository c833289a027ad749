package smoothers

import (
	"math"
	"testing"
)

// A rung that is too large to keep its rows works them out again: S as the fits have it.
func TestMatrixOfALargeLocalRung(t *testing.T) {
	x, _ := noisyWave(400)
	x[50] = x[51] // a tie
	for name, s := range map[string]Smoother{"kernel": NewKernel(), "local": NewLocal()} {
		r := &s.On(x, nil).AtDF([]float64{5})[0]
		if r.solver.(*localRung).rows.end != nil {
			t.Fatalf("%s keeps its rows; the design is too small for this test", name)
		}
		n := len(x)
		dst, y := make([]float64, n*n), make([]float64, n)
		var f Fit
		r.Matrix(dst, y, &f)
		for _, j := range []int{0, 50, 51, 120, n - 1} {
			y[j] = 1
			r.Fit(y, &f)
			y[j] = 0
			for i, v := range f.Fitted {
				if !(math.Abs(dst[i*n+j]-v) <= 1e-12) {
					t.Fatalf("%s: S is %.14g at (%d, %d), the fit %.14g", name, dst[i*n+j], i, j, v)
				}
			}
		}
	}
}
