package smoothers

import "math"

// A midpoints is an ascending sequence of points at which a local fit may have a
// kink: halfway between x_i and x_(i+apart), and shifted.
type midpoints struct {
	x     []float64
	apart int
	shift float64
}

func (s *midpoints) len() int         { return max(0, len(s.x)-s.apart) }
func (s *midpoints) at(i int) float64 { return s.x[i] + (s.x[i+s.apart]-s.x[i])/2 + s.shift }

// kinks appends to dst, ascending, the ends of the stretches on which local fits at
// a tuning are smooth in t, from a little before the data to a little beyond.
//
//   - Bandwidth and compact support: an x enters or leaves the window at x ± h, and
//     |u|³ has a kink at x itself.
//   - Neighbours: the width changes its slope where the k-th or the (k + 1)-th nearest
//     observation becomes another: midway between x_i and x_j, j − i = k − 1, k, k + 1.
//     For compact support, that is also where an x enters or leaves.
//   - Gaussian: none but what the width has.
func (l *localLadder) kinks(dst []float64, tuning float64) []float64 {
	var seqs [4]midpoints
	used := seqs[:0]
	g := l.gaze(tuning)
	switch {
	case g.k > 0:
		for apart := max(g.k-1, 1); apart <= g.k+1; apart++ {
			used = append(used, midpoints{x: l.x, apart: apart})
		}
	case l.shape.compact():
		used = append(used, midpoints{x: l.z, shift: -g.width}, midpoints{x: l.z, shift: g.width})
	}
	if l.shape == tricube {
		used = append(used, midpoints{x: l.z})
	}
	var margin float64
	if !l.hold {
		margin = marginSpacings * l.extent() / float64(len(l.x))
	}
	from, to := l.z[0]-margin, l.z[len(l.z)-1]+margin
	dst = l.merge(append(dst, from), used, to)
	if dst[len(dst)-1] < to {
		dst = append(dst, to)
	}
	return dst
}

// marginSpacings is how far beyond the data panels reach, in mean spacings of the
// observations: about one held-out point in e⁸ falls farther out.
const marginSpacings = 8

// merge appends the points of all sequences that are above the last of dst and
// below to, in ascending order. Points too close to tell apart are one.
func (l *localLadder) merge(dst []float64, seqs []midpoints, to float64) []float64 {
	var next [4]int
	last := dst[len(dst)-1]
	for {
		best, which := to, -1
		for s := range seqs {
			for next[s] < seqs[s].len() {
				v := seqs[s].at(next[s])
				if v > last+8*l.grain(v) {
					if v < best {
						best, which = v, s
					}
					break
				}
				next[s]++
			}
		}
		if which < 0 || best >= to-8*l.grain(to) {
			return dst
		}
		dst = append(dst, best)
		last = best
		next[which]++
	}
}

// grain returns the spacing, about, of the numbers that t can be at v.
func (l *localLadder) grain(v float64) float64 {
	return 0x1p-52 * (math.Abs(v) + math.Abs(l.origin))
}
