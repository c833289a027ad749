package smoothers

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"gonum.org/v1/gonum/floats"
)

func TestKernelConstants(t *testing.T) {
	// R(K) = ∫K² and μ₂ = ∫u²K of the kernels scaled to ∫K = 1 (Wand & Jones 1995).
	for k, want := range [][2]float64{
		gaussian:     {1 / (2 * math.Sqrt(math.Pi)), 1},
		epanechnikov: {3.0 / 5, 1.0 / 5},
		biweight:     {5.0 / 7, 1.0 / 7},
		tricube:      {175.0 / 247, 35.0 / 243},
	} {
		k := shape(k)
		const n = 40000 // midpoints: the error is of order 1/n² at the kinks, below 1e−8
		reach := 1.0
		if k == gaussian {
			reach = 10
		}
		var mass, square, spread float64
		for i := range n {
			u := (float64(i) + 0.5) / n * reach
			w := []float64{-u * u / 2}
			if k == gaussian {
				expAll(w)
			} else {
				k.weigh(w, []float64{1 - u})
			}
			mass += w[0]
			square += w[0] * w[0]
			spread += u * u * w[0]
		}
		step := 2 * reach / n
		r, mu := square*step/(mass*step*mass*step), spread/mass
		if math.Abs(r-want[0]) > 1e-8 || math.Abs(mu-want[1]) > 1e-8 {
			t.Errorf("%s: R(K) = %.10g, μ₂ = %.10g, want %.10g, %.10g", shapeWords[k], r, mu, want[0], want[1])
		}
	}
}

func TestKernelSlopeIsDerivativeByWidth(t *testing.T) {
	for k := range shapeWords {
		for _, u := range []float64{-0.9, 0.1, 0.5} {
			const e = 1e-6
			at := func(logWidth float64) float64 {
				return denseKernel(shapeWords[k], u*math.Exp(-logWidth))
			}
			want := (at(e) - at(-e)) / (2 * e)
			if got := shape(k).widen(u, at(0)); math.Abs(got-want) > 1e-8 {
				t.Errorf("%s: −uK′(u) at %g is %g, want %g", shapeWords[k], u, got, want)
			}
		}
	}
}

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

func TestLocalStatusByDF(t *testing.T) {
	even := make([]float64, 20)
	for i := range even {
		even[i] = float64(i)
	}
	gap := []float64{0, 1, 2, 3, 4, 10, 11, 12, 13, 14}
	equal := []float64{3, 3, 3, 3}
	for _, c := range []struct {
		what string
		s    Smoother
		x    []float64
		df   float64
		want Status
	}{
		{"below the mean", NewKernel(), even, 0.99, DFUnattainable},
		{"the mean", NewKernel(), even, 1, OK},
		{"below the line", localOf(1, "bandwidth", "gaussian"), even, 1.5, DFUnattainable},
		{"the line", localOf(1, "bandwidth", "tricube"), even, 2, OK},
		{"the parabola", localOf(2, "bandwidth", "biweight"), even, 3, OK},
		{"above n", NewKernel(), even, 20.1, DFUnattainable},
		{"n", NewKernel(), even, 20, OK},
		{"n for compact support", kernelOf("epanechnikov"), even, 20, OK},
		{"wider than all neighbours", NewLocal(), even, 2.2, DFUnattainable},
		{"ordinary", NewLocal(), even, 5, OK},
		{"across a gap", kernelOf("tricube"), gap, 6, EmptyWindow},
		{"across a gap, gaussian", NewKernel(), gap, 6, OK},
		{"across a gap, neighbours", NewLocal(), gap, 4, OK},
		{"all equal", NewKernel(), equal, 1, DFUnattainable},
		{"all equal, line", localOf(1, "bandwidth", "gaussian"), equal, 2, RankDeficient},
		{"all equal, neighbours", NewLocal(), equal, 2, EmptyWindow},
		{"two x for a parabola", localOf(2, "bandwidth", "gaussian"), []float64{0, 0, 1}, 2, RankDeficient},
		{"one observation", NewKernel(), []float64{5}, 1, DFUnattainable},
		{"not a number", NewKernel(), even, math.NaN(), NotFinite},
		{"infinite", NewLocal(), even, math.Inf(1), NotFinite},
	} {
		r := c.s.On(c.x, nil).AtDF([]float64{c.df})[0]
		if r.Status != c.want {
			t.Errorf("%s: df %g on %v is %v (%s), want %v", c.what, c.df, c.x, r.Status, r.Note, c.want)
		}
		if r.Status == OK && math.Abs(r.TrS-c.df) > 1e-8*c.df {
			t.Errorf("%s: tr S = %.12g, want %g", c.what, r.TrS, c.df)
		}
		if (r.Status == OK) != (r.Leverage != nil) {
			t.Errorf("%s: status %v with leverages %v", c.what, r.Status, r.Leverage)
		}
	}
}

