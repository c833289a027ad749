package smoothers

import (
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/floats"
)

// localOf returns a local smoother with these options.
func localOf(degree int, width, kernel string) *Local {
	s := NewLocal()
	s.Degree, s.Width, s.Kernel = degree, width, kernel
	return s
}

// kernelOf returns a kernel smoother with this kernel.
func kernelOf(kernel string) *Kernel {
	s := NewKernel()
	s.Kernel = kernel
	return s
}

func TestLocalPiecesEqualPointByPoint(t *testing.T) {
	// The promise is 1e−10 of the range of y, where weights do not add up to more than
	// their number: inside the data and a little beyond.
	for _, n := range []int{5, 30, 150} {
		x := uniformDesign(n, 8)
		y := wiggle(x, 3)
		held := uniformDesign(pieceworthy, 9)
		for i, v := range held {
			held[i] = -0.05 + 1.1*v
		}
		fine, coarse := make([]float64, len(held)), make([]float64, len(held))
		for name, s := range allLocal() {
			for _, lasting := range []bool{false, true} {
				rungs := s.On(x, &Arena{Lasting: lasting}).AtDF([]float64{2.3, 8, 20})
				for i := range rungs {
					r := &rungs[i]
					if r.Status != OK {
						continue
					}
					var f Fit
					r.Fit(y, &f)
					f.Curve.At(coarse, held)
					for j := range held { // one at a time it is evaluated directly
						f.local.At(fine[j:j+1], held[j:j+1])
					}
					scale := (slices.Max(y) - slices.Min(y)) / 2
					for j, v := range held {
						size := scale
						if v < x[0] || v > x[n-1] {
							size *= 20
						}
						if e := math.Abs(fine[j] - coarse[j]); !(e <= 1e-10*max(size, math.Abs(fine[j]))) {
							t.Errorf("n = %d, %s, df %g, lasting %t: %g off at %g", n, name, r.DF, lasting, e, v)
							break
						}
					}
				}
			}
		}
	}
}

func TestLocalLeaveOneOut(t *testing.T) {
	// With a bandwidth the short cut equals an explicit refit.
	x := uniformDesign(25, 4)
	y := wiggle(x, 4)
	for name, s := range allLocal() {
		if l, ok := s.(*Local); ok && l.Width == "neighbours" {
			continue
		}
		rungs := s.On(x, nil).AtDF([]float64{3.5, 6, 12})
		for k := range rungs {
			r := &rungs[k]
			if r.Status != OK {
				continue
			}
			var f, g Fit
			r.Fit(y, &f)
			for i := range x {
				rest := slices.Delete(slices.Clone(x), i, i+1)
				without := s.On(rest, nil).AtTuning([]float64{r.Tuning})[0]
				if without.Status != OK {
					continue
				}
				without.Fit(slices.Delete(slices.Clone(y), i, i+1), &g)
				at := []float64{0}
				g.Curve.At(at, x[i:i+1])
				got := (y[i] - f.Fitted[i]) / r.Remainder[i]
				if want := y[i] - at[0]; math.Abs(got-want) > 1e-9*max(1, math.Abs(want)) {
					t.Errorf("%s, df %g: left out %d, residual %.12g, want %.12g", name, r.DF, i, got, want)
				}
			}
		}
	}
}

func TestLocalAllocatesNothingPerRung(t *testing.T) {
	x := uniformDesign(30, 6)
	y := wiggle(x, 6)
	held := uniformDesign(1500, 6)
	dst := make([]float64, len(held))
	all := allLocal()
	for _, name := range []string{"kernel gaussian", "kernel tricube", "local 1 neighbours tricube", "local 2 bandwidth epanechnikov"} {
		s := all[name]
		for _, lasting := range []bool{false, true} {
			mem := Arena{Lasting: lasting}
			var f Fit
			once := func(dfs []float64) func() {
				return func() {
					mem.Reset()
					rungs := s.On(x, &mem).AtDF(dfs)
					for i := range rungs {
						if rungs[i].Status == OK {
							rungs[i].Fit(y, &f)
							f.Curve.At(dst, held)
						}
					}
				}
			}
			few, many := []float64{4, 6}, []float64{3, 3.5, 4, 4.5, 5, 5.5, 6, 6.5, 7, 7.5}
			once(many)()
			once(many)()
			a, b := testing.AllocsPerRun(2, once(few)), testing.AllocsPerRun(2, once(many))
			if b > a { // the ladder itself takes a few, its rungs none
				t.Errorf("%s, lasting %t: %g allocations for 2 rungs, %g for 10", name, lasting, a, b)
			}
		}
	}
}

func TestLocalReproducesPolynomials(t *testing.T) {
	x := uniformDesign(30, 3)
	for name, s := range allLocal() {
		degree := 0
		if l, ok := s.(*Local); ok {
			degree = l.Degree
		}
		y := make([]float64, len(x))
		for i, v := range x {
			y[i] = 2 + []float64{0, 3 * v, 3*v - 5*v*v}[degree]
		}
		rungs := s.On(x, nil).AtDF([]float64{3.5, 5, 9})
		for i := range rungs {
			if r := &rungs[i]; r.Status == OK {
				var f Fit
				r.Fit(y, &f)
				if !floats.EqualApprox(f.Fitted, y, 1e-11) {
					t.Errorf("%s, df %g: fitted %v, want %v", name, r.DF, f.Fitted, y)
				}
			}
		}
	}
}
