package scoring

import "math"

// A docket is what a verdict weighs: the relative excess of every method in every cell.
type docket struct {
	cells   []*Appraisal
	methods []methodName
	place   map[methodName]int
	full    []bool      // whether a method has picks in every cell
	excess  [][]float64 // by method and cell, −1 where it has no picks
	means   []float64
}

// newDocket lists the methods that have picks somewhere.
func newDocket(cells []*Appraisal) *docket {
	d := &docket{cells: cells, place: map[methodName]int{}}
	judged := map[methodName]int{}
	for _, a := range cells {
		for i := range a.methods {
			if m := &a.methods[i]; m.failed < a.replicates {
				judged[m.name]++
			}
		}
	}
	for _, a := range cells {
		for i := range a.methods {
			name := a.methods[i].name
			if _, known := d.place[name]; known || judged[name] == 0 {
				continue
			}
			d.place[name] = len(d.methods)
			d.methods = append(d.methods, name)
			d.full = append(d.full, judged[name] == len(cells))
			d.excess = append(d.excess, make([]float64, len(cells)))
		}
	}
	return d
}

// weigh works out the relative excesses with each batch of each cell counted as often as
// weights say.
func (d *docket) weigh(weights [][]float64) {
	for c, a := range d.cells {
		for m := range d.methods {
			d.excess[m][c] = -1
		}
		d.means = a.means(d.means, weights[c])
		best := math.Inf(1)
		for _, v := range d.means {
			if v >= 0 {
				best = min(best, v)
			}
		}
		for i, v := range d.means {
			m, listed := d.place[a.methods[i].name]
			if !listed || v < 0 {
				continue
			}
			d.excess[m][c] = 0 // both may be 0, and then neither is behind
			if v > best {
				d.excess[m][c] = v/best - 1
			}
		}
	}
}

// A standing is the methods' relative excess over the cells.
type standing struct {
	mean, worst       []float64 // by method
	at                []int     // cell of the worst
	meanWin, worstWin int       // methods with the least, −1 if no method is in all cells
}

// score sums the relative excesses up.
func (d *docket) score() standing {
	s := standing{
		mean: make([]float64, len(d.methods)), worst: make([]float64, len(d.methods)),
		at: make([]int, len(d.methods)), meanWin: -1, worstWin: -1,
	}
	for m, excess := range d.excess {
		cells := 0.0
		s.worst[m], s.at[m] = -1, -1
		for c, v := range excess {
			if v < 0 {
				continue
			}
			cells++
			s.mean[m] += v
			if v > s.worst[m] {
				s.worst[m], s.at[m] = v, c
			}
		}
		s.mean[m] /= cells
		if cells == 0 { // a resampling without any of its picks
			s.worst[m] = math.NaN()
		}
		if !d.full[m] || int(cells) < len(d.cells) {
			continue
		}
		if s.meanWin < 0 || s.mean[m] < s.mean[s.meanWin] {
			s.meanWin = m
		}
		if s.worstWin < 0 || s.worst[m] < s.worst[s.worstWin] {
			s.worstWin = m
		}
	}
	return s
}

// behind is how far method m lies behind method w.
func (s *standing) behind(m, w int) float64 { return (1+s.mean[m])/(1+s.mean[w]) - 1 }
