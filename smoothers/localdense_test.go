package smoothers

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/mat"
)

// The dense reference of the local families: at every target the weighted least
// squares problem is written out over all observations, ties and all, and solved
// by QR. Kernels, widths and the row of S are coded here anew.

// denseKernel is K(u) by its formula.
func denseKernel(name string, u float64) float64 {
	u = math.Abs(u)
	switch {
	case name == "gaussian":
		return math.Exp(-u * u / 2)
	case u >= 1:
		return 0
	case name == "epanechnikov":
		return 1 - u*u
	case name == "biweight":
		return math.Pow(1-u*u, 2)
	default:
		return math.Pow(1-u*u*u, 3)
	}
}

// denseWidth is the distance from t to its q-th nearest observation.
func denseWidth(x []float64, t, q float64) float64 {
	d := make([]float64, len(x))
	for i, v := range x {
		d[i] = math.Abs(v - t)
	}
	slices.Sort(d)
	k := min(int(q), len(x))
	h := d[k-1]
	if k < len(x) {
		h += (q - float64(k)) * (d[k] - h)
	}
	return h
}

// denseRow is the row of weights with which the fit at t takes y, or nil where too
// few distinct x have weights for QR without row exchanges to be a reference.
func denseRow(s Smoother, x []float64, tuning, t float64) []float64 {
	kernel, degree, h := "", 0, tuning
	switch s := s.(type) {
	case *Kernel:
		kernel = s.Kernel
	case *Local:
		kernel, degree = s.Kernel, s.Degree
		if s.Width == "neighbours" {
			h = denseWidth(x, t, tuning*float64(len(x)))
		}
	}
	n := len(x)
	root := make([]float64, n) // square roots of the weights
	least := math.Inf(1)
	for _, v := range x {
		least = min(least, math.Abs(v-t)/h)
	}
	for i, v := range x {
		u := (v - t) / h
		if kernel == "gaussian" {
			root[i] = math.Exp(-(u*u - least*least) / 4)
		} else {
			root[i] = math.Sqrt(denseKernel(kernel, u))
		}
	}
	seen := map[float64]bool{}
	for i, v := range x {
		if root[i] > 1e-7 {
			seen[v] = true
		}
	}
	if len(seen) <= degree {
		return nil
	}
	a := mat.NewDense(n, degree+1, nil)
	for i, v := range x {
		p := root[i]
		for j := range degree + 1 {
			a.Set(i, j, p)
			p *= (v - t) / h
		}
	}
	var qr mat.QR
	qr.Factorize(a)
	var q, r mat.Dense
	qr.QTo(&q)
	qr.RTo(&r)
	// The constant coefficient is e₀ᵀR⁻¹Qᵀ√W y: solve Rᵀc = e₀.
	c := make([]float64, degree+1)
	for j := range c {
		if j == 0 {
			c[j] = 1
		}
		for k := range j {
			c[j] -= r.At(k, j) * c[k]
		}
		c[j] /= r.At(j, j)
	}
	row := make([]float64, n)
	for i := range row {
		for j, c := range c {
			row[i] += root[i] * q.At(i, j) * c
		}
	}
	return row
}

// denseS is the smoother matrix.
func denseS(s Smoother, x []float64, tuning float64) *mat.Dense {
	m := mat.NewDense(len(x), len(x), nil)
	for i, t := range x {
		row := denseRow(s, x, tuning, t)
		if row == nil { // S reproduces a lone reading
			row = make([]float64, len(x))
			row[i] = 1
		}
		m.SetRow(i, row)
	}
	return m
}
