package smoothers

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// truncated is the basis 1, u, …, u^d, (u − ξ)₊^d, with u scaled to [0, 1].
func truncated(degree int, knots []float64, lo, hi float64) func(v float64) []float64 {
	return func(v float64) []float64 {
		u := (v - lo) / (hi - lo)
		row := []float64{}
		for j := range degree + 1 {
			row = append(row, math.Pow(2*u-1, float64(j)))
		}
		for _, k := range knots {
			row = append(row, math.Pow(max(u-(k-lo)/(hi-lo), 0), float64(degree)))
		}
		return row
	}
}

// natural is the basis 1, u and differences of cubic truncated powers that vanish
// beyond the end knots (Hastie, Tibshirani & Friedman 2009, Elements of Statistical
// Learning, eq. 5.4 and 5.5).
func natural(knots []float64, lo, hi float64) func(v float64) []float64 {
	all := append(append([]float64{lo}, knots...), hi)
	last := len(all) - 1
	return func(v float64) []float64 {
		scale := hi - lo
		d := func(k int) float64 {
			cube := func(t float64) float64 { t = max((v-t)/scale, 0); return t * t * t }
			return (cube(all[k]) - cube(all[last])) / ((all[last] - all[k]) / scale)
		}
		row := []float64{1, (v - lo) / scale}
		for k := range last - 1 {
			row = append(row, d(k)-d(last-1))
		}
		return row
	}
}

// quantiles by the definition: position p(n − 1) among the order statistics.
func quantileKnots(x []float64, k int) []float64 {
	var knots []float64
	for j := 1; j <= k; j++ {
		at := float64(j) / float64(k+1) * float64(len(x)-1)
		i := int(at)
		knots = append(knots, x[i]*(1-(at-float64(i)))+x[min(i+1, len(x)-1)]*(at-float64(i)))
	}
	return knots
}

func evenKnots(lo, hi float64, k int) []float64 {
	var knots []float64
	for j := 1; j <= k; j++ {
		knots = append(knots, lo+(hi-lo)*float64(j)/float64(k+1))
	}
	return knots
}

func TestRegressionSplineEqualsDenseProjection(t *testing.T) {
	compared := 0
	for name, x := range hostileDesigns() {
		n := len(x)
		lo, hi := x[0], x[n-1]
		y := make([]float64, n)
		for i := range y {
			y[i] = math.Cos(float64(7*i)) + float64(i)/10
		}
		at := []float64{lo - 0.05*(hi-lo), lo, x[n/3], x[n/2], hi, hi + 0.05*(hi-lo)}
		for _, c := range []struct {
			spline RegressionSpline
			dfs    []float64
		}{
			{RegressionSpline{Degree: 3, Knots: "quantiles", Beyond: "extend"}, []float64{4, 5, 8, 11}},
			{RegressionSpline{Degree: 3, Knots: "equispaced", Beyond: "extend"}, []float64{5, 8}},
			{RegressionSpline{Degree: 1, Knots: "quantiles", Beyond: "extend"}, []float64{2, 3, 7}},
			{RegressionSpline{Degree: 2, Knots: "equispaced", Beyond: "extend"}, []float64{4, 7}},
			{RegressionSpline{Degree: 3, Knots: "quantiles", Natural: true, Beyond: "extend"}, []float64{2, 3, 4, 5, 8}},
			{RegressionSpline{Degree: 3, Knots: "equispaced", Natural: true, Beyond: "extend"}, []float64{3, 6}},
		} {
			for _, r := range c.spline.On(x, nil).AtDF(c.dfs) {
				label := fmt.Sprintf("%s %+v", name, c.spline)
				if r.Status == RankDeficient {
					continue
				}
				if r.Status != OK {
					t.Errorf("%s, df %g: %v", label, r.DF, r.Status)
					continue
				}
				k := int(r.Tuning)
				knots := quantileKnots(x, k)
				if c.spline.Knots == "equispaced" {
					knots = evenKnots(lo, hi, k)
				}
				row := truncated(c.spline.Degree, knots, lo, hi)
				if c.spline.Natural {
					row = natural(knots, lo, hi)
				}
				b := mat.NewDense(n, int(r.DF), nil)
				for i, v := range x {
					b.SetRow(i, row(v))
				}
				checkProjection(t, label, &r, b, row, x, y, at)
				compared++
			}
		}
	}
	if compared < 100 {
		t.Errorf("only %d rungs compared", compared)
	}
}

