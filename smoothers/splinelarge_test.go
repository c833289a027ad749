package smoothers

import (
	"math"
	"math/rand/v2"
	"runtime"
	"slices"
	"testing"
	"time"
)

// noisyWave returns n random x in order and readings about sin 9x.
func noisyWave(n int) (x, y []float64) {
	rng := rand.New(rand.NewPCG(1, 6))
	x, y = make([]float64, n), make([]float64, n)
	for i := range x {
		x[i] = rng.Float64()
	}
	slices.Sort(x)
	for i := range x {
		y[i] = math.Sin(9*x[i]) + rng.NormFloat64()
	}
	return x, y
}

// A million observations: df solved and fitted in seconds on one core.
func TestSmoothingSplineOfAMillionObservations(t *testing.T) {
	if !slow {
		t.Skip("set BENDTEST_SLOW to fit a million observations")
	}
	seconds := func(n int) float64 {
		x, y := noisyWave(n)
		runtime.GC()
		start := time.Now()
		r := NewSmoothingSpline().On(x, nil).AtDF([]float64{12})[0]
		var f Fit
		r.Fit(y, &f)
		took := time.Since(start).Seconds()
		var mem runtime.MemStats
		runtime.ReadMemStats(&mem)
		worst := 0.0
		for i := range x {
			worst = max(worst, math.Abs(f.Fitted[i]-math.Sin(9*x[i])))
		}
		// The bias at the ends, where the true curve bends and the spline may not, is 0.06.
		if math.Abs(r.TrS-12) > 1e-8*12 || worst > 0.1 {
			t.Errorf("n = %d: tr S %.12g, furthest off the truth %.2g", n, r.TrS, worst)
		}
		t.Logf("n = %d: %.2f s, %.0f MB from the system in all", n, took, float64(mem.Sys)/1e6)
		if mem.Sys > 600e6 {
			t.Errorf("n = %d took %d bytes", n, mem.Sys)
		}
		return took
	}
	small := min(seconds(100_000), seconds(100_000))
	large := seconds(1_000_000)
	// How the two compare depends on what fits into the processor's cache and on who else
	// works there, so that it is told and not judged.
	t.Logf("a million take %.1f times as long as a tenth of it", large/small)
	if large > 5 {
		t.Errorf("a million take %.2f s", large)
	}
}
