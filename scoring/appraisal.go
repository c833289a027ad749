package scoring

import (
	"maps"
	"slices"

	"bendtest/results"
)

// mostBatches is the number of batches of neighbouring replicates that an appraisal
// keeps sums of, so that its memory does not grow with the replicates.
const mostBatches = 100

// An Appraisal collects what the verdict takes of one cell: each method's ASE by batches of
// replicates, and its failures.
type Appraisal struct {
	cell       string
	replicates int
	batches    int
	methods    []appraised
	place      map[methodName]int
}

// An appraised is one method in one cell.
type appraised struct {
	name     methodName
	sum      []float64 // of ASE by batch
	count    []float64 // of scored picks by batch
	failed   int
	statuses map[string]int // of those
}

// NewAppraisal returns an empty one for the cell with this key and number of replicates.
func NewAppraisal(cell string, replicates int) *Appraisal {
	return &Appraisal{cell: cell, replicates: replicates, batches: min(replicates, mostBatches), place: map[methodName]int{}}
}

// Add takes one pick of the cell. The oracle is no method.
func (a *Appraisal) Add(p *results.Pick) {
	if p.Rule == Oracle {
		return
	}
	name := methodName{p.Smoother, p.Rule}
	i, ok := a.place[name]
	if !ok {
		i = len(a.methods)
		a.place[name] = i
		a.methods = append(a.methods, appraised{
			name: name, sum: make([]float64, a.batches), count: make([]float64, a.batches), statuses: map[string]int{},
		})
	}
	m := &a.methods[i]
	if !p.Regret.Known {
		m.failed++
		m.statuses[p.Status]++
		return
	}
	b := p.Replicate * a.batches / a.replicates
	m.sum[b] += p.ASEHeldout.Value
	m.count[b]++
}

// means writes each method's mean ASE into dst, with each batch counted as often as
// weight says; −1 stands for a method without picks.
func (a *Appraisal) means(dst, weight []float64) []float64 {
	dst = dst[:0]
	for i := range a.methods {
		m := &a.methods[i]
		var sum, count float64
		for b, w := range weight {
			sum += w * m.sum[b]
			count += w * m.count[b]
		}
		mean := -1.0
		if count > 0 {
			mean = sum / count
		}
		dst = append(dst, mean)
	}
	return dst
}

// failure is the most frequent status among counts, the first in the alphabet of equals, or
// "".
func failure(counts map[string]int) string {
	worst := ""
	for _, status := range slices.Sorted(maps.Keys(counts)) {
		if worst == "" || counts[status] > counts[worst] {
			worst = status
		}
	}
	return worst
}
