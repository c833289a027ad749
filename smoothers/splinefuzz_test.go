package smoothers

import (
	"encoding/binary"
	"math"
	"slices"
	"testing"
)

// crowdedDesign reads a design off bytes, six per observation: a place and a scale, so
// that ties, near ties, gaps and crowds all come up.
func crowdedDesign(data []byte) []float64 {
	var x []float64
	for ; len(data) >= 6 && len(x) < 80; data = data[6:] {
		place := float64(binary.LittleEndian.Uint32(data)) / (1 << 32)
		x = append(x, place*math.Pow(10, -float64(data[4]%14))+float64(data[5]%5))
	}
	slices.Sort(x)
	return x
}

// FuzzSplineLadders looks for a panic, a NaN, or tr S off target without a status, in the
// regression and penalised splines on any design.
func FuzzSplineLadders(f *testing.F) {
	f.Add([]byte("a few readings, some of them close to one another: 0123456789 0123456789"), uint8(3), uint8(0))
	f.Add([]byte("aaaaaabaaaaacaaaaadaaaaaeaaaaafaaaaagaaaaahaaaaaiaaaaaj"), uint8(1), uint8(7))
	f.Fuzz(func(t *testing.T, data []byte, degree, options uint8) {
		x := crowdedDesign(data)
		if len(x) == 0 {
			return
		}
		regression := NewRegressionSpline()
		if options&1 > 0 {
			regression.Knots = "equispaced"
		}
		if regression.Natural = options&2 > 0; !regression.Natural {
			regression.Degree = 1 + int(degree)%maxDegree
		}
		penalised := &PenalisedSpline{Segments: 1 + int(degree)%60, Beyond: "extend"}
		if options&4 > 0 {
			regression.Beyond, penalised.Beyond = "hold", "hold"
		}
		dfs := []float64{1, 2, 2.01, 3, 4, 5, 7.5, 12, float64(len(x)) / 2, float64(len(x)) - 0.1, float64(len(x))}
		for _, s := range []Smoother{regression, penalised} {
			for _, r := range s.On(x, nil).AtDF(dfs) {
				checkSane(t, s, &r, x)
			}
		}
	})
}

// checkSane reports what no rung may be.
func checkSane(t *testing.T, s Smoother, r *Rung, x []float64) {
	t.Helper()
	if r.Status != OK {
		if r.Note == "" || r.Leverage != nil {
			t.Errorf("%+v on %v: %v with note %q", s, x, r.Status, r.Note)
		}
		return
	}
	var f Fit
	y := make([]float64, len(x))
	for i := range y {
		y[i] = math.Cos(float64(i * i))
	}
	r.Fit(y, &f)
	at := make([]float64, len(x))
	f.Curve.At(at, x)
	sum, squares := 0.0, 0.0
	for i := range x {
		sum += r.Leverage[i]
		squares += r.RowNorm2[i]
		v := r.Leverage[i]
		if !(v > 0 && v < 1+1e-8 && r.Remainder[i] >= 0 && r.RowNorm2[i] <= v+1e-8) || math.Abs(1-v-r.Remainder[i]) > 1e-8 || math.IsNaN(f.Fitted[i]+at[i]) {
			t.Fatalf("%+v, df %g on %v: S_ii %g, 1 − S_ii %g, (SSᵀ)_ii %g, fit %g, curve %g", s, r.DF, x, v, r.Remainder[i], r.RowNorm2[i], f.Fitted[i], at[i])
		}
	}
	if math.Abs(r.TrS-r.DF) > 1e-8*r.DF || math.Abs(sum-r.TrS) > 1e-8*r.TrS || math.Abs(squares-r.TrSTS) > 1e-8*r.TrS {
		t.Fatalf("%+v on %v: df %g, tr S %g, leverages add to %g, tr SᵀS %g, rows to %g", s, x, r.DF, r.TrS, sum, r.TrSTS, squares)
	}
}
