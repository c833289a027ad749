package scoring

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// bandLevel is the pointwise coverage that bands aim at.
const bandLevel = 0.95

// normalHalf is how many standard deviations a band with a known variance reaches: the
// standard normal quantile at (1 + bandLevel)/2.
const normalHalf = 1.959963984540054

// A studentTable holds the half width of a band in estimated standard errors, the
// Student quantile at (1 + bandLevel)/2, as a function of w = 1/ν on [0, 1]: log t in
// Chebyshev polynomials, good to 1e-12.
type studentTable [studentTerms]float64

const studentTerms = 32

// newStudentTable fits it at the Chebyshev points.
func newStudentTable() *studentTable {
	const n = studentTerms
	var c studentTable
	for i := range n {
		angle := math.Pi * (float64(i) + 0.5) / n
		w := (1 + math.Cos(angle)) / 2
		v := math.Log(studentHalf(1 / w))
		for k := range c {
			c[k] += 2 * v * math.Cos(float64(k)*angle) / n
		}
	}
	c[0] /= 2
	return &c
}

// studentHalf is the quantile itself. For ν over 10⁷ it is the normal's to 1e-7/ν.
func studentHalf(nu float64) float64 {
	return distuv.StudentsT{Mu: 0, Sigma: 1, Nu: nu}.Quantile((1 + bandLevel) / 2)
}

// half returns the half width for ν degrees of freedom.
func (c *studentTable) half(nu float64) float64 {
	if !(nu >= 1) {
		return studentHalf(nu)
	}
	z := 2/nu - 1
	var b1, b2 float64
	for k := studentTerms - 1; k > 0; k-- { // Clenshaw's recurrence
		b1, b2 = 2*z*b1-b2+c[k], b1
	}
	return math.Exp(z*b1 - b2 + c[0])
}

// coverage is the share of design points whose true mean f lies within half·√q of the
// fitted value, q per observation in units of the noise variance.
func coverage(f, fitted, q []float64, half float64) float64 {
	inside, square := 0, half*half
	for i, v := range fitted {
		if d := v - f[i]; d*d <= square*q[i] {
			inside++
		}
	}
	return float64(inside) / float64(len(f))
}
