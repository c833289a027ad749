package smoothers

import "math"

// mostMagnified bounds norm·σ_k/(σ_k² + λ), by which rounding of the σ_k and w_k may be
// magnified: fitted values are then off by at most 1e−9.
const mostMagnified = 6e5

// lay works out all of a rung that y does not touch.
func (l *penaltyLadder) lay(r *Rung, s *penaltySolver, lambda float64) {
	n, m := len(l.design.x), len(l.design.z)
	factors := l.mem.floats(3 * l.rank)
	f, ff, g := factors[:l.rank], factors[l.rank:2*l.rank], factors[2*l.rank:]
	*s = penaltySolver{ladder: l, gain: l.mem.floats(l.rank)}
	magnified := 0.0
	for k := range l.rank {
		sigma := l.sigma(k)
		f[k], g[k], s.gain[k] = 1, 0, 1
		if k >= 2 {
			s.gain[k] = 1 / (sigma*sigma + lambda)
			f[k], g[k] = sigma*sigma*s.gain[k], lambda*s.gain[k]
			if math.IsInf(lambda, 1) {
				g[k] = 1
			}
			magnified = max(magnified, l.reinsch.norm*sigma*s.gain[k])
		}
		ff[k] = f[k] * f[k]
		r.TrS += f[k]
		r.TrSTS += ff[k]
		r.DFResidual += g[k] * g[k]
		if k >= 2 && lambda > 0 {
			r.LogDet -= math.Log1p(sigma * sigma / lambda)
		}
	}
	if !(magnified <= mostMagnified) {
		*r = Rung{DF: r.DF, Status: RankDeficient, Note: noteDigits}
		return
	}
	r.Tuning, r.Form, r.Lines = lambda, Ridge, true
	r.DFResidual += float64(n - l.rank)
	r.HasLogDet = lambda > 0
	r.Leverage, r.RowNorm2, r.Remainder = l.mem.floats(n), l.mem.floats(n), l.mem.floats(n)
	l.rows.diagonals(f, ff, g, r.Leverage[:m], r.RowNorm2[:m], r.Remainder[:m])
	for i, v := range l.rows.unseen {
		r.Remainder[i] += v
	}
	l.design.share(r.Leverage, r.Remainder)
	for i, c := range l.design.count {
		r.RowNorm2[i] /= c
	}
	l.design.spread(r.RowNorm2, r.RowNorm2[:m])
	r.solver = s
}

// sigma returns σ of the k-th of all columns, the two lines first.
func (l *penaltyLadder) sigma(k int) float64 {
	if k < 2 {
		return 1
	}
	return l.reinsch.sigma[k-2]
}

// A penaltySolver fits one rung of a penalised spline.
type penaltySolver struct {
	ladder *penaltyLadder
	gain   []float64 // 1, 1 and 1/(σ_k² + λ)
}

// solve implements solver: c = Σ_k gain_k (w_kᵀBᵀy) w_k.
func (s *penaltySolver) solve(y []float64, f *Fit) {
	l := s.ladder
	b, q, d := &l.reinsch, &l.qr, &l.design
	m, p := len(d.z), b.columns
	f.work = resize(f.work, m+2*p+q.w)
	r, c, t, work := f.work[:m], f.work[m:m+p], f.work[m+p:m+2*p], f.work[m+2*p:]
	mean := d.centre(r, y)
	q.transposed(t, r, work)
	clear(c)
	for k, gain := range s.gain {
		w := b.vectors[k*p : (k+1)*p]
		a := gain * dot(w, t)
		for j, v := range w {
			c[j] += a * v
		}
	}
	q.fitted(r, c, work)
	d.uncentre(f.Fitted, r, mean)
	for j := range c {
		c[j] += mean
	}
	l.basis.draw(&f.pieces, c, d.origin, l.hold)
	f.Curve = &f.pieces
}
