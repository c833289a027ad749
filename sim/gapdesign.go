package sim

import "fmt"

// GapDesign is uniform on the parts of the domain left and right of a gap.
type GapDesign struct {
	From float64  `option:"from" required:"true" doc:"where the gap begins" unit:"x"`
	To   float64  `option:"to" required:"true" doc:"where the gap ends" unit:"x"`
	Left *float64 `option:"left" above:"0" below:"1" doc:"share of x to the left of the gap; by default as its length"`
}

// Check refuses a gap without length.
func (d *GapDesign) Check() error {
	if !(d.From < d.To) {
		return &OptionError{"to", fmt.Sprint(d.To), fmt.Sprintf("a number above from = %g", d.From)}
	}
	return nil
}

func (d *GapDesign) on(lo, hi float64) (xLaw, error) {
	if !(lo < d.From && d.To < hi) {
		return nil, &OptionError{"from", fmt.Sprint(d.From), fmt.Sprintf("a gap inside the domain [%g, %g]", lo, hi)}
	}
	l := &gapLaw{left: uniformLaw{lo: lo, hi: d.From}, right: uniformLaw{lo: d.To, hi: hi}}
	l.p = (d.From - lo) / (d.From - lo + hi - d.To)
	if d.Left != nil {
		l.p = *d.Left
	}
	return l, nil
}

func (d *GapDesign) describe() string {
	if d.Left != nil {
		return fmt.Sprintf("gap %v %v left %v", d.From, d.To, *d.Left)
	}
	return fmt.Sprintf("gap %v %v", d.From, d.To)
}

// gapLaw is uniform on either of two intervals, on the left one with probability p.
type gapLaw struct {
	continuous
	left, right uniformLaw
	p           float64
}

func (l *gapLaw) draw(x []float64, s *Stream) {
	s.ascending(x, 0, 1)
	for i, u := range x {
		part, v := &l.left, u/l.p
		if u >= l.p {
			part, v = &l.right, (u-l.p)/(1-l.p)
		}
		x[i] = min(part.lo+(part.hi-part.lo)*v, part.hi)
	}
}

func (l *gapLaw) mean(g integrand, within float64) (float64, error) {
	left, err := l.left.mean(g, within)
	if err != nil {
		return 0, err
	}
	right, err := l.right.mean(g, within)
	return l.p*left + (1-l.p)*right, err
}

func (l *gapLaw) cdf(x float64) float64 { return l.p*l.left.cdf(x) + (1-l.p)*l.right.cdf(x) }
