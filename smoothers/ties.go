package smoothers

// A tied design is a design with its tied observations gathered: what a local
// fit sees of them is one point that counts as often as it was observed. Its x are
// taken from an origin, which is not 0 only where no difference is rounded by that.
type tied struct {
	origin float64
	given  []float64 // the design as it was given, length n
	x      []float64 // the observations from the origin, ascending, length n
	z      []float64 // the distinct x, length m
	count  []float64 // observations at each, length m
	start  []int     // index of the first of them, length m; nil where m = n
}

// gather finds the distinct values of x, which must be ascending and finite.
func gather(x []float64, mem *Arena) tied {
	m := 0
	for i, v := range x {
		if v-v != 0 || i > 0 && v < x[i-1] {
			panic("smoothers: x must be finite and ascending")
		}
		if i == 0 || v != x[i-1] {
			m++
		}
	}
	if m == 0 {
		panic("smoothers: a design needs an observation")
	}
	d := tied{given: x, x: x, count: mem.floats(m)}
	if first, last := x[0], x[len(x)-1]; first > 0 && last <= 2*first || last < 0 && first >= 2*last {
		// Sterbenz: a − b is exact for b/2 ≤ a ≤ 2b. Far from 0 this gives points
		// between the x, where curves are interpolated, a finer grain than the x have.
		d.origin = first
		d.x = mem.floats(len(x))
		for i, v := range x {
			d.x[i] = v - first
		}
		x = d.x
	}
	d.z = x
	if m == len(x) {
		for i := range d.count {
			d.count[i] = 1
		}
		return d
	}
	d.z, d.start = mem.floats(m), make([]int, m)
	g := -1
	for i, v := range x {
		if i == 0 || v != x[i-1] {
			g++
			d.z[g], d.start[g] = v, i
		}
		d.count[g]++
	}
	return d
}

// sums writes the sum of y over the observations at each distinct x into dst.
func (d *tied) sums(dst, y []float64) {
	if d.start == nil {
		copy(dst, y)
		return
	}
	for g, i := range d.start {
		var s float64
		for _, v := range y[i : i+int(d.count[g])] {
			s += v
		}
		dst[g] = s
	}
}

// spread writes one value per distinct x to all observations there. dst and v
// may be the same memory: it works from the end.
func (d *tied) spread(dst, v []float64) {
	if d.start == nil {
		copy(dst, v)
		return
	}
	for g := len(d.z) - 1; g >= 0; g-- {
		val := v[g]
		for i := range int(d.count[g]) {
			dst[d.start[g]+i] = val
		}
	}
}
