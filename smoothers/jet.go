package smoothers

// A jet is a function of θ near a point as its Taylor polynomial of degree 4: entry k is
// the k-th derivative ÷ k!. Arithmetic on jets differentiates to rounding (Griewank &
// Walther 2008, Evaluating Derivatives, §13.2).
type jet [5]float64

// decay is c·e^−θ, given its value c at the point.
func decay(c float64) jet { return jet{c, -c, c / 2, -c / 6, c / 24} }

// add adds c·b to a.
func (a *jet) add(c float64, b *jet) {
	a[0] += c * b[0]
	a[1] += c * b[1]
	a[2] += c * b[2]
	a[3] += c * b[3]
	a[4] += c * b[4]
}

// times multiplies a by b.
func (a *jet) times(b *jet) {
	a0, a1, a2, a3, a4 := a[0], a[1], a[2], a[3], a[4]
	b0, b1, b2, b3 := b[0], b[1], b[2], b[3]
	a[0] = a0 * b0
	a[1] = a0*b1 + a1*b0
	a[2] = a0*b2 + a1*b1 + a2*b0
	a[3] = a0*b3 + a1*b2 + a2*b1 + a3*b0
	a[4] = a0*b[4] + a1*b3 + a2*b2 + a3*b1 + a4*b0
}

// invert replaces a by 1/a.
func (a *jet) invert() {
	r := 1 / a[0]
	a1, a2, a3 := a[1]*r, a[2]*r, a[3]*r
	b1 := -a1
	b2 := -a2 - a1*b1
	b3 := -a3 - a2*b1 - a1*b2
	b4 := -a[4]*r - a3*b1 - a2*b2 - a1*b3
	a[0], a[1], a[2], a[3], a[4] = r, r*b1, r*b2, r*b3, r*b4
}

// logRates adds the third and the fourth Taylor coefficient of log a to third and fourth.
func (a *jet) logRates(third, fourth *float64) {
	r := 1 / a[0]
	a1, a2, a3 := a[1]*r, a[2]*r, a[3]*r
	l2 := a2 - a1*a1/2
	l3 := a3 - (a1*a2+2*l2*a1)/3
	*third += l3
	*fourth += a[4]*r - (a1*a3+2*l2*a2+3*l3*a1)/4
}
