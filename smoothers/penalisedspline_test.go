package smoothers

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// uniformCubics writes the cubic B-splines on equal segments at x by their formulas in
// the position within a segment.
func uniformCubics(x, lo, hi float64, segments int) []float64 {
	v := (x - lo) / (hi - lo) * float64(segments)
	s := min(max(int(math.Floor(v)), 0), segments-1)
	u := v - float64(s)
	row := make([]float64, segments+3)
	row[s] = (1 - u) * (1 - u) * (1 - u) / 6
	row[s+1] = (3*u*u*u - 6*u*u + 4) / 6
	row[s+2] = (-3*u*u*u + 3*u*u + 3*u + 1) / 6
	row[s+3] = u * u * u / 6
	return row
}

// densePenalised returns S and the operator c = Gy of the penalised spline, from the QR
// factorisation of B over √λD.
func densePenalised(x []float64, lo, hi float64, segments int, lambda float64) (s, g *mat.Dense) {
	n, q := len(x), segments+3
	a := mat.NewDense(n+q-2, q, nil)
	for i, v := range x {
		a.SetRow(i, uniformCubics(v, lo, hi, segments))
	}
	root := math.Sqrt(lambda)
	for k := range q - 2 {
		a.Set(n+k, k, root)
		a.Set(n+k, k+1, -2*root)
		a.Set(n+k, k+2, root)
	}
	var qr mat.QR
	qr.Factorize(a)
	eye := mat.NewDense(n+q-2, n, nil)
	for i := range n {
		eye.Set(i, i, 1)
	}
	g = new(mat.Dense)
	if err := qr.SolveTo(g, false, eye); err != nil {
		if _, bad := err.(mat.Condition); !bad {
			panic(err)
		}
	}
	s = new(mat.Dense)
	s.Mul(a.Slice(0, n, 0, q), g)
	return s, g
}

func TestPenalisedSplineEqualsDensePenalisedLeastSquares(t *testing.T) {
	compared := 0
	for name, x := range hostileDesigns() {
		for _, segments := range []int{1, 7, 20, 45} {
			l := (&PenalisedSpline{Segments: segments, Beyond: "extend"}).On(x, nil)
			for _, r := range l.AtDF([]float64{2.001, 2.5, 3.5, 4, 6, 9.5, 15}) {
				label := fmt.Sprintf("%s, %d segments, df %g", name, segments, r.DF)
				if r.Status != OK {
					if r.DF <= 4 {
						t.Errorf("%s: %v, %s", label, r.Status, r.Note)
					}
					continue
				}
				if r.Tuning == 0 {
					continue // the limit has no dense form here
				}
				checkPenalised(t, label, &r, x, segments)
				compared++
			}
		}
	}
	if compared < 150 {
		t.Errorf("only %d rungs compared", compared)
	}
}

// checkPenalised compares a rung with its dense form.
func checkPenalised(t *testing.T, label string, r *Rung, x []float64, segments int) {
	t.Helper()
	n := len(x)
	lo, hi := x[0], x[n-1]
	s, g := densePenalised(x, lo, hi, segments, r.Tuning)
	var sst mat.Dense
	sst.Mul(s, s.T())
	y := make([]float64, n)
	for i := range y {
		y[i] = math.Cos(float64(7 * i))
	}
	var want, c mat.VecDense
	want.MulVec(s, mat.NewVecDense(n, y))
	c.MulVec(g, mat.NewVecDense(n, y))
	var f Fit
	r.Fit(y, &f)
	lever, fit := 0.0, 0.0
	for i := range n {
		lever = max(lever, math.Abs(r.Leverage[i]-s.At(i, i)), math.Abs(r.RowNorm2[i]-sst.At(i, i)), math.Abs(r.Remainder[i]+s.At(i, i)-1))
		fit = max(fit, math.Abs(f.Fitted[i]-want.AtVec(i)))
	}
	at := []float64{lo - 0.1*(hi-lo), lo, lo + 0.3*(hi-lo), lo + 0.77*(hi-lo), hi, hi + 0.1*(hi-lo)}
	v := make([]float64, len(at))
	f.Curve.At(v, at)
	for k, u := range at {
		row := mat.NewVecDense(segments+3, uniformCubics(u, lo, hi, segments))
		p := mat.Dot(row, &c)
		size := 1.0 // of the terms, which beyond the data outgrow the sum
		for j := range segments + 3 {
			size = max(size, math.Abs(row.AtVec(j)*c.AtVec(j)))
		}
		fit = max(fit, math.Abs(v[k]-p)/size)
	}
	// Rounding of x, magnified by the spacing of 1e4 + small, is 1e-12 of the range; the
	// dense form squares nothing and keeps more.
	if lever > 1e-9 || fit > 1e-9 || math.Abs(r.TrS-mat.Trace(s)) > 1e-9*r.TrS || math.Abs(r.TrSTS-mat.Trace(&sst)) > 1e-9*r.TrSTS {
		t.Errorf("%s, λ %.3g: diagonals off by %.2g, curve by %.2g, tr S by %.2g, tr SᵀS by %.2g", label, r.Tuning, lever, fit, r.TrS-mat.Trace(s), r.TrSTS-mat.Trace(&sst))
	}
	if math.Abs(r.TrS-r.DF) > 1e-8*r.DF {
		t.Errorf("%s: tr S = %.12g", label, r.TrS)
	}
	checkLogDet(t, label, r, s)
}

