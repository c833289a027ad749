package smoothers

import "math"

// A bandedFit is least squares on a banded basis: each observation meets at most
// `width` neighbouring columns. R of the QR factorisation comes from Givens
// rotations row by row, in O(m·width²).
type bandedFit struct {
	basis   *bspline
	design  *tied
	natural bool
	hold    bool
	width   int       // columns that a row meets
	columns int       // of the basis after the end conditions
	first   []int     // first column of each distinct x
	rows    []float64 // m × width
	r       []float64 // columns × width: row j holds R_jj … R_j,j+width−1
	ends    [2]endRule
}

// An endRule keeps the second derivative of a cubic at one end at 0: the second
// coefficient from the end is outer·(first) + inner·(third).
type endRule struct{ outer, inner float64 }

// leastPivot is how small, relative to its column, a diagonal of R may be. Below, a
// column is nearly a combination of those before it, and fitted values would not
// have nine digits.
const leastPivot = 1e-6

// newBandedFit evaluates the basis at the distinct x.
func newBandedFit(basis *bspline, design *tied, natural bool, mem *Arena) *bandedFit {
	m := len(design.z)
	s := &bandedFit{basis: basis, design: design, natural: natural, width: basis.degree + 1, columns: basis.size()}
	if natural {
		s.columns -= 2
		s.ends = endRules(basis)
	}
	s.first = make([]int, m)
	s.rows = mem.floats(m * s.width)
	k := 0
	var v [maxDegree + 1]float64
	for i, z := range design.z {
		k = basis.interval(z, k)
		basis.at(v[:], k, z)
		row := s.rows[i*s.width : (i+1)*s.width]
		s.first[i] = k - basis.degree
		if natural {
			s.first[i] = s.fold(row, v[:s.width], k-basis.degree)
		} else {
			copy(row, v[:s.width])
		}
	}
	return s
}

// endRules solves f″ = 0 at both ends: with gaps e₁, e₂ from the end to the next and
// the next but one knot, (c₂ − c₁)/e₂ = (c₁ − c₀)/e₁.
func endRules(b *bspline) [2]endRule {
	t, p := b.knots, b.size()
	rule := func(e1, e2 float64) endRule { return endRule{e2 / (e1 + e2), e1 / (e1 + e2)} }
	return [2]endRule{
		rule(t[4]-t[3], t[5]-t[3]),
		rule(t[p]-t[p-1], t[p]-t[p-2]),
	}
}

// fold turns the values v of basis functions j … j+3 into those of the natural basis,
// whose functions are the cubic ones but the second from either end, shared out
// by the end rules. It returns the first column.
func (s *bandedFit) fold(row, v []float64, j int) int {
	clear(row)
	last := s.basis.size() - 1
	first := max(0, min(j-1, s.columns-s.width))
	if j == 0 {
		first = 0
	}
	add := func(column int, w float64) {
		if w != 0 {
			row[column-first] += w
		}
	}
	for k, w := range v {
		switch i := j + k; i {
		case 1:
			add(0, w*s.ends[0].outer)
			add(1, w*s.ends[0].inner)
		case last - 1:
			add(s.columns-1, w*s.ends[1].outer)
			add(s.columns-2, w*s.ends[1].inner)
		case 0:
			add(0, w)
		case last:
			add(s.columns-1, w)
		default:
			add(i-1, w)
		}
	}
	return first
}

// factor makes R, and says whether the basis has full rank with digits to spare.
func (s *bandedFit) factor(mem *Arena) bool {
	w := s.width
	s.r = mem.floats(s.columns * w)
	size := mem.floats(s.columns) // squared norms of the columns
	var row [maxDegree + 1]float64
	for i := range s.design.z {
		weight := math.Sqrt(s.design.count[i])
		clear(row[:])
		for k, v := range s.rows[i*w : (i+1)*w] {
			row[k] = weight * v
			if row[k] != 0 {
				size[s.first[i]+k] += row[k] * row[k]
			}
		}
		s.rotate(row[:w], s.first[i])
	}
	for j := range s.columns {
		if !(math.Abs(s.r[j*w]) > leastPivot*math.Sqrt(size[j])) {
			return false
		}
	}
	return true
}

// rotate works a row that begins at column j into R. The row is used up.
func (s *bandedFit) rotate(row []float64, j int) {
	w := s.width
	for ; j < s.columns; j++ {
		if row[0] != 0 {
			r := s.r[j*w : (j+1)*w]
			norm := math.Hypot(r[0], row[0])
			c, sn := r[0]/norm, row[0]/norm
			for k := range r {
				r[k], row[k] = c*r[k]+sn*row[k], c*row[k]-sn*r[k]
			}
		}
		copy(row, row[1:])
		row[w-1] = 0
		if zero(row) {
			return
		}
	}
}

func zero(v []float64) bool {
	for _, x := range v {
		if x != 0 {
			return false
		}
	}
	return true
}

// leverages writes |R⁻ᵀb_i|² for each distinct x. The entries of R⁻ᵀb die away
// geometrically, so the sum ends when they no longer count.
func (s *bandedFit) leverages(dst []float64, mem *Arena) {
	w := s.width
	v := mem.floats(s.columns)
	for i := range dst {
		sum, quiet := 0.0, 0
		from := s.first[i]
		for j := from; j < s.columns && quiet < w; j++ {
			t := 0.0
			if j-from < w {
				t = s.rows[i*w+j-from]
			}
			for k := max(from, j-w+1); k < j; k++ {
				t -= s.r[k*w+j-k] * v[k]
			}
			v[j] = t / s.r[j*w]
			sum += v[j] * v[j]
			if v[j]*v[j] <= 1e-20*sum && j-from >= w {
				quiet++
			} else {
				quiet = 0
			}
		}
		dst[i] = sum
	}
}

