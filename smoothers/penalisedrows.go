package smoothers

import "math"

// A penaltyRows holds the rows of B in the orthonormal basis u_k = Bw_k/σ_k of a
// reinschBasis, and from them works out the diagonals of matrices Σ_k f_k u_k u_kᵀ, as S,
// SSᵀ and I − S are.
type penaltyRows struct {
	qr     *windowQR
	rank   int       // number of u_k, the two lines first
	first  []float64 // of segment s in rows, counted in rows; length segments + 1
	rows   []float64 // by rows of length rank: u_ik² where the segment is not dense, else u of its triangle
	unseen []float64 // 1 − Σ_k u_ik² for each distinct x: what B misses
}

// newPenaltyRows works them out.
func newPenaltyRows(q *windowQR, b *reinschBasis, rank int, mem *Arena) penaltyRows {
	m, segments := int(q.first[q.windows()]), q.windows()
	p := penaltyRows{qr: q, rank: rank, first: mem.floats(segments + 1), unseen: mem.floats(m)}
	for s := range segments {
		p.first[s+1] = p.first[s] + float64(len(q.block(s))/q.w)
	}
	p.rows = mem.floats(int(p.first[segments]) * rank)
	for s := range segments {
		block, rows := q.block(s), p.of(s)
		for i := range len(block) / q.w {
			for k := range rank {
				u := dot(block[i*q.w:(i+1)*q.w], b.vectors[k*b.columns+s:k*b.columns+s+q.w])
				if k >= 2 {
					u /= b.sigma[k-2]
				}
				rows[i*rank+k] = u
			}
		}
	}
	whole := p.purify(b)
	for s := range segments {
		if !q.dense(s) {
			for i, u := range p.of(s) {
				p.rows[int(p.first[s])*rank+i] = u * u
			}
		}
	}
	if rank < m || !whole {
		all := mem.floats(rank)
		for k := range all {
			all[k] = 1
		}
		p.diagonals(all, all, all, p.unseen, p.unseen, p.unseen)
		for i, v := range p.unseen {
			p.unseen[i] = max(1-v, 0)
		}
	}
	return p
}

// faintSigma is the σ, relative to the norm whose rounding it suffers, below which u = Bw/σ
// has too few digits.
const faintSigma = 2e-6

// purify makes the u_k of small σ orthonormal to all others and to one another. What is
// left of their error is a turn among them that no λ large enough to have digits sees.
// One that is nothing but rounding of the others is dropped, and reported as false.
func (p *penaltyRows) purify(b *reinschBasis) (whole bool) {
	whole = true
	for k := 2; k < p.rank; k++ {
		if b.sigma[k-2] > faintSigma*b.norm {
			continue
		}
		left := 0.0 // of the norm after taking the others out
		for tries := 0; tries < 5 && !(left > 0.5); tries++ {
			p.combine(k, k, 1/math.Sqrt(p.inner(k, k))-1)
			for j := range k {
				p.combine(k, j, -p.inner(k, j))
			}
			left = math.Sqrt(p.inner(k, k))
			if !(left > 0) {
				break
			}
		}
		if !(left > 0.5) {
			whole = false
			for i := k; i < len(p.rows); i += p.rank {
				p.rows[i] = 0
			}
			continue
		}
		p.combine(k, k, 1/left-1)
	}
	return whole
}

// inner is the inner product of u_j and u_k.
func (p *penaltyRows) inner(j, k int) (sum float64) {
	for i := 0; i < len(p.rows); i += p.rank {
		sum += p.rows[i+j] * p.rows[i+k]
	}
	return sum
}

// combine adds a multiple of u_j to u_k.
func (p *penaltyRows) combine(k, j int, times float64) {
	for i := 0; i < len(p.rows); i += p.rank {
		p.rows[i+k] += times * p.rows[i+j]
	}
}

// of returns the rows of segment s.
func (p *penaltyRows) of(s int) []float64 {
	return p.rows[int(p.first[s])*p.rank : int(p.first[s+1])*p.rank]
}

// diagonals writes Σ_k f_k u_ik² for three sets of factors f.
func (p *penaltyRows) diagonals(f, g, h []float64, df, dg, dh []float64) {
	q := p.qr
	for s := range q.windows() {
		from, rows := int(q.first[s]), p.of(s)
		if q.dense(s) {
			p.bySegment(s, f, g, h, df, dg, dh)
			continue
		}
		for i := range len(rows) / p.rank {
			var a, b, c float64
			for k, v := range rows[i*p.rank : (i+1)*p.rank] {
				a += f[k] * v
				b += g[k] * v
				c += h[k] * v
			}
			df[from+i], dg[from+i], dh[from+i] = a, b, c
		}
	}
}

// A form is a symmetric 4 × 4 matrix A as the coefficients of v₀², v₀v₁, v₀v₂, v₀v₃, v₁²,
// v₁v₂, v₁v₃, v₂², v₂v₃ and v₃² in vᵀAv.
type form [10]float64

// bySegment is diagonals for a dense segment, whose rows are v times its triangle, v of
// length 4: all are values of one form.
func (p *penaltyRows) bySegment(s int, f, g, h []float64, df, dg, dh []float64) {
	a, b, c := p.form(s, f), p.form(s, g), p.form(s, h)
	for i := int(p.qr.first[s]); i < int(p.qr.first[s+1]); i++ {
		v := (*[4]float64)(p.qr.rows[4*i:])
		products := form{
			v[0] * v[0], v[0] * v[1], v[0] * v[2], v[0] * v[3], v[1] * v[1],
			v[1] * v[2], v[1] * v[3], v[2] * v[2], v[2] * v[3], v[3] * v[3],
		}
		var x, y, z float64
		for k, u := range products {
			x += a[k] * u
			y += b[k] * u
			z += c[k] * u
		}
		df[i], dg[i], dh[i] = x, y, z
	}
}

// form returns Σ_k f_k u_k u_kᵀ, u_k the four values of the triangle of segment s.
func (p *penaltyRows) form(s int, f []float64) (a form) {
	rows, at := p.of(s), 0
	for i := range 4 {
		for j := i; j < 4; j++ {
			one, two := rows[i*p.rank:(i+1)*p.rank], rows[j*p.rank:(j+1)*p.rank]
			for k, v := range one {
				a[at] += f[k] * v * two[k]
			}
			if j > i {
				a[at] *= 2
			}
			at++
		}
	}
	return a
}
