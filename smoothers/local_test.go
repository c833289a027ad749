package smoothers

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/mat"
)

// allLocal returns every kernel, degree and width, by name.
func allLocal() map[string]Smoother {
	all := map[string]Smoother{}
	for _, k := range shapeWords {
		s := NewKernel()
		s.Kernel = k
		all["kernel "+k] = s
		for degree := 1; degree <= 2; degree++ {
			for _, w := range []string{"neighbours", "bandwidth"} {
				s := NewLocal()
				s.Degree, s.Width, s.Kernel = degree, w, k
				all[fmt.Sprintf("local %d %s %s", degree, w, k)] = s
			}
		}
	}
	return all
}

// uniformDesign returns n ascending uniform x.
func uniformDesign(n int, seed uint64) []float64 {
	rng := rand.New(rand.NewPCG(seed, 1))
	x := make([]float64, n)
	for i := range x {
		x[i] = rng.Float64()
	}
	slices.Sort(x)
	return x
}

// localDesigns returns ordinary designs, on which QR in double precision is a reference
// to 1e-9, by name.
func localDesigns() map[string][]float64 {
	d := map[string][]float64{
		"random": uniformDesign(30, 7),
		"tiny":   {0.1, 0.35, 0.5, 0.8, 1},
	}
	even, ties, crowded, offset := make([]float64, 25), make([]float64, 30), make([]float64, 40), make([]float64, 30)
	for i := range even {
		even[i] = (float64(i) + 0.5) / 25
	}
	for i, x := range uniformDesign(30, 3) {
		ties[i] = math.Round(x*15) / 15
		offset[i] = 1e4 + x
	}
	for i := range crowded {
		crowded[i] = math.Pow(math.Sin(math.Pi/2*float64(i)/39), 4) // crowded at both ends
	}
	d["even"], d["ties"], d["crowded"], d["offset"] = even, ties, crowded, offset
	for name, unit := range map[string]float64{"small scale": 1e-6, "large scale": 1e8} {
		x := uniformDesign(30, 11)
		floats.Scale(unit, x)
		d[name] = x
	}
	return d
}

// wiggle returns readings on x scaled to [0, 1].
func wiggle(x []float64, seed uint64) []float64 {
	rng := rand.New(rand.NewPCG(seed, 2))
	y := make([]float64, len(x))
	lo, hi := x[0], x[len(x)-1]
	for i, v := range x {
		y[i] = 2 + math.Sin(6*(v-lo)/max(hi-lo, 1e-300)) + 0.3*rng.NormFloat64()
	}
	return y
}

// targets returns points inside and beyond the data, ascending.
func targets(x []float64, seed uint64) []float64 {
	rng := rand.New(rand.NewPCG(seed, 3))
	lo, hi := x[0], x[len(x)-1]
	t := []float64{lo, hi, lo - (hi - lo), hi + (hi-lo)/2}
	for range 60 {
		t = append(t, lo+(rng.Float64()*1.2-0.1)*(hi-lo))
	}
	slices.Sort(t)
	return t
}

// apart is the largest difference of a and b relative to scale.
func apart(a, b []float64, scale float64) float64 {
	var d float64
	for i := range a {
		if e := math.Abs(a[i]-b[i]) / scale; !(e <= d) {
			d = e
		}
	}
	return d
}

// denseTol allows QR its own rounding: conditioning of the local problems of
// localDesigns stays below 1e6.
const denseTol = 1e-9

func TestLocalEqualsDenseReference(t *testing.T) {
	for design, x := range localDesigns() {
		for name, s := range allLocal() {
			t.Run(design+"/"+name, func(t *testing.T) {
				rungs := s.On(x, nil).AtDF([]float64{2.2, 3.5, 5, float64(len(x)) / 2})
				for i := range rungs {
					if rungs[i].Status == OK {
						compareDense(t, s, x, &rungs[i])
					}
				}
			})
		}
	}
}

