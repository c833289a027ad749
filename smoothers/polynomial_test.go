package smoothers

import (
	"bufio"
	"fmt"
	"math"
	"os"
	"strings"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// nist reads the data of a NIST StRD file, which begin at line 61: y, x.
func nist(t *testing.T, name string) (x, y []float64) {
	t.Helper()
	f, err := os.Open("../testdata/nist/" + name + ".dat")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	in := bufio.NewScanner(f)
	for line := 1; in.Scan(); line++ {
		var v, u float64
		if line > 60 && strings.TrimSpace(in.Text()) != "" {
			if _, err := fmt.Sscan(in.Text(), &v, &u); err != nil {
				t.Fatalf("%s:%d: %v", name, line, err)
			}
			x, y = append(x, u), append(y, v)
		}
	}
	return x, y
}

// Certified residual standard deviations (NIST/ITL Statistical Reference Datasets,
// linear regression; Wampler 1970, JASA 65:549).
func TestPolynomialReproducesNISTCertifiedResiduals(t *testing.T) {
	for _, c := range []struct {
		name   string
		n      int
		degree float64
		sd     float64
		tol    float64
	}{
		{"Norris", 36, 1, 0.884796396144373, 1e-9},
		{"Pontius", 40, 2, 0.205177424076185e-03, 1e-9},
		{"Filip", 82, 10, 0.334801051324544e-02, 1e-7},
		{"Wampler1", 21, 5, 0, 1e-9},
		{"Wampler2", 21, 5, 0, 1e-9},
		{"Wampler3", 21, 5, 2360.14502379268, 1e-9},
		{"Wampler4", 21, 5, 236014.502379268, 1e-9},
		{"Wampler5", 21, 5, 23601450.2379268, 1e-9},
	} {
		x, y := nist(t, c.name)
		if len(x) != c.n {
			t.Fatalf("%s: %d observations, want %d", c.name, len(x), c.n)
		}
		sortPairs(x, y)
		r := NewPolynomial().On(x, nil).AtTuning([]float64{c.degree})
		var f Fit
		r[0].Fit(y, &f)
		rss, size := 0.0, 0.0
		for i := range y {
			rss += (y[i] - f.Fitted[i]) * (y[i] - f.Fitted[i])
			size = max(size, math.Abs(y[i]))
		}
		sd := math.Sqrt(rss / r[0].DFResidual)
		// A certified 0 is met to rounding: 1e-13 of the largest reading.
		if c.sd == 0 && sd > 1e-13*size || c.sd > 0 && math.Abs(sd/c.sd-1) > c.tol {
			t.Errorf("%s: residual SD %.15g, certified %.15g", c.name, sd, c.sd)
		}
		v := make([]float64, len(x))
		f.Curve.At(v, x)
		for i := range v {
			if math.Abs(v[i]-f.Fitted[i]) > 1e-8*size {
				t.Errorf("%s: the curve misses the fit at %d by %.2g", c.name, i, v[i]-f.Fitted[i])
				break
			}
		}
	}
}

// sortPairs sorts x ascending and y along with it.
func sortPairs(x, y []float64) {
	for i := range x {
		for j := i; j > 0 && x[j] < x[j-1]; j-- {
			x[j], x[j-1], y[j], y[j-1] = x[j-1], x[j], y[j-1], y[j]
		}
	}
}

// The hat matrix of a Chebyshev basis by dense QR.
func TestPolynomialEqualsDenseProjection(t *testing.T) {
	for name, x := range hostileDesigns() {
		n := len(x)
		y := make([]float64, n)
		for i := range y {
			y[i] = math.Cos(float64(7*i)) + float64(i)/10
		}
		at := []float64{x[0] - 0.1*(x[n-1]-x[0]), x[0], x[n/2], x[n-1], x[n-1] + 0.1*(x[n-1]-x[0])}
		for _, r := range NewPolynomial().On(x, nil).AtDF([]float64{1, 2, 3, 4, 5, 8}) {
			if r.Status != OK {
				t.Errorf("%s, df %g: %v", name, r.DF, r.Status)
				continue
			}
			p := int(r.DF)
			cheb := func(v float64) []float64 {
				u := 2*((v-x[0])/(x[n-1]-x[0])) - 1
				row := []float64{1, u}
				for len(row) < p {
					row = append(row, 2*u*row[len(row)-1]-row[len(row)-2])
				}
				return row[:p]
			}
			b := mat.NewDense(n, p, nil)
			for i, v := range x {
				b.SetRow(i, cheb(v))
			}
			checkProjection(t, name, &r, b, cheb, x, y, at)
		}
	}
}

// checkProjection compares a rung of a projection with dense QR on a basis.
func checkProjection(t *testing.T, name string, r *Rung, b *mat.Dense, row func(float64) []float64, x, y, at []float64) {
	t.Helper()
	n, p := b.Dims()
	var qr mat.QR
	qr.Factorize(b)
	var q mat.Dense
	qr.QTo(&q)
	var c mat.VecDense
	if err := qr.SolveVecTo(&c, false, mat.NewVecDense(n, y)); err != nil {
		t.Logf("%s, df %g: %v", name, r.DF, err)
	}
	var f Fit
	r.Fit(y, &f)
	for i := range n {
		lever, fit := 0.0, 0.0
		for k := range p {
			lever += q.At(i, k) * q.At(i, k)
			fit += b.At(i, k) * c.AtVec(k)
		}
		if math.Abs(lever-r.Leverage[i]) > 1e-9 || math.Abs(1-lever-r.Remainder[i]) > 1e-9 {
			t.Errorf("%s, df %g: leverage %d = %.12g, want %.12g", name, r.DF, i, r.Leverage[i], lever)
			return
		}
		if math.Abs(fit-f.Fitted[i]) > 1e-9 {
			t.Errorf("%s, df %g: fit %d = %.12g, want %.12g", name, r.DF, i, f.Fitted[i], fit)
			return
		}
	}
	v := make([]float64, len(at))
	f.Curve.At(v, at)
	for i, u := range at {
		want := 0.0
		for k, w := range row(u) {
			want += w * c.AtVec(k)
		}
		// Beyond the data the basis grows, and rounding with it.
		if math.Abs(v[i]-want) > 1e-9*max(1, math.Abs(want)) {
			t.Errorf("%s, df %g: curve at %g = %.12g, want %.12g", name, r.DF, u, v[i], want)
		}
	}
	if math.Abs(r.TrS-r.DF) > 1e-12 || math.Abs(r.TrSTS-r.DF) > 1e-12 || math.Abs(r.DFResidual-float64(n)+r.DF) > 1e-12 {
		t.Errorf("%s, df %g: traces %g, %g, %g", name, r.DF, r.TrS, r.TrSTS, r.DFResidual)
	}
}

func TestPolynomialStatuses(t *testing.T) {
	x := []float64{1, 1, 2, 4}
	rungs := NewPolynomial().On(x, nil).AtDF([]float64{3, 4, 2.5, 0, -1, math.NaN(), math.Inf(1), 1e9})
	if rungs[0].Status != OK {
		t.Errorf("df 3 on three distinct x: %v", rungs[0].Status)
	}
	for _, r := range rungs[1:] {
		if r.Status != DFUnattainable {
			t.Errorf("df %g: %v", r.DF, r.Status)
		}
	}
	if r := NewPolynomial().On([]float64{-1e308, 0, 1e308}, nil).AtDF([]float64{2}); r[0].Status != NotFinite {
		t.Errorf("a range that overflows: %v", r[0].Status)
	}
	near := []float64{0, 1e-9, 2e-9, 1, 1 + 1e-9, 2}
	if r := NewPolynomial().On(near, nil).AtDF([]float64{3, 6}); r[0].Status != OK || r[1].Status != RankDeficient {
		t.Errorf("near ties: %v, %v", r[0].Status, r[1].Status)
	}
}

func TestPolynomialHoldsBeyondTheData(t *testing.T) {
	x, y := []float64{0, 1, 2, 3, 4, 5, 6}, []float64{0, 1, 4, 2, 3, 1, 5}
	for _, df := range []float64{1, 3, 4, 6} {
		r := (&Polynomial{Beyond: "hold"}).On(x, nil).AtDF([]float64{df})
		var f Fit
		r[0].Fit(y, &f)
		v := make([]float64, 6)
		f.Curve.At(v, []float64{-5, 0, 3, 6, 7, 99})
		for i, want := range []float64{f.Fitted[0], f.Fitted[0], f.Fitted[3], f.Fitted[6], f.Fitted[6], f.Fitted[6]} {
			if math.Abs(v[i]-want) > 1e-12 {
				t.Errorf("df %g: %v, fitted %v", df, v, f.Fitted)
				break
			}
		}
	}
}

// An observation far out nearly fits itself. For a straight line 1 − h_i is the determinant
// of XᵀX without observation i over that with it, which has no cancellation.
func TestPolynomialRemainderKeepsItsDigits(t *testing.T) {
	x := []float64{0, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9, 1e5}
	det := func(x []float64) float64 {
		n, mean, sxx := float64(len(x)), 0.0, 0.0
		for _, v := range x {
			mean += v / n
		}
		for _, v := range x {
			sxx += (v - mean) * (v - mean)
		}
		return n * sxx
	}
	want := det(x[:10]) / det(x) // 7.5e-11
	r := NewPolynomial().On(x, nil).AtDF([]float64{2, 11})
	// Rounding of 1e-16 in a vector of length √want; 1 − h would be off by 1e-6.
	if got := r[0].Remainder[10]; math.Abs(got/want-1) > 1e-10 {
		t.Errorf("remainder %.15g, want %.15g", got, want)
	}
	for i, v := range r[1].Remainder {
		if r[1].Status == OK && v != 0 {
			t.Errorf("remainder %d of an interpolating polynomial is %g", i, v)
		}
	}
}

func BenchmarkPolynomial(b *testing.B) {
	dfs := []float64{2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12, 13, 14, 15, 16}
	for _, n := range []int{30, 300, 3000} {
		x, y := evenReadings(n)
		b.Run(fmt.Sprintf("rungs/n=%d", n), func(b *testing.B) {
			var mem Arena
			b.ReportAllocs()
			for b.Loop() {
				mem.Reset()
				NewPolynomial().On(x, &mem).AtDF(dfs)
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N*len(dfs)), "ns/rung")
		})
		b.Run(fmt.Sprintf("fit/n=%d", n), func(b *testing.B) {
			r := NewPolynomial().On(x, nil).AtDF([]float64{8})
			var f Fit
			b.ReportAllocs()
			for b.Loop() {
				r[0].Fit(y, &f)
			}
		})
	}
	x, y := evenReadings(30)
	r := NewPolynomial().On(x, nil).AtDF([]float64{16})
	var f Fit
	r[0].Fit(y, &f)
	t, _ := evenReadings(10000)
	v := make([]float64, len(t))
	b.Run("curve/df=16/m=10000", func(b *testing.B) {
		for b.Loop() {
			f.Curve.At(v, t)
		}
	})
}
