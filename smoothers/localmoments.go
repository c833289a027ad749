package smoothers

import "math"

// How far the determinant of the moments may fall below the product of its diagonal
// before it is left to the orthogonal polynomials of localFit. A window cut in half
// by the end of the data has about 0.2 for degree 1 and 0.002 for degree 2.
const (
	lineFirm     = 0.02
	parabolaFirm = 3e-4
)

// solve finds the fit from the moments: k is the first row of the inverse of the
// matrix of moments m_(i+j). It reports false if that is ill-conditioned.
func (s *localSums) solve() bool {
	m := &s.m
	switch s.l.degree {
	case 0:
		s.k0 = 1 / m[0]
		return true
	case 1:
		det := m[0]*m[2] - m[1]*m[1]
		s.k0, s.k1 = m[2]/det, -m[1]/det
		return det > lineFirm*m[0]*m[2]
	default:
		a, b, c := m[2]*m[4]-m[3]*m[3], m[2]*m[3]-m[1]*m[4], m[1]*m[3]-m[2]*m[2]
		det := m[0]*a + m[1]*b + m[2]*c
		s.k0, s.k1, s.k2 = a/det, b/det, c/det
		return det > parabolaFirm*m[0]*m[2]*m[4]
	}
}

// value returns the fit's value from the sums of y.
func (s *localSums) value() float64 {
	switch s.l.degree {
	case 0:
		return s.k0 * s.ym[0]
	case 1:
		return s.k0*s.ym[0] + s.k1*s.ym[1]
	default:
		return s.k0*s.ym[0] + s.k1*s.ym[1] + s.k2*s.ym[2]
	}
}

// leverage returns the weight of an observation at t itself and its derivative by
// log h, −Σ (∂w/∂log h)(k0 + k1 u + k2 u²)².
func (s *localSums) leverage() (lev, slope float64) {
	d := &s.dm
	switch s.l.degree {
	case 0:
		return s.k0, -s.k0 * s.k0 * d[0]
	case 1:
		return s.k0, -(s.k0*s.k0*d[0] + 2*s.k0*s.k1*d[1] + s.k1*s.k1*d[2])
	default:
		return s.k0, -(s.k0*s.k0*d[0] + 2*s.k0*s.k1*d[1] + (s.k1*s.k1+2*s.k0*s.k2)*d[2] +
			2*s.k1*s.k2*d[3] + s.k2*s.k2*d[4])
	}
}

// norm2 returns Σ of the squared weights with which the fit takes observations, from
// the moments of the squared kernel in q.
func (s *localSums) norm2(q *localSums) float64 {
	m := q.m
	if s.l.shape == gaussian {
		rescale(m[:], 1/math.Sqrt2) // q's width is narrower
	}
	switch s.l.degree {
	case 0:
		return s.k0 * s.k0 * m[0]
	case 1:
		return s.k0*s.k0*m[0] + 2*s.k0*s.k1*m[1] + s.k1*s.k1*m[2]
	default:
		return s.k0*s.k0*m[0] + 2*s.k0*s.k1*m[1] + (s.k1*s.k1+2*s.k0*s.k2)*m[2] +
			2*s.k1*s.k2*m[3] + s.k2*s.k2*m[4]
	}
}