// solve implements solver: the normal equations through R, twice over the residuals,
// which gives the digits of an orthogonal solution (Björck 1987, Linear Algebra
// Appl. 88/89:31).
func (s *bandedFit) solve(y []float64, f *Fit) {
	m, p := len(s.design.z), s.columns
	f.work = resize(f.work, 2*m+2*p+s.basis.size())
	sums, fit, c, g := f.work[:m], f.work[m:2*m], f.work[2*m:2*m+p], f.work[2*m+p:2*m+2*p]
	s.design.sums(sums, y)
	level := 0.0
	for _, v := range sums {
		level += v / float64(len(s.design.x))
	}
	for i, n := range s.design.count {
		sums[i] -= n * level
	}
	clear(fit)
	clear(c)
	for range 3 {
		s.project(sums, fit, g)
		for j := range c {
			c[j] += g[j]
		}
		s.evaluate(fit, c)
	}
	for i := range fit {
		fit[i] += level
	}
	s.design.spread(f.Fitted, fit)
	full := f.work[2*m+2*p:]
	s.unfold(full, c)
	for j := range full {
		full[j] += level // B-splines add up to 1
	}
	s.pieces(&f.pieces, full)
	f.Curve = &f.pieces
}

// project solves RᵀR g = Bᵀ(sums − count·fit).
func (s *bandedFit) project(sums, fit, g []float64) {
	w := s.width
	clear(g)
	for i, v := range sums {
		e := v - s.design.count[i]*fit[i]
		row := s.rows[i*w : (i+1)*w]
		to := g[s.first[i]:min(s.first[i]+w, s.columns)]
		for k := range to {
			to[k] += row[k] * e
		}
	}
	for j := range g {
		for k := max(0, j-w+1); k < j; k++ {
			g[j] -= s.r[k*w+j-k] * g[k]
		}
		g[j] /= s.r[j*w]
	}
	for j := s.columns - 1; j >= 0; j-- {
		for k := 1; k < w && j+k < s.columns; k++ {
			g[j] -= s.r[j*w+k] * g[j+k]
		}
		g[j] /= s.r[j*w]
	}
}

// evaluate writes B c.
func (s *bandedFit) evaluate(fit, c []float64) {
	w := s.width
	for i := range fit {
		row := s.rows[i*w : (i+1)*w]
		v := 0.0
		for k, u := range c[s.first[i]:min(s.first[i]+w, s.columns)] {
			v += row[k] * u
		}
		fit[i] = v
	}
}

// unfold turns coefficients into those of the B-spline basis.
func (s *bandedFit) unfold(full, c []float64) {
	if !s.natural {
		copy(full, c)
		return
	}
	last, p := len(full)-1, len(c)
	full[0], full[last] = c[0], c[p-1]
	copy(full[2:last-1], c[1:p-1])
	full[1] = s.ends[0].outer*c[0] + s.ends[0].inner*c[1]
	full[last-1] = s.ends[1].outer*c[p-1] + s.ends[1].inner*c[p-2]
}

// pieces writes the spline with B-spline coefficients c; beyond the data go a line
// for a natural spline, a level where the value is held, or the last piece.
func (s *bandedFit) pieces(p *Piecewise, c []float64) {
	b, d := s.basis, s.basis.degree
	outer := 0
	if s.natural || s.hold {
		outer = 1
	}
	inner := 0
	for k := d; k < b.size(); k++ {
		if b.knots[k+1] > b.knots[k] {
			inner++
		}
	}
	p.grow(inner+2*outer, d+1)
	at := outer
	for k := d; k < b.size(); k++ {
		if !(b.knots[k+1] > b.knots[k]) {
			continue
		}
		b.powers(p.Coef[at*p.Order:(at+1)*p.Order], c, k)
		p.Origin[at], p.Width[at] = s.design.origin+b.knots[k], b.knots[k+1]-b.knots[k]
		p.Break[at] = p.Origin[at]
		at++
	}
	p.Break[at] = s.design.origin + b.knots[b.size()]
	if outer == 1 {
		s.outer(p)
	}
}

// outer writes the pieces beyond the data from their neighbours.
func (s *bandedFit) outer(p *Piecewise) {
	last := len(p.Origin) - 1
	p.Break[0], p.Break[last+1] = p.Break[1], p.Break[last]
	first, final := p.Coef[:p.Order], p.Coef[last*p.Order:]
	next, before := p.Coef[p.Order:2*p.Order], p.Coef[(last-1)*p.Order:last*p.Order]
	clear(first)
	clear(final)
	first[0] = next[0]
	for j, v := range before {
		final[0] += v
		final[1] += float64(j) * v
	}
	first[1] = next[1]
	if s.hold {
		first[1], final[1] = 0, 0
	}
	p.Origin[0], p.Width[0] = p.Origin[1], p.Width[1]
	p.Origin[last], p.Width[last] = p.Break[last], p.Width[last-1]
}
