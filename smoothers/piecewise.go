package smoothers

// A Piecewise is a curve that is a polynomial between consecutive breaks. Piece k
// covers [Break[k], Break[k+1]); the first also covers all below and the last all
// above, so with K pieces Break has length K+1 and its ends only mark the data.
//
// On piece k the value at t is Σ_j Coef[k·Order+j] u^j with u = (t − Origin[k])/Width[k].
type Piecewise struct {
	Order  int       // coefficients per piece: degree + 1
	Break  []float64 // length K+1, ascending
	Origin []float64 // length K
	Width  []float64 // length K, positive
	Coef   []float64 // K × Order, row-major, lowest power first
}

// grow sets the number of pieces and the order, reusing memory.
func (p *Piecewise) grow(pieces, order int) {
	p.Order = order
	p.Break = resize(p.Break, pieces+1)
	p.Origin = resize(p.Origin, pieces)
	p.Width = resize(p.Width, pieces)
	p.Coef = resize(p.Coef, pieces*order)
}

// At writes the values at the ascending points t into dst.
func (p *Piecewise) At(dst, t []float64) {
	if len(dst) != len(t) {
		panic("smoothers: dst and t differ in length")
	}
	last := len(p.Origin) - 1
	k := 0
	for i, ti := range t {
		for k < last && ti >= p.Break[k+1] {
			k++
		}
		dst[i] = p.Piece(k, ti)
	}
}

// Piece evaluates the polynomial of piece k at t, wherever t lies.
func (p *Piecewise) Piece(k int, t float64) float64 {
	u := (t - p.Origin[k]) / p.Width[k]
	c := p.Coef[k*p.Order : (k+1)*p.Order]
	v := c[len(c)-1]
	for j := len(c) - 2; j >= 0; j-- {
		v = v*u + c[j]
	}
	return v
}
