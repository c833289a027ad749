package smoothers

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"testing"
)

// Minimum-GCV cubic smoothing spline of 50 points: GCV 0.0433056129, residual df
// 39.6239255, mean square residual 0.0271968858, estimated error variance 0.0343187676
// (Hutchinson 1986, Algorithm 642, ACM TOMS 12:150; data in testdata/published).
func TestSmoothingSplineReproducesAlgorithm642(t *testing.T) {
	x, y, fit := published642(t)
	ladder := NewSmoothingSpline().On(x, nil)
	var f Fit
	gcv := func(df float64) (score, square float64) {
		r := ladder.AtDF([]float64{df})
		r[0].Fit(y, &f)
		for i := range y {
			square += (y[i] - f.Fitted[i]) * (y[i] - f.Fitted[i]) / 50
		}
		free := 1 - r[0].TrS/50
		return square / (free * free), square
	}
	const df = 50 - 39.6239255
	score, square := gcv(df)
	for _, c := range []struct {
		name      string
		got, want float64
	}{{"GCV", score, 0.0433056129}, {"mean square residual", square, 0.0271968858}, {"error variance", square * 50 / 39.6239255, 0.0343187676}} {
		if math.Abs(c.got-c.want) > 1e-10 { // the last digit published
			t.Errorf("%s = %.12f, published %.10f", c.name, c.got, c.want)
		}
	}
	for i := range fit {
		if math.Abs(f.Fitted[i]-fit[i]) > 1e-7 { // df has 9 digits
			t.Errorf("fit %d = %.9f, published %.9f", i, f.Fitted[i], fit[i])
		}
	}
	// Near its minimum GCV rises by 4e-4 (df − df₀)²: its rounding of 1e-16 leaves df₀ open
	// by 1e-6 or so.
	best := lowest(6, 20, func(df float64) float64 { s, _ := gcv(df); return s })
	if math.Abs(best-df) > 1e-5 {
		t.Errorf("GCV is least at df %.8f, published %.8f", best, df)
	}
}

// lowest returns where f, which falls and then rises, is least (golden section).
func lowest(a, b float64, f func(float64) float64) float64 {
	ratio := (math.Sqrt(5) - 1) / 2
	c, d := b-ratio*(b-a), a+ratio*(b-a)
	fc, fd := f(c), f(d)
	for b-a > 1e-8 {
		if fc < fd {
			b, d, fd = d, c, fc
			c = b - ratio*(b-a)
			fc = f(c)
		} else {
			a, c, fc = c, d, fd
			d = a + ratio*(b-a)
			fd = f(d)
		}
	}
	return (a + b) / 2
}

// published642 reads the data and the fit of Algorithm 642.
func published642(t *testing.T) (x, y, fit []float64) {
	t.Helper()
	f, err := os.Open("../testdata/published/toms642.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	lines, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	for _, line := range lines[1:] {
		var v [3]float64
		for k := range v {
			if v[k], err = strconv.ParseFloat(line[k], 64); err != nil {
				t.Fatal(err)
			}
		}
		x, y, fit = append(x, v[0]), append(y, v[1]), append(fit, v[2])
	}
	return x, y, fit
}

// NIST certifies the straight line of Norris; it is the limit of smoothing splines.
func TestSmoothingSplineTendsToTheCertifiedLine(t *testing.T) {
	x, y := nist(t, "Norris")
	sortPairs(x, y)
	for _, c := range []struct{ df, tol float64 }{{2, 1e-9}, {2 + 1e-6, 1e-6}} {
		r := NewSmoothingSpline().On(x, nil).AtDF([]float64{c.df})[0]
		var f Fit
		r.Fit(y, &f)
		rss := 0.0
		for i := range y {
			rss += (y[i] - f.Fitted[i]) * (y[i] - f.Fitted[i])
		}
		if sd := math.Sqrt(rss / r.DFResidual); math.Abs(sd/0.884796396144373-1) > c.tol {
			t.Errorf("df %g: residual SD %.15g, certified 0.884796396144373", c.df, sd)
		}
	}
}
