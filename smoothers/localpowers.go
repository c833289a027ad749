package smoothers

import "math"

const (
	// seriesMost is the number of terms of e^(sv) that suffice for |s| ≤ centreMost.
	seriesMost = 23
	centreMost = 0.5
	seriesBins = 8
)

// inverseFactorial holds 1/k!.
var inverseFactorial = func() (f [seriesMost]float64) {
	f[0] = 1
	for k := range seriesMost - 1 {
		f[k+1] = f[k] / float64(k+1)
	}
	return f
}()

// seriesTerms holds the number of terms of e^(sv) needed for |s| up to the end of
// each of equal bins of [0, centreMost]. Under the weight e^−v²/2 the k-th term is at
// most |s|^k (k/e)^(k/2)/k!; the first below 1e−18 is left out with all after it.
var seriesTerms = func() (terms [seriesBins]int) {
	for i := range terms {
		s := centreMost * float64(i+1) / seriesBins
		k := 1
		for k < seriesMost && math.Pow(s, float64(k))*math.Pow(float64(k)/math.E, float64(k)/2)*inverseFactorial[k] > 1e-18 {
			k++
		}
		terms[i] = k
	}
	return terms
}()

// renewSeries makes the sums for the gaussian kernel, with the centre as far ahead of
// t as will do.
func (s *localSums) renewSeries(t float64) {
	g, z := &s.gaze, s.l.z
	s.made = true
	s.unit, s.c = g.h, min(t+0.98*centreMost*g.h, z[len(z)-1])
	reach := (math.Sqrt(2*faded[s.l.degree]) + 2*centreMost) * g.h
	s.lo = g.lo
	for s.lo > 0 && s.c-z[s.lo-1] < reach {
		s.lo--
	}
	s.hi = max(s.lo, g.hi)
	for s.hi < len(z) && z[s.hi]-s.c < reach {
		s.hi++
	}
	s.even = powerSums{}
	s.addAll(&s.even, s.lo, s.hi)
}

// series works out the moments for the gaussian kernel. It reports false where all
// points are so far that the series would cancel.
func (s *localSums) series(t float64, slope bool) bool {
	tau := (t - s.c) / s.unit
	p := s.l.degree
	var c [seriesMost]float64
	terms := seriesTerms[min(int(math.Abs(tau)*(seriesBins/centreMost)), seriesBins-1)]
	power := math.Exp(-tau * tau / 2)
	for k := range terms {
		c[k] = power * inverseFactorial[k]
		power *= tau
	}
	n := 2*p + 1
	if slope {
		n += 2
	}
	s.m, s.ym = [7]float64{}, [3]float64{}
	combine(s.m[:n], c[:terms], s.even.n[:])
	if !(s.m[0] > 1e-2*s.even.n[0]) {
		return false
	}
	recentre(s.m[:n], tau)
	if slope { // −u K′(u) = u² K(u)
		copy(s.dm[:2*p+1], s.m[2:])
	}
	if s.y != nil {
		combine(s.ym[:p+1], c[:terms], s.even.y[:])
		recentre(s.ym[:p+1], tau)
	}
	return true
}

// A power is one term factor·|x|^e of a kernel.
type power struct {
	factor float64
	e      int
}

// kernelPowers holds the kernels of compact support without their constant 1, by shape:
// the even and the odd powers of K, then of K².
var kernelPowers = [...][4][]power{
	epanechnikov: {{{-1, 2}}, nil, {{-2, 2}, {1, 4}}, nil},
	biweight:     {{{-2, 2}, {1, 4}}, nil, {{-4, 2}, {6, 4}, {-4, 6}, {1, 8}}, nil},
	tricube: {
		{{3, 6}}, {{-3, 3}, {-1, 9}},
		{{15, 6}, {15, 12}, {1, 18}}, {{-6, 3}, {-20, 9}, {-6, 15}},
	},
}

// powers returns the powers of K or K².
func (k shape) powers(squared bool) (even, odd []power) {
	p := &kernelPowers[k]
	if squared {
		return p[2], p[3]
	}
	return p[0], p[1]
}

// coefficients returns the number of coefficients of a polynomial with these powers.
func coefficients(p []power) int {
	if len(p) == 0 {
		return 0
	}
	return p[len(p)-1].e + 1
}

