package sim

import (
	"fmt"
	"math"
)

const (
	panels = 512     // equal panels that an integration starts from: a feature of a thousandth of the interval is seen
	degree = 16      // of the rule on a panel, on degree + 1 points
	batch  = 12      // panels worked at a time, so that f works on vectors
	splits = 100_000 // panels halved at most
	depth  = 60      // times that a panel is halved at most
)

// An integrand writes a function at x into dst, of x's length.
type integrand func(dst, x []float64)

// A panel is an interval with the rule's value on it, and how far a rule of half the
// degree is from that.
type panel struct {
	a, b       float64
	value, off float64
	depth      int
}

// An integrator sums a function by adaptive bisection, with the rule of Clenshaw &
// Curtis (1960, Numer. Math. 2:197) on each panel: a panel is halved until the rules
// of full and of half the degree agree to rounding. Both use the panel's ends, so that
// a jump is seen wherever it lies, and cornered in some fifty halvings; Gauss rules
// have a blind spot between an end and the first of their points.
type integrator struct {
	f          integrand
	point      [degree + 1]float64 // on [−1, 1]
	full, half [degree + 1]float64 // weights
	x, y       [batch * (degree + 1)]float64
}

// exactly is the precision at which an integral of piecewise smooth f is good to about
// 1e-13.
const exactly = 1e-15

// integrate returns ∫ f over [lo, hi]. A panel is done when what it may be off is no more
// than within, relative to ∫|f|. The error says where f is not finite, or that it is too rough.
func integrate(f integrand, lo, hi, within float64) (float64, error) {
	in := newIntegrator(f)
	todo, size, err := in.start(lo, hi)
	sum := 0.0
	for left := splits; err == nil && len(todo) > 0; left -= batch / 2 {
		if left <= 0 {
			return 0, fmt.Errorf("too rough on [%g, %g] to be integrated", lo, hi)
		}
		var halves [batch]panel
		n := 0
		for ; len(todo) > 0 && n < batch; todo = todo[:len(todo)-1] {
			p := todo[len(todo)-1]
			if p.off <= within*size || p.depth == depth {
				sum += p.value
				continue
			}
			mid := p.a + (p.b-p.a)/2
			halves[n] = panel{a: p.a, b: mid, depth: p.depth + 1}
			halves[n+1] = panel{a: mid, b: p.b, depth: p.depth + 1}
			n += 2
		}
		if n > 0 {
			_, err = in.apply(halves[:n])
		}
		todo = append(todo, halves[:n]...)
	}
	return sum, err
}

// start works the equal panels of [lo, hi]; size is ∫|f|.
func (in *integrator) start(lo, hi float64) (ps []panel, size float64, err error) {
	edge := func(k int) float64 { return lo + (hi-lo)*float64(k)/panels }
	ps = make([]panel, panels)
	for k := range ps {
		ps[k] = panel{a: edge(k), b: edge(k + 1)}
	}
	for from := 0; from < panels && err == nil; from += batch {
		var s float64
		s, err = in.apply(ps[from:min(panels, from+batch)])
		size += s
	}
	return ps, size, err
}

// newIntegrator sets up the rules. The weights of degree N are
// w_k = c_k/N (1 − Σ_{j=1}^{N/2} b_j/(4j² − 1) cos(2jkπ/N)), where c is 1 at the ends
// and else 2, and b is 1 for j = N/2 and else 2 (Waldvogel 2006, BIT 46:195).
func newIntegrator(f integrand) *integrator {
	weight := func(k, degree int) float64 {
		n, sum := float64(degree), 1.0
		for j := 1; j <= degree/2; j++ {
			b := 2.0
			if 2*j == degree {
				b = 1
			}
			sum -= b / float64(4*j*j-1) * math.Cos(2*math.Pi*float64(j*k)/n)
		}
		if k == 0 || k == degree {
			return sum / n
		}
		return 2 * sum / n
	}
	in := &integrator{f: f}
	for k := range in.point {
		in.point[k] = -math.Cos(math.Pi * float64(k) / degree)
		in.full[k] = weight(k, degree)
		if k%2 == 0 {
			in.half[k] = weight(k/2, degree/2)
		}
	}
	in.point[degree/2] = 0
	return in
}

// apply works up to batch panels and returns the sum of their ∫|f|.
func (in *integrator) apply(ps []panel) (size float64, err error) {
	const points = degree + 1
	for k, p := range ps {
		mid, half := p.a+(p.b-p.a)/2, (p.b-p.a)/2
		x := in.x[k*points : (k+1)*points]
		for i, r := range in.point {
			x[i] = mid + half*r
		}
		x[0], x[degree] = p.a, p.b
	}
	in.f(in.y[:points*len(ps)], in.x[:points*len(ps)])
	for k := range ps {
		p := &ps[k]
		half, less := (p.b-p.a)/2, 0.0
		for i, y := range in.y[k*points : (k+1)*points] {
			if math.IsNaN(y) || math.IsInf(y, 0) {
				return 0, fmt.Errorf("not finite at x = %g", in.x[k*points+i])
			}
			p.value += half * in.full[i] * y
			less += half * in.half[i] * y
			size += half * in.full[i] * math.Abs(y)
		}
		p.off = math.Abs(p.value - less)
	}
	return size, nil
}
