package smoothers

import (
	"math"
	"slices"
)

// AtTuning implements Ladder.
func (l *localLadder) AtTuning(tunings []float64) []Rung {
	rungs := make([]Rung, len(tunings))
	solvers := make([]localRung, len(tunings))
	for i, t := range tunings {
		r := &rungs[i]
		r.Tuning = t
		if r.Status, r.Note = l.admit(t); r.Status == OK {
			l.lay(r, &solvers[i])
		}
		r.DF = r.TrS
	}
	return rungs
}

// AtDF implements Ladder.
func (l *localLadder) AtDF(dfs []float64) []Rung {
	rungs := make([]Rung, len(dfs))
	solvers := make([]localRung, len(dfs))
	for i, df := range dfs {
		r := &rungs[i]
		r.DF = df
		if r.Tuning, r.Status, r.Note = l.tune(df); r.Status == OK {
			l.lay(r, &solvers[i])
		}
		if r.Status == OK && math.Abs(r.TrS-df) > dfTolerance*df {
			*r = Rung{DF: df, Status: DFUnattainable, Note: noteStep}
		}
	}
	return rungs
}

// A localRung fits a y on one rung.
type localRung struct {
	l      *localLadder
	tuning float64
	rows   localRows // the rows of S, one per distinct x; empty where too large to keep
	panels panelLayout
}

// A localRows holds linear functionals of y, each on consecutive distinct x:
// functional i is Σ_g weight[end[i−1]+g]·Y[lo[i]+g]. Indices are kept as floats,
// which arenas deal in.
type localRows struct {
	lo, end []float64
	weight  []float64
}

// apply writes the functionals of the sums of y into dst.
func (r *localRows) apply(dst, sums []float64) {
	from := 0
	for i, end := range r.end {
		row := r.weight[from:int(end)]
		y := sums[int(r.lo[i]):]
		y = y[:len(row)]
		var v float64
		for j, w := range row {
			v += w * y[j]
		}
		dst[i] = v
		from = int(end)
	}
}

const (
	// rowsKept bounds the size of the rows of S kept per rung, in floats.
	rowsKept = 1 << 14
	// nodesKept bounds that of the functionals at the nodes of its panels.
	nodesKept = 1 << 17
)

// lay works out all of a rung that y does not touch.
func (l *localLadder) lay(r *Rung, s *localRung) {
	n := len(l.x)
	*s = localRung{l: l, tuning: r.Tuning}
	r.solver, r.Lines = s, l.degree > 0
	r.Leverage, r.RowNorm2, r.Remainder = l.mem.floats(n), l.mem.floats(n), l.mem.floats(n)
	if l.wide(r.Tuning) && l.window(r.Tuning)*float64(len(l.z)) > rowsKept {
		l.layBySums(r)
	} else {
		l.layByRows(r, s)
	}
	if math.IsNaN(r.TrS + r.TrSTS) {
		*r = Rung{DF: r.DF, Tuning: r.Tuning, Status: RankDeficient, Note: noteFew}
		return
	}
	l.spread(r.Leverage, r.Leverage)
	l.spread(r.Remainder, r.Remainder)
	l.spread(r.RowNorm2, r.RowNorm2)
	if s.rows.end != nil && l.mem != nil && l.mem.Lasting {
		s.panels = l.layout(r.Tuning)
	}
}

// layByRows lays a rung by way of the rows of S, and keeps them if they fit.
func (l *localLadder) layByRows(r *Rung, s *localRung) {
	m := len(l.z)
	lo, end := l.mem.floats(m), l.mem.floats(m)
	if l.store == nil {
		l.store = l.mem.floats(min(m*m, 2*rowsKept))
	}
	used := 0
	g := l.gaze(r.Tuning)
	for i, t := range l.z {
		g.at(t)
		row := l.layRow(r, &g, i)
		lo[i] = float64(l.fit.lo)
		if used+len(row) <= len(l.store) {
			copy(l.store[used:], row)
		}
		used += len(row)
		end[i] = float64(used)
	}
	if used <= len(l.store) {
		s.rows = localRows{lo: lo, end: end, weight: l.keep(l.store[:used])}
	}
}

// layRow fills in what a rung says of the i-th distinct x, where g is, and returns the
// row of S, from the distinct x number l.fit.lo on.
func (l *localLadder) layRow(r *Rung, g *gaze, i int) []float64 {
	row, lev, rem := l.fit.row(g, i)
	var rest float64
	for j, c := range l.count[l.fit.lo : l.fit.lo+len(row)] {
		rest += c * row[j] * row[j]
	}
	row[i-l.fit.lo] = lev
	l.enter(r, i, lev, rem, rest+(l.count[i]-1)*lev*lev)
	return row
}

// enter fills in the leverage of the i-th distinct x, its complement rem, and the
// sum of squares of the rest of its row.
func (l *localLadder) enter(r *Rung, i int, lev, rem, rest float64) {
	c := l.count[i]
	r.Leverage[i], r.Remainder[i], r.RowNorm2[i] = lev, rem, rest+lev*lev
	r.TrS += c * lev
	r.TrSTS += c * (rest + lev*lev)
	r.DFResidual += c * (rest + rem*rem)
}

