package scoring

import "bendtest/results"

// A methodName names a smoother with a rule: the thing that can become a default.
type methodName struct{ smoother, rule string }

// A Pairs compares the methods of one cell replicate by replicate. They see the same
// data, so that a difference is far better known than either figure.
type Pairs struct {
	cell      string
	methods   []methodName
	place     map[methodName]int
	replicate int
	ase       []results.Number // of the replicate at hand, by method
	pairs     map[[2]int]*pair
}

// A pair is two methods.
type pair struct {
	difference Moment
	wins       float64
}

// NewPairs returns an empty one for the cell with this key.
func NewPairs(cell string) *Pairs {
	return &Pairs{cell: cell, place: map[methodName]int{}, pairs: map[[2]int]*pair{}}
}

// Add takes one pick of the cell; picks must come replicate by replicate. The oracle is no
// method.
func (p *Pairs) Add(pick *results.Pick) {
	if pick.Rule == Oracle {
		return
	}
	if pick.Replicate != p.replicate {
		p.flush()
		p.replicate = pick.Replicate
	}
	name := methodName{pick.Smoother, pick.Rule}
	i, ok := p.place[name]
	if !ok {
		i = len(p.methods)
		p.place[name] = i
		p.methods = append(p.methods, name)
		p.ase = append(p.ase, results.Number{})
	}
	p.ase[i] = results.Number{}
	if pick.Regret.Known {
		p.ase[i] = pick.ASEHeldout
	}
}

// flush takes the replicate at hand into account.
func (p *Pairs) flush() {
	for j := range p.ase {
		for i := range j {
			a, b := p.ase[i], p.ase[j]
			if !a.Known || !b.Known {
				continue
			}
			at := p.pairs[[2]int{i, j}]
			if at == nil {
				at = &pair{}
				p.pairs[[2]int{i, j}] = at
			}
			at.difference = at.difference.plus(Moment{Count: 1, Mean: a.Value - b.Value})
			switch {
			case a.Value < b.Value:
				at.wins++
			case a.Value == b.Value:
				at.wins += 0.5
			}
		}
	}
	clear(p.ase)
}

// Rows returns a row per pair of methods that both have a pick in some replicate, in the
// order in which the methods first came.
func (p *Pairs) Rows() []results.Difference {
	p.flush()
	var rows []results.Difference
	for i, a := range p.methods {
		for j := i + 1; j < len(p.methods); j++ {
			at := p.pairs[[2]int{i, j}]
			if at == nil {
				continue
			}
			b, e := p.methods[j], at.difference.Estimate()
			rows = append(rows, results.Difference{
				Cell: p.cell, Smoother: a.smoother, Rule: a.rule, ThanSmoother: b.smoother, ThanRule: b.rule,
				ASEDifference: e.Value, MCSE: e.MCSE,
				Better: results.Num(at.wins / float64(at.difference.Count)), Replicates: at.difference.Count,
			})
		}
	}
	return rows
}
