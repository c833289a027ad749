package scoring

import (
	"math"

	"bendtest/sim"
	"bendtest/smoothers"
)

// A HeldOut scores curves against a held-out set whose x ascend.
//
// Piecewise cubics are not evaluated point by point. The set is cut into blocks, and
// of each block the moments Σu^k, Σyu^k and Σfu^k about its own centre are kept; on a
// block that lies within one piece the sums Σ(y−f̂)² and Σ(f−f̂)² follow from the
// moments in a few dozen operations. Blocks come short and long, the long ones made
// of the short: a piece is summed over as few as cover it. They are cut at the
// training x, where the pieces of a smoothing spline meet; the ends of the training
// range are among the cuts, so no block lies both inside and outside it.
type HeldOut struct {
	x, y, f []float64
	noise   float64 // mean of (y − f)²
	short   []block
	long    []longBlock
	inside  [2]int // long blocks [inside[0], inside[1]) lie in the training range
	pred    []float64
}

// A longBlock is short blocks [first, last) together.
type longBlock struct {
	block
	first, last int
}

// HeldOutScore is how a curve does on a held-out set.
type HeldOutScore struct {
	MSE        float64 // mean (y − f̂)²
	ASE        float64 // mean (f − f̂)²
	Inside     float64 // ASE over the points within the training range
	Outside    float64 // ASE over the points beyond it
	HasInside  bool    // there are such points
	HasOutside bool
}

// Sizes of blocks, in points. A short block with a break in it is summed point by
// point, so it should hold few; a long one serves where pieces are wide.
const (
	shortPoints = 32
	longPoints  = 128
	leastPoints = 12 // a gap between training x that holds fewer is not worth a block of its own
)

// Set takes the held-out set and the training x, both ascending. It keeps the set's
// slices until the next Set.
func (h *HeldOut) Set(held *sim.Set, train []float64) {
	h.x, h.y, h.f = held.X, held.Y, held.F
	sum := 0.0
	for i, y := range h.y {
		e := y - h.f[i]
		sum += e * e
	}
	h.noise = sum / float64(len(h.y))

	lo, hi := train[0], train[len(train)-1]
	first, n := 0, len(h.x)
	for first < n && h.x[first] < lo {
		first++
	}
	end := n
	for end > first && h.x[end-1] > hi {
		end--
	}
	h.short, h.long = h.short[:0], h.long[:0]
	h.cut(0, first, nil)
	h.inside[0] = len(h.long)
	h.cut(first, end, train)
	h.inside[1] = len(h.long)
	h.cut(end, n, nil)
}

// cut makes the blocks of the points [from, to), cut at the training x as far as the
// parts are long enough.
func (h *HeldOut) cut(from, to int, train []float64) {
	open := len(h.short) // first short block that is in no long one yet
	at := from
	for _, t := range train {
		for at < to && h.x[at] < t {
			at++
		}
		if at-from < leastPoints {
			continue
		}
		h.cutShort(from, at)
		from = at
		if at-h.short[open].from >= longPoints {
			h.join(open)
			open = len(h.short)
		}
	}
	h.cutShort(from, to)
	if open < len(h.short) {
		h.join(open)
	}
}

// join makes a long block of the short ones from open on.
func (h *HeldOut) join(open int) {
	h.long = append(h.long, longBlock{first: open, last: len(h.short)})
	h.long[len(h.long)-1].block.join(h.x, h.short[open:])
}

// cutShort makes short blocks of the points [from, to).
func (h *HeldOut) cutShort(from, to int) {
	parts := (to - from + shortPoints - 1) / shortPoints
	for k := range parts {
		a, b := from+k*(to-from)/parts, from+(k+1)*(to-from)/parts
		h.short = append(h.short, block{})
		h.short[len(h.short)-1].set(h.x, h.y, h.f, a, b)
	}
}

// Noise is the mean squared error of the truth itself on this set.
func (h *HeldOut) Noise() float64 { return h.noise }

// Score scores a curve. finite is false where the curve leaves the numbers.
func (h *HeldOut) Score(c smoothers.Curve) (s HeldOutScore, finite bool) {
	var below, in, above sums
	if p, ok := c.(*smoothers.Piecewise); ok && p.Order <= maxOrder && p.Beyond == nil {
		w := walker{set: h, curve: p}
		below = w.sum(0, h.inside[0])
		in = w.sum(h.inside[0], h.inside[1])
		above = w.sum(h.inside[1], len(h.long))
	} else {
		h.evaluate(c)
		below = h.direct(0, h.inside[0])
		in = h.direct(h.inside[0], h.inside[1])
		above = h.direct(h.inside[1], len(h.long))
	}
	out := below.plus(above)
	all := in.plus(out)
	s = HeldOutScore{MSE: all.mse(), ASE: all.ase(), HasInside: in.n > 0, HasOutside: out.n > 0}
	if s.HasInside {
		s.Inside = in.ase()
	}
	if s.HasOutside {
		s.Outside = out.ase()
	}
	finite = !math.IsNaN(s.MSE+s.ASE) && !math.IsInf(s.MSE+s.ASE, 0)
	return s, finite
}

// evaluate writes the curve at all held-out points into pred.
func (h *HeldOut) evaluate(c smoothers.Curve) {
	if cap(h.pred) < len(h.x) {
		h.pred = make([]float64, len(h.x))
	}
	h.pred = h.pred[:len(h.x)]
	c.At(h.pred, h.x)
}

// direct sums over the points of long blocks [from, to), with pred evaluated.
func (h *HeldOut) direct(from, to int) sums {
	var s sums
	if from == to {
		return s
	}
	first, end := h.long[from].from, h.long[to-1].to
	for i := first; i < end; i++ {
		s.add(h.y[i]-h.pred[i], h.f[i]-h.pred[i])
	}
	s.n = end - first
	return s
}

// sums collects squared deviations of a curve from y and from f over n points.
type sums struct {
	y, f float64
	n    int
}

func (s *sums) add(dy, df float64) {
	s.y += dy * dy
	s.f += df * df
}

func (s sums) plus(t sums) sums { return sums{s.y + t.y, s.f + t.f, s.n + t.n} }
func (s sums) mse() float64     { return s.y / float64(s.n) }
func (s sums) ase() float64     { return s.f / float64(s.n) }
