package smoothers

import (
	"math"
	"testing"
)

// shrinking is the trace of a smoother with eigenvalues 1, 1 and 1/(1 + λj⁴).
func shrinking(theta float64) (t, slope float64) {
	t = 2
	for j := 1.0; j <= 28; j++ {
		u := 1 / (1 + math.Exp(theta)*j*j*j*j)
		t += u
		slope -= u * (1 - u)
	}
	return t, slope
}

func TestDFIsFoundInAHandfulOfLookups(t *testing.T) {
	for _, c := range []struct {
		name  string
		trace func(theta float64) (t, slope float64)
		most  int // lookups for one df, from a guess 3 off
	}{
		{"with derivatives", shrinking, 9},
		{"without", func(theta float64) (float64, float64) { v, _ := shrinking(theta); return v, math.NaN() }, 20},
	} {
		for _, df := range []float64{2 + 1e-7, 2.001, 3, 7.5, 15, 29.9, 30 - 1e-7} {
			calls, last := 0, 0.0
			f := newDFFinder(2, 30, -200, 200, func(theta float64) (float64, float64) {
				calls++
				last = theta
				return c.trace(theta)
			}, nil)
			want, _ := f.find(df, 0)
			calls = 0
			clear(f.nodes)
			theta, found := f.find(df, want+3)
			if !found || theta != want || theta != last || calls > c.most {
				t.Errorf("%s, df %g: θ %.17g and %.17g, last looked up %.17g, found %v, %d lookups", c.name, df, theta, want, last, found, calls)
			}
			if tr, _ := shrinking(theta); math.Abs(tr-df) > dfTolerance*df {
				t.Errorf("%s: trace %.12g for df %g", c.name, tr, df)
			}
		}
	}
}

func TestDFOutOfReachIsNotFound(t *testing.T) {
	// A trace that goes from 20 to 4 within the bounds, and with a step from 12 to 8.
	stepped := func(theta float64) (float64, float64) {
		v := 12 - 8*math.Tanh(theta)
		if v < 12 {
			v = max(4, v-4)
		}
		return v, math.NaN()
	}
	for _, df := range []float64{3, 21, 10} {
		f := newDFFinder(2, 30, -50, 50, stepped, nil)
		if theta, found := f.find(df, 1); found {
			t.Errorf("df %g is found at θ = %g", df, theta)
		}
	}
}
