package smoothers

// maxDegree bounds the degree of splines, so that small fixed arrays serve.
const maxDegree = 10

// A bspline is the B-splines of some degree on a clamped knot sequence: degree + 1
// equal knots at either end and the interior knots between (de Boor 2001, A Practical
// Guide to Splines, ch. IX). Interval k runs from knots[k] to knots[k+1], and
// functions k − degree … k live on it.
type bspline struct {
	degree int
	knots  []float64 // ascending, length interior + 2(degree + 1)
}

// size is the number of basis functions.
func (b *bspline) size() int { return len(b.knots) - b.degree - 1 }

// interval returns the interval that holds x, going up from guess, which must not be
// above it. The first and the last also have all that lies beyond.
func (b *bspline) interval(x float64, guess int) int {
	k, last := guess, b.size()-1
	for k < last && x >= b.knots[k+1] {
		k++
	}
	return k
}

// A spanSteps holds what evaluating the functions on interval k takes of the knots:
// for each order e = 1 … degree the reciprocals of knots[k+1+l] − knots[k+1+l−e],
// l = 0 … e−1, one order after the other. All these stretches contain the interval.
type spanSteps struct {
	k       int
	inverse [maxDegree * (maxDegree + 1) / 2]float64
}

// enter readies s for interval k.
func (s *spanSteps) enter(b *bspline, k int) {
	s.k = k
	at := 0
	for e := 1; e <= b.degree; e++ {
		for l := k + 1; l <= k+e; l++ {
			s.inverse[at] = 1 / (b.knots[l] - b.knots[l-e])
			at++
		}
	}
}

// values writes the degree + 1 functions that do not vanish on the interval, at x, into
// v (de Boor's recurrence BSPLVB). Within the interval only positive terms are added.
func (s *spanSteps) values(b *bspline, v []float64, x float64) {
	if b.degree == 3 {
		s.cubic(b, (*[4]float64)(v), x)
		return
	}
	v[0] = 1
	at := 0
	for e := 1; e <= b.degree; e++ {
		at = s.raise(b, v, x, e, at)
	}
}

// cubic is values for degree 3, written out: cubics are most of what is ever asked for.
func (s *spanSteps) cubic(b *bspline, v *[4]float64, x float64) {
	t := (*[6]float64)(b.knots[s.k-2:])
	i := (*[6]float64)(s.inverse[:])
	l2, l1, l0 := x-t[0], x-t[1], x-t[2]
	r0, r1, r2 := t[3]-x, t[4]-x, t[5]-x
	p, q := r0*i[0], l0*i[0]
	a, c := p*i[1], q*i[2]
	p, q, u := r0*a, l1*a+r1*c, l0*c
	a, c, d := p*i[3], q*i[4], u*i[5]
	v[0], v[1], v[2], v[3] = r0*a, l2*a+r1*c, l1*c+r2*d, l0*d
}

// raise turns the functions of order e − 1 in v into those of order e.
func (s *spanSteps) raise(b *bspline, v []float64, x float64, e, at int) int {
	saved := 0.0
	for l := range e {
		t := v[l] * s.inverse[at+l]
		right := b.knots[s.k+1+l]
		left := b.knots[s.k+1+l-e]
		v[l] = saved + (right-x)*t
		saved = (x - left) * t
	}
	v[e] = saved
	return at + e
}

// powers writes the polynomial that the coefficients c (those of functions k − degree
// … k) make on the interval into dst, by powers of u = (x − from)/width.
//
// Its r-th derivative is a spline of order degree − r whose coefficients are differences
// of c over knot distances (de Boor 2001, ch. X, eq. 16). With the interval's length
// for width, no distance is below it: no difference is magnified.
func (s *spanSteps) powers(b *bspline, dst, c []float64, from, width float64) {
	d := b.degree
	var tower [(maxDegree + 1) * (maxDegree + 2) / 2]float64 // c, then its differences
	copy(tower[:d+1], c)
	top, at := 0, d*(d+1)/2 // where the highest row begins; the order's reciprocals end at `at`
	for e := d; e >= 1; e-- {
		at -= e
		low, high := tower[top:top+e+1], tower[top+e+1:top+2*e+1]
		step := float64(e) * width
		for l := range high {
			high[l] = (low[l+1] - low[l]) * (step * s.inverse[at+l])
		}
		top += e + 1
	}
	var v [maxDegree + 1]float64
	v[0] = 1
	factorial := 1.0
	for r := 2; r <= d; r++ {
		factorial *= float64(r)
	}
	for e := 0; e <= d; e++ {
		if e > 0 {
			at = s.raise(b, v[:], from, e, at)
			top -= e + 1
		}
		sum := 0.0
		for l, a := range tower[top : top+e+1] {
			sum += a * v[l]
		}
		r := d - e
		dst[r] = sum / factorial
		factorial /= float64(max(r, 1))
	}
}