func TestLocalStatusByTuning(t *testing.T) {
	x := []float64{0, 1, 2, 4, 5, 6} // the gap of 2 needs a bandwidth above 1
	for _, c := range []struct {
		s      Smoother
		tuning float64
		want   Status
	}{
		{kernelOf("biweight"), 1, EmptyWindow},
		{kernelOf("biweight"), 1 + 1e-12, OK},
		{kernelOf("gaussian"), 0.01, OK},
		{kernelOf("gaussian"), 0, EmptyWindow},
		{kernelOf("gaussian"), -1, EmptyWindow},
		{kernelOf("gaussian"), math.NaN(), NotFinite},
		{kernelOf("gaussian"), math.Inf(1), NotFinite},
		{kernelOf("gaussian"), 1e300, OK},
		{kernelOf("gaussian"), 1e-300, EmptyWindow},
		// Degree 1: three x may be 3 apart, and the ends need the second x inside.
		{localOf(1, "bandwidth", "tricube"), 1.5, EmptyWindow},
		{localOf(1, "bandwidth", "tricube"), 1.5 + 1e-9, OK},
		// Midway between z_i and z_(i+2) both are at the rim: q must exceed 3.
		{localOf(1, "neighbours", "tricube"), 0.5, EmptyWindow},
		{localOf(1, "neighbours", "tricube"), 0.5 + 1e-9, OK},
		{localOf(2, "neighbours", "tricube"), 4.0 / 6, EmptyWindow},
		{localOf(2, "neighbours", "tricube"), 4.01 / 6, OK},
		{localOf(2, "neighbours", "tricube"), 1, OK},
		{localOf(2, "neighbours", "tricube"), 1.01, DFUnattainable},
		{localOf(1, "neighbours", "gaussian"), 1.0 / 6, EmptyWindow},
		{localOf(1, "neighbours", "gaussian"), 1.1 / 6, OK},
	} {
		r := c.s.On(x, nil).AtTuning([]float64{c.tuning})[0]
		if r.Status != c.want {
			t.Errorf("%+v at %.12g is %v (%s), want %v", c.s, c.tuning, r.Status, r.Note, c.want)
		}
		if r.DF != r.TrS || r.Tuning != c.tuning && !math.IsNaN(c.tuning) {
			t.Errorf("%+v at %g: df %g, tr S %g, tuning %g", c.s, c.tuning, r.DF, r.TrS, r.Tuning)
		}
	}
}

func TestLocalDFDoesNotDependOnOthers(t *testing.T) {
	x := uniformDesign(40, 5)
	for name, s := range allLocal() {
		dfs := []float64{12, 3.3, 7, 4}
		together := s.On(x, nil).AtDF(dfs)
		for i, df := range dfs {
			alone := s.On(x, nil).AtDF([]float64{df})[0]
			if alone.Tuning != together[i].Tuning || alone.Status != together[i].Status {
				t.Errorf("%s: df %g alone %g (%v), with others %g (%v)", name, df, alone.Tuning, alone.Status, together[i].Tuning, together[i].Status)
			}
		}
	}
}

func TestLocalTraceFallsWithWidth(t *testing.T) {
	// By the argument at traceGrid this holds for every design; so a df has one width.
	rng := rand.New(rand.NewPCG(3, 3))
	for range 60 {
		x := make([]float64, 4+rng.IntN(10))
		for i := range x {
			x[i] = math.Round(1000*math.Pow(rng.Float64(), 1+3*rng.Float64())) / 1000 // crowded at 0, with ties
		}
		slices.Sort(x)
		for name, s := range allLocal() {
			l := s.On(x, nil).(*localLadder)
			if math.IsInf(l.floor, 1) || len(l.z) <= l.degree+1 {
				continue
			}
			wide, narrow := min(l.widest(), 4*l.extent()), l.narrowest()
			if l.neighbours {
				wide = 1
			}
			last := 0.0
			for i := range 60 {
				w := wide * math.Pow(narrow/wide, float64(i)/60)
				tr, slope := l.trace(w)
				if tr < last-1e-9 || slope > 1e-9 {
					t.Fatalf("%s on %v: tr S = %.12g after %.12g, slope %g at %g", name, x, tr, last, slope, w)
				}
				last = tr
			}
		}
	}
}

