package smoothers

import "math"

// An arnoldi is a basis of polynomials q_0, q_1, … orthonormal over the observations of a
// design, made by the Arnoldi process with reorthogonalisation, so that high degrees
// keep their digits (Brubeck, Nakatsukasa & Trefethen 2021, SIAM Rev. 63:405). With t
// the position scaled to [−1, 1],
//
//	beta_{k+1} q_{k+1} = (t − alpha_k) q_k − beta_k q_{k−1},
//
// the other coefficients of the process being rounding: multiplying by t is symmetric.
type arnoldi struct {
	design      *tied
	mem         *Arena
	half        float64   // half the range of x
	size        int       // polynomials that there are: fewer than asked for if one more has no digits
	q           []float64 // size × m: values at the distinct x
	lever       []float64 // size × m: sums of squares over q_0 … q_k, the leverages of degree k
	alpha, beta []float64 // length size; beta[0] is 0
	rate        []float64 // 1/beta; rate[0] is q_0
	drift       []float64 // 2 × m: the last two polynomials by recurrence
	unit        []float64 // scratch, length m
}

// leastDigits is how far a polynomial evaluated by recurrence may be off its values at the
// data, relative to the largest of these: what the curve loses against the fitted values.
const leastDigits = 1e-10

// newArnoldi makes up to size polynomials.
func newArnoldi(design *tied, size int, mem *Arena) *arnoldi {
	m := len(design.z)
	b := &arnoldi{design: design, mem: mem, half: (design.z[m-1] - design.z[0]) / 2}
	if size == 0 || math.IsInf(b.half, 1) {
		return b
	}
	b.q, b.lever = mem.floats(size*m), mem.floats(size*m)
	b.alpha, b.beta, b.rate = mem.floats(size), mem.floats(size), mem.floats(size)
	b.drift, b.unit = mem.floats(2*m), mem.floats(m)
	b.rate[0] = 1 / math.Sqrt(float64(len(design.x)))
	for i := range m {
		b.q[i] = b.rate[0]
		b.lever[i] = b.q[i] * b.q[i]
		b.drift[m+i] = b.q[i]
	}
	for b.size = 1; b.size < size; b.size++ {
		if !b.extend() {
			break
		}
	}
	return b
}

// position scales a point, counted from the design's origin, to [−1, 1].
func (b *arnoldi) position(z float64) float64 {
	if b.half == 0 {
		return 0
	}
	return (z-b.design.z[0])/b.half - 1
}

// extend makes one more polynomial, and says whether it has its digits.
func (b *arnoldi) extend() bool {
	m, k := len(b.design.z), b.size
	v, last := b.q[k*m:(k+1)*m], b.q[(k-1)*m:k*m]
	for i, z := range b.design.z {
		v[i] = b.position(z) * last[i]
	}
	for range 2 { // twice is enough
		for j := range k {
			c := b.project(v, j)
			if j == k-1 {
				b.alpha[j] += c
			}
		}
	}
	norm := math.Sqrt(b.dot(v, v))
	b.beta[k], b.rate[k] = norm, 1/norm
	lever, below := b.lever[k*m:(k+1)*m], b.lever[(k-1)*m:k*m]
	for i := range v {
		v[i] /= norm
		lever[i] = below[i] + v[i]*v[i]
	}
	return b.evaluable(v)
}

// project takes the part along q_j out of v and returns its size.
func (b *arnoldi) project(v []float64, j int) float64 {
	m := len(v)
	q := b.q[j*m : (j+1)*m]
	c := b.dot(q, v)
	for i := range v {
		v[i] -= c * q[i]
	}
	return c
}

// evaluable evaluates the newest polynomial, whose values are v, by recurrence at the
// data, and says whether that gives v.
func (b *arnoldi) evaluable(v []float64) bool {
	m, k := len(v), b.size
	before, last := b.drift[:m], b.drift[m:]
	size, off := 0.0, 0.0
	for i, z := range b.design.z {
		next := b.next(k, b.position(z), last[i], before[i])
		before[i], last[i] = last[i], next
		size, off = max(size, math.Abs(v[i])), max(off, math.Abs(next-v[i]))
	}
	return off <= leastDigits*size
}

// next evaluates q_k at t from the two before it (Stieltjes).
func (b *arnoldi) next(k int, t, last, before float64) float64 {
	return ((t-b.alpha[k-1])*last - b.beta[k-1]*before) * b.rate[k]
}

// dot is the inner product over the observations.
func (b *arnoldi) dot(u, v []float64) float64 {
	sum := 0.0
	for i, c := range b.design.count {
		sum += c * u[i] * v[i]
	}
	return sum
}

// remainder returns 1 − h for the leverage h of observation i in a fit of p polynomials.
// Where that difference would lose digits it is the squared length of what the fit
// leaves of a unit vector; there are no more than about p such observations.
func (b *arnoldi) remainder(i, p int, h float64) float64 {
	count := b.design.count[i]
	switch {
	case p == len(b.design.z):
		return (count - 1) / count
	case 1-h > 1e-3:
		return 1 - h
	}
	clear(b.unit)
	b.unit[i] = 1
	for range 2 { // the second pass takes out what the first leaves by rounding
		for k := range p {
			b.project(b.unit, k)
		}
	}
	return b.dot(b.unit, b.unit)
}
