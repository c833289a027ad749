package smoothers

import "math"

// A local curve is drawn as polynomials on panels. Between kinks (see there) it is
// smooth, and is interpolated at Chebyshev points; a panel's length is steered by
// the error found at both its ends, where the interpolant is compared with the fit
// itself. Panels are laid out for the rows of weights, not for one y: with e the
// sum of absolute errors of the weights, no curve is off by more than e·max|y|
// there, and not by more than e times half the range of y, since the weights' errors
// sum to zero.
const (
	// panelTol bounds e, relative to the sum of absolute weights where that exceeds 1.
	// What was promised is 1e−10.
	panelTol = 3e-11
	// panelsMost bounds the number of panels. Beyond it, or where panels become as
	// short as the spacing of numbers, the curve is evaluated point by point.
	panelsMost = 1 << 14
	// kinksMost bounds the number of kinks: with more of them panels no longer cost
	// less than the points of a held-out set.
	kinksMost = 400
)

// Panels of kernels of compact support are short, since kinks come thick and fast.
var (
	smoothPanels = newPanelBasis(12)
	kinkedPanels = newPanelBasis(10)
)

// basis returns the panel basis for the ladder's kernel.
func (l *localLadder) basis() *panelBasis {
	if l.shape.compact() {
		return kinkedPanels
	}
	return smoothPanels
}

// A panelLayout is the panels of one rung and the functionals that give the curve's
// values at their nodes, panel by panel.
type panelLayout struct {
	ends []float64 // of the panels, ascending
	rows localRows // empty if the layout failed or is too large
}

// A panelMaker lays out panels. It grows its slices and keeps them.
type panelMaker struct {
	l      *localLadder
	basis  *panelBasis
	fit    *localFit
	sums   []float64 // of y: functionals are then values for that y; nil for rows
	scale  float64   // what errors are relative to where the functional itself is smaller
	room   int       // most floats in weight
	tuning float64
	gaze   gaze
	follow bool // windows are wide enough for moving, unless for rows
	moving localSums

	stretch []float64 // kinks
	ends    []float64
	lo, end []float64 // functionals at the nodes, as in localRows
	weight  []float64

	edge, next sparse    // functionals at the left and the right end of a panel
	diff       []float64 // length m, zero between uses
}

// A sparse is the functional at one t: its weights from distinct x number lo on.
type sparse struct {
	at     float64
	lo     int
	weight []float64
}

// make lays out the panels of a tuning. It reports false if there is no room or no end.
func (b *panelMaker) make(tuning float64) bool {
	b.tuning, b.gaze = tuning, b.l.gaze(tuning)
	if b.follow = b.sums != nil && b.l.wide(tuning); b.follow {
		b.moving = b.l.sumsOn(tuning, b.sums)
	}
	b.ends, b.lo, b.end, b.weight = b.ends[:0], b.lo[:0], b.end[:0], b.weight[:0]
	b.stretch = b.l.kinks(b.stretch[:0], tuning)
	s := b.stretch
	if len(s) < 2 || len(s) > kinksMost {
		return false
	}
	b.ends = append(b.ends, s[0])
	b.functional(&b.edge, s[0])
	length := math.Inf(1)
	for i, to := range s[1:] {
		if length = b.march(s[i], to, length); length == 0 {
			return false
		}
	}
	return len(b.weight) <= b.room
}

// march lays panels from a to b, on which the fit is smooth. It starts with panels
// of the given length, and returns the length to go on with, 0 if it gives up.
func (b *panelMaker) march(from, to, length float64) float64 {
	order := float64(b.basis.order)
	grain := b.l.grain(max(math.Abs(from), math.Abs(to)))
	for from < to {
		end := to
		if parts := math.Ceil((to - from) / length); parts > 1 {
			end = from + (to-from)/parts
		}
		mark := len(b.lo)
		mid, half := b.l.panel(from, end)
		if at := mid - half; at != b.edge.at {
			b.functional(&b.edge, at) // the panel's own end, off the last one's by rounding
		}
		for _, u := range b.basis.node {
			b.append(mid + u*half)
		}
		b.functional(&b.next, mid+half)
		tol := panelTol + 16*0x1p-52*max(math.Abs(from), math.Abs(end))/b.gaze.h
		off := max(b.miss(mark, b.basis.left, &b.edge), b.miss(mark, b.basis.right, &b.next)) / tol
		length = (end - from) * min(4, max(0.1, 0.85*math.Pow(off, -1/order)))
		if off <= 1 {
			from = end
			b.ends = append(b.ends, end)
			b.edge, b.next = b.next, b.edge
		} else {
			b.drop(mark)
		}
		if len(b.weight) > b.room || len(b.ends) > panelsMost || !(length > 64*grain) {
			return 0
		}
	}
	return length
}

// append appends the functional at t.
func (b *panelMaker) append(t float64) {
	f := b.fit
	switch {
	case b.follow && b.moved(t):
		b.lo = append(b.lo, 0)
		b.weight = append(b.weight, b.moving.value(b.l.degree))
	case b.sums != nil:
		if !b.follow {
			b.gaze.at(t)
		}
		b.lo = append(b.lo, 0)
		b.weight = append(b.weight, f.valueAt(&b.gaze, t, b.sums))
	default:
		b.gaze.at(t)
		f.safe(&b.gaze, t)
		b.lo = append(b.lo, float64(f.lo))
		for i, w := range f.w[:f.hi-f.lo] {
			b.weight = append(b.weight, w*f.kappa(i))
		}
	}
	b.end = append(b.end, float64(len(b.weight)))
}

// moved moves the sums to t. It reports false if they are not safe there; gaze is at t
// in any case.
func (b *panelMaker) moved(t float64) bool {
	ok := b.moving.at(t, false)
	b.gaze = b.moving.gaze
	return ok
}

// functional writes the functional at t into s.
func (b *panelMaker) functional(s *sparse, t float64) {
	mark, from := len(b.lo), len(b.weight)
	b.append(t)
	s.at, s.lo = t, int(b.lo[mark])
	s.weight = append(s.weight[:0], b.weight[from:]...)
	b.drop(mark)
}

// drop takes back all functionals from number mark on.
func (b *panelMaker) drop(mark int) {
	b.lo, b.end = b.lo[:mark], b.end[:mark]
	b.weight = b.weight[:b.start(mark)]
}

// start returns where functional number i begins in weight.
func (b *panelMaker) start(i int) int {
	if i == 0 {
		return 0
	}
	return int(b.end[i-1])
}

// miss returns the sum of absolute differences between the functional want and the
// combination c of the functionals from number mark on, relative to want's.
func (b *panelMaker) miss(mark int, c []float64, want *sparse) float64 {
	lo, hi := want.lo, want.lo+len(want.weight)
	var size float64
	for i, w := range want.weight {
		b.diff[want.lo+i] = -w
		size += math.Abs(w)
	}
	for j, c := range c {
		at := int(b.lo[mark+j])
		row := b.weight[b.start(mark+j):int(b.end[mark+j])]
		lo, hi = min(lo, at), max(hi, at+len(row))
		d := b.diff[at : at+len(row)]
		for i, w := range row {
			d[i] += c * w
		}
	}
	var off float64
	for i, d := range b.diff[lo:hi] {
		off += math.Abs(d)
		b.diff[lo+i] = 0
	}
	return off / max(b.scale, size)
}