func TestLocalContinuesBeyondData(t *testing.T) {
	// Too far out for the window, the polynomial through the outermost means goes on,
	// and nothing jumps where it takes over.
	x := []float64{0, 0.1, 0.2, 0.2, 0.3, 0.45, 0.5}
	y := []float64{1, 3, 2, 4, 0, 1, 2}
	for _, kernel := range shapeWords[1:] {
		for degree := range 3 {
			var s Smoother = kernelOf(kernel)
			if degree > 0 {
				s = localOf(degree, "bandwidth", kernel)
			}
			r := s.On(x, nil).AtTuning([]float64{0.35})[0]
			var f Fit
			r.Fit(y, &f)
			right, left := []float64{2, 1, 0}, []float64{1, 3, 3} // means from the end inwards
			zr, zl := []float64{0.5, 0.45, 0.3}, []float64{0, 0.1, 0.2}
			at := []float64{-1e6, -3, -0.4, 0.9, 4, 1e6}
			got := make([]float64, len(at))
			f.Curve.At(got, at)
			for i, v := range at {
				z, m := zr[:degree+1], right[:degree+1]
				if v < 0 {
					z, m = zl[:degree+1], left[:degree+1]
				}
				if want := lagrange(z, m, v); math.Abs(got[i]-want) > 1e-9*max(1, math.Abs(want)) {
					t.Errorf("%s, degree %d: at %g got %.12g, want %.12g", kernel, degree, v, got[i], want)
				}
			}
			edge := 0.35 + zr[degree]
			two := make([]float64, 2)
			f.Curve.At(two, []float64{edge - 1e-9, edge + 1e-9})
			if math.Abs(two[0]-two[1]) > 1e-5 {
				t.Errorf("%s, degree %d: jumps from %g to %g where the window gets too small", kernel, degree, two[0], two[1])
			}
		}
	}
}

// lagrange evaluates the polynomial through (z, v) at t.
func lagrange(z, v []float64, t float64) float64 {
	var sum float64
	for i := range z {
		p := v[i]
		for j := range z {
			if j != i {
				p *= (t - z[j]) / (z[i] - z[j])
			}
		}
		sum += p
	}
	return sum
}

func TestLocalFarBeyondGaussian(t *testing.T) {
	// Far out, gaussian weights leave the polynomial through the degree + 1 outermost means.
	x := []float64{0, 0.3, 0.5, 0.8, 1}
	y := []float64{1, 2, 0, 4, 3}
	for degree := range 3 {
		var s Smoother = NewKernel()
		if degree > 0 {
			s = localOf(degree, "bandwidth", "gaussian")
		}
		r := s.On(x, nil).AtTuning([]float64{0.2})[0]
		var f Fit
		r.Fit(y, &f)
		got := make([]float64, 3)
		at := []float64{30, 1e3, 1e9}
		f.Curve.At(got, at)
		z, m := []float64{1, 0.8, 0.5}[:degree+1], []float64{3, 4, 0}[:degree+1]
		for i, v := range at {
			if want := lagrange(z, m, v); math.Abs(got[i]-want) > 1e-9*math.Abs(want) {
				t.Errorf("degree %d: at %g got %.12g, want %.12g", degree, v, got[i], want)
			}
		}
	}
}

func TestLocalHolds(t *testing.T) {
	x := uniformDesign(30, 2)
	y := wiggle(x, 2)
	held := []*Local{NewLocal(), localOf(2, "bandwidth", "gaussian")}
	for _, s := range held {
		s.Beyond = "hold"
		r := s.On(x, &Arena{Lasting: true}).AtDF([]float64{6})[0]
		var f Fit
		r.Fit(y, &f)
		at := []float64{x[0] - 1e3, x[0] - 1e-3, x[0], x[29], x[29] + 0.1, x[29] + 1e9}
		many := slices.Repeat(at, pieceworthy)
		slices.Sort(many)
		for _, at := range [][]float64{at, many} {
			got := make([]float64, len(at))
			f.Curve.At(got, at)
			for i, v := range at {
				want := f.Fitted[0]
				if v >= x[29] {
					want = f.Fitted[29]
				}
				if math.Abs(got[i]-want) > 1e-10 {
					t.Errorf("%+v: at %g got %.12g, want the end's %.12g", s, v, got[i], want)
				}
			}
		}
	}
}

func TestLocalPiecesEqualPointByPoint(t *testing.T) {
	// The promise is 1e−10 of the range of y, where weights do not add up to more than
	// their number: inside the data and a little beyond.
	for _, n := range []int{5, 30, 300} {
		x := uniformDesign(n, 8)
		y := wiggle(x, 3)
		held := uniformDesign(4000, 9)
		for i, v := range held {
			held[i] = -0.05 + 1.1*v
		}
		fine, coarse := make([]float64, len(held)), make([]float64, len(held))
		for name, s := range allLocal() {
			for _, lasting := range []bool{false, true} {
				rungs := s.On(x, &Arena{Lasting: lasting}).AtDF([]float64{2.3, 4, 8, 20})
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
	for name, s := range allLocal() {
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
