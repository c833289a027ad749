package smoothers

import (
	"math"
	"testing"
)

func TestExpAllIsExp(t *testing.T) {
	// math.Exp is within 1 ulp, expAll within about 1.2: 3 ulps apart at most.
	for v := 0.0; v > -699; v -= 0.00737 {
		x := []float64{v, v - 1e-9, -1e-300, 0}
		expAll(x)
		for i, v := range []float64{v, v - 1e-9, -1e-300, 0} {
			if want := math.Exp(v); math.Abs(x[i]-want) > 3*0x1p-52*want {
				t.Fatalf("exp(%g) = %.17g, want %.17g", v, x[i], want)
			}
		}
	}
	x := []float64{-701, math.Inf(-1)}
	if expAll(x); x[0] != 0 || x[1] != 0 {
		t.Errorf("far below: %v, want zeros", x)
	}
}
