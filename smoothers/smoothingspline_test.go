package smoothers

import (
	"encoding/csv"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"slices"
	"strconv"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// rkSmoother returns S of the smoothing spline of order 2 by its reproducing kernel,
// a form that stays stable on near ties (Wahba 1990, Spline Models for Observational
// Data, §1.3): with K_ij = ∫(x_i − u)₊(x_j − u)₊du about the lowest x, M = K + λI and
// T = [1 x], I − S = λ(M⁻¹ − M⁻¹T(TᵀM⁻¹T)⁻¹TᵀM⁻¹).
func rkSmoother(x []float64, lambda float64) *mat.Dense {
	n := len(x)
	span := x[n-1] - x[0]
	m, trend := mat.NewSymDense(n, nil), mat.NewDense(n, 2, nil)
	l := lambda / (span * span * span)
	for i := range n {
		u := (x[i] - x[0]) / span
		trend.SetRow(i, []float64{1, u - 0.5})
		for j := i; j < n; j++ {
			v := (x[j] - x[0]) / span
			k := u * u * (v - u/3) / 2
			if i == j {
				k += l
			}
			m.SetSym(i, j, k)
		}
	}
	var chol mat.Cholesky
	if !chol.Factorize(m) {
		panic("the kernel matrix is not positive definite")
	}
	var inv mat.SymDense
	if err := chol.InverseTo(&inv); err != nil {
		panic(err)
	}
	var mt, tmt, w, proj mat.Dense
	mt.Mul(&inv, trend)
	tmt.Mul(trend.T(), &mt)
	if err := w.Solve(&tmt, mt.T()); err != nil {
		panic(err)
	}
	proj.Mul(&mt, &w)
	s := mat.NewDense(n, n, nil)
	for i := range n {
		for j := range n {
			v := -l * (inv.At(i, j) - proj.At(i, j))
			if i == j {
				v++
			}
			s.Set(i, j, v)
		}
	}
	return s
}

// hostileDesigns are designs that break careless splines.
func hostileDesigns() map[string][]float64 {
	rng := rand.New(rand.NewPCG(8, 1))
	designs := map[string][]float64{}
	add := func(name string, n int, f func(i int) float64) {
		x := make([]float64, n)
		for i := range x {
			x[i] = f(i)
		}
		slices.Sort(x)
		designs[name] = x
	}
	add("random", 40, func(int) float64 { return rng.Float64() })
	add("even", 30, func(i int) float64 { return (float64(i) + 0.5) / 30 })
	add("ties", 50, func(int) float64 { return math.Round(rng.Float64()*12) / 12 })
	add("near ties", 40, func(i int) float64 { return float64(i/2)/20 + float64(i%2)*1e-9 })
	add("crowded ends", 60, func(int) float64 { b := rng.Float64(); return 0.5 - 0.5*math.Cos(math.Pi*b*b*(3-2*b)) })
	add("offset", 40, func(int) float64 { return 1e4 + rng.Float64() })
	add("tiny", 30, func(int) float64 { return 1e-6 * rng.Float64() })
	add("huge", 30, func(int) float64 { return 1e8 * rng.Float64() })
	return designs
}

func TestSmoothingSplineEqualsReproducingKernelForm(t *testing.T) {
	for name, x := range hostileDesigns() {
		n := len(x)
		y := make([]float64, n)
		rng := rand.New(rand.NewPCG(5, 5))
		for i := range y {
			y[i] = math.Sin(6*(x[i]-x[0])/(x[n-1]-x[0])) + 0.3*rng.NormFloat64()
		}
		rungs := NewSmoothingSpline().On(x, nil).AtDF([]float64{2.1, 2.5, 4, 7, 9.5})
		for _, r := range rungs {
			if r.Status != OK || math.Abs(r.TrS-r.DF) > 1e-8*r.DF {
				t.Errorf("%s, df %g: status %v, tr S %.12g", name, r.DF, r.Status, r.TrS)
				continue
			}
			s := rkSmoother(x, r.Tuning)
			var sst mat.Dense
			sst.Mul(s, s.T())
			worst := 0.0
			for i := range n {
				worst = max(worst, math.Abs(r.Leverage[i]-s.At(i, i)), math.Abs(r.RowNorm2[i]-sst.At(i, i)), math.Abs(r.Remainder[i]+s.At(i, i)-1))
			}
			var f Fit
			r.Fit(y, &f)
			var want mat.VecDense
			want.MulVec(s, mat.NewVecDense(n, y))
			fitWorst := 0.0
			for i := range n {
				fitWorst = max(fitWorst, math.Abs(f.Fitted[i]-want.AtVec(i)))
			}
			at := make([]float64, n)
			f.Curve.At(at, x)
			for i := range n {
				fitWorst = max(fitWorst, math.Abs(at[i]-f.Fitted[i]))
			}
			if worst > 1e-9 || fitWorst > 1e-9 || math.Abs(r.TrSTS-mat.Trace(&sst)) > 1e-9*r.TrS {
				t.Errorf("%s, df %g, λ %.3g: leverages off by %.2g, fit by %.2g, tr SᵀS by %.2g", name, r.DF, r.Tuning, worst, fitWorst, r.TrSTS-mat.Trace(&sst))
			}
			var eig mat.EigenSym
			d := mat.NewSymDense(n, nil)
			for i := range n {
				for j := i; j < n; j++ {
					v := -s.At(i, j)
					if i == j {
						v++
					}
					d.SetSym(i, j, v)
				}
			}
			eig.Factorize(d, false)
			values := eig.Values(nil)
			sum := 0.0
			for _, v := range values[2:] {
				sum += math.Log(v)
			}
			if math.Abs(sum-r.LogDet) > 1e-7*max(1, math.Abs(sum)) && name != "near ties" {
				t.Errorf("%s, df %g: log det %.12g, want %.12g", name, r.DF, r.LogDet, sum)
			}
		}
	}
}

func BenchmarkSmoothingSpline(b *testing.B) {
	for _, n := range []int{30, 300, 3000, 100000} {
		x := make([]float64, n)
		y := make([]float64, n)
		for i := range x {
			x[i] = (float64(i) + 0.5*rand.Float64()) / float64(n)
			y[i] = rand.NormFloat64()
		}
		dfs := []float64{3, 4, 5, 6, 7, 8, 9, 10}
		b.Run(fmt.Sprintf("rungs/n=%d", n), func(b *testing.B) {
			var mem Arena
			s := NewSmoothingSpline()
			b.ReportAllocs()
			for b.Loop() {
				mem.Reset()
				s.On(x, &mem).AtDF(dfs)
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/8, "ns/rung")
		})
		b.Run(fmt.Sprintf("fit/n=%d", n), func(b *testing.B) {
			r := NewSmoothingSpline().On(x, nil).AtDF(dfs[:1])
			var f Fit
			b.ReportAllocs()
			for b.Loop() {
				r[0].Fit(y, &f)
			}
		})
	}
}

// The smoothing spline of order 1 has (W + λDᵀH⁻¹D)⁻¹ for its S, D the first
// differences and H the gaps: tridiagonal, here dense.
func TestSmoothingSplineOfOrderOneEqualsItsPenaltyForm(t *testing.T) {
	for name, x := range hostileDesigns() {
		n := len(x)
		s := &SmoothingSpline{Order: 1, Beyond: "extend"}
		for _, r := range s.On(x, nil).AtDF([]float64{1.5, 3, 8}) {
			var z []float64
			at := make([]int, n)
			for i, v := range x {
				if i == 0 || v != x[i-1] {
					z = append(z, v)
				}
				at[i] = len(z) - 1
			}
			a := mat.NewSymDense(len(z), nil)
			for i := range x {
				a.SetSym(at[i], at[i], a.At(at[i], at[i])+1)
			}
			for i := range len(z) - 1 {
				k := r.Tuning / (z[i+1] - z[i])
				a.SetSym(i, i, a.At(i, i)+k)
				a.SetSym(i+1, i+1, a.At(i+1, i+1)+k)
				a.SetSym(i, i+1, a.At(i, i+1)-k)
			}
			var chol mat.Cholesky
			if !chol.Factorize(a) {
				t.Fatal("not positive definite")
			}
			var v mat.SymDense
			if err := chol.InverseTo(&v); err != nil && name != "near ties" {
				t.Fatal(err)
			}
			tol := 1e-10
			if name == "near ties" {
				tol = 1e-5 // of the reference: its condition is 1e9
			}
			trace := 0.0
			for i := range x {
				if d := math.Abs(r.Leverage[i] - v.At(at[i], at[i])); d > tol {
					t.Errorf("%s, df %g: leverage %d off by %.2g", name, r.DF, i, d)
					break
				}
				trace += r.Leverage[i]
			}
			if math.Abs(trace-r.DF) > 1e-10*r.DF {
				t.Errorf("%s, df %g: tr S = %.12g", name, r.DF, trace)
			}
		}
	}
}

// Minimum-GCV cubic smoothing spline of 50 points: GCV 0.0433056129, residual df
// 39.6239255, mean square residual 0.0271968858 (Hutchinson 1986, Algorithm 642, ACM
// TOMS 12:150; data in testdata/published).
func TestSmoothingSplineReproducesAlgorithm642(t *testing.T) {
	x, y, fit := published642(t)
	rungs := NewSmoothingSpline().On(x, nil).AtDF([]float64{50 - 39.6239255, 10, 10.8})
	gcv := make([]float64, len(rungs))
	for k := range rungs {
		var f Fit
		rungs[k].Fit(y, &f)
		rss := 0.0
		for i := range y {
			rss += (y[i] - f.Fitted[i]) * (y[i] - f.Fitted[i])
			if k == 0 && math.Abs(f.Fitted[i]-fit[i]) > 1e-6 {
				t.Errorf("fit %d = %.9f, published %.9f", i, f.Fitted[i], fit[i])
			}
		}
		free := 1 - rungs[k].TrS/50
		gcv[k] = rss / 50 / (free * free)
		if k == 0 && math.Abs(rss/50-0.0271968858) > 1e-8 {
			t.Errorf("mean square residual %.10f", rss/50)
		}
	}
	if math.Abs(gcv[0]-0.0433056129) > 1e-9 {
		t.Errorf("GCV = %.10f, published 0.0433056129", gcv[0])
	}
	if gcv[1] <= gcv[0] || gcv[2] <= gcv[0] {
		t.Errorf("GCV %v has no minimum at the published df", gcv)
	}
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

func TestSmoothingSplineAtItsEnds(t *testing.T) {
	x := []float64{0, 0.1, 0.1, 0.5, 0.7, 2}
	y := []float64{1, 3, 2, 5, 4, 4}
	rungs := NewSmoothingSpline().On(x, nil).AtDF([]float64{2, 5, 1.9, 5.1, math.NaN(), math.Inf(1), -3, 0})
	var f Fit
	rungs[0].Fit(y, &f)
	line := append([]float64(nil), f.Fitted...)
	slope := (line[5] - line[0]) / 2
	for i := range x {
		if math.Abs(line[i]-line[0]-slope*x[i]) > 1e-14 {
			t.Errorf("df 2 is no straight line: %v", line)
		}
	}
	if rungs[0].Status != OK || !math.IsInf(rungs[0].Tuning, 1) || math.Abs(rungs[0].LogDet) > 1e-12 {
		t.Errorf("df 2: %+v", rungs[0])
	}
	rungs[1].Fit(y, &f)
	for i, want := range []float64{1, 2.5, 2.5, 5, 4, 4} {
		if math.Abs(f.Fitted[i]-want) > 1e-12 {
			t.Errorf("as many df as distinct x do not interpolate: %v", f.Fitted)
			break
		}
	}
	for _, r := range rungs[2:] {
		if r.Status != DFUnattainable {
			t.Errorf("df %g: status %v", r.DF, r.Status)
		}
	}
	for _, x := range [][]float64{{3}, {3, 3, 3}} {
		if r := NewSmoothingSpline().On(x, nil).AtDF([]float64{1, 2})[1]; r.Status != DFUnattainable {
			t.Errorf("on %v: status %v", x, r.Status)
		}
	}
}

func TestSmoothingSplineBeyondTheData(t *testing.T) {
	x, y := []float64{1, 2, 3, 5}, []float64{0, 2, 1, 4}
	at := []float64{-1, 0, 1, 5, 6, 7}
	for _, c := range []struct {
		beyond string
		level  bool
	}{{"extend", false}, {"hold", true}} {
		s := &SmoothingSpline{Order: 2, Beyond: c.beyond}
		r := s.On(x, nil).AtDF([]float64{3})
		var f Fit
		r[0].Fit(y, &f)
		v := make([]float64, len(at))
		f.Curve.At(v, at)
		if math.Abs(v[0]-2*v[1]+v[2]) > 1e-12 || math.Abs(v[3]-2*v[4]+v[5]) > 1e-12 {
			t.Errorf("%s: no line beyond the data: %v", c.beyond, v)
		}
		if level := v[0] == v[2] && v[5] == v[3]; level != c.level {
			t.Errorf("%s: %v", c.beyond, v)
		}
		if math.Abs(v[2]-f.Fitted[0]) > 1e-13 || math.Abs(v[3]-f.Fitted[3]) > 1e-13 {
			t.Errorf("%s: the curve misses its fitted ends", c.beyond)
		}
	}
}

func TestSmoothingSplineDoesNotAllocatePerRung(t *testing.T) {
	x := hostileDesigns()["random"]
	y := make([]float64, len(x))
	r := NewSmoothingSpline().On(x, nil).AtDF([]float64{5})
	var f Fit
	r[0].Fit(y, &f)
	if n := testing.AllocsPerRun(10, func() { r[0].Fit(y, &f) }); n != 0 {
		t.Errorf("%v allocations per fit", n)
	}
}
