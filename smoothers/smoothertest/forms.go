package smoothertest

import (
	"math"

	"bendtest/smoothers"
)

// forms checks what a rung says of the form of S against S itself.
func forms(tr *trial, r *report) {
	tr.each(func(c *trialCase, k int, rung *smoothers.Rung) {
		s := c.matrix(k)
		keptMatrix(r, c, k, rung)
		if quartic, known := rung.ResidualQuartic(); known {
			if d := quartic - sumOfSquares(residualForm(s)); !(math.Abs(d) <= rounding*float64(len(s))) {
				r.faultf("%s: tr Q² is %.12g, stated %+.2g more", c.at(k), quartic-d, d)
			}
		} else if rung.Form != smoothers.General {
			r.faultf("%s: S has a form, yet tr Q² is not known", c.at(k))
		}
		if rung.Form != smoothers.General {
			symmetric(r, c, k)
		}
		if rung.Form == smoothers.Projection || rung.Form == smoothers.Nested {
			same(r, c, k, "S² is S", product(s, s), s)
		}
		if k > 0 && rung.Form == smoothers.Nested && c.rungs[k-1].Status == smoothers.OK {
			before := c.matrix(k - 1)
			same(r, c, k, "S leaves alone what the rung before can fit", product(s, before), before)
		}
		if rung.Lines {
			from, span := c.x[0], c.x[len(c.x)-1]-c.x[0]
			line := transformed(c.x, func(v float64) float64 { return (v - from) / span })
			if d, i := apart(fitted(rung, line), line); !(d <= rounding) {
				r.faultf("%s: S leaves straight lines alone, yet moves point %d of one by %.2g", c.at(k), i, d)
			}
		}
	})
	for _, c := range tr.on() {
		for k := 1; k < len(c.rungs); k++ {
			ridgePair(r, c, k)
		}
	}
}

// ridgePair checks S₁S₂ = (λ₁S₁ − λ₂S₂)/(λ₁ − λ₂), which holds for all (I + λK)⁻¹ with one K.
func ridgePair(r *report, c *trialCase, k int) {
	a, b := &c.rungs[k-1], &c.rungs[k]
	if a.Status != smoothers.OK || b.Status != smoothers.OK || a.Form != smoothers.Ridge || b.Form != smoothers.Ridge {
		return
	}
	ratio := b.Tuning / a.Tuning
	if !(math.Abs(1-ratio) > 1e-3) { // too close to tell
		return
	}
	s, t := c.matrix(k-1), c.matrix(k)
	want := make([][]float64, len(s))
	for j := range want {
		want[j] = make([]float64, len(s))
		for i := range want[j] {
			want[j][i] = (s[j][i] - ratio*t[j][i]) / (1 - ratio)
		}
	}
	same(r, c, k, "the product with the rung before follows from λ", product(s, t), want)
}

// keptMatrix checks Rung.Matrix.
func keptMatrix(r *report, c *trialCase, k int, rung *smoothers.Rung) {
	n := len(c.x)
	dst, y := make([]float64, n*n), make([]float64, n)
	var f smoothers.Fit
	rung.Matrix(dst, y, &f)
	for j, column := range c.matrix(k) {
		for i, v := range column {
			if !(math.Abs(dst[i*n+j]-v) <= rounding) {
				r.faultf("%s: Matrix has %.12g at (%d, %d), the fits %.12g", c.at(k), dst[i*n+j], i, j, v)
				return
			}
		}
	}
}

// symmetric checks that S is.
func symmetric(r *report, c *trialCase, k int) {
	s := c.matrix(k)
	for j := range s {
		for i := range j {
			if !(math.Abs(s[j][i]-s[i][j]) <= rounding) {
				r.faultf("%s: S differs from its transpose at (%d, %d)", c.at(k), i, j)
				return
			}
		}
	}
}

// same checks that two matrices are equal.
func same(r *report, c *trialCase, k int, what string, got, want [][]float64) {
	for j := range got {
		if d, i := apart(got[j], want[j]); !(d <= rounding) {
			r.faultf("%s: not so that %s: %.2g apart at (%d, %d)", c.at(k), what, d, i, j)
			return
		}
	}
}

// product is ST, all by columns.
func product(s, t [][]float64) [][]float64 {
	p := make([][]float64, len(s))
	for j := range p {
		p[j] = make([]float64, len(s))
		for k, v := range t[j] {
			for i, u := range s[k] {
				p[j][i] += u * v
			}
		}
	}
	return p
}

// residualForm is Q = (I−S)ᵀ(I−S), S by columns.
func residualForm(s [][]float64) [][]float64 {
	n := len(s)
	rest := make([][]float64, n)
	for j := range rest {
		rest[j] = make([]float64, n)
		for i, v := range s[j] {
			rest[j][i] = -v
		}
		rest[j][j]++
	}
	q := make([][]float64, n)
	for j := range q {
		q[j] = make([]float64, n)
		for i := range q[j] {
			for k := range n {
				q[j][i] += rest[i][k] * rest[j][k]
			}
		}
	}
	return q
}

// sumOfSquares is the squared Frobenius norm.
func sumOfSquares(m [][]float64) (s float64) {
	for _, column := range m {
		for _, v := range column {
			s += v * v
		}
	}
	return s
}
