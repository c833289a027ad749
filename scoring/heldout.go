package scoring

import (
	"math"

	"bendtest/sim"
	"bendtest/smoothers"
)

// A HeldOut scores curves against a held-out set whose x ascend.
//
// Piecewise cubics are not evaluated point by point. The set is cut into short
// blocks, and of each block the moments Σu^k, Σyu^k and Σfu^k about its own centre
// are kept; on a block that lies within one piece the sums Σ(y−f̂)² and Σ(f−f̂)²
// follow from the moments in a few dozen operations. y and f enter as deviations
// from their block means, so that no digits cancel. A block that holds a break is
// summed directly. No block holds points both inside and outside the training
// range.
type HeldOut struct {
	x, y, f []float64
	noise   float64 // mean of (y − f)²
	blocks  []block
	inside  [2]int // blocks [inside[0], inside[1]) lie in the training range
	pred    []float64
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

// blockPoints is the number of held-out points per block. More points make fewer
// blocks but longer direct sums at the breaks; 32 is near the best for 10,000
// points and 5 to 30 pieces.
const blockPoints = 32

// Set takes the held-out set, with lo and hi the ends of the training range. It
// keeps the set's slices until the next Set.
func (h *HeldOut) Set(held *sim.Set, lo, hi float64) {
	h.x, h.y, h.f = held.X, held.Y, held.F
	sum := 0.0
	for i, y := range h.y {
		e := y - h.f[i]
		sum += e * e
	}
	h.noise = sum / float64(len(h.y))

	first, n := 0, len(h.x)
	for first < n && h.x[first] < lo {
		first++
	}
	end := n
	for end > first && h.x[end-1] > hi {
		end--
	}
	h.blocks = h.blocks[:0]
	h.cut(0, first)
	h.inside[0] = len(h.blocks)
	h.cut(first, end)
	h.inside[1] = len(h.blocks)
	h.cut(end, n)
}

// cut appends blocks for the points [from, to).
func (h *HeldOut) cut(from, to int) {
	for from < to {
		next := min(from+blockPoints, to)
		h.blocks = append(h.blocks, block{})
		h.blocks[len(h.blocks)-1].set(h.x, h.y, h.f, from, next)
		from = next
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
		above = w.sum(h.inside[1], len(h.blocks))
	} else {
		h.evaluate(c)
		below = h.direct(0, h.inside[0])
		in = h.direct(h.inside[0], h.inside[1])
		above = h.direct(h.inside[1], len(h.blocks))
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

// direct sums over the points of blocks [from, to), with pred evaluated.
func (h *HeldOut) direct(from, to int) sums {
	var s sums
	if from == to {
		return s
	}
	for i := h.blocks[from].from; i < h.blocks[to-1].to; i++ {
		s.add(h.y[i]-h.pred[i], h.f[i]-h.pred[i])
	}
	s.n = h.blocks[to-1].to - h.blocks[from].from
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
