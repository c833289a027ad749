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

	// With neighbours h = |kth − t| + extra, where kth is the k-th nearest observation.
	kth, extra float64
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
	g.h = g.width
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
func (g *gaze) sees(z, t float64) bool {
	s := g.h - math.Abs(z-t)
	if math.Abs(s) < slackTight*g.h {
		s = g.slack(z, t)
	}
	return s > 0
}

// slackTight is how near to the rim of the window, in widths, h − |z − t| must be
// worked out exactly: a weight there may decide the fit, however small it is.
const slackTight = 1e-4

// slack returns h − |z − t|, not as a rounded h less a rounded distance.
func (g *gaze) slack(z, t float64) float64 {
	if g.k > 0 {
		return farther(g.kth, z, t) + g.extra
	}
	d := math.Abs(z - t)
	if z < t {
		z, t = t, z
	}
	back := d - z // d is z − t but for an error that these four operations find (Knuth)
	return g.h - d - ((z - (d - back)) - (t + back))
}

// farther returns |a − t| − |b − t|, rounded once or twice.
func farther(a, b, t float64) float64 {
	switch {
	case a >= t && b >= t:
		return a - b
	case a < t && b < t:
		return b - a
	}
	s := a + b
	back := s - a
	rest := (a - (s - back)) + (b - back) // s + rest is a + b
	v := (s - 2*t) + rest
	if a < t {
		return -v
	}
	return v
}

// neighbours sets the width at t to the distance of the q-th nearest observation,
// interpolated between the k-th and the next.
func (g *gaze) neighbours(t float64) {
	x, k := g.l.x, g.k
	n := len(x)
	for g.first+k < n && x[g.first+k]-t < t-x[g.first] {
		g.first++
	}
	for g.first > 0 && t-x[g.first-1] < x[g.first+k-1]-t {
		g.first--
	}
	left, right := g.first, g.first+k-1
	g.kth = x[left]
	if x[right]-t > t-x[left] {
		g.kth = x[right]
	}
	g.spread = 0
	if k < n {
		next := math.Inf(1)
		if left > 0 {
			next = farther(x[left-1], g.kth, t)
		}
		if right+1 < n {
			next = min(next, farther(x[right+1], g.kth, t))
		}
		g.spread = max(next, 0)
	}
	g.extra = g.theta * g.spread
	g.h = math.Abs(g.kth-t) + g.extra
}
