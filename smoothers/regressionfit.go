package smoothers

// A knotSolver fits one rung of a regression spline.
type knotSolver struct {
	ladder *knotLadder
	basis  splineBasis
	qr     windowQR
}

// solve implements solver. The mean of y is taken off first and put back at the end:
// B-splines add up to 1.
func (s *knotSolver) solve(y []float64, f *Fit) {
	d, q := &s.ladder.design, &s.qr
	m, p := len(d.z), s.basis.size()
	f.work = resize(f.work, m+p+q.w+q.most)
	r, c, work := f.work[:m], f.work[m:m+p], f.work[m+p:]
	mean := d.centre(r, y)
	q.solve(c[:q.columns()], r, work)
	q.fitted(r, c, work)
	d.uncentre(f.Fitted, r, mean)
	if s.basis.ends.columns > 0 {
		s.basis.ends.unfold(c)
	}
	for j := range c {
		c[j] += mean
	}
	s.basis.draw(&f.pieces, c, d.origin, s.ladder.spline.Beyond == "hold")
	f.Curve = &f.pieces
}