// checkLogDet compares the log of the product of the n − 2 non-zero eigenvalues of I − S.
func checkLogDet(t *testing.T, label string, r *Rung, s *mat.Dense) {
	t.Helper()
	n, _ := s.Dims()
	d := mat.NewSymDense(n, nil)
	for i := range n {
		for j := i; j < n; j++ {
			v := -(s.At(i, j) + s.At(j, i)) / 2
			if i == j {
				v++
			}
			d.SetSym(i, j, v)
		}
	}
	var eig mat.EigenSym
	eig.Factorize(d, false)
	values := eig.Values(nil)
	if values[2] < 1e-6 {
		return // the dense eigenvalues keep too few digits
	}
	sum := 0.0
	for _, v := range values[2:] {
		sum += math.Log(v)
	}
	if math.Abs(sum-r.LogDet) > 1e-7*max(1, math.Abs(sum)) {
		t.Errorf("%s: log det %.12g, want %.12g", label, r.LogDet, sum)
	}
}

// On x = (i − ½)/100 with 20 segments of [0, 1], f = sin 2πx and normal noise of sd 0.3:
// λ 3.78961370 has df 8 and tr SSᵀ 6.46980571; the expected training error is
// 8.1512238481e-2, held-out at the same x 9.5912238481e-2 (exact theory, worked out in
// dense arithmetic outside this project). The segments are those of [0, 1], not of the
// data, so the ladder is laid between ends of its own.
func TestPenalisedSplineHasItsExactMeanErrors(t *testing.T) {
	x, f := make([]float64, 100), make([]float64, 100)
	for i := range x {
		x[i] = (float64(i) + 0.5) / 100
		f[i] = math.Sin(2 * math.Pi * x[i])
	}
	d := gather(x, nil)
	l := NewPenalisedSpline().between(d, 0-d.origin, 1-d.origin, nil)
	r := l.AtDF([]float64{8})
	var fit Fit
	r[0].Fit(f, &fit)
	bias := 0.0
	for i := range f {
		bias += (fit.Fitted[i] - f[i]) * (fit.Fitted[i] - f[i]) / 100
	}
	train := bias + 0.09*(1-2*r[0].TrS/100+r[0].TrSTS/100)
	heldOut := 0.09 + bias + 0.09*r[0].TrSTS/100
	if math.Abs(train-8.1512238481e-2) > 1e-11 || math.Abs(heldOut-9.5912238481e-2) > 1e-11 {
		t.Errorf("training error %.12g, held-out %.12g", train, heldOut)
	}
	if math.Abs(r[0].Tuning-3.78961370) > 1e-8 || math.Abs(r[0].TrSTS-6.46980571) > 1e-8 {
		t.Errorf("λ %.10g, tr SᵀS %.10g", r[0].Tuning, r[0].TrSTS)
	}
}

func TestPenalisedSplineAtItsEnds(t *testing.T) {
	x := []float64{0, 0.1, 0.1, 0.5, 0.7, 2}
	y := []float64{1, 3, 2, 5, 4, 4}
	l := NewPenalisedSpline().On(x, nil)
	rungs := l.AtDF([]float64{2, 5, 4.99, 1.9, 5.1, math.NaN(), math.Inf(1), -3, 0})
	var f Fit
	rungs[0].Fit(y, &f)
	slope := (f.Fitted[5] - f.Fitted[0]) / 2
	for i := range x {
		if math.Abs(f.Fitted[i]-f.Fitted[0]-slope*x[i]) > 1e-14 {
			t.Errorf("df 2 is no straight line: %v", f.Fitted)
		}
	}
	if !math.IsInf(rungs[0].Tuning, 1) || rungs[0].LogDet != 0 {
		t.Errorf("df 2: %+v", rungs[0])
	}
	rungs[1].Fit(y, &f)
	for i, want := range []float64{1, 2.5, 2.5, 5, 4, 4} {
		if math.Abs(f.Fitted[i]-want) > 1e-12 {
			t.Errorf("as many df as distinct x do not interpolate: %v", f.Fitted)
			break
		}
	}
	for _, r := range rungs[3:] {
		if r.Status != DFUnattainable {
			t.Errorf("df %g: status %v", r.DF, r.Status)
		}
	}
	if r := rungs[2]; r.Status != OK || math.Abs(r.TrS-4.99) > 1e-8 {
		t.Errorf("df 4.99: %v, tr S %.12g", r.Status, r.TrS)
	}
}
