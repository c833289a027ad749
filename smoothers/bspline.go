package smoothers

// A bspline is a B-spline basis of some degree on a clamped knot sequence: degree+1
// equal knots at either end, the interior knots between (de Boor 2001, A Practical
// Guide to Splines, ch. IX).
type bspline struct {
	degree int
	knots  []float64 // degree+1 + interior + degree+1, ascending
}

// maxDegree bounds the degree, so that small fixed arrays serve.
const maxDegree = 10

// size is the number of basis functions.
func (b *bspline) size() int { return len(b.knots) - b.degree - 1 }

// interval returns k with knots[k] ≤ x < knots[k+1], going up from guess; the last
// such interval also for x at or beyond the upper end, the first below the lower.
func (b *bspline) interval(x float64, guess int) int {
	k, last := max(guess, b.degree), b.size()-1
	for k < last && x >= b.knots[k+1] {
		k++
	}
	return k
}

// at writes the degree+1 basis functions that do not vanish on interval k, of index
// k−degree … k, at x into v (de Boor's stable recurrence, algorithm BSPLVB).
func (b *bspline) at(v []float64, k int, x float64) {
	var right, left [maxDegree]float64
	v[0] = 1
	for j := range b.degree {
		right[j] = b.knots[k+j+1] - x
		left[j] = x - b.knots[k-j]
		saved := 0.0
		for r := range j + 1 {
			term := v[r] / (right[r] + left[j-r])
			v[r] = saved + right[r]*term
			saved = left[j-r] * term
		}
		v[j+1] = saved
	}
}

// powers writes the polynomial that coefficients c make on interval k into dst, in
// powers of u = (x − knots[k])/(knots[k+1] − knots[k]). The values of the blossom at
// the interval's ends are its Bézier coefficients, convex combinations of c
// throughout (Ramshaw 1989, CAGD 6:323).
func (b *bspline) powers(dst, c []float64, k int) {
	d := b.degree
	lo, hi := b.knots[k], b.knots[k+1]
	var bezier, row [maxDegree + 1]float64
	for s := range d + 1 { // s arguments at hi, the others at lo
		copy(row[:], c[k-d:k+1])
		for r := 1; r <= d; r++ {
			u := lo
			if r <= s {
				u = hi
			}
			for j := d; j >= r; j-- {
				i := k - d + j
				a := (u - b.knots[i]) / (b.knots[i+d-r+1] - b.knots[i])
				row[j] = (1-a)*row[j-1] + a*row[j]
			}
		}
		bezier[s] = row[d]
	}
	// The j-th forward difference times the binomial is the j-th power coefficient.
	binomial := 1.0
	for j := range d + 1 {
		dst[j] = binomial * bezier[0]
		for i := range d - j {
			bezier[i] = bezier[i+1] - bezier[i]
		}
		binomial *= float64(d-j) / float64(j+1)
	}
}
