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

// Exact means on a fixed design: n = 100, x = (i − ½)/100, f = sin 2πx, noise of
// standard deviation 0.3. Values worked out in independent dense arithmetic from
//
//	E train = |b|²/n + σ²(1 − 2 tr S/n + tr SSᵀ/n),   b = (S − I) f
//	E held-out at the same x = σ² + |b|²/n + σ² tr SSᵀ/n
//	E LOOCV = mean of (b_i² + σ²(RRᵀ)_ii)/(1 − S_ii)², R = I − S
func TestSmoothingSplineHasItsExactMeans(t *testing.T) {
	const n, variance = 100, 0.09
	x, f := make([]float64, n), make([]float64, n)
	for i := range x {
		x[i] = (float64(i) + 0.5) / n
		f[i] = math.Sin(2 * math.Pi * x[i])
	}
	r := NewSmoothingSpline().On(x, nil).AtDF([]float64{8})[0]
	var fit Fit
	r.Fit(f, &fit)
	bias, loocv := 0.0, 0.0
	for i := range f {
		b := fit.Fitted[i] - f[i]
		bias += b * b / n
		loocv += (b*b + variance*(1-2*r.Leverage[i]+r.RowNorm2[i])) / (r.Remainder[i] * r.Remainder[i] * n)
	}
	for _, c := range []struct {
		name      string
		got, want float64
	}{
		{"λ", r.Tuning, 6.49545019e-4},
		{"tr S", r.TrS, 8},
		{"tr SSᵀ", r.TrSTS, 6.25084452},
		{"E train", bias + variance*(1-2*r.TrS/n+r.TrSTS/n), 8.1380169997e-2},
		{"E held-out", variance + bias + variance*r.TrSTS/n, 9.5780169997e-2},
		{"E LOOCV", loocv, 9.6258866773e-2},
	} {
		if math.Abs(c.got/c.want-1) > 1e-8 {
			t.Errorf("%s = %.10g, want %.10g", c.name, c.got, c.want)
		}
	}
}

// A published four-factor design (Wand 2000, Comput. Stat. 15:443): n = 200,
// f₀(x) = 1.5 φ((x − .35)/.15) − φ((x − .8)/.04), x = (i − ½)/n. Noise factor: sd
// .02 + .04 (j − 1)², f₀. Spatial factor: sd .2 and
// f_j = √(x(1 − x)) sin{2π(1 + 2^((9−4j)/5))/(x + 2^((9−4j)/5))}. The least E[ASE] of the
// cubic smoothing spline and its df, worked out in independent dense arithmetic.
func TestSmoothingSplineHasItsLeastExpectedError(t *testing.T) {
	const n = 200
	phi := func(u float64) float64 { return math.Exp(-u*u/2) / math.Sqrt(2*math.Pi) }
	noise := func(x float64) float64 { return 1.5*phi((x-.35)/.15) - phi((x-.8)/.04) }
	spatial := func(j float64) func(x float64) float64 {
		return func(x float64) float64 {
			p := math.Pow(2, (9-4*j)/5)
			return math.Sqrt(x*(1-x)) * math.Sin(2*math.Pi*(1+p)/(x+p))
		}
	}
	for _, c := range []struct {
		name                           string
		f                              func(float64) float64
		sd, df, least, atTen, atTwenty float64
	}{
		{"noise 3", noise, 0.18, 13.504739, 2.07468386e-03, 2.420288e-03, 2.527252e-03},
		{"noise 5", noise, 0.66, 5.391929, 1.35837959e-02, 1.804498e-02, 3.327470e-02},
		{"spatial 1", spatial(1), 0.2, 4.884874, 8.96682490e-04, 1.554911e-03, 3.050681e-03},
		{"spatial 3", spatial(3), 0.2, 11.254423, 1.99976734e-03, 2.096667e-03, 3.057266e-03},
	} {
		x, f := make([]float64, n), make([]float64, n)
		for i := range x {
			x[i] = (float64(i) + 0.5) / n
			f[i] = c.f(x[i])
		}
		ladder := NewSmoothingSpline().On(x, nil)
		var fit Fit
		expected := func(df float64) float64 {
			r := ladder.AtDF([]float64{df})
			r[0].Fit(f, &fit)
			ase := c.sd * c.sd * r[0].TrSTS / n
			for i := range f {
				ase += (fit.Fitted[i] - f[i]) * (fit.Fitted[i] - f[i]) / n
			}
			return ase
		}
		best := lowest(2.5, 40, expected)
		// The minimum is flat: rounding of 1e-16 leaves its place open by about 1e-7 df.
		if math.Abs(best-c.df) > 2e-6 || math.Abs(expected(best)/c.least-1) > 5e-9 {
			t.Errorf("%s: least E[ASE] %.9g at df %.7f, want %.9g at %.6f", c.name, expected(best), best, c.least, c.df)
		}
		if math.Abs(expected(10)/c.atTen-1) > 3e-7 || math.Abs(expected(20)/c.atTwenty-1) > 3e-7 { // 7 digits given
			t.Errorf("%s: E[ASE] %.7g at df 10, %.7g at df 20; want %g and %g", c.name, expected(10), expected(20), c.atTen, c.atTwenty)
		}
	}
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
