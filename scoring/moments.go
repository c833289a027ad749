package scoring

import (
	"bendtest/smoothers"
)

// maxOrder is the largest order of piece (degree + 1) that blocks keep moments for.
const maxOrder = 4

// A block is a run of held-out points with its moments about centre c on the
// scale w: u = (x − c)/w lies in [−1, 1].
type block struct {
	from, to     int // the points [from, to)
	c, w         float64
	meanY, meanF float64
	yy, ff       float64                 // Σ(y−ȳ)², Σ(f−f̄)²
	u            [2*maxOrder - 1]float64 // Σ u^k
	yu, fu       [maxOrder]float64       // Σ (y−ȳ)u^k, Σ (f−f̄)u^k
}

// set computes the moments of the points [from, to), which must not be empty.
func (b *block) set(x, y, f []float64, from, to int) {
	b.from, b.to = from, to
	b.c = x[from] + (x[to-1]-x[from])/2
	b.w = (x[to-1] - x[from]) / 2
	if !(b.w > 0) {
		b.w = 1 // one x: u = 0 throughout
	}
	n := float64(to - from)
	for i := from; i < to; i++ {
		b.meanY += y[i] / n
		b.meanF += f[i] / n
	}
	for i := from; i < to; i++ {
		u := (x[i] - b.c) / b.w
		dy, df := y[i]-b.meanY, f[i]-b.meanF
		b.yy += dy * dy
		b.ff += df * df
		u2 := u * u
		u3 := u2 * u
		b.u[1] += u
		b.u[2] += u2
		b.u[3] += u3
		b.u[4] += u2 * u2
		b.u[5] += u2 * u3
		b.u[6] += u3 * u3
		b.yu[0] += dy
		b.yu[1] += dy * u
		b.yu[2] += dy * u2
		b.yu[3] += dy * u3
		b.fu[0] += df
		b.fu[1] += df * u
		b.fu[2] += df * u2
		b.fu[3] += df * u3
	}
	b.u[0] = n
}

// sum adds up the squared deviations from the cubic with coefficients g in u.
func (b *block) sum(g [maxOrder]float64) sums {
	p := g
	p[0] -= b.meanY
	q := g
	q[0] -= b.meanF
	return sums{
		y: b.yy - 2*inner(&b.yu, &p) + b.square(&p),
		f: b.ff - 2*inner(&b.fu, &q) + b.square(&q),
		n: b.to - b.from,
	}
}

// inner returns Σ a_k g_k.
func inner(a, g *[maxOrder]float64) float64 {
	return a[0]*g[0] + a[1]*g[1] + a[2]*g[2] + a[3]*g[3]
}

// square returns Σ g(u)² over the block, g a cubic.
func (b *block) square(g *[maxOrder]float64) float64 {
	m := &b.u
	return g[0]*g[0]*m[0] +
		2*g[0]*g[1]*m[1] +
		(2*g[0]*g[2]+g[1]*g[1])*m[2] +
		2*(g[0]*g[3]+g[1]*g[2])*m[3] +
		(2*g[1]*g[3]+g[2]*g[2])*m[4] +
		2*g[2]*g[3]*m[5] +
		g[3]*g[3]*m[6]
}

// A walker sums a piecewise cubic over a held-out set, block by block upwards.
type walker struct {
	set   *HeldOut
	curve *smoothers.Piecewise
	piece int
}

// sum adds up blocks [from, to); calls must go upwards.
func (w *walker) sum(from, to int) sums {
	var s sums
	for k := from; k < to; k++ {
		s = s.plus(w.block(&w.set.blocks[k]))
	}
	return s
}

// block sums one block: by moments if one piece covers it, directly if not.
func (w *walker) block(b *block) sums {
	x := w.set.x
	w.seek(x[b.from])
	p := w.curve
	if w.piece == len(p.Origin)-1 || x[b.to-1] < p.Break[w.piece+1] {
		return b.sum(w.cubicAbout(b.c, b.w))
	}
	s := sums{n: b.to - b.from}
	for i := b.from; i < b.to; i++ {
		w.seek(x[i])
		g := p.Piece(w.piece, x[i])
		s.add(w.set.y[i]-g, w.set.f[i]-g)
	}
	return s
}

// seek moves up to the piece that covers t.
func (w *walker) seek(t float64) {
	for w.piece < len(w.curve.Origin)-1 && t >= w.curve.Break[w.piece+1] {
		w.piece++
	}
}

// cubicAbout returns the current piece's coefficients in (t − centre)/scale.
func (w *walker) cubicAbout(centre, scale float64) [maxOrder]float64 {
	p := w.curve
	var c [maxOrder]float64
	copy(c[:], p.Coef[w.piece*p.Order:(w.piece+1)*p.Order])
	s := (centre - p.Origin[w.piece]) / p.Width[w.piece]
	r := scale / p.Width[w.piece]
	return [maxOrder]float64{
		c[0] + s*(c[1]+s*(c[2]+s*c[3])),
		r * (c[1] + s*(2*c[2]+3*s*c[3])),
		r * r * (c[2] + 3*s*c[3]),
		r * r * r * c[3],
	}
}
