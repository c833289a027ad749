package scoring

import "bendtest/smoothers"

// A walker sums a piecewise cubic over a held-out set, upwards: long blocks that lie
// within one piece by their moments, the others by their short blocks, and the short
// blocks that hold a break point by point.
type walker struct {
	set   *HeldOut
	curve *smoothers.Piecewise
	piece int
}

// sum adds up long blocks [from, to); calls must go upwards.
func (w *walker) sum(from, to int) sums {
	var s sums
	for k := from; k < to; k++ {
		long := &w.set.long[k]
		if w.covers(&long.block) {
			g := w.cubicAbout(long.c, long.w)
			s = s.plus(long.sum(&g))
			continue
		}
		for i := long.first; i < long.last; i++ {
			s = s.plus(w.short(&w.set.short[i]))
		}
	}
	return s
}

// short sums one short block.
func (w *walker) short(b *block) sums {
	if w.covers(b) {
		g := w.cubicAbout(b.c, b.w)
		return b.sum(&g)
	}
	s := sums{n: b.to - b.from}
	for i := b.from; i < b.to; i++ {
		x := w.set.x[i]
		w.seek(x)
		g := w.curve.Piece(w.piece, x)
		s.add(w.set.y[i]-g, w.set.f[i]-g)
	}
	return s
}

// covers moves to the piece of a block's first point and reports whether it covers
// the whole block.
func (w *walker) covers(b *block) bool {
	w.seek(w.set.x[b.from])
	return w.piece == len(w.curve.Origin)-1 || w.set.x[b.to-1] < w.curve.Break[w.piece+1]
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
	inverse := 1 / p.Width[w.piece]
	s := (centre - p.Origin[w.piece]) * inverse
	r := scale * inverse
	return [maxOrder]float64{
		c[0] + s*(c[1]+s*(c[2]+s*c[3])),
		r * (c[1] + s*(2*c[2]+3*s*c[3])),
		r * r * (c[2] + 3*s*c[3]),
		r * r * r * c[3],
	}
}
