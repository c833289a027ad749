package smoothers

import "math"

// A windowQR is least squares on rows that meet w consecutive columns each, their
// window, in ascending order of windows: min Σ (y_i − b_iᵀc)².
//
// The rows of a window are first brought down to a few. From then on the work goes by
// windows: Householder reflections eliminate column after column upwards and
// give R (Reid 1967, Comput. J. 10:188), and the same downwards gives what the windows
// above say of a window's columns. Both together with the window's own rows are a
// small triangle that holds all the data say of these columns (two filters: Fraser &
// Potter 1969, IEEE Trans. Autom. Control 14:387). A leverage is the squared norm of a
// row of an orthonormal basis made there: nothing but orthogonal transformations stands
// between it and the rows, and no squared matrix, which would halve its digits.
//
// Cost and memory are O(m w² + windows·w³).
type windowQR struct {
	w     int       // columns of a window
	most  int       // rows that a window may keep, at least w
	first []float64 // window s has rows first[s] … first[s+1]−1; length windows + 1
	rows  []float64 // m × w: the rows; where a window has more than `most`, an orthonormal basis of them …
	tri   []float64 // windows × w × w: … and the triangle it is to be multiplied by
	r     []float64 // columns × w: row j holds R_jj … R_j,j+w−1
	refl  []float64 // windows × most × w: the reflections that made R …
	tau   []float64 // windows × w: … and their factors
}

// newWindowQR has room for m rows in a number of windows, all of them empty.
func newWindowQR(m, windows, w, most int, mem *Arena) windowQR {
	return windowQR{
		w: w, most: most, first: mem.floats(windows + 1), rows: mem.floats(m * w),
		tri:  mem.floats(windows * w * w),
		r:    mem.floats((windows + w - 1) * w),
		refl: mem.floats(windows * most * w), tau: mem.floats(windows * w),
	}
}

func (q *windowQR) windows() int { return len(q.first) - 1 }
func (q *windowQR) columns() int { return q.windows() + q.w - 1 }

// of returns the rows of window s.
func (q *windowQR) of(s int) []float64 {
	return q.rows[int(q.first[s])*q.w : int(q.first[s+1])*q.w]
}

// dense reports whether window s has so many rows that they are kept in two factors.
func (q *windowQR) dense(s int) bool { return int(q.first[s+1]-q.first[s]) > q.most }

// block returns at most `most` rows that say of c what the rows of window s say.
func (q *windowQR) block(s int) []float64 {
	if q.dense(s) {
		return q.triangle(s)
	}
	return q.of(s)
}

// triangle is the triangle of a dense window.
func (q *windowQR) triangle(s int) []float64 { return q.tri[s*q.w*q.w : (s+1)*q.w*q.w] }

// compress factors the rows of dense windows. It comes once, after rows are filled in.
func (q *windowQR) compress() {
	for s := range q.windows() {
		if q.dense(s) {
			thinQR(q.of(s), q.w, q.triangle(s), q.tau[s*q.w:(s+1)*q.w])
		}
	}
}

// row writes the i-th row of window s, as it was before compress, into dst.
func (q *windowQR) row(dst []float64, s, i int) {
	w := q.w
	row := q.of(s)[i*w : (i+1)*w]
	if !q.dense(s) {
		copy(dst, row)
		return
	}
	t := q.triangle(s)
	for j := range dst {
		sum := 0.0
		for k, v := range row[:j+1] {
			sum += v * t[k*w+j]
		}
		dst[j] = sum
	}
}

// thinQR factors a, n × w by rows with n ≥ w, and leaves Q in it and the upper
// triangle R in t. tau has room for w. (Golub & Van Loan 2013, Matrix Computations,
// §5.2.2.)
func thinQR(a []float64, w int, t, tau []float64) {
	clear(t)
	for k := range w {
		tail := a[(k+1)*w:]
		tau[k] = reflector(&a[k*w+k], tail, w, k)
		copy(t[k*w+k:(k+1)*w], a[k*w+k:(k+1)*w])
		mirror(t[k*w:(k+1)*w], tail, k, k+1, tau[k])
		clear(a[k*w+k : (k+1)*w])
	}
	for k := w - 1; k >= 0; k-- {
		tail := a[(k+1)*w:]
		mirror(a[k*w:(k+1)*w], tail, k, k+1, tau[k])
		for i := k; i < len(tail); i += w {
			tail[i] *= -tau[k]
		}
		a[k*w+k] = 1 - tau[k]
	}
}

// reflector finds the reflection 1 − τvvᵀ that sends (head, column k of rows) to
// (head′, 0), v = (1, v′). It leaves head′ and v′ in their places and returns τ.
func reflector(head *float64, rows []float64, w, k int) float64 {
	ss := 0.0
	for i := k; i < len(rows); i += w {
		ss += rows[i] * rows[i]
	}
	if ss == 0 {
		return 0
	}
	a := *head
	b := -math.Copysign(math.Sqrt(a*a+ss), a)
	scale := 1 / (a - b)
	for i := k; i < len(rows); i += w {
		rows[i] *= scale
	}
	*head = b
	return (b - a) / b
}

