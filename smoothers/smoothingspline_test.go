package smoothers

import (
	"fmt"
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/mat"
)

// kernelForm returns S of the smoothing spline of order 2 by its reproducing kernel, as
// exactSpline, in double precision: its own error is 1e-16 times the condition of M.
func kernelForm(x []float64, lambda float64) *mat.Dense {
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
	inv := mat.NewSymDense(n, nil)
	if err := chol.InverseTo(inv); err != nil {
		panic(err)
	}
	var mt, tmt, w, proj mat.Dense
	mt.Mul(inv, trend)
	tmt.Mul(trend.T(), &mt)
	if err := w.Solve(&tmt, mt.T()); err != nil {
		panic(err)
	}
	proj.Mul(&mt, &w)
	s := mat.NewDense(n, n, nil)
	for i := range n {
		for j := range n {
			s.Set(i, j, -l*(inv.At(i, j)-proj.At(i, j)))
		}
		s.Set(i, i, s.At(i, i)+1)
	}
	return s
}

// The determinant against eigenvalues: another route than that of exactSpline.
func TestLogDetIsThatOfTheNonZeroEigenvalues(t *testing.T) {
	for name, x := range hostileDesigns() {
		if name == "near ties" {
			continue // eigenvalues next to 0 have no digits in double precision
		}
		for _, r := range NewSmoothingSpline().On(x, nil).AtDF([]float64{2, 2.1, 4, 8}) {
			if math.IsInf(r.Tuning, 1) {
				if math.Abs(r.LogDet) > 1e-12 {
					t.Errorf("%s: the straight line has log det %g, want 0", name, r.LogDet)
				}
				continue
			}
			n, s := len(x), kernelForm(x, r.Tuning)
			rest := mat.NewSymDense(n, nil)
			for i := range n {
				for j := i; j < n; j++ {
					rest.SetSym(i, j, -s.At(i, j))
				}
				rest.SetSym(i, i, 1-s.At(i, i))
			}
			var eig mat.EigenSym
			if !eig.Factorize(rest, false) {
				t.Fatal("no eigenvalues")
			}
			sum := 0.0
			for _, v := range eig.Values(nil)[2:] {
				sum += math.Log(v)
			}
			if !r.HasLogDet || math.Abs(sum-r.LogDet) > 1e-8*max(1, math.Abs(sum)) {
				t.Errorf("%s, df %g: log det %.12g, by eigenvalues %.12g", name, r.DF, r.LogDet, sum)
			}
		}
	}
}

