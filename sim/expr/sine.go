package expr

import "math"

// sine is sin v to about one unit in the last place, in half the time of calling
// math.Sin on each.
func sine(dst, a, _, _ []float64) { wave(dst, a, 0, math.Sin) }

// cosine is cos v likewise: a sine that crosses zero half a turn later.
func cosine(dst, a, _, _ []float64) { wave(dst, a, 0.5, math.Cos) }

// The sine of r, |r| ≤ π/2, is r + r³ P(r²). P has the least relative error of its
// degree, 3e−19 of the sine (testdata/sim/make.py works it out).
const (
	p0 = -0.16666666666666666
	p1 = 0.008333333333333207
	p2 = -0.00019841269841212574
	p3 = 2.755731921160269e-06
	p4 = -2.5052106908838558e-08
	p5 = 1.6058941283555474e-10
	p6 = -7.643028010703784e-13
	p7 = 2.721522473648885e-15
)

// wave is the sine (−1)^k sin(v − (k + shift)π) where shift is 0, and minus that
// where it is ½, which is the cosine; k makes the argument at most π/2 in size.
//
// π is taken in three parts, the first two of 33 bits, so that their products with
// k + shift are exact (Cody & Waite 1980, Software Manual for the Elementary
// Functions, ch. 8). Arguments too large for that are left to exact.
func wave(dst, a []float64, shift float64, exact func(float64) float64) {
	const (
		pi1     = 0x1.921fb54400000p+1
		pi2     = 0x1.0b4611a600000p-33
		pi3     = 0x1.3198a2e037073p-68
		largest = 1e6
	)
	odd := uint64(2 * shift) // which k have a minus: odd ones, or even ones
	dst = dst[:len(a)]
	for i, v := range a {
		if !(math.Abs(v) < largest) {
			dst[i] = exact(v)
			continue
		}
		s := v*(1/math.Pi) - shift + toInteger
		minus := (math.Float64bits(s) + odd) << 63
		k := s - toInteger + shift
		r := v - k*pi1 - k*pi2 - k*pi3
		z := r * r
		p := p0 + z*(p1+z*(p2+z*(p3+z*(p4+z*(p5+z*(p6+z*p7))))))
		r += r * z * p
		dst[i] = math.Float64frombits(math.Float64bits(r) ^ minus)
	}
}
