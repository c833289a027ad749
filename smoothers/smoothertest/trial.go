package smoothertest

import (
	"fmt"
	"math"

	"bendtest/smoothers"
)

// rounding is how far fits of readings of size 1 may be apart that are equal in exact
// arithmetic: the accuracy that the families are held to. It leaves a factor of 4e6 over
// the rounding of one operation.
const rounding = 1e-9

// A trial is a smoother under test.
type trial struct {
	smoother smoothers.Smoother
	claims   Claims
	cases    []*trialCase // laid out at first use
}

// A trialCase is the smoother on one design.
type trialCase struct {
	design
	rungs []smoothers.Rung // one per claimed df
	s     [][][]float64    // by rung, the columns of S; built at first use
}

func newTrial(s smoothers.Smoother, claims Claims) *trial {
	if len(claims.DF) < 2 {
		panic("smoothertest: Claims.DF needs at least two df")
	}
	return &trial{smoother: s, claims: claims}
}

// on returns the smoother on all designs.
func (tr *trial) on() []*trialCase {
	if tr.cases == nil {
		var cases []*trialCase
		for _, d := range designs() {
			c := &trialCase{design: d, rungs: tr.smoother.On(d.x, nil).AtDF(tr.claims.DF)}
			c.s = make([][][]float64, len(c.rungs))
			cases = append(cases, c)
		}
		tr.cases = cases
	}
	return tr.cases
}

// each calls f for every rung that has a fit.
func (tr *trial) each(f func(c *trialCase, k int, rung *smoothers.Rung)) {
	for _, c := range tr.on() {
		for k := range c.rungs {
			if c.rungs[k].Status == smoothers.OK {
				f(c, k, &c.rungs[k])
			}
		}
	}
}

// at names a rung of the case.
func (c *trialCase) at(k int) string { return fmt.Sprintf("%s, df %g", c.name, c.rungs[k].DF) }

// matrix returns the columns of S of rung k, by fitting unit vectors.
func (c *trialCase) matrix(k int) [][]float64 {
	if c.s[k] == nil {
		n := len(c.x)
		columns := make([][]float64, n)
		unit := make([]float64, n)
		for j := range columns {
			unit[j] = 1
			columns[j] = fitted(&c.rungs[k], unit)
			unit[j] = 0
		}
		c.s[k] = columns
	}
	return c.s[k]
}

// fitted returns the fitted values of y on a rung.
func fitted(r *smoothers.Rung, y []float64) []float64 {
	var f smoothers.Fit
	r.Fit(y, &f)
	return f.Fitted
}

// apart returns the largest difference of two slices, +Inf if their lengths differ or
// there is a NaN, and where it is.
func apart(a, b []float64) (worst float64, at int) {
	if len(a) != len(b) {
		return math.Inf(1), -1
	}
	for i := range a {
		d := math.Abs(a[i] - b[i])
		if math.IsNaN(d) {
			return math.Inf(1), i
		}
		if d > worst {
			worst, at = d, i
		}
	}
	return worst, at
}

// transformed returns f of each value.
func transformed(v []float64, f func(float64) float64) []float64 {
	w := make([]float64, len(v))
	for i := range v {
		w[i] = f(v[i])
	}
	return w
}

// sum adds up v.
func sum(v []float64) (s float64) {
	for _, u := range v {
		s += u
	}
	return s
}

// sameBits says whether two slices are equal bit for bit.
func sameBits(a, b []float64) bool {
	if len(a) != len(b) {
		return false
	}
	for i := range a {
		if math.Float64bits(a[i]) != math.Float64bits(b[i]) {
			return false
		}
	}
	return true
}

// finite says whether there is neither NaN nor infinity in v.
func finite(v ...float64) bool {
	for _, u := range v {
		if math.IsNaN(u) || math.IsInf(u, 0) {
			return false
		}
	}
	return true
}