// layBySums lays a rung with wide windows. Σ_j S_ij² is a combination of the moments
// of the squared kernel. A leverage of a half and more, whose complement would
// cancel, is left to the row.
func (l *localLadder) layBySums(r *Rung) {
	s, q := l.sumsOn(r.Tuning, nil), l.squaredSumsOn(r.Tuning)
	for i, t := range l.z {
		if s.at(t, false) && s.k0 < 0.5 && q.gather(t, false) {
			if l.shape == gaussian {
				rescale(q.m[:2*l.degree+1], 1/math.Sqrt2) // its width is narrower
			}
			lev := s.k0
			l.enter(r, i, lev, 1-lev, s.quadratic(l.degree, q.m[:])-lev*lev)
			continue
		}
		l.layRow(r, &s.gaze, i)
	}
}

// keep returns a copy of v in the ladder's memory.
func (l *localLadder) keep(v []float64) []float64 {
	k := l.mem.floats(len(v))
	copy(k, v)
	return k
}

// layout returns the panels of a tuning, or none if their rows are too large to keep.
func (l *localLadder) layout(tuning float64) panelLayout {
	b := &l.maker
	if b.l == nil {
		m := len(l.z)
		b.l, b.basis, b.fit, b.scale = l, l.basis(), &l.fit, 1
		b.diff = l.mem.floats(m)
		b.weight = l.mem.floats(nodesKept)[:0]
		b.lo, b.end = l.mem.floats(nodesKept / 16)[:0], l.mem.floats(nodesKept / 16)[:0]
		b.stretch, b.ends = l.mem.floats(2 * kinksMost)[:0], l.mem.floats(4 * kinksMost)[:0]
		b.edge.weight, b.next.weight = l.mem.floats(m)[:0], l.mem.floats(m)[:0]
		b.room = nodesKept
	}
	if !b.make(tuning) {
		return panelLayout{}
	}
	return panelLayout{
		ends: l.keep(b.ends),
		rows: localRows{lo: l.keep(b.lo), end: l.keep(b.end), weight: l.keep(b.weight)},
	}
}

// row returns the weights with which the fitted value at the i-th distinct x takes
// one observation of each distinct x from f.lo on, zero at i itself; the leverage
// lev, with which it takes an observation at i; and rem = 1 − lev.
//
// It fits without one observation at i and puts that back (Sherman & Morrison):
// with v the variance of the fit without it, of weight 1, lev = v/(1 + v) and
// rem = 1/(1 + v), and the rest of the row is rem times the row without it.
func (f *localFit) row(g *gaze, i int) (row []float64, lev, rem float64) {
	if !f.at(g, f.l.z[i], i) {
		f.lo, f.hi = i, i+1
		row = f.w[:1]
		row[0] = 0
		return row, 1, 0 // a lone x that the fit must meet
	}
	v := f.variance()
	near := math.Exp(-f.far) // weights of f are relative to this
	lev, rem = v/(near+v), near/(near+v)
	row = f.w[:f.hi-f.lo]
	for j := range row {
		row[j] *= rem * f.kappa(j)
	}
	row[i-f.lo] = 0
	return row, lev, rem
}

// solve implements solver.
func (s *localRung) solve(y []float64, f *Fit) {
	l := s.l
	m := len(l.z)
	nodes := len(s.panels.rows.end)
	f.work = resize(f.work, m+nodes+l.scratch())
	sums, values := f.work[:m], f.work[m:m+nodes]
	l.sums(sums, y)
	c := &f.local
	c.rung, c.sums, c.fit = s, sums, l.fitOn(f.work[m+nodes:])
	c.pieces, c.tried, c.drawn = &f.pieces, false, false
	c.low, c.high = slices.Min(y), slices.Max(y)
	f.Curve = c
	if nodes > 0 {
		s.panels.rows.apply(values, sums)
		l.draw(&f.pieces, s.panels.ends, values, c)
		f.Curve = &f.pieces
	}
	if s.rows.end != nil {
		s.rows.apply(f.Fitted[:m], sums)
	} else {
		w := c.sweep(m)
		for i, t := range l.z {
			f.Fitted[i] = c.value(&w, t)
		}
	}
	l.spread(f.Fitted, f.Fitted[:m])
}

// matrix implements rower: from the rows if they are kept, else they are worked out again.
func (s *localRung) matrix(dst []float64) bool {
	l := s.l
	n, first, from := len(l.x), 0, 0 // observation, weight
	g := l.gaze(s.tuning)
	var fit localFit
	if s.rows.end == nil {
		fit = l.fitOn(make([]float64, l.scratch()))
	}
	clear(dst)
	for i, c := range l.count {
		row, lo := []float64(nil), 0
		if s.rows.end != nil {
			row, lo = s.rows.weight[from:int(s.rows.end[i])], int(s.rows.lo[i])
			from = int(s.rows.end[i])
		} else {
			g.at(l.z[i])
			var lev float64
			row, lev, _ = fit.row(&g, i)
			lo = fit.lo
			row[i-lo] = lev
		}
		l.spreadRow(dst[first*n:(first+1)*n], row, lo)
		for k := 1; k < int(c); k++ {
			copy(dst[(first+k)*n:(first+k+1)*n], dst[first*n:(first+1)*n])
		}
		first += int(c)
	}
	return true
}

// spreadRow writes weights of one observation at each distinct x, from the one numbered lo
// on, to all observations.
func (l *localLadder) spreadRow(dst, weight []float64, lo int) {
	at := lo
	if l.start != nil {
		at = l.start[lo]
	}
	for j, w := range weight {
		for range int(l.count[lo+j]) {
			dst[at] = w
			at++
		}
	}
}
