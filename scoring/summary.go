package scoring

import (
	"maps"
	"math"
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
		m.tally.failed++
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
	t.behind = append(t.behind, p.ASEHeldout.Value-p.OracleASE.Value)
	t.coverage = appendKnown(t.coverage, p.Coverage)
	t.coverageBayes = appendKnown(t.coverageBayes, p.CoverageBayes)
	if p.Criterion.Known && !math.IsInf(p.Criterion.Value, 0) {
		t.criterion = append(t.criterion, p.Criterion.Value)
		t.calibration = append(t.calibration, p.Criterion.Value-p.HeldoutMSE.Value)
	}
	edge := 0.0
	if p.AtEdge {
		edge = 1
	}
	t.edge = append(t.edge, edge)
}

// appendKnown appends a figure that is not null.
func appendKnown(v []float64, n results.Number) []float64 {
	if !n.Known {
		return v
	}
	return append(v, n.Value)
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
				Value: e.Value, MCSE: e.MCSE, Replicates: len(m.tally.mse), Failed: m.tally.failed, Failure: failure(m.statuses),
			})
		}
	}
	return rows
}

// Choices returns how often each method picked each df, df ascending.
func (s *Summariser) Choices() []results.Choice {
	var rows []results.Choice
	for i := range s.methods {
		m := &s.methods[i]
		count := map[float64]int{}
		for _, df := range m.tally.df {
			count[df]++
		}
		for _, df := range slices.Sorted(maps.Keys(count)) {
			share := shareOf(count[df], len(m.tally.df))
			rows = append(rows, results.Choice{
				Cell: s.cell, Smoother: m.smoother, Rule: m.rule, DF: df, Picked: count[df], Replicates: len(m.tally.df),
				Rate: share.Rate, Lo: share.Lo, Hi: share.Hi,
			})
		}
	}
	return rows
}
