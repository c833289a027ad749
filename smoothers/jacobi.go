package smoothers

import "math"

// orthogonalise turns the p rows of a, of length n each, into orthogonal rows by
// rotating pairs of them (one-sided Jacobi: Hestenes 1958, J. SIAM 6:51). With A = VΣUᵀ
// before, row k is σ_k u_kᵀ after. Small rows keep their digits: errors are relative to
// each (Demmel & Veselić 1992, SIAM J. Matrix Anal. Appl. 13:1204). It writes the norms
// into sigma, and orders rows by descending norm. work has room for p values.
//
// Convergence is quadratic; six to nine sweeps over the pairs are the rule.
func orthogonalise(a []float64, n int, sigma []float64) {
	p := len(sigma)
	for range 60 {
		for i := range p {
			sigma[i] = dot(a[i*n:(i+1)*n], a[i*n:(i+1)*n])
		}
		if !rotatePairs(a, n, sigma) {
			break
		}
	}
	for i, s := range sigma {
		sigma[i] = math.Sqrt(s)
	}
}

// rotatePairs rotates each pair of rows once, larger rows first, and reports whether any
// was off orthogonal. sigma holds the squared norms.
func rotatePairs(a []float64, n int, sigma []float64) (rotated bool) {
	const tolerance = 1e-15
	p := len(sigma)
	for i := range p - 1 {
		largest := i // (de Rijk 1989, SIAM J. Sci. Stat. Comput. 10:359)
		for j := i + 1; j < p; j++ {
			if sigma[j] > sigma[largest] {
				largest = j
			}
		}
		one := a[i*n : (i+1)*n]
		if largest != i {
			sigma[i], sigma[largest] = sigma[largest], sigma[i]
			other := a[largest*n : (largest+1)*n]
			for k, v := range one {
				one[k], other[k] = other[k], v
			}
		}
		for j := i + 1; j < p; j++ {
			two := a[j*n : (j+1)*n]
			g := dot(one, two)
			if !(math.Abs(g) > tolerance*math.Sqrt(sigma[i]*sigma[j])) {
				continue
			}
			rotated = true
			zeta := (sigma[j] - sigma[i]) / (2 * g)
			t := math.Copysign(1/(math.Abs(zeta)+math.Sqrt(1+zeta*zeta)), zeta)
			c := 1 / math.Sqrt(1+t*t)
			s := c * t
			for k, u := range one {
				v := two[k]
				one[k], two[k] = c*u-s*v, s*u+c*v
			}
			sigma[i] -= t * g
			sigma[j] = max(sigma[j]+t*g, 0)
		}
	}
	return rotated
}

// dot is the inner product of two vectors of one length.
func dot(u, v []float64) float64 {
	v = v[:len(u)]
	var one, two float64
	k := 0
	for ; k+1 < len(u); k += 2 {
		one += u[k] * v[k]
		two += u[k+1] * v[k+1]
	}
	if k < len(u) {
		one += u[k] * v[k]
	}
	return one + two
}
