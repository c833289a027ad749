package scoring

import (
	"math"

	"bendtest/results"
)

// A Moment is a figure over replicates: how many it was seen in, its mean, and the sum of
// squared deviations from that. The zero value is a figure never seen.
type Moment struct {
	Count    int
	Mean, M2 float64
}

// plus is the moment of both samples together (Chan, Golub & LeVeque 1983, Am. Stat.
// 37:242).
func (m Moment) plus(o Moment) Moment {
	switch {
	case o.Count == 0:
		return m
	case m.Count == 0:
		return o
	}
	d := o.Mean - m.Mean
	if m.Count == o.Count {
		return Moment{2 * m.Count, m.Mean + d/2, m.M2 + o.M2 + d*d*(float64(m.Count)/2)}
	}
	a, b := float64(m.Count), float64(o.Count)
	share := b / (a + b)
	return Moment{m.Count + o.Count, m.Mean + d*share, m.M2 + o.M2 + d*d*a*share}
}

// Variance is the sample variance, divisor count − 1; null for fewer than two.
func (m Moment) Variance() results.Number {
	if m.Count < 2 {
		return results.Number{}
	}
	return finite(m.M2 / float64(m.Count-1))
}

// Estimate is the mean with its Monte Carlo standard error sd/√R.
func (m Moment) Estimate() Estimate {
	if m.Count == 0 {
		return Estimate{}
	}
	e := Estimate{Value: finite(m.Mean)}
	if v := m.Variance(); v.Known {
		e.MCSE = finite(math.Sqrt(v.Value / float64(m.Count)))
	}
	return e
}

// A Forest adds up vectors of moments pairwise: two of equal size become one of twice
// the size. What comes out depends on the order of the vectors and on nothing else; in
// particular, 2^k vectors that start at a multiple of 2^k may be added up apart and
// come in as one, and no bit of the total changes. The zero value is empty.
type Forest struct {
	levels [][]Moment // the tree of 2^level vectors, if it is there
	there  []bool
	carry  []Moment
}

// Add adds a vector; all must have one length. It keeps nothing of v.
func (f *Forest) Add(v []Moment) {
	f.carry = append(f.carry[:0], v...)
	for level := 0; ; level++ {
		if level == len(f.levels) {
			f.levels = append(f.levels, make([]Moment, len(v)))
			f.there = append(f.there, false)
		}
		tree := f.levels[level]
		if !f.there[level] {
			copy(tree, f.carry)
			f.there[level] = true
			return
		}
		for i, m := range tree {
			f.carry[i] = m.plus(f.carry[i])
		}
		f.there[level] = false
	}
}

// Total returns all vectors together, with those of tail, which may be nil, after them.
func (f *Forest) Total(tail []Moment) []Moment {
	total := append([]Moment(nil), tail...)
	for level, tree := range f.levels {
		switch {
		case !f.there[level]:
		case len(total) == 0:
			total = append(total, tree...)
		default:
			for i, m := range tree {
				total[i] = m.plus(total[i])
			}
		}
	}
	return total
}

// Reset empties the forest, keeping its memory.
func (f *Forest) Reset() { clear(f.there) }
