package smoothers

import "math"

// powersOf2 holds 2^(i/64).
var powersOf2 = func() (t [64]float64) {
	for i := range t {
		t[i] = math.Exp2(float64(i) / 64)
	}
	return t
}()

// expAll replaces each v ≤ 0 by e^v, to about one unit in the last place, and by 0
// below e^−700. It takes a third of the time of a call of math.Exp each: gaussian
// weights are what the kernel and local families spend their time on.
//
// With v = (64j + i)·ln 2/64 + r, |r| ≤ ln 2/128, e^v = 2^j · 2^(i/64) · e^r, the
// last from five terms of its series, 4e−17 short (Tang 1989, ACM TOMS 15:144).
func expAll(v []float64) {
	const (
		perStep = 64 / math.Ln2
		high    = 6.93147180369123816490e-01 / 64 // of ln 2/64; its product with a step number is exact
		low     = 1.90821492927058770002e-10 / 64
		round   = 0x1.8p52 // adding it rounds to an integer in the low bits
	)
	for i, x := range v {
		if x < -700 {
			v[i] = 0
			continue
		}
		s := x*perStep + round
		step := int64(math.Float64bits(s))
		s -= round
		r := x - s*high - s*low
		r2 := r * r
		p := r + r2*(0.5+r*(1.0/6)+r2*(1.0/24+r*(1.0/120)))
		w := powersOf2[step&63]
		w += w * p
		v[i] = math.Float64frombits(math.Float64bits(w) + uint64(step>>6)<<52)
	}
}
