package smoothers

import "math"

const (
	// dfTolerance is how far, relative to df, tr S may be off a df asked for.
	dfTolerance = 1e-8
	// dfClose is when the search is over: so far below dfTolerance that what is
	// computed from a rung doesn't show it, so far above rounding that it's reached.
	dfClose = 1e-12
)

// A dfFinder finds the tunings at which tr S is as asked for, on one design. tr S
// must fall from ceiling to floor as the log θ of the tuning goes from lo to hi.
//
// The trace is looked up at whole multiples of a step, as few as needed and each only
// once; neighbouring df share them, and each starts from the two around it. So the
// tuning of a df depends, to the last bit, on no other df that was asked for.
type dfFinder struct {
	floor, ceiling float64
	lo, hi         float64
	// trace returns tr S and its derivative by θ, or NaN for the latter where a family
	// has none.
	trace func(theta float64) (t, slope float64)
	nodes []float64 // z and rate per multiple; 0, 0 where not looked up yet
}

// dfStep is the distance of neighbouring nodes in θ.
const dfStep = 1.0

// newDFFinder lays out the nodes.
func newDFFinder(floor, ceiling, lo, hi float64, trace func(theta float64) (t, slope float64), mem *Arena) *dfFinder {
	count := 1 + int(math.Ceil((hi-lo)/dfStep))
	return &dfFinder{floor: floor, ceiling: ceiling, lo: lo, hi: hi, trace: trace, nodes: mem.floats(2 * count)}
}

// A tracePoint is the trace on a scale on which it is nearly straight in θ for
// penalised smoothers: z = log((t − floor)/(ceiling − t)), infinite where the trace has
// reached an end. rate is dz/dθ, NaN where unknown.
type tracePoint struct{ theta, z, rate float64 }

// point puts a trace on that scale.
func (f *dfFinder) point(theta, t, slope float64) tracePoint {
	up, down := t-f.floor, f.ceiling-t
	switch {
	case !(up > 0):
		return tracePoint{theta, math.Inf(-1), math.NaN()}
	case !(down > 0):
		return tracePoint{theta, math.Inf(1), math.NaN()}
	}
	return tracePoint{theta, math.Log(up / down), slope * (1/up + 1/down)}
}

// node returns the trace at node k.
func (f *dfFinder) node(k int) tracePoint {
	theta := min(f.lo+float64(k)*dfStep, f.hi)
	at := f.nodes[2*k : 2*k+2]
	if at[0] == 0 && at[1] == 0 {
		t, slope := f.trace(theta)
		p := f.point(theta, t, slope)
		at[0], at[1] = p.z, p.rate
	}
	return tracePoint{theta, at[0], at[1]}
}

// find returns θ with tr S = df, floor < df < ceiling; found is false where the trace
// stays off df. If it is true, the last call of trace was at θ. guess is where θ
// may lie: it changes the cost and not the answer.
func (f *dfFinder) find(df, guess float64) (theta float64, found bool) {
	goal := f.point(0, df, 0).z
	above, below, inside := f.cell(goal, guess)
	if !inside { // both are the end that comes nearest
		t, _ := f.trace(above.theta)
		return above.theta, math.Abs(t-df) <= dfTolerance*df
	}
	lo, hi := above.theta, below.theta
	points := [3]tracePoint{above, below}
	known := 2
	for range 200 {
		theta = interpolate(goal, points[:known])
		if !(theta > lo && theta < hi) {
			theta = lo + (hi-lo)/2
		}
		t, slope := f.trace(theta)
		if math.Abs(t-df) <= dfClose*df {
			return theta, true
		}
		if theta == lo || theta == hi {
			return theta, math.Abs(t-df) <= dfTolerance*df
		}
		p := f.point(theta, t, slope)
		if known == 3 { // the latest three are kept
			points[0] = points[1]
			points[1] = points[2]
		}
		points[2], known = p, 3
		if p.z > goal {
			lo = theta
		} else {
			hi = theta
		}
	}
	return theta, false
}

// cell returns the neighbouring nodes between which z passes the goal, starting at a
// guess and going by Newton steps. Where all z lie on one side, inside is false and
// both are the node at that end.
func (f *dfFinder) cell(goal, guess float64) (above, below tracePoint, inside bool) {
	last := len(f.nodes)/2 - 1
	a, b := -1, last+1
	next := (guess - f.lo) / dfStep
	for tries := 0; b-a > 1; tries++ {
		k := (a + b) / 2
		if tries < 20 && !math.IsNaN(next) {
			k = int(min(max(next, float64(a+1)), float64(b-1)))
		}
		p := f.node(k)
		next = float64(k) + (goal-p.z)/p.rate/dfStep
		if p.z > goal {
			a, above = k, p
			next++ // the far end of the cell it points to
		} else {
			b, below = k, p
		}
	}
	switch {
	case a < 0:
		return below, below, false
	case b > last:
		return above, above, false
	}
	return above, below, true
}

// interpolate returns θ at z = goal on the polynomial in z through the points, and
// with their rates where these are known (Newton's divided differences, a point with
// a rate counted twice). It is NaN where a point is infinite.
func interpolate(goal float64, points []tracePoint) float64 {
	var z, c [6]float64
	n := 0
	for _, p := range points {
		z[n], c[n] = p.z, p.theta
		n++
		if !math.IsNaN(p.rate) {
			z[n], c[n] = p.z, p.theta
			n++
		}
	}
	twice := func(i int) bool { return z[i] == z[i-1] }
	slope := func(i int) float64 {
		for _, p := range points {
			if p.z == z[i] {
				return 1 / p.rate
			}
		}
		return math.NaN()
	}
	for order := 1; order < n; order++ {
		for i := n - 1; i >= order; i-- {
			if order == 1 && twice(i) {
				c[i] = slope(i)
				continue
			}
			c[i] = (c[i] - c[i-1]) / (z[i] - z[i-order])
		}
	}
	theta := c[n-1]
	for i := n - 2; i >= 0; i-- {
		theta = theta*(goal-z[i]) + c[i]
	}
	return theta
}