func TestSmoothingSplineAtItsEnds(t *testing.T) {
	x := []float64{0, 0.1, 0.1, 0.5, 0.7, 2}
	y := []float64{1, 3, 2, 5, 4, 4}
	rungs := NewSmoothingSpline().On(x, nil).AtDF([]float64{2, 5, 1.9, 5.1, math.NaN(), math.Inf(1), -3, 0})
	var f Fit
	rungs[0].Fit(y, &f)
	line := slices.Clone(f.Fitted)
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
	if !floats.EqualApprox(f.Fitted, []float64{1, 2.5, 2.5, 5, 4, 4}, 1e-14) {
		t.Errorf("as many df as distinct x do not interpolate: %v", f.Fitted)
	}
	if r := rungs[1]; r.Status != OK || r.Tuning != 0 || r.TrS != 5 || r.Remainder[0] != 0 || r.Remainder[1] != 0.5 || r.HasLogDet {
		t.Errorf("df 5: %+v", r)
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
	if r := NewSmoothingSpline().On([]float64{-1e308, 0, 1e308}, nil).AtDF([]float64{2.5})[0]; r.Status != NotFinite {
		t.Errorf("a range that overflows: status %v", r.Status)
	}
}

// The interpolating natural spline through (0, 0), (1, 1), (2, 0) is 3t/2 − t³/2 up to 1.
func TestSmoothingSplineInterpolates(t *testing.T) {
	r := NewSmoothingSpline().On([]float64{0, 1, 2}, nil).AtDF([]float64{3})
	var f Fit
	r[0].Fit([]float64{0, 1, 0}, &f)
	at := []float64{-1, 0, 0.25, 0.5, 1, 1.5, 1.75, 2, 3}
	v := make([]float64, len(at))
	f.Curve.At(v, at)
	if want := []float64{-1.5, 0, 0.3671875, 0.6875, 1, 0.6875, 0.3671875, 0, -1.5}; !floats.EqualApprox(v, want, 1e-14) {
		t.Errorf("curve %v, want %v", v, want)
	}
}

func TestSmoothingSplineBeyondTheData(t *testing.T) {
	x, y := []float64{1, 2, 3, 5}, []float64{0, 2, 1, 4}
	at := []float64{-1, 0, 1, 5, 6, 7}
	for _, c := range []struct {
		order  int
		beyond string
		level  bool
	}{{2, "extend", false}, {2, "hold", true}, {1, "extend", true}, {1, "hold", true}} {
		s := &SmoothingSpline{Order: c.order, Beyond: c.beyond}
		r := s.On(x, nil).AtDF([]float64{3})
		var f Fit
		r[0].Fit(y, &f)
		v := make([]float64, len(at))
		f.Curve.At(v, at)
		if math.Abs(v[0]-2*v[1]+v[2]) > 1e-14 || math.Abs(v[3]-2*v[4]+v[5]) > 1e-14 {
			t.Errorf("%v: no line beyond the data: %v", c, v)
		}
		if level := v[0] == v[2] && v[5] == v[3]; level != c.level {
			t.Errorf("%v: %v", c, v)
		}
		if v[2] != f.Fitted[0] || math.Abs(v[3]-f.Fitted[3]) > 1e-15 {
			t.Errorf("%v: the curve misses its fitted ends", c)
		}
	}
}

func TestSmoothingSplineRefusesOddOptions(t *testing.T) {
	for _, c := range []struct {
		s    SmoothingSpline
		want string
	}{{SmoothingSpline{3, "extend"}, "order"}, {SmoothingSpline{2, "repeat"}, "beyond"}, {*NewSmoothingSpline(), ""}} {
		option := ""
		if err := c.s.Check(); err != nil {
			option = err.(*OptionError).Option
		}
		if option != c.want {
			t.Errorf("%+v: at fault is %q, want %q", c.s, option, c.want)
		}
	}
}

// Designs too large for their gains to be kept are fitted alike.
func TestLargeSmoothingSplinesKeepNoGains(t *testing.T) {
	n := gainsKept/gainRoom + 1
	x, y := evenReadings(n)
	r := NewSmoothingSpline().On(x, nil).AtDF([]float64{20})
	kept := r[0]
	s := *r[0].solver.(*splineSolver)
	if s.gains != nil {
		t.Fatal("gains are kept")
	}
	s.gains = make([]float64, s.ladder.filter.room())
	s.ladder.filter.gains(s.q, s.gains)
	kept.solver = &s
	var f, g Fit
	r[0].Fit(y, &f)
	kept.Fit(y, &g)
	if !slices.Equal(f.Fitted, g.Fitted) {
		t.Error("fits with and without kept gains differ")
	}
	if a := testing.AllocsPerRun(3, func() { r[0].Fit(y, &f) }); a != 0 {
		t.Errorf("%g allocations per fit", a)
	}
}

func BenchmarkSmoothingSpline(b *testing.B) {
	dfs := []float64{2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12, 13, 14, 15, 16}
	for _, n := range []int{30, 300, 3000, 100_000} {
		x, y := evenReadings(n)
		for i := range x {
			x[i] += 0.3 * math.Sin(float64(i)) / float64(n)
		}
		b.Run(fmt.Sprintf("rungs/n=%d", n), func(b *testing.B) {
			var mem Arena
			s := NewSmoothingSpline()
			b.ReportAllocs()
			for b.Loop() {
				mem.Reset()
				s.On(x, &mem).AtDF(dfs)
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N*len(dfs)), "ns/rung")
		})
		b.Run(fmt.Sprintf("fit/n=%d", n), func(b *testing.B) {
			r := NewSmoothingSpline().On(x, nil).AtDF(dfs[4:5])
			var f Fit
			b.ReportAllocs()
			for b.Loop() {
				r[0].Fit(y, &f)
			}
		})
	}
}
