package smoothers

import "sort"

// A Piecewise is a curve that is a polynomial between consecutive breaks. Piece k
// covers [Break[k], Break[k+1]); with K pieces Break has length K+1. Below Break[0] and
// from Break[K] on, the first and the last piece go on, unless Beyond is set: then the
// pieces end there and Beyond is the curve outside.
//
// On piece k the value at t is Σ_j Coef[k·Order+j] u^j with u = (t − Origin[k])/Width[k].
type Piecewise struct {
	Order  int       // coefficients per piece: degree + 1
	Break  []float64 // length K+1, ascending
	Origin []float64 // length K
	Width  []float64 // length K, positive
	Coef   []float64 // K × Order, row-major, lowest power first
	Beyond Curve     // the curve outside [Break[0], Break[K]), or nil if the end pieces go on
}

// grow sets the number of pieces and the order, reusing memory.
func (p *Piecewise) grow(pieces, order int) {
	p.Order, p.Beyond = order, nil
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
	if p.Beyond != nil {
		from := sort.SearchFloat64s(t, p.Break[0])
		to := from + sort.SearchFloat64s(t[from:], p.Break[last+1])
		p.Beyond.At(dst[:from], t[:from])
		p.Beyond.At(dst[to:], t[to:])
		dst, t = dst[from:to], t[from:to]
	}
	for i, k := 0, 0; i < len(t); {
		for k < last && t[i] >= p.Break[k+1] {
			k++
		}
		end := len(t)
		if k < last {
			end = i + 1
			for end < len(t) && t[end] < p.Break[k+1] {
				end++
			}
		}
		p.along(k, dst[i:end], t[i:end])
		i = end
	}
}

// along evaluates the polynomial of piece k at all t, four at a time, since each
// step of Horner's scheme waits for the last.
func (p *Piecewise) along(k int, dst, t []float64) {
	o, w := p.Origin[k], p.Width[k]
	c := p.Coef[k*p.Order : (k+1)*p.Order]
	top := len(c) - 1
	dst = dst[:len(t)]
	i := 0
	for ; i+3 < len(t); i += 4 {
		u0, u1, u2, u3 := (t[i]-o)/w, (t[i+1]-o)/w, (t[i+2]-o)/w, (t[i+3]-o)/w
		v0, v1, v2, v3 := c[top], c[top], c[top], c[top]
		for j := top - 1; j >= 0; j-- {
			a := c[j]
			v0, v1, v2, v3 = v0*u0+a, v1*u1+a, v2*u2+a, v3*u3+a
		}
		dst[i], dst[i+1], dst[i+2], dst[i+3] = v0, v1, v2, v3
	}
	for ; i < len(t); i++ {
		dst[i] = p.Piece(k, t[i])
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
