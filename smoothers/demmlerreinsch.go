package smoothers

import "math"

// A reinschBasis is the basis that a penalised least-squares spline on a design thinks
// in (Demmler & Reinsch 1975, Numer. Math. 24:375): coefficient vectors w_k with
//
//	w_jᵀBᵀB w_k = σ_k² and w_jᵀDᵀD w_k = 1 for j = k, both 0 otherwise,
//
// D the second differences, beside two straight lines that BᵀB makes orthonormal and D
// sends to 0. In this basis S(λ) is diagonal with 1, 1 and σ_k²/(σ_k² + λ).
//
// All is found once per design, from the singular values of B D⁺ with the lines taken
// out (Eldén 1977, BIT 17:134): nothing is squared, λ plays no part, and of λ large or
// small nothing overflows. With c = Nα + He, e = Dc, H the sequences with a single kink, RN
// is brought to a triangle by two reflections; what these leave of RH is the matrix
// wanted. Errors are of the order of rounding of the norm of RH.
type reinschBasis struct {
	columns int       // q, the number of coefficients
	sigma   []float64 // q − 2, descending; 0 where B does not see w_k
	vectors []float64 // q × q by rows: the two lines, then w_k
	norm    float64   // of RH, in the Frobenius norm: some six times the largest σ on most designs
}

// newReinschBasis works it out for at least four columns from the R of B. rank is that
// of B, at least 2.
func newReinschBasis(q *windowQR, rank int, mem *Arena) reinschBasis {
	n := q.columns()
	p := n - 2
	b := reinschBasis{columns: n, sigma: mem.floats(p), vectors: mem.floats(n * n)}
	a := mem.floats(n * n)
	penaltyForm(a, q)
	b.norm = math.Sqrt(dot(a[2*n:], a[2*n:]))
	for k := range 2 {
		column := a[k*n+k : (k+1)*n]
		tau := flip(column)
		for j := k + 1; j < n; j++ {
			flipped(a[j*n+k:(j+1)*n], column, tau)
		}
	}
	rows := mem.floats(p * p)
	for j := range p {
		for i, v := range a[(2+j)*n+2 : (3+j)*n] {
			rows[i*p+j] = v
		}
	}
	orthogonalise(rows, p, b.sigma)
	b.lines(a[0], a[n], a[n+1])
	for k := range p {
		if k >= rank-2 || b.sigma[k] == 0 {
			clear(b.sigma[k:])
			break
		}
		b.vector(k, rows[k*p:(k+1)*p], a)
	}
	return b
}

// penaltyForm writes the columns of RN and RH into a, one after the other: N the
// constant and the centred line, H the kinks (k − j − 1)₊, j = 0, 1, ….
func penaltyForm(a []float64, q *windowQR) {
	n := q.columns()
	middle := float64(n-1) / 2
	for i := range n {
		for l, r := range q.r[i*q.w : i*q.w+min(q.w, n-i)] {
			k := i + l
			a[i] += r
			a[n+i] += r * (float64(k) - middle)
			for j := range max(k-1, 0) {
				a[(2+j)*n+i] += r * float64(k-1-j)
			}
		}
	}
}

// flip finds the reflection 1 − τvvᵀ, v = (1, v′), that sends a column to a multiple of
// the first unit vector. It leaves that multiple and v′ in its place.
func flip(column []float64) (tau float64) {
	return reflector(&column[0], column[1:], 1, 0)
}

// flipped applies a reflection to x.
func flipped(x, v []float64, tau float64) {
	d := tau * (x[0] + dot(v[1:], x[1:]))
	x[0] -= d
	for i, u := range v[1:] {
		x[1+i] -= d * u
	}
}

// lines writes the two straight lines, given the triangle (r00 r01; 0 r11) of RN.
func (b *reinschBasis) lines(r00, r01, r11 float64) {
	n := b.columns
	middle := float64(n-1) / 2
	for k := range n {
		b.vectors[k] = 1 / r00
		b.vectors[n+k] = (float64(k) - middle - r01/r00) / r11
	}
}

// vector writes w_k from σ_k v_k, v_k the k-th right singular vector: Hv_k less its lines,
// of which the first two rows of a tell.
func (b *reinschBasis) vector(k int, row, a []float64) {
	n := b.columns
	w := b.vectors[(2+k)*n : (3+k)*n]
	var value, slope, level, tilt float64
	for j, u := range row {
		v := u / b.sigma[k]
		slope += v
		value += slope
		w[j+2] = value
		level += v * a[(2+j)*n]
		tilt += v * a[(2+j)*n+1]
	}
	for i, one := range b.vectors[:n] {
		w[i] -= level*one + tilt*b.vectors[n+i]
	}
}

// rank is the number of columns that B sees.
func (b *reinschBasis) rank() int {
	r := 2
	for r-2 < len(b.sigma) && b.sigma[r-2] > 0 {
		r++
	}
	return r
}
