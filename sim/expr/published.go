package expr

import "math"

// The test functions below are those of Donoho & Johnstone 1994, Biometrika
// 81:425, table 1, in their printed scaling.
var (
	jumpAt     = [...]float64{.10, .13, .15, .23, .25, .40, .44, .65, .76, .78, .81}
	blockSize  = [...]float64{4, -5, 3, -4, 5, -4.2, 2.1, 4.3, -3.1, 2.1, -4.2}
	bumpHeight = [...]float64{4, 5, 3, 4, 5, 4.2, 2.1, 4.3, 3.1, 5.1, 4.2}
	bumpWidth  = [...]float64{.005, .005, .006, .01, .01, .03, .01, .01, .005, .008, .005}
)

// blocks is Σ h_j (1 + sgn(x − t_j))/2.
func blocks(x float64) float64 {
	sum := 0.0
	for j, t := range jumpAt {
		sum += blockSize[j] * (1 + sign(x-t)) / 2
	}
	return sum
}

// bumps is Σ h_j (1 + |(x − t_j)/w_j|)⁻⁴.
func bumps(x float64) float64 {
	sum := 0.0
	for j, t := range jumpAt {
		d := 1 + math.Abs((x-t)/bumpWidth[j])
		sum += bumpHeight[j] / (d * d * d * d)
	}
	return sum
}

// heavisine is 4 sin 4πx − sgn(x − 0.3) − sgn(0.72 − x).
func heavisine(dst, a, _, _ []float64) {
	var angle [block]float64
	for i, x := range a {
		angle[i] = 4 * math.Pi * x
	}
	sine(angle[:len(a)], angle[:len(a)], nil, nil)
	dst = dst[:len(a)]
	for i, x := range a {
		dst[i] = 4*angle[i] - sign(x-0.3) - sign(0.72-x)
	}
}

// doppler is √(x(1−x)) sin(2π·1.05/(x + 0.05)), and 0 outside [0, 1].
func doppler(dst, a, _, _ []float64) {
	var angle [block]float64
	for i, x := range a {
		angle[i] = 2 * math.Pi * 1.05 / (x + 0.05)
	}
	sine(angle[:len(a)], angle[:len(a)], nil, nil)
	dst = dst[:len(a)]
	for i, x := range a {
		if x > 0 && x < 1 {
			dst[i] = math.Sqrt(x*(1-x)) * angle[i]
		} else {
			dst[i] = 0
		}
	}
}
