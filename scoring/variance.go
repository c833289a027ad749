package scoring

// RiceVariance estimates the noise variance by first differences,
// Σ (y_i − y_{i−1})² / (2(n−1)), with y in the order of x (Rice 1984, Ann. Stat.
// 12:1215). It needs n ≥ 2; ok says whether it could be had.
func RiceVariance(y []float64) (variance float64, ok bool) {
	if len(y) < 2 {
		return 0, false
	}
	sum := 0.0
	for i := 1; i < len(y); i++ {
		d := y[i] - y[i-1]
		sum += d * d
	}
	return sum / float64(2*(len(y)-1)), true
}

// DifferenceVariance estimates the noise variance by how far each point lies from
// the line through its neighbours:
//
//	e_i = a_i y_{i−1} + b_i y_{i+1} − y_i,   a_i = (x_{i+1} − x_i)/(x_{i+1} − x_{i−1}),   b_i = 1 − a_i
//	σ̂² = Σ e_i²/(1 + a_i² + b_i²) / (n − 2)
//
// It is exactly unbiased for a straight line (Gasser, Sroka & Jennen-Steinmetz
// 1986, Biometrika 73:625). x is ascending and of y's length. Where three
// neighbours share one x the limit a = b = ½ is used. It needs n ≥ 3.
func DifferenceVariance(x, y []float64) (variance float64, ok bool) {
	if len(x) != len(y) {
		panic("scoring: x and y differ in length")
	}
	n := len(y)
	if n < 3 {
		return 0, false
	}
	sum := 0.0
	for i := 1; i < n-1; i++ {
		a := 0.5
		if span := x[i+1] - x[i-1]; span > 0 {
			a = (x[i+1] - x[i]) / span
		}
		b := 1 - a
		// Differences from y_i keep the digits when y has a large offset.
		e := a*(y[i-1]-y[i]) + b*(y[i+1]-y[i])
		sum += e * e / (1 + a*a + b*b)
	}
	return sum / float64(n-2), true
}