// mirror applies the reflection in column k of rows to the columns from j on of (head,
// rows), head being one row. It takes two at a time, since a sum waits for each of its
// terms.
func mirror(head, rows []float64, k, j int, tau float64) {
	if tau == 0 {
		return
	}
	w := len(head)
	for ; j+1 < w; j += 2 {
		one, two := head[j], head[j+1]
		for r := rows; len(r) >= w; r = r[w:] {
			v := r[k]
			one += v * r[j]
			two += v * r[j+1]
		}
		one *= tau
		two *= tau
		head[j] -= one
		head[j+1] -= two
		for r := rows; len(r) >= w; r = r[w:] {
			v := r[k]
			r[j] -= one * v
			r[j+1] -= two * v
		}
	}
	if j < w {
		one := head[j]
		for r := rows; len(r) >= w; r = r[w:] {
			one += r[k] * r[j]
		}
		one *= tau
		head[j] -= one
		for r := rows; len(r) >= w; r = r[w:] {
			r[j] -= one * r[k]
		}
	}
}

// absorb brings rows (each of w) into the upper triangle t, w × w. It leaves the
// reflections in their place and their factors in tau.
func absorb(t, rows []float64, w int, tau []float64) {
	for k := range w {
		tau[k] = reflector(&t[k*w+k], rows, w, k)
		mirror(t[k*w:(k+1)*w], rows, k, k+1, tau[k])
	}
}

// advance drops the first row and column of the triangle t and adds zeros at the end.
func advance(t []float64, w int) {
	for k := range w - 1 {
		copy(t[k*w+k:(k+1)*w-1], t[(k+1)*w+k+1:(k+2)*w])
		t[(k+1)*w-1] = 0
	}
	t[w*w-1] = 0
}

// upwards eliminates column after column, which makes R.
func (q *windowQR) upwards(mem *Arena) {
	t := mem.floats(q.w * q.w)
	for s := range q.windows() {
		q.absorb(s, t)
		advance(t, q.w)
	}
}

// absorb brings the rows of window s into the triangle t of those below, keeps the
// reflections, and takes what that adds to R.
func (q *windowQR) absorb(s int, t []float64) {
	w, block := q.w, q.block(s)
	refl := q.refl[s*q.most*w:][:len(block)]
	copy(refl, block)
	absorb(t, refl, w, q.tau[s*w:(s+1)*w])
	copy(q.r[s*w:(s+1)*w], t[:w])
	if s == q.windows()-1 {
		for k := 1; k < w; k++ {
			copy(q.r[(s+k)*w:], t[k*w+k:(k+1)*w])
		}
	}
}

// solve writes the c that is nearest to the readings y, one per row, for a windowQR
// that has its R. work has room for w + most values.
func (q *windowQR) solve(c, y, work []float64) {
	w, last := q.w, q.windows()-1
	head, tail := work[:w], work[w:]
	clear(head)
	for s := range last + 1 {
		rest := y[int(q.first[s]):int(q.first[s+1])]
		if q.dense(s) {
			project(tail[:w], q.of(s), rest)
			rest = tail[:w]
		} else {
			rest = tail[:copy(tail, rest)]
		}
		refl := q.refl[s*q.most*w:]
		for k, tau := range q.tau[s*w : (s+1)*w] {
			dot := head[k]
			for i, v := range rest {
				dot += refl[i*w+k] * v
			}
			dot *= tau
			head[k] -= dot
			for i := range rest {
				rest[i] -= dot * refl[i*w+k]
			}
		}
		c[s] = head[0]
		if s == last {
			copy(c[s:], head)
		}
		copy(head, head[1:])
		head[w-1] = 0
	}
	q.back(c)
}

// project writes the products of the columns of rows with y into dst.
func project(dst, rows, y []float64) {
	clear(dst)
	w := len(dst)
	for i, v := range y {
		for k, b := range rows[i*w : (i+1)*w] {
			dst[k] += b * v
		}
	}
}

// back solves R c = c.
func (q *windowQR) back(c []float64) {
	w := q.w
	for j := len(c) - 1; j >= 0; j-- {
		r := q.r[j*w : j*w+min(w, len(c)-j)]
		v := c[j]
		for k := 1; k < len(r); k++ {
			v -= r[k] * c[j+k]
		}
		c[j] = v / r[0]
	}
}

// fitted writes B c.
func (q *windowQR) fitted(dst, c, work []float64) {
	w := q.w
	local := work[:w]
	for s := range q.windows() {
		from, to := int(q.first[s]), int(q.first[s+1])
		copy(local, c[s:s+w])
		if q.dense(s) {
			t := q.triangle(s)
			for k := range local {
				sum := 0.0
				for j, v := range t[k*w+k : (k+1)*w] {
					sum += v * c[s+k+j]
				}
				local[k] = sum
			}
		}
		for i := from; i < to; i++ {
			sum := 0.0
			for k, v := range q.rows[i*w : (i+1)*w] {
				sum += v * local[k]
			}
			dst[i] = sum
		}
	}
}

// transposed writes Bᵀr.
func (q *windowQR) transposed(dst, r, work []float64) {
	w := q.w
	local := work[:w]
	clear(dst)
	for s := range q.windows() {
		project(local, q.of(s), r[int(q.first[s]):int(q.first[s+1])])
		to := dst[s : s+w]
		if !q.dense(s) {
			for k, v := range local {
				to[k] += v
			}
			continue
		}
		t := q.triangle(s)
		for k, v := range local {
			for j := k; j < w; j++ {
				to[j] += v * t[k*w+j]
			}
		}
	}
}