// polynomial works out the moments for a kernel of compact support from the powers
// of x = (v − tau)/h. It reports false where the weights are small against the
// terms that they are summed from.
func (s *localSums) polynomial(t float64, slope bool) bool {
	p := s.l.degree
	tau, h := (t-s.c)/s.unit, s.gaze.h/s.unit
	even, odd := s.l.shape.powers(s.squared)
	var ce, co [19]float64 // coefficients of v^k, for all points and with the sign
	ne, no := coefficients(even), coefficients(odd)
	expand(ce[:ne], even, tau, h, false)
	expand(co[:no], odd, tau, h, false)
	ce[0]++
	n := 2*p + 1
	s.m, s.ym = [7]float64{}, [3]float64{}
	combine(s.m[:n], ce[:ne], s.even.n[:])
	combine(s.m[:n], co[:no], s.odd.n[:])
	if !(s.m[0] > thinWindow*s.even.n[0]) {
		return false
	}
	recentre(s.m[:n], tau)
	rescale(s.m[:n], 1/h)
	if s.y != nil {
		combine(s.ym[:p+1], ce[:ne], s.even.y[:])
		combine(s.ym[:p+1], co[:no], s.odd.y[:])
		recentre(s.ym[:p+1], tau)
		rescale(s.ym[:p+1], 1/h)
	}
	if slope {
		s.dm = [5]float64{}
		expand(ce[:ne], even, tau, h, true)
		expand(co[:no], odd, tau, h, true)
		combine(s.dm[:n], ce[:ne], s.even.n[:])
		combine(s.dm[:n], co[:no], s.odd.n[:])
		recentre(s.dm[:n], tau)
		rescale(s.dm[:n], 1/h)
	}
	return true
}

// thinWindow is the mean weight of a window's points below which sums of powers,
// whose terms are of size 1 to 100, would lose more than three digits.
const thinWindow = 0.02

// binomials holds the binomial coefficients up to row 18.
var binomials = func() (b [19][19]float64) {
	for e := range b {
		b[e][0] = 1
		for k := 1; k <= e; k++ {
			b[e][k] = b[e-1][k-1] + b[e-1][k]
		}
	}
	return b
}()

// expand sets dst to the coefficients in v of the powers of x = (v − tau)/h, or of
// their derivative by log h, which multiplies each by −e.
func expand(dst []float64, powers []power, tau, h float64, byWidth bool) {
	clear(dst)
	inv := 1 / h
	for _, p := range powers {
		f := p.factor
		if byWidth {
			f *= -float64(p.e)
		}
		for range p.e {
			f *= inv
		}
		row := binomials[p.e][:p.e+1]
		d := dst[:p.e+1]
		for k := p.e; k >= 0; k-- {
			d[k] += f * row[k]
			f *= -tau
		}
	}
}

// combine adds Σ_k c_k sums[k+j] to each m_j.
func combine(m, c, sums []float64) {
	for len(m) >= 3 {
		a, s := c, sums[:len(c)+2]
		var m0, m1, m2 float64
		for k, c := range a {
			m0 += c * s[k]
			m1 += c * s[k+1]
			m2 += c * s[k+2]
		}
		m[0], m[1], m[2] = m[0]+m0, m[1]+m1, m[2]+m2
		m, sums = m[3:], sums[3:]
	}
	for j := range m {
		s := sums[j : j+len(c)]
		var even, odd float64
		k := 0
		for ; k+1 < len(c); k += 2 {
			even += c[k] * s[k]
			odd += c[k+1] * s[k+1]
		}
		if k < len(c) {
			even += c[k] * s[k]
		}
		m[j] += even + odd
	}
}

// recentre turns moments about 0 into moments about tau.
func recentre(m []float64, tau float64) {
	for first := 1; first < len(m); first++ { // Horner's scheme, as for a Taylor shift
		for j := len(m) - 1; j >= first; j-- {
			m[j] -= tau * m[j-1]
		}
	}
}

// rescale multiplies m_j by f^j.
func rescale(m []float64, f float64) {
	p := 1.0
	for j := range m {
		m[j] *= p
		p *= f
	}
}
