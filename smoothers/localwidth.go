package smoothers

import "math"

// A gaze follows targets t over a design and says what the local fit
// at t sees: its width h and the distinct x that weigh anything, z[lo:hi].
type gaze struct {
	l     *localLadder
	width float64 // the bandwidth; unused with neighbours
	k     int     // whole part of q, the number of neighbours; 0 with a bandwidth
	theta float64 // fractional part of q

	h      float64
	lo, hi int
	near   int     // the nearest distinct x, kept for the gaussian kernel
	first  int     // the k nearest observations are x[first:first+k]
	spread float64 // dh/dq: from the k-th nearest to the next

	// Beyond the data the width with neighbours is |t − rim|, where rim does not
	// depend on t; h − |z_i − t| = |z_i − rim| is then taken without cancellation.
	beyond bool
	rim    float64
}

// gaze returns a gaze at the left of everything.
func (l *localLadder) gaze(tuning float64) gaze {
	g := gaze{l: l, width: tuning}
	if e := l.extent(); e > 0 {
		g.width = min(tuning, 1e40*e) // the limit to all digits, and its powers are finite
	}
	if l.neighbours {
		n := len(l.x)
		q := min(tuning*float64(n), float64(n))
		g.k = int(q)
		g.theta = q - float64(g.k)
	}
	return g
}

// at moves the gaze to t. Its cost is the distance moved, in x passed.
func (g *gaze) at(t float64) {
	g.h, g.beyond = g.width, false
	if g.k > 0 {
		g.neighbours(t)
	}
	z := g.l.z
	if g.l.shape.compact() {
		for g.hi < len(z) && (z[g.hi] <= t || g.sees(z[g.hi], t)) {
			g.hi++
		}
		for g.hi > 0 && z[g.hi-1] > t && !g.sees(z[g.hi-1], t) {
			g.hi--
		}
		for g.lo > 0 && (z[g.lo-1] >= t || g.sees(z[g.lo-1], t)) {
			g.lo--
		}
		for g.lo < g.hi && z[g.lo] < t && !g.sees(z[g.lo], t) {
			g.lo++
		}
		return
	}
	for g.near+1 < len(z) && z[g.near+1]-t < math.Abs(t-z[g.near]) {
		g.near++
	}
	for g.near > 0 && t-z[g.near-1] < math.Abs(t-z[g.near]) {
		g.near--
	}
	u := (t - z[g.near]) / g.h
	r := g.h * math.Sqrt(u*u+2*faded[g.l.degree])
	for g.hi < len(z) && z[g.hi]-t <= r {
		g.hi++
	}
	for g.hi > 0 && z[g.hi-1]-t > r {
		g.hi--
	}
	for g.lo > 0 && t-z[g.lo-1] <= r {
		g.lo--
	}
	for g.lo < g.hi && t-z[g.lo] > r {
		g.lo++
	}
}

// sees says whether a kernel of compact support gives z weight.
func (g *gaze) sees(z, t float64) bool { return g.slack(z, t) > 0 }

// slack returns h − |z − t|.
func (g *gaze) slack(z, t float64) float64 {
	switch {
	case !g.beyond:
		return g.h - math.Abs(z-t)
	case g.rim < t:
		return z - g.rim
	default:
		return g.rim - z
	}
}

// neighbours sets the width at t to the distance of the q-th nearest observation,
// interpolated between the k-th and the next.
func (g *gaze) neighbours(t float64) {
	x, k := g.l.x, g.k
	n := len(x)
	g.spread = 0
	for g.first+k < n && x[g.first+k]-t < t-x[g.first] {
		g.first++
	}
	for g.first > 0 && t-x[g.first-1] < x[g.first+k-1]-t {
		g.first--
	}
	switch {
	case t > x[n-1]:
		g.beyond, g.rim = true, x[n-k]
		if k < n {
			g.rim += g.theta * (x[n-k-1] - x[n-k])
		}
		g.h = t - g.rim
	case t < x[0]:
		g.beyond, g.rim = true, x[k-1]
		if k < n {
			g.rim += g.theta * (x[k] - x[k-1])
		}
		g.h = g.rim - t
	default:
		g.h = max(t-x[g.first], x[g.first+k-1]-t)
		next := math.Inf(1)
		if g.first > 0 {
			next = t - x[g.first-1]
		}
		if g.first+k < n {
			next = min(next, x[g.first+k]-t)
		}
		if k < n {
			g.spread = next - g.h
			g.h += g.theta * g.spread
		}
	}
}
