package smoothers

import "math"

// A splineBasis is the basis of a spline on a design: B-splines, or what is left of
// cubic ones under the natural end conditions.
type splineBasis struct {
	bspline
	ends naturalEnds // columns is 0 where the ends are free
}

// columns is the number of coefficients.
func (b *splineBasis) columns() int {
	if b.ends.columns > 0 {
		return b.ends.columns
	}
	return b.size()
}

// on returns the least-squares problem of the basis on a design: one row per distinct
// x, weighted by the root of its count. Windows with more than most rows are dense.
func (b *splineBasis) on(d *tied, most int, mem *Arena) windowQR {
	m, w := len(d.z), min(b.degree+1, b.columns())
	q := newWindowQR(m, b.columns()-w+1, w, most, mem)
	var v [maxDegree + 1]float64
	var steps spanSteps
	window, k := 0, b.degree
	steps.enter(&b.bspline, k)
	for i, z := range d.z {
		if k = b.interval(z, k); k != steps.k {
			steps.enter(&b.bspline, k)
		}
		steps.values(&b.bspline, v[:b.degree+1], z)
		row := q.rows[i*w : (i+1)*w]
		first := k - b.degree
		if b.ends.columns > 0 {
			first = b.ends.fold(row, v[:b.degree+1], k)
		} else {
			copy(row, v[:w])
		}
		if c := d.count[i]; c > 1 {
			weight := math.Sqrt(c)
			for j := range row {
				row[j] *= weight
			}
		}
		for ; window < first; window++ {
			q.first[window+1] = float64(i)
		}
	}
	for ; window < q.windows(); window++ {
		q.first[window+1] = float64(m)
	}
	return q
}

// centre writes one reading per row of that problem into r: the sums of y at the distinct
// x, less the mean of y, weighted like the rows. It returns the mean.
func (d *tied) centre(r, y []float64) (mean float64) {
	d.sums(r, y)
	for _, v := range r {
		mean += v / float64(len(d.x))
	}
	for i, n := range d.count {
		if r[i] -= n * mean; n > 1 {
			r[i] /= math.Sqrt(n)
		}
	}
	return mean
}

// uncentre turns fitted values of that problem into those of the observations.
func (d *tied) uncentre(fitted, r []float64, mean float64) {
	for i, n := range d.count {
		if n > 1 {
			r[i] /= math.Sqrt(n)
		}
		r[i] += mean
	}
	d.spread(fitted, r)
}

// draw writes the spline with B-spline coefficients c, places counted from origin.
// Beyond the ends go a line for a natural spline, a level where the value is held, or
// else the last piece.
func (b *splineBasis) draw(p *Piecewise, c []float64, origin float64, hold bool) {
	d := b.degree
	outer := 0
	if b.ends.columns > 0 || hold {
		outer = 1
	}
	inner := b.size() - d
	p.grow(inner+2*outer, d+1)
	var steps spanSteps
	for i := range inner {
		k, at := d+i, outer+i
		p.Origin[at] = origin + b.knots[k]
		p.Width[at] = b.knots[k+1] - b.knots[k]
		if p.Width[at] == 0 {
			p.Width[at] = 1 // a single x
		}
		p.Break[at] = p.Origin[at]
		steps.enter(&b.bspline, k)
		from := p.Origin[at] - origin // the knot, to the grain of the curve's own x
		steps.powers(&b.bspline, p.Coef[at*p.Order:(at+1)*p.Order], c[i:i+d+1], from, p.Width[at])
	}
	p.Break[outer+inner] = origin + b.knots[b.size()]
	if outer == 1 {
		p.close(hold)
	}
}

// close writes the first and the last piece as the tangents to their neighbours at
// the ends of these, or as levels.
func (p *Piecewise) close(level bool) {
	last, o := len(p.Origin)-1, p.Order
	p.Break[0], p.Break[last+1] = p.Break[1], p.Break[last]
	p.Origin[0], p.Width[0] = p.Origin[1], p.Width[1]
	p.Origin[last], p.Width[last] = p.Break[last], p.Width[last-1]
	lower, upper := p.Coef[:o], p.Coef[last*o:]
	clear(lower)
	clear(upper)
	next, before := p.Coef[o:2*o], p.Coef[(last-1)*o:last*o]
	lower[0] = next[0]
	for _, v := range before {
		upper[0] += v
	}
	if level || o == 1 {
		return
	}
	lower[1] = next[1]
	for j, v := range before {
		upper[1] += float64(j) * v
	}
}
