package smoothers

import "math"

// A windowSpread works out what S = B(BᵀB)⁻¹Bᵀ has on its diagonal, from a windowQR
// of B. It is scratch, for one factorisation after the other.
type windowSpread struct {
	q     *windowQR
	store []float64 // what all below is cut from

	above   []float64 // windows × (w−1)w: what the windows above say of a window's columns, as rows
	size    []float64 // columns: their squared norms
	lower   []float64 // w × w: the triangle of what the windows below say
	upward  []float64 // w × w: that and the window's own rows
	local   []float64 // w × w: the triangle of all that is said of a window's columns …
	inverse []float64 // w × w: … and its inverse
	basis   []float64 // w × w: the block of a window times that inverse
	spare   []float64 // w × w: rows that get used up
	row     []float64 // w
	tau     []float64 // w
}

// on readies p for q, whose rows are compressed.
func (p *windowSpread) on(q *windowQR, mem *Arena) {
	w := q.w
	above, size := q.windows()*(w-1)*w, q.columns()
	if need := above + size + 6*w*w + 2*w; len(p.store) < need {
		p.store = mem.floats(need)
	}
	at := 0
	take := func(n int) []float64 {
		at += n
		return p.store[at-n : at : at]
	}
	p.q, p.above, p.size = q, take(above), take(size)
	p.lower, p.upward, p.local, p.inverse = take(w*w), take(w*w), take(w*w), take(w*w)
	p.basis, p.spare = take(w*w), take(w*w)
	p.row, p.tau = take(w), take(w)
}

// factor makes R of the windowQR and writes, for each row of B, its leverage and
// 1 − leverage. It returns by how much the problem may magnify rounding errors of B:
// √Σ_j |B_j|²(BᵀB)⁻¹_jj, the condition number in the Frobenius norm of B with its
// columns scaled to norm 1. That is +Inf or NaN if B has not full rank.
func (p *windowSpread) factor(leverage, rest []float64) (condition float64) {
	q, w := p.q, p.q.w
	p.norms()
	p.downwards()
	clear(p.lower)
	last := q.windows() - 1
	for s := range last + 1 {
		copy(p.upward, p.lower)
		q.absorb(s, p.upward)
		p.join(s)
		known := 1 // columns that no later window has
		if s == last {
			known = w
		}
		for k := range known {
			sum := 0.0
			for _, v := range p.inverse[k*w+k : (k+1)*w] {
				sum += v * v
			}
			condition += p.size[s+k] * sum
		}
		p.rows(s, leverage, rest)
		copy(p.lower, p.upward)
		advance(p.lower, w)
	}
	return math.Sqrt(condition)
}

// norms writes the squared norms of the columns of B.
func (p *windowSpread) norms() {
	clear(p.size)
	for s := range p.q.windows() {
		for i, v := range p.q.block(s) {
			p.size[s+i%p.q.w] += v * v
		}
	}
}

// downwards works out what the windows above say: upwards elimination on columns in
// descending order.
func (p *windowSpread) downwards() {
	q, w := p.q, p.q.w
	t, size := p.upward, (w-1)*w
	clear(t)
	clear(p.above[(q.windows()-1)*size:])
	for s := q.windows() - 1; s > 0; s-- {
		block := q.block(s)
		for i := 0; i < len(block); i += w {
			for j := range w {
				p.spare[i+w-1-j] = block[i+j]
			}
		}
		absorb(t, p.spare[:len(block)], w, p.tau)
		advance(t, w)
		above := p.above[(s-1)*size : s*size]
		for k := range w - 1 {
			above[k*w] = 0
			for j := range w - 1 {
				above[k*w+w-1-j] = t[k*w+j]
			}
		}
	}
}

// join makes the triangle of all that is said of the columns of window s, its inverse,
// and the orthonormal rows of the window's block.
func (p *windowSpread) join(s int) {
	w := p.q.w
	size := (w - 1) * w
	copy(p.local, p.upward)
	copy(p.spare, p.above[s*size:(s+1)*size])
	absorb(p.local, p.spare[:size], w, p.tau)
	for j := range w {
		p.inverse[j*w+j] = 1 / p.local[j*w+j]
		for k := j - 1; k >= 0; k-- {
			sum := 0.0
			for l := k + 1; l <= j; l++ {
				sum -= p.local[k*w+l] * p.inverse[l*w+j]
			}
			p.inverse[k*w+j] = sum * p.inverse[k*w+k]
		}
	}
	block := p.q.block(s)
	for i := 0; i < len(block); i += w {
		for j := range w {
			sum := 0.0
			for k := range j + 1 {
				sum += block[i+k] * p.inverse[k*w+j]
			}
			p.basis[i+j] = sum
		}
	}
}

// highLeverage is where 1 − leverage begins to lose digits as a difference.
const highLeverage = 0.9

// rows writes the leverages of the rows of window s and what they leave.
func (p *windowSpread) rows(s int, leverage, rest []float64) {
	w, rows := p.q.w, p.q.of(s)
	from := int(p.q.first[s])
	for i := range len(rows) / w {
		sum := 0.0
		if !p.q.dense(s) {
			for _, v := range p.basis[i*w : (i+1)*w] {
				sum += v * v
			}
		} else {
			sum = spanned(rows[i*w:(i+1)*w], p.basis)
		}
		leverage[from+i] = sum
		if rest[from+i] = 1 - sum; sum > highLeverage {
			rest[from+i] = p.without(s, i)
		}
	}
}

// spanned returns |rowᵀt|² for an upper triangle t.
func spanned(row, t []float64) float64 {
	w := len(row)
	if w == 4 { // cubic splines: most of what is ever done here
		r, t := (*[4]float64)(row), (*[16]float64)(t)
		a, b := r[0]*t[0], r[0]*t[1]+r[1]*t[5]
		c, d := r[0]*t[2]+r[1]*t[6]+r[2]*t[10], r[0]*t[3]+r[1]*t[7]+r[2]*t[11]+r[3]*t[15]
		return a*a + b*b + (c*c + d*d)
	}
	sum := 0.0
	for j := range w {
		u := 0.0
		for k, v := range row[:j+1] {
			u += v * t[k*w+j]
		}
		sum += u * u
	}
	return sum
}

// without returns 1 − the leverage of row i of window s: 1/(1 + v), v the variance that
// all other rows leave to the row's value (Sherman & Morrison).
func (p *windowSpread) without(s, i int) float64 {
	q, w := p.q, p.q.w
	size := (w - 1) * w
	copy(p.local, p.lower)
	for j := range len(q.of(s)) / w {
		if j != i {
			q.row(p.row, s, j)
			absorb(p.local, p.row, w, p.tau)
		}
	}
	copy(p.spare, p.above[s*size:(s+1)*size])
	absorb(p.local, p.spare[:size], w, p.tau)
	q.row(p.row, s, i)
	v := 0.0
	for k := range w {
		d := p.local[k*w+k]
		if d == 0 {
			return 0
		}
		e := p.row[k] / d
		v += e * e
		for j := k + 1; j < w; j++ {
			p.row[j] -= e * p.local[k*w+j]
		}
	}
	return 1 / (1 + v)
}
