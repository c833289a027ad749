package smoothers

// moments holds the moments of a window about its target t, u = (z − t)/h, and the
// fit that follows from them. It is the quick way to a fit, for windows that are not
// nearly singular; localFit is the safe one.
type moments struct {
	m  [7]float64 // Σ w u^j
	dm [5]float64 // Σ ∂w/∂log h u^j
	ym [3]float64 // Σ w Y u^j

	k0, k1, k2   float64 // the fit takes y with weights w (k0 + k1 u + k2 u²)
	spread, bend float64 // Σ w times the variance of u, and of u² given u
}

// How far the determinant of the moments may fall below the product of its diagonal
// before it is left to the orthogonal polynomials of localFit. A window cut in half
// by the end of the data has about 0.2 for degree 1 and 0.002 for degree 2.
const (
	lineFirm     = 0.02
	parabolaFirm = 3e-4
)

// solve finds the fit from the moments: k is the first row of the inverse of the
// matrix of moments m_(i+j). It reports false if that is ill-conditioned.
func (s *moments) solve(degree int) bool {
	m := &s.m
	if degree == 0 {
		s.k0 = 1 / m[0]
		return true
	}
	line := m[0]*m[2] - m[1]*m[1]
	s.spread = line / m[0]
	if degree == 1 {
		s.k0, s.k1 = m[2]/line, -m[1]/line
		return line > lineFirm*m[0]*m[2]
	}
	a, b, c := m[2]*m[4]-m[3]*m[3], m[2]*m[3]-m[1]*m[4], m[1]*m[3]-m[2]*m[2]
	det := m[0]*a + m[1]*b + m[2]*c
	s.k0, s.k1, s.k2 = a/det, b/det, c/det
	s.bend = det / line
	return line > lineFirm*m[0]*m[2] && det > parabolaFirm*m[0]*m[2]*m[4]
}

// value returns the fit's value.
func (s *moments) value(degree int) float64 {
	switch degree {
	case 0:
		return s.k0 * s.ym[0]
	case 1:
		return s.k0*s.ym[0] + s.k1*s.ym[1]
	default:
		return s.k0*s.ym[0] + s.k1*s.ym[1] + s.k2*s.ym[2]
	}
}

// leverage returns the weight of an observation at t itself, for K(0) = 1, and its
// derivative by log h, −Σ (∂w/∂log h)(k0 + k1 u + k2 u²)².
func (s *moments) leverage(degree int) (lev, slope float64) {
	return s.k0, -s.quadratic(degree, s.dm[:])
}

// quadratic returns Σ v (k0 + k1 u + k2 u²)² from the moments Σ v u^j.
func (s *moments) quadratic(degree int, v []float64) float64 {
	switch degree {
	case 0:
		return s.k0 * s.k0 * v[0]
	case 1:
		return s.k0*s.k0*v[0] + 2*s.k0*s.k1*v[1] + s.k1*s.k1*v[2]
	default:
		return s.k0*s.k0*v[0] + 2*s.k0*s.k1*v[1] + (s.k1*s.k1+2*s.k0*s.k2)*v[2] +
			2*s.k1*s.k2*v[3] + s.k2*s.k2*v[4]
	}
}
