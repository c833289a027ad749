package sim

import "slices"

// FixedX returns the training x of a cell whose design is fixed, ascending; it panics for
// others.
func (c *Cell) FixedX(seed uint64) []float64 {
	if !c.FixedDesign() {
		panic("sim: a design that is drawn anew has no fixed x")
	}
	s := Sample{Train: Set{X: make([]float64, c.N)}}
	c.trainX(seed, 0, &s)
	return s.Train.X
}

// ErrorRoot returns the columns of an n × n matrix A with AAᵀ the covariance of the
// training errors at x.
func (c *Cell) ErrorRoot(x []float64) [][]float64 {
	columns := make([][]float64, len(x))
	var s Sample
	for k := range columns {
		e := make([]float64, len(x))
		e[k] = 1
		c.shape(e, x, c.Noise.AR1, &s)
		columns[k] = e
	}
	return columns
}

// ErrorVariances returns the noise variance at each x.
func (c *Cell) ErrorVariances(x []float64) []float64 {
	v := make([]float64, len(x))
	for i := range v {
		v[i] = 1
	}
	var s Sample
	c.shape(v, x, 0, &s)
	for i, sd := range v {
		v[i] = sd * sd
	}
	return v
}

// NormalErrors reports whether the errors are normal.
func (c *Cell) NormalErrors() bool {
	_, ok := c.Noise.Law.(*NormalNoise)
	return ok
}

// HeavyTails reports whether squared errors have no variance, as with Student's t on 4
// degrees of freedom and fewer: means of them then have no standard error to speak of.
func (c *Cell) HeavyTails() bool {
	law, ok := c.Noise.Law.(*StudentNoise)
	return ok && law.Nu <= 4
}

// WhiteErrors reports whether the errors are independent and of one variance.
func (c *Cell) WhiteErrors() bool { return c.Noise.AR1 == 0 && c.Noise.Scale == nil }

// HeldOutMean returns E g(X) for the law of held-out x, good to about 1e-9 relative to
// E|g| for piecewise smooth g, or why it cannot be worked out. g writes its values at
// ascending x into dst.
func (c *Cell) HeldOutMean(g func(dst, x []float64)) (float64, error) {
	const within = 1e-11
	var order []int
	var x, values []float64
	return c.x.mean(func(dst, at []float64) {
		order, x, values = order[:0], resize(x, len(at)), resize(values, len(at))
		for i := range at {
			order = append(order, i)
		}
		slices.SortFunc(order, func(i, j int) int {
			switch {
			case at[i] < at[j]:
				return -1
			case at[i] > at[j]:
				return 1
			}
			return 0
		})
		for k, i := range order {
			x[k] = at[i]
		}
		g(values, x)
		for k, i := range order {
			dst[i] = values[k]
		}
	}, within)
}

// TruthAt returns the true means at x.
func (c *Cell) TruthAt(x []float64) []float64 {
	f := make([]float64, len(x))
	var s Sample
	c.Truth.Eval(f, x, &s.truth)
	return f
}