// compareDense holds all of a rung against the dense smoother matrix.
func compareDense(t *testing.T, s Smoother, x []float64, r *Rung) {
	t.Helper()
	n := len(x)
	S := denseS(s, x, r.Tuning)
	var sts float64
	lev, norm := make([]float64, n), make([]float64, n)
	for i := range n {
		lev[i] = S.At(i, i)
		norm[i] = floats.Dot(S.RawRowView(i), S.RawRowView(i))
		sts += norm[i]
		if e := math.Abs(r.Remainder[i] - (1 - lev[i])); e > 1e-9 {
			t.Errorf("df %g: 1 − S_ii is off by %g at %d", r.DF, e, i)
		}
	}
	check := func(what string, got, want float64) {
		t.Helper()
		if !(math.Abs(got-want) <= denseTol*max(1, math.Abs(want))) {
			t.Errorf("df %g: %s = %.15g, want %.15g", r.DF, what, got, want)
		}
	}
	check("tr S", r.TrS, mat.Trace(S))
	check("tr SᵀS", r.TrSTS, sts)
	check("residual df", r.DFResidual, float64(n)-2*mat.Trace(S)+sts)
	check("leverages apart", apart(r.Leverage, lev, 1), 0)
	check("row norms apart", apart(r.RowNorm2, norm, 1), 0)

	y := wiggle(x, 5)
	var f Fit
	r.Fit(y, &f)
	want := make([]float64, n)
	mat.NewVecDense(n, want).MulVec(S, mat.NewVecDense(n, y))
	check("fitted values apart", apart(f.Fitted, want, 1), 0)
	at := targets(x, 9)
	got := make([]float64, len(at))
	f.Curve.At(got, at)
	for i, v := range at {
		row := denseRow(s, x, r.Tuning, v)
		if row == nil {
			continue // see TestLocalContinuesBeyondData
		}
		want := floats.Dot(row, y)
		if size := floats.Norm(row, 1); !(math.Abs(got[i]-want) <= denseTol*max(1, size)) {
			t.Errorf("df %g: at %g the curve is %.15g, want %.15g", r.DF, v, got[i], want)
		}
	}
}

func TestLocalTableOfExactMeans(t *testing.T) {
	// Derived outside the project in dense arithmetic: n = 100, x = (i − ½)/100,
	// f = sin 2πx, sd 0.3, h = 0.05; E train, E held-out at the same x and E LOOCV
	// by the formulas for linear smoothers.
	line := NewLocal()
	line.Width, line.Kernel = "bandwidth", "gaussian"
	for _, c := range []struct {
		s                             Smoother
		tr, trSTS, train, held, loocv float64
	}{
		{NewKernel(), 8.44342379, 6.07567377, 8.3933889036e-2, 9.9132051851e-2, 1.0045173490e-1},
		{line, 9.34792382, 7.04264519, 8.0639535486e-2, 9.7465798353e-2, 9.8347516187e-2},
	} {
		const n, s2 = 100, 0.09
		x, f := make([]float64, n), make([]float64, n)
		for i := range x {
			x[i] = (float64(i) + 0.5) / n
			f[i] = math.Sin(2 * math.Pi * x[i])
		}
		r := &c.s.On(x, nil).AtTuning([]float64{0.05})[0]
		var fit Fit
		r.Fit(f, &fit)
		var bias2, loocv float64
		for i := range x {
			b := fit.Fitted[i] - f[i]
			bias2 += b * b / n
			rr := r.RowNorm2[i] - 2*r.Leverage[i] + 1 // (RRᵀ)_ii, R = I − S
			loocv += (b*b + s2*rr) / (r.Remainder[i] * r.Remainder[i]) / n
		}
		train := bias2 + s2*(1-2*r.TrS/n+r.TrSTS/n)
		for _, v := range [][2]float64{
			{r.TrS, c.tr}, {r.TrSTS, c.trSTS}, {train, c.train},
			{s2 + bias2 + s2*r.TrSTS/n, c.held}, {loocv, c.loocv},
		} {
			if math.Abs(v[0]-v[1]) > 1e-9*v[1] { // the table's last digit
				t.Errorf("%T: got %.11g, want %.11g", c.s, v[0], v[1])
			}
		}
	}
}
