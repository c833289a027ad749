package smoothers

// draw writes the curve with the given values at the nodes of panels into p. Where
// it is held beyond the data, the pieces before and after them are constant; otherwise
// beyond evaluates it there.
func (l *localLadder) draw(p *Piecewise, ends, values []float64, beyond Curve) {
	b := l.basis()
	inner, at := len(ends)-1, 0
	if l.hold {
		at = 1
	}
	p.grow(inner+2*at, b.order)
	for k, end := range ends {
		p.Break[at+k] = end + l.origin
	}
	for k := range inner {
		i := at + k
		mid, half := l.panel(ends[k], ends[k+1])
		p.Origin[i], p.Width[i] = mid+l.origin, half
		b.coefficients(p.Coef[i*b.order:(i+1)*b.order], values[k*b.order:])
	}
	if !l.hold {
		p.Beyond = beyond
		return
	}
	p.Break[0], p.Break[inner+2] = p.Break[1], p.Break[inner+1]
	p.constant(0, p.Break[0], p.Piece(1, p.Break[0]))
	p.constant(inner+1, p.Break[inner+2], p.Piece(inner, p.Break[inner+2]))
}

// panel returns the middle and half the length of a panel that covers from … to. The
// middle is one of the numbers that x and t can be, so that its distance from t
// is exact.
func (l *localLadder) panel(from, to float64) (mid, half float64) {
	mid = from + (to-from)/2 + l.origin - l.origin
	return mid, max(to-mid, mid-from)
}

// constant makes piece k the constant v.
func (p *Piecewise) constant(k int, at, v float64) {
	p.Origin[k], p.Width[k] = at, 1
	c := p.Coef[k*p.Order : (k+1)*p.Order]
	clear(c)
	c[0] = v
}
