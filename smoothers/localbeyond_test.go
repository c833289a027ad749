package smoothers

import (
	"math"
	"slices"
	"testing"
)

func TestLocalContinuesBeyondData(t *testing.T) {
	// Too far out for the window, the polynomial through the outermost means goes on,
	// and nothing jumps where it takes over.
	x := []float64{0, 0.1, 0.2, 0.2, 0.3, 0.45, 0.5}
	y := []float64{1, 3, 2, 4, 0, 1, 2}
	for _, kernel := range shapeWords[1:] {
		for degree := range 3 {
			var s Smoother = kernelOf(kernel)
			if degree > 0 {
				s = localOf(degree, "bandwidth", kernel)
			}
			r := s.On(x, nil).AtTuning([]float64{0.35})[0]
			var f Fit
			r.Fit(y, &f)
			right, left := []float64{2, 1, 0}, []float64{1, 3, 3} // means from the end inwards
			zr, zl := []float64{0.5, 0.45, 0.3}, []float64{0, 0.1, 0.2}
			at := []float64{-1e6, -3, -0.4, 0.9, 4, 1e6}
			got := make([]float64, len(at))
			f.Curve.At(got, at)
			for i, v := range at {
				z, m := zr[:degree+1], right[:degree+1]
				if v < 0 {
					z, m = zl[:degree+1], left[:degree+1]
				}
				if want := lagrange(z, m, v); math.Abs(got[i]-want) > 1e-9*max(1, math.Abs(want)) {
					t.Errorf("%s, degree %d: at %g got %.12g, want %.12g", kernel, degree, v, got[i], want)
				}
			}
			edge := 0.35 + zr[degree]
			two := make([]float64, 2)
			f.Curve.At(two, []float64{edge - 1e-9, edge + 1e-9})
			if math.Abs(two[0]-two[1]) > 1e-5 {
				t.Errorf("%s, degree %d: jumps from %g to %g where the window gets too small", kernel, degree, two[0], two[1])
			}
		}
	}
}

// lagrange evaluates the polynomial through (z, v) at t.
func lagrange(z, v []float64, t float64) float64 {
	var sum float64
	for i := range z {
		p := v[i]
		for j := range z {
			if j != i {
				p *= (t - z[j]) / (z[i] - z[j])
			}
		}
		sum += p
	}
	return sum
}

func TestLocalFarBeyondGaussian(t *testing.T) {
	// Far out, gaussian weights leave the polynomial through the degree + 1 outermost means.
	x := []float64{0, 0.3, 0.5, 0.8, 1}
	y := []float64{1, 2, 0, 4, 3}
	for degree := range 3 {
		var s Smoother = NewKernel()
		if degree > 0 {
			s = localOf(degree, "bandwidth", "gaussian")
		}
		r := s.On(x, nil).AtTuning([]float64{0.2})[0]
		var f Fit
		r.Fit(y, &f)
		got := make([]float64, 3)
		at := []float64{30, 1e3, 1e9}
		f.Curve.At(got, at)
		z, m := []float64{1, 0.8, 0.5}[:degree+1], []float64{3, 4, 0}[:degree+1]
		for i, v := range at {
			if want := lagrange(z, m, v); math.Abs(got[i]-want) > 1e-9*math.Abs(want) {
				t.Errorf("degree %d: at %g got %.12g, want %.12g", degree, v, got[i], want)
			}
		}
	}
}

func TestLocalHolds(t *testing.T) {
	x := uniformDesign(30, 2)
	y := wiggle(x, 2)
	held := []*Local{NewLocal(), localOf(2, "bandwidth", "gaussian")}
	for _, s := range held {
		s.Beyond = "hold"
		r := s.On(x, &Arena{Lasting: true}).AtDF([]float64{6})[0]
		var f Fit
		r.Fit(y, &f)
		at := []float64{x[0] - 1e3, x[0] - 1e-3, x[0], x[29], x[29] + 0.1, x[29] + 1e9}
		many := slices.Repeat(at, pieceworthy)
		slices.Sort(many)
		for _, at := range [][]float64{at, many} {
			got := make([]float64, len(at))
			f.Curve.At(got, at)
			for i, v := range at {
				want := f.Fitted[0]
				if v >= x[29] {
					want = f.Fitted[29]
				}
				if math.Abs(got[i]-want) > 1e-10 {
					t.Errorf("%+v: at %g got %.12g, want the end's %.12g", s, v, got[i], want)
				}
			}
		}
	}
}