// A cubic regression spline with 4 equispaced knots on [0, 1] of the design
// x = (i − ½)/100: tr S = tr SSᵀ = 8, expected training error 8.2807086749e-2,
// held-out at the same x 9.7207086749e-2 (exact theory) for f = sin 2πx, sd 0.3. The
// knots are those of [0, 1], not of the data, hence the ends set here.
func TestRegressionSplineHasItsExactMeanErrors(t *testing.T) {
	x := make([]float64, 100)
	f := make([]float64, 100)
	for i := range x {
		x[i] = (float64(i) + 0.5) / 100
		f[i] = math.Sin(2 * math.Pi * x[i])
	}
	l := NewRegressionSpline().On(x, nil).(*knotLadder)
	l.spline.Knots = "equispaced"
	l.lo, l.hi = 0-l.design.origin, 1-l.design.origin
	r := l.AtDF([]float64{8})
	var fit Fit
	r[0].Fit(f, &fit)
	bias := 0.0
	for i := range f {
		bias += (fit.Fitted[i] - f[i]) * (fit.Fitted[i] - f[i]) / 100
	}
	train := bias + 0.09*(1-2*r[0].TrS/100+r[0].TrSTS/100)
	heldOut := 0.09 + bias + 0.09*r[0].TrSTS/100
	if math.Abs(train-8.2807086749e-2) > 1e-11 || math.Abs(heldOut-9.7207086749e-2) > 1e-11 {
		t.Errorf("training error %.12g, held-out %.12g", train, heldOut)
	}
}

func TestRegressionSplineStatusesAndNotes(t *testing.T) {
	x := hostileDesigns()["random"]
	rungs := NewRegressionSpline().On(x, nil).AtDF([]float64{1, 2, 3, 4, 4.5, 0, -1, 41, math.NaN(), math.Inf(1)})
	for i, want := range []Status{OK, OK, OK, OK, DFUnattainable, DFUnattainable, DFUnattainable, DFUnattainable, DFUnattainable, DFUnattainable} {
		if rungs[i].Status != want {
			t.Errorf("df %g: %v, want %v", rungs[i].DF, rungs[i].Status, want)
		}
	}
	for i, r := range rungs[:4] {
		if (r.Note != "") != (i < 3) {
			t.Errorf("df %g: note %q", r.DF, r.Note)
		}
	}
	// Knots that no data surround leave coefficients undetermined.
	crowded := []float64{0, 0.001, 0.002, 0.003, 0.004, 0.005, 0.006, 0.007, 0.99, 1}
	s := &RegressionSpline{Degree: 3, Knots: "equispaced", Beyond: "extend"}
	if r := s.On(crowded, nil).AtDF([]float64{9}); r[0].Status != RankDeficient {
		t.Errorf("equispaced knots without data between: %v", r[0].Status)
	}
	if _, ok := (&RegressionSpline{Degree: 2, Natural: true, Knots: "quantiles", Beyond: "hold"}).Check().(*OptionError); !ok {
		t.Error("a natural spline of degree 2 is accepted")
	}
}

func TestRegressionSplineBeyondTheData(t *testing.T) {
	x := hostileDesigns()["random"]
	n := len(x)
	y := make([]float64, n)
	for i := range y {
		y[i] = math.Cos(float64(7 * i))
	}
	at := []float64{x[0] - 2, x[0] - 1, x[0], x[n-1], x[n-1] + 1, x[n-1] + 2}
	for _, c := range []struct {
		spline      RegressionSpline
		line, level bool
	}{
		{RegressionSpline{Degree: 3, Knots: "quantiles", Beyond: "extend"}, false, false},
		{RegressionSpline{Degree: 3, Knots: "quantiles", Beyond: "hold"}, true, true},
		{RegressionSpline{Degree: 3, Knots: "quantiles", Natural: true, Beyond: "extend"}, true, false},
		{RegressionSpline{Degree: 3, Knots: "quantiles", Natural: true, Beyond: "hold"}, true, true},
	} {
		r := c.spline.On(x, nil).AtDF([]float64{7})
		var f Fit
		r[0].Fit(y, &f)
		v := make([]float64, len(at))
		f.Curve.At(v, at)
		scale := math.Abs(v[0]) + math.Abs(v[5]) + 1
		line := math.Abs(v[0]-2*v[1]+v[2]) < 1e-9*scale && math.Abs(v[3]-2*v[4]+v[5]) < 1e-9*scale
		level := v[0] == v[2] && v[5] == v[3]
		if line != c.line || level != c.level {
			t.Errorf("%+v: %v", c.spline, v)
		}
		if math.Abs(v[2]-f.Fitted[0]) > 1e-10 || math.Abs(v[3]-f.Fitted[n-1]) > 1e-10 {
			t.Errorf("%+v: the curve misses its fitted ends", c.spline)
		}
	}
}

func BenchmarkRegressionSpline(b *testing.B) {
	for _, n := range []int{30, 300, 3000} {
		x, y := make([]float64, n), make([]float64, n)
		for i := range x {
			x[i] = (float64(i) + 0.5*math.Sin(float64(i))) / float64(n)
			y[i] = math.Cos(float64(7 * i))
		}
		dfs := []float64{5, 6, 7, 8, 9, 10, 11, 12}
		b.Run(fmt.Sprintf("rungs/n=%d", n), func(b *testing.B) {
			var mem Arena
			s := NewRegressionSpline()
			b.ReportAllocs()
			for b.Loop() {
				mem.Reset()
				s.On(x, &mem).AtDF(dfs)
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/8, "ns/rung")
		})
		b.Run(fmt.Sprintf("fit/n=%d", n), func(b *testing.B) {
			r := NewRegressionSpline().On(x, nil).AtDF(dfs[:1])
			var f Fit
			b.ReportAllocs()
			for b.Loop() {
				r[0].Fit(y, &f)
			}
		})
	}
}
