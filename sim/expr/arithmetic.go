package expr

import (
	"math"
	"math/bits"
)

// each makes a vector operation of a function of one number.
func each(f func(float64) float64) func(dst, a, b, c []float64) {
	return func(dst, a, _, _ []float64) {
		dst = dst[:len(a)]
		for i, v := range a {
			dst[i] = f(v)
		}
	}
}

// pairs makes a vector operation of a function of two numbers.
func pairs(f func(a, b float64) float64) func(dst, a, b, c []float64) {
	return func(dst, a, b, _ []float64) {
		dst, b = dst[:len(a)], b[:len(a)]
		for i, v := range a {
			dst[i] = f(v, b[i])
		}
	}
}

func add(dst, a, b, _ []float64) {
	dst, b = dst[:len(a)], b[:len(a)]
	for i, v := range a {
		dst[i] = v + b[i]
	}
}

func subtract(dst, a, b, _ []float64) {
	dst, b = dst[:len(a)], b[:len(a)]
	for i, v := range a {
		dst[i] = v - b[i]
	}
}

func multiply(dst, a, b, _ []float64) {
	dst, b = dst[:len(a)], b[:len(a)]
	for i, v := range a {
		dst[i] = v * b[i]
	}
}

func divide(dst, a, b, _ []float64) {
	dst, b = dst[:len(a)], b[:len(a)]
	for i, v := range a {
		dst[i] = v / b[i]
	}
}

func negate(dst, a, _, _ []float64) {
	dst = dst[:len(a)]
	for i, v := range a {
		dst[i] = -v
	}
}

func absolute(dst, a, _, _ []float64) {
	dst = dst[:len(a)]
	for i, v := range a {
		dst[i] = math.Abs(v)
	}
}

func squareRoot(dst, a, _, _ []float64) {
	dst = dst[:len(a)]
	for i, v := range a {
		dst[i] = math.Sqrt(v)
	}
}

// choose takes b where a is not 0, else c.
func choose(dst, a, b, c []float64) {
	dst, b, c = dst[:len(a)], b[:len(a)], c[:len(a)]
	for i, v := range a {
		if v != 0 {
			dst[i] = b[i]
		} else {
			dst[i] = c[i]
		}
	}
}

// number is 1 for what is true, else 0.
func number(b bool) float64 {
	if b {
		return 1
	}
	return 0
}

func sign(v float64) float64 {
	switch {
	case v > 0:
		return 1
	case v < 0:
		return -1
	}
	return 0
}

// mostFactors is the largest power that is multiplied out.
const mostFactors = 16

// power is a^b. Small whole powers are multiplied out, which is ten times faster
// and as exact: by repeated squaring, within a few units in the last place.
func power(dst, a, b, _ []float64) {
	dst, b = dst[:len(a)], b[:len(a)]
	for i, v := range a {
		switch n := int(b[i]); {
		case float64(n) != b[i] || n < 1 || n > mostFactors:
			dst[i] = math.Pow(v, b[i])
		case n == 2:
			dst[i] = v * v
		default:
			product := v
			for bit := bits.Len(uint(n)) - 2; bit >= 0; bit-- {
				product *= product
				if n>>bit&1 == 1 {
					product *= v
				}
			}
			dst[i] = product
		}
	}
}

// density is e^(−v²/2)/√(2π).
func density(dst, a, _, _ []float64) {
	dst = dst[:len(a)]
	for i, v := range a {
		dst[i] = -v * v / 2
	}
	exponential(dst, dst, nil, nil)
	for i := range dst {
		dst[i] *= 1 / (math.Sqrt2 * math.SqrtPi)
	}
}

func distribution(v float64) float64 { return math.Erfc(-v/math.Sqrt2) / 2 }
