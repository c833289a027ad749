package scoring

import (
	"maps"
	"slices"

	"bendtest/results"
)

// A Summariser collects the picks of one cell, replicate after replicate, and
// turns them into the rows of the table summary.
type Summariser struct {
	cell    string
	floor   float64
	methods []method
	index   map[[2]string]int
}

// A method is the picks of one rule on one smoother.
type method struct {
	smoother, rule string
	tally          tally
	failed         int            // replicates without a scored pick
	statuses       map[string]int // of those replicates
}

// NewSummariser returns an empty one for the cell with this key and known noise
// variance.
func NewSummariser(cell string, noiseVariance float64) *Summariser {
	return &Summariser{cell: cell, floor: noiseVariance, index: map[[2]string]int{}}
}

// Add takes one pick of the cell.
func (s *Summariser) Add(p *results.Pick) {
	key := [2]string{p.Smoother, p.Rule}
	i, ok := s.index[key]
	if !ok {
		i = len(s.methods)
		s.index[key] = i
		s.methods = append(s.methods, method{smoother: p.Smoother, rule: p.Rule, tally: tally{floor: s.floor}})
	}
	s.methods[i].add(p)
}

// add takes one replicate.
func (m *method) add(p *results.Pick) {
	if !p.Regret.Known {
		m.failed++
		if m.statuses == nil {
			m.statuses = map[string]int{}
		}
		m.statuses[p.Status]++
		return
	}
	t := &m.tally
	t.mse = append(t.mse, p.HeldoutMSE.Value)
	t.excess = append(t.excess, p.HeldoutMSE.Value-p.HeldoutNoise.Value)
	t.ase = append(t.ase, p.ASEHeldout.Value)
	t.df = append(t.df, p.DF.Value)
	t.oracle = append(t.oracle, p.OracleDF.Value)
	t.regret = append(t.regret, p.Regret.Value)
	edge := 0.0
	if p.AtEdge {
		edge = 1
	}
	t.edge = append(t.edge, edge)
}

// failure is the most frequent status of the failed replicates, the first in the
// alphabet of equals, or "".
func (m *method) failure() string {
	worst := ""
	for _, status := range slices.Sorted(maps.Keys(m.statuses)) {
		if worst == "" || m.statuses[status] > m.statuses[worst] {
			worst = status
		}
	}
	return worst
}

// Rows returns a row per method and measure, methods in the order in which they
// first came. The summariser takes no more picks afterwards.
func (s *Summariser) Rows() []results.Summary {
	measures := Measures()
	rows := make([]results.Summary, 0, len(s.methods)*len(measures))
	for i := range s.methods {
		m := &s.methods[i]
		slices.Sort(m.tally.regret)
		for _, measure := range measures {
			e := measure.of(&m.tally)
			rows = append(rows, results.Summary{
				Cell: s.cell, Smoother: m.smoother, Rule: m.rule, Measure: measure.Name,
				Value: e.Value, MCSE: e.MCSE, Replicates: len(m.tally.mse), Failed: m.failed, Failure: m.failure(),
			})
		}
	}
	return rows
}
