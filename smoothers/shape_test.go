package smoothers

import (
	"math"
	"testing"
)

func TestKernelConstants(t *testing.T) {
	// R(K) = ∫K² and μ₂ = ∫u²K of the kernels scaled to ∫K = 1 (Wand & Jones 1995).
	for k, want := range [][2]float64{
		gaussian:     {1 / (2 * math.Sqrt(math.Pi)), 1},
		epanechnikov: {3.0 / 5, 1.0 / 5},
		biweight:     {5.0 / 7, 1.0 / 7},
		tricube:      {175.0 / 247, 35.0 / 243},
	} {
		k := shape(k)
		const n = 40000 // midpoints: the error is of order 1/n² at the kinks, below 1e−8
		reach := 1.0
		if k == gaussian {
			reach = 10
		}
		var mass, square, spread float64
		for i := range n {
			u := (float64(i) + 0.5) / n * reach
			w := []float64{-u * u / 2}
			if k == gaussian {
				expAll(w)
			} else {
				k.weigh(w, []float64{1 - u})
			}
			mass += w[0]
			square += w[0] * w[0]
			spread += u * u * w[0]
		}
		step := 2 * reach / n
		r, mu := square*step/(mass*step*mass*step), spread/mass
		if math.Abs(r-want[0]) > 1e-8 || math.Abs(mu-want[1]) > 1e-8 {
			t.Errorf("%s: R(K) = %.10g, μ₂ = %.10g, want %.10g, %.10g", shapeWords[k], r, mu, want[0], want[1])
		}
	}
}

func TestKernelSlopeIsDerivativeByWidth(t *testing.T) {
	for k := range shapeWords {
		for _, u := range []float64{-0.9, 0.1, 0.5} {
			const e = 1e-6
			at := func(logWidth float64) float64 {
				return denseKernel(shapeWords[k], u*math.Exp(-logWidth))
			}
			want := (at(e) - at(-e)) / (2 * e)
			if got := shape(k).widen(u, at(0)); math.Abs(got-want) > 1e-8 {
				t.Errorf("%s: −uK′(u) at %g is %g, want %g", shapeWords[k], u, got, want)
			}
		}
	}
}
