package scoring

import "bendtest/results"

// mostFailures is the share of replicates in which a method may fail in a cell and still be
// good enough there.
const mostFailures = 0.01

// A Shortfall is a cell in which no method is good enough.
type Shortfall struct {
	Cell           string
	Smoother, Rule string   // the method with the least mean held-out error there; empty if there is none
	Above          Estimate // how far that lies above the noise floor, relative to it
	Failing        bool     // every method failed in too many replicates
}

// Shortfalls returns the cells in which the mean held-out error of every method lies more
// than floor, relative to the known noise variance, above it, or every method fails in
// more than 1 % of the replicates. A fixed df counts as a method, the oracle does not.
func Shortfalls(cells []results.Cell, summary []results.Summary, floor float64) []Shortfall {
	type best struct {
		Shortfall
		reliable bool
	}
	found := map[string]*best{}
	for _, c := range cells {
		found[c.Cell] = &best{Shortfall: Shortfall{Cell: c.Cell}}
	}
	for _, s := range summary {
		b := found[s.Cell]
		if b == nil || s.Rule == Oracle {
			continue
		}
		switch s.Measure {
		case "floor_ratio":
			if s.Value.Known && (b.Smoother == "" || s.Value.Value-1 < b.Above.Value.Value) {
				b.Smoother, b.Rule = s.Smoother, s.Rule
				b.Above = Estimate{results.Num(s.Value.Value - 1), s.MCSE}
			}
		case "failure_rate":
			b.reliable = b.reliable || s.Value.Known && s.Value.Value <= mostFailures
		}
	}
	var short []Shortfall
	for _, c := range cells {
		b := found[c.Cell]
		b.Failing = !b.reliable
		if b.Smoother == "" || b.Failing || b.Above.Value.Value > floor {
			short = append(short, b.Shortfall)
		}
	}
	return short
}
