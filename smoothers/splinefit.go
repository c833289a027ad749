package smoothers

// A splineSolver fits one rung of a smoothing spline.
type splineSolver struct {
	ladder *splineLadder
	q      float64   // 1/λ, in units of the range of x
	gains  []float64 // of the filter; nil where too large to keep
}

// solve implements solver. What the penalty leaves alone, a line or for order 1 a
// constant, is fitted first and put back at the end, which keeps the digits of
// readings far from 0.
func (s *splineSolver) solve(y []float64, f *Fit) {
	l, gains := s.ladder, s.gains
	m := len(l.design.z)
	f.work = resize(f.work, 5*m)
	if gains == nil {
		f.work = resize(f.work, 5*m+l.filter.room())
		gains = f.work[5*m:]
		l.filter.gains(s.q, gains)
	}
	r, g, slope := f.work[:m], f.work[m:2*m], f.work[2*m:3*m]
	l.design.sums(r, y)
	line := l.line(r)
	for i, count := range l.design.count {
		r[i] -= count * line.at(l.position(i))
	}
	l.filter.smooth(gains, r, g, slope, f.work[3*m:5*m])
	for i := range g {
		g[i] += line.at(l.position(i))
		slope[i] += line.slope
	}
	l.design.spread(f.Fitted, g)
	l.pieces(&f.pieces, g, slope)
	f.Curve = &f.pieces
}

// position is knot i on the scale of the filter.
func (l *splineLadder) position(i int) float64 { return (l.design.z[i] - l.design.z[0]) / l.span }

// A trend is a straight line about a centre.
type trend struct{ centre, level, slope float64 }

func (t trend) at(x float64) float64 { return t.level + t.slope*(x-t.centre) }

// line is the least-squares line through the readings, whose sums at the knots are
// r; for order 1 it is level.
func (l *splineLadder) line(r []float64) trend {
	n := float64(len(l.design.x))
	t := trend{}
	for i, count := range l.design.count {
		t.centre += count * l.position(i) / n
		t.level += r[i] / n
	}
	if l.order == 1 {
		return t
	}
	var sxx, sxy float64
	for i, count := range l.design.count {
		d := l.position(i) - t.centre
		sxx += count * d * d
		sxy += d * (r[i] - count*t.level)
	}
	t.slope = sxy / sxx
	return t
}

// pieces writes the spline with the given values and slopes at the knots: Hermite
// cubics between, and one piece beyond either end.
func (l *splineLadder) pieces(p *Piecewise, g, slope []float64) {
	z, origin := l.design.z, l.design.origin
	m := len(z)
	p.grow(m+1, 2*l.order)
	for i, v := range z {
		p.Break[i+1] = origin + v
	}
	p.Break[0], p.Break[m+1] = p.Break[1], p.Break[m]
	for i := range m - 1 {
		k := i + 1
		h := l.gap[i]
		p.Origin[k], p.Width[k] = p.Break[k], z[i+1]-z[i]
		c := p.Coef[k*p.Order : (k+1)*p.Order]
		rise := g[i+1] - g[i]
		c[0] = g[i]
		if l.order == 1 {
			c[1] = rise
			continue
		}
		s0, s1 := h*slope[i], h*slope[i+1]
		c[1], c[2], c[3] = s0, 3*rise-2*s0-s1, s0+s1-2*rise
	}
	l.end(p, 0, g[0], slope[0])
	l.end(p, m, g[m-1], slope[m-1])
}

// end writes a piece beyond the data: a line, or level where the value is held.
func (l *splineLadder) end(p *Piecewise, k int, g, slope float64) {
	if l.hold {
		slope = 0
	}
	p.Origin[k], p.Width[k] = p.Break[k], l.span
	c := p.Coef[k*p.Order : (k+1)*p.Order]
	clear(c)
	c[0], c[1] = g, slope
}
