package scoring

import (
	"math"
	"testing"
)

// close reports |got − want| ≤ tol·max(1, |want|).
func near(got, want, tol float64) bool {
	return math.Abs(got-want) <= tol*max(1, math.Abs(want))
}

// The values are worked by hand from the formulas at n = 50, RSS = 2, t = 7.5.
func TestCriteriaByHand(t *testing.T) {
	const n, rss, df = 50, 2.0, 7.5
	for _, c := range []struct {
		name      string
		got, want float64
	}{
		{"gcv", GCV(n, rss, df, 1), 0.04 / (0.85 * 0.85)},
		{"gcv, gamma 1.4", GCV(n, rss, df, 1.4), 0.04 / (0.79 * 0.79)},
		{"cp", CP(n, rss, df, 0.05, 1), 0.04 + 2*0.05*7.5/50},
		{"cp, gamma 2", CP(n, rss, df, 0.05, 2), 0.04 + 4*0.05*7.5/50},
		{"aic", AIC(n, rss, df), math.Log(0.04) + 0.3},
		{"bic", BIC(n, rss, df), math.Log(0.04) + 7.5*math.Log(50)/50},
		{"aicc", AICc(n, rss, df), math.Log(0.04) + 1 + 17/40.5},
		{"reml", REML(n, 2.5, -3), 48*math.Log(2.5) + 3},
		{"ml", ML(n, 2.5, -3), 50*math.Log(2.5) + 3},
	} {
		if !near(c.got, c.want, 1e-14) {
			t.Errorf("%s = %v, want %v", c.name, c.got, c.want)
		}
	}
}

// 1 + 2(t+1)/(n−t−2) = (n+t)/(n−t−2): the two printed forms of the criterion
// (Hurvich, Simonoff & Tsai 1998).
func TestAICcHasBothPublishedForms(t *testing.T) {
	for _, n := range []int{10, 30, 1000} {
		for df := 1.0; df < float64(n)-2.5; df += 0.7 {
			other := math.Log(3/float64(n)) + (float64(n)+df)/(float64(n)-df-2)
			if got := AICc(n, 3, df); !near(got, other, 1e-13) {
				t.Errorf("AICc(%d, 3, %g) = %v, want %v", n, df, got, other)
			}
		}
	}
}

func TestCriteriaAreInfiniteWhereNothingIsLeft(t *testing.T) {
	for _, c := range []struct {
		name string
		got  float64
	}{
		{"gcv at t = n", GCV(20, 0, 20, 1)},
		{"gcv at γt = n", GCV(21, 1, 15, 1.4)},
		{"gcv beyond", GCV(20, 1, 19, 1.4)},
		{"aicc at t = n − 2", AICc(20, 1, 18)},
		{"aicc beyond", AICc(20, 1, 19.5)},
		{"loocv of a point that fits itself", LOOCV([]float64{0, 1}, []float64{0, 0.5})},
	} {
		if !math.IsInf(c.got, 1) {
			t.Errorf("%s = %v, want +Inf", c.name, c.got)
		}
	}
}

// A running mean of three over five points, left-outs worked by hand.
func TestLOOCVByHand(t *testing.T) {
	residual := []float64{0.5, -1, 2}
	remainder := []float64{0.5, 0.25, 0.8}
	if got, want := LOOCV(residual, remainder), (1+16+6.25)/3; !near(got, want, 1e-15) {
		t.Errorf("LOOCV = %v, want %v", got, want)
	}
}

// On x = (i − ½)/100 with f = sin 2πx and noise variance 0.09 the means of the two
// estimators are 0.0909766697678 and 0.0900013243697 (exact theory: the estimators
// are quadratic forms, so their mean is the noise variance plus their value at f).
func TestDifferenceVariancesHaveTheirExactMeans(t *testing.T) {
	x, f := make([]float64, 100), make([]float64, 100)
	for i := range x {
		x[i] = (float64(i) + 0.5) / 100
		f[i] = math.Sin(2 * math.Pi * x[i])
	}
	rice, _ := RiceVariance(f)
	diff, _ := DifferenceVariance(x, f)
	if got, want := 0.09+rice, 0.0909766697678; !near(got, want, 1e-12) {
		t.Errorf("mean of Rice's estimator = %v, want %v", got, want)
	}
	if got, want := 0.09+diff, 0.0900013243697; !near(got, want, 1e-12) {
		t.Errorf("mean of the difference estimator = %v, want %v", got, want)
	}
}

// The difference estimator must vanish on any straight line, however uneven or
// tied the x and however large the offset.
func TestDifferenceVarianceIgnoresStraightLines(t *testing.T) {
	x := []float64{0, 0, 0, 0.1, 0.1 + 1e-9, 0.7, 0.7, 3}
	y := make([]float64, len(x))
	for i := range x {
		y[i] = 1e6 - 4*x[i]
	}
	got, ok := DifferenceVariance(x, y)
	if !ok || got > 1e-18 {
		t.Errorf("DifferenceVariance of a line = %v, %v; want 0 to rounding", got, ok)
	}
	y[3]++
	if got, _ := DifferenceVariance(x, y); got < 1e-3 {
		t.Errorf("DifferenceVariance misses a point off the line: %v", got)
	}
}

func TestDifferenceVariancesNeedEnoughPoints(t *testing.T) {
	if _, ok := RiceVariance([]float64{1}); ok {
		t.Error("RiceVariance of one point is ok")
	}
	if _, ok := DifferenceVariance([]float64{1, 2}, []float64{1, 2}); ok {
		t.Error("DifferenceVariance of two points is ok")
	}
}
