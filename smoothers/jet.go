package smoothers

// A jet is a function of θ near a point as its Taylor polynomial of degree 4: entry k is
// the k-th derivative ÷ k!. Arithmetic on jets differentiates to rounding (Griewank &
// Walther 2008, Evaluating Derivatives, §13.2).
type jet [5]float64

// decay is c·e^−θ, given its value c at the point.
func decay(c float64) jet { return jet{c, -c, c / 2, -c / 6, c / 24} }

func (a jet) plus(b jet) jet {
	for k, v := range b {
		a[k] += v
	}
	return a
}

func (a jet) by(c float64) jet {
	for k := range a {
		a[k] *= c
	}
	return a
}

func (a jet) times(b jet) jet {
	return jet{
		a[0] * b[0],
		a[0]*b[1] + a[1]*b[0],
		a[0]*b[2] + a[1]*b[1] + a[2]*b[0],
		a[0]*b[3] + a[1]*b[2] + a[2]*b[1] + a[3]*b[0],
		a[0]*b[4] + a[1]*b[3] + a[2]*b[2] + a[3]*b[1] + a[4]*b[0],
	}
}

// inverse is 1/a.
func (a jet) inverse() jet {
	r := 1 / a[0]
	b := jet{r}
	b[1] = -r * (a[1] * b[0])
	b[2] = -r * (a[1]*b[1] + a[2]*b[0])
	b[3] = -r * (a[1]*b[2] + a[2]*b[1] + a[3]*b[0])
	b[4] = -r * (a[1]*b[3] + a[2]*b[2] + a[3]*b[1] + a[4]*b[0])
	return b
}

// logRates adds the derivatives of log a by θ, from the third ÷ 3! on the fourth ÷ 4!,
// to third and fourth, given 1/a[0].
func (a jet) logRates(r float64, third, fourth *float64) {
	l1 := a[1] * r
	l2 := a[2]*r - l1*a[1]*r/2
	l3 := a[3]*r - (l1*a[2]+2*l2*a[1])*r/3
	l4 := a[4]*r - (l1*a[3]+2*l2*a[2]+3*l3*a[1])*r/4
	*third += l3
	*fourth += l4
}
