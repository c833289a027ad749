package smoothers

import (
	"math"
	"testing"
)

// exactASE is the expected average squared error of a rung, bias² + variance, for
// true means f and noise variances v, both at the design.
func exactASE(r *Rung, f, v []float64, fit *Fit) float64 {
	r.Fit(f, fit)
	sum := 0.0
	for i := range f {
		b := fit.Fitted[i] - f[i]
		sum += b*b + v[i]*r.RowNorm2[i] // exact for equal variances
	}
	return sum / float64(len(f))
}

// n = 100, x = (i − ½)/100, f = sin 2πx, sd 0.3: exact means derived in independent
// dense arithmetic. Smoothing spline of df 8: λ 6.49545019e-4, tr SSᵀ 6.25084452, E
// training error 8.1380169997e-2, E held-out at the same x 9.5780169997e-2, E LOOCV
// 9.6258866773e-2.
func TestSmoothingSplineHasItsExactMeanErrors(t *testing.T) {
	const n, s2 = 100, 0.09
	x, f, v := make([]float64, n), make([]float64, n), make([]float64, n)
	for i := range x {
		x[i] = (float64(i) + 0.5) / n
		f[i] = math.Sin(2 * math.Pi * x[i])
		v[i] = s2
	}
	r := &NewSmoothingSpline().On(x, nil).AtDF([]float64{8})[0]
	var fit Fit
	ase := exactASE(r, f, v, &fit)
	loocv := 0.0
	for i := range f {
		b := fit.Fitted[i] - f[i]
		d := 1 - r.Leverage[i]
		residual := 1 - 2*r.Leverage[i] + r.RowNorm2[i] // (RRᵀ)_ii, R = I − S symmetric
		loocv += (b*b + s2*residual) / (d * d) / n
	}
	for _, c := range []struct {
		name           string
		got, want, tol float64
	}{
		{"λ", r.Tuning, 6.49545019e-4, 1e-12},
		{"tr S", r.TrS, 8, 1e-12},
		{"tr SSᵀ", r.TrSTS, 6.25084452, 1e-8},
		{"E training error", ase + s2*(1-2*r.TrS/n), 8.1380169997e-2, 1e-11},
		{"E held-out error at the same x", ase + s2, 9.5780169997e-2, 1e-11},
		{"E LOOCV", loocv, 9.6258866773e-2, 1e-11},
	} {
		if math.Abs(c.got-c.want) > c.tol {
			t.Errorf("%s = %.12g, want %.12g", c.name, c.got, c.want)
		}
	}
}

// The four-factor design of Wand (2000, Comput. Stat. 15:443): n = 200, x = (i −
// ½)/n, exact least E[ASE] of the cubic smoothing spline and the df where it is,
// with E[ASE] at 10 and 20 df (published formulas, derived values).
func TestSmoothingSplineOnAPublishedDesign(t *testing.T) {
	const n = 200
	phi := func(z float64) float64 { return math.Exp(-z*z/2) / math.Sqrt(2*math.Pi) }
	f0 := func(x float64) float64 { return 1.5*phi((x-.35)/.15) - phi((x-.8)/.04) }
	spatial := func(j float64) func(float64) float64 {
		p := math.Pow(2, (9-4*j)/5)
		return func(x float64) float64 { return math.Sqrt(x*(1-x)) * math.Sin(2*math.Pi*(1+p)/(x+p)) }
	}
	for _, c := range []struct {
		name                  string
		f                     func(float64) float64
		sd                    float64
		df, least, at10, at20 float64
	}{
		{"noise 3", f0, .02 + .04*4, 13.504739, 2.07468386e-03, 2.420288e-03, 2.527252e-03},
		{"noise 5", f0, .02 + .04*16, 5.391929, 1.35837959e-02, 1.804498e-02, 3.327470e-02},
		{"spatial 1", spatial(1), .2, 4.884874, 8.96682490e-04, 1.554911e-03, 3.050681e-03},
		{"spatial 3", spatial(3), .2, 11.254423, 1.99976734e-03, 2.096667e-03, 3.057266e-03},
	} {
		x, f, v := make([]float64, n), make([]float64, n), make([]float64, n)
		for i := range x {
			x[i] = (float64(i) + 0.5) / n
			f[i], v[i] = c.f(x[i]), c.sd*c.sd
		}
		rungs := NewSmoothingSpline().On(x, nil).AtDF([]float64{c.df, c.df - 0.01, c.df + 0.01, 10, 20})
		var fit Fit
		ase := make([]float64, len(rungs))
		for k := range rungs {
			ase[k] = exactASE(&rungs[k], f, v, &fit)
		}
		if math.Abs(ase[0]/c.least-1) > 1e-8 || ase[1] <= ase[0] || ase[2] <= ase[0] {
			t.Errorf("%s: E ASE %.10g at df %g, neighbours %.10g and %.10g; want the least, %.10g", c.name, ase[0], c.df, ase[1], ase[2], c.least)
		}
		if math.Abs(ase[3]/c.at10-1) > 1e-6 || math.Abs(ase[4]/c.at20-1) > 1e-6 {
			t.Errorf("%s: E ASE %.7g at 10 df, %.7g at 20; want %.7g, %.7g", c.name, ase[3], ase[4], c.at10, c.at20)
		}
	}
}
