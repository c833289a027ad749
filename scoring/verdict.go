package scoring

import (
	"cmp"
	"math"
	"math/rand/v2"
	"slices"

	"bendtest/results"
)

// Margin is the indifference margin of the table verdict: methods whose mean relative
// excess is no more than this behind the least are called tied.
const Margin = 0.05

// resamplings is the number of times that replicates are drawn again for intervals.
const resamplings = 1000

// JudgeMethods returns the rows of the table verdict from the appraisals of all cells, each
// with a source of random numbers of its own.
//
// In a cell, the relative excess of a method is its mean ASE over that of the best
// method there, less 1. Intervals are percentiles of a bootstrap of the replicates of each
// cell (Efron & Tibshirani 1993, An Introduction to the Bootstrap, §13.3), the same for
// all methods, so that they keep their pairing. Methods that never picked are left out.
func JudgeMethods(cells []*Appraisal, sources []rand.Source) []results.Verdict {
	d := newDocket(cells)
	weights := make([][]float64, len(cells))
	for c, a := range cells {
		weights[c] = make([]float64, a.batches)
		for b := range weights[c] {
			weights[c][b] = 1
		}
	}
	d.weigh(weights)
	point := d.score()
	rows := make([]results.Verdict, len(d.methods))
	for m := range rows {
		rows[m] = d.row(m, &point)
	}
	d.bootstrap(rows, &point, weights, sources)
	d.rank(rows)
	Tie(rows, Margin)
	slices.SortStableFunc(rows, func(a, b results.Verdict) int {
		return cmp.Or(-cmp.Compare(a.Cells, b.Cells), cmp.Compare(a.MeanExcess.Value, b.MeanExcess.Value))
	})
	return rows
}

// Tie marks the methods whose mean relative excess lies no more than margin behind the
// least. A method that was not judged in all cells is never tied.
func Tie(rows []results.Verdict, margin float64) {
	most := 0
	for i := range rows {
		most = max(most, rows[i].Cells)
	}
	for i := range rows {
		r := &rows[i]
		r.Tied = r.Cells == most && r.Behind.Known && r.Behind.Value <= margin
	}
}

// row fills in what the replicates as they are say of method m.
func (d *docket) row(m int, s *standing) results.Verdict {
	name := d.methods[m]
	row := results.Verdict{
		Smoother: name.smoother, Rule: name.rule,
		MeanExcess: finite(s.mean[m]), WorstExcess: finite(s.worst[m]), WorstCell: d.cells[s.at[m]].cell,
		WorstFailureRate: results.Num(0),
	}
	if s.meanWin >= 0 {
		row.Behind = finite(s.behind(m, s.meanWin))
	}
	statuses := map[string]int{}
	for c, a := range d.cells {
		if d.excess[m][c] >= 0 {
			row.Cells++
		}
		i, there := a.place[name]
		if !there {
			continue
		}
		failed := a.methods[i].failed
		row.Failed += failed
		row.Replicates += a.replicates - failed
		row.WorstFailureRate.Value = max(row.WorstFailureRate.Value, float64(failed)/float64(a.replicates))
		for status, count := range a.methods[i].statuses {
			statuses[status] += count
		}
	}
	row.Failure = failure(statuses)
	return row
}

// bootstrap fills in intervals and shares of wins.
func (d *docket) bootstrap(rows []results.Verdict, point *standing, weights [][]float64, sources []rand.Source) {
	mean, worst, behind := samples(len(rows)), samples(len(rows)), samples(len(rows))
	meanWins, worstWins := make([]float64, len(rows)), make([]float64, len(rows))
	random := make([]*rand.Rand, len(sources))
	for c, s := range sources {
		random[c] = rand.New(s)
	}
	for range resamplings {
		for c, w := range weights {
			clear(w)
			for range w {
				w[random[c].IntN(len(w))]++
			}
		}
		d.weigh(weights)
		s := d.score()
		for m := range rows {
			mean[m], worst[m] = append(mean[m], s.mean[m]), append(worst[m], s.worst[m])
			if point.meanWin >= 0 {
				behind[m] = append(behind[m], s.behind(m, point.meanWin))
			}
		}
		if s.meanWin >= 0 {
			meanWins[s.meanWin]++
			worstWins[s.worstWin]++
		}
	}
	for m := range rows {
		r := &rows[m]
		r.MeanLo, r.MeanHi = middle(mean[m])
		r.WorstLo, r.WorstHi = middle(worst[m])
		r.BehindLo, r.BehindHi = middle(behind[m])
		r.MeanWins, r.MinimaxWins = results.Num(meanWins[m]/resamplings), results.Num(worstWins[m]/resamplings)
	}
}

// samples makes room for the resamplings of each method.
func samples(methods int) [][]float64 {
	s := make([][]float64, methods)
	for m := range s {
		s[m] = make([]float64, 0, resamplings)
	}
	return s
}

// middle returns the 2.5 % and 97.5 % quantiles of v, which it sorts. Resamplings in which
// none of a method's picks was drawn are left out; the ends are null if these are half
// of all or more.
func middle(v []float64) (lo, hi results.Number) {
	v = slices.DeleteFunc(v, math.IsNaN)
	if len(v) <= resamplings/2 {
		return lo, hi
	}
	slices.Sort(v)
	return Quantile(v, 0.025).Value, Quantile(v, 0.975).Value
}

// rank fills in the ranks by mean ASE, ties averaged.
func (d *docket) rank(rows []results.Verdict) {
	for _, a := range d.cells {
		weight := make([]float64, a.batches)
		for b := range weight {
			weight[b] = 1
		}
		d.means = a.means(d.means, weight)
		for i, v := range d.means {
			m, listed := d.place[a.methods[i].name]
			if !listed || v < 0 {
				continue
			}
			below, equal := 0.0, 0.0
			for _, u := range d.means {
				switch {
				case u < 0:
				case u < v:
					below++
				case u == v:
					equal++
				}
			}
			rank := below + (equal+1)/2
			row := &rows[m]
			row.MeanRank = results.Num(row.MeanRank.Value + rank/float64(row.Cells))
			row.WorstRank = results.Num(max(row.WorstRank.Value, rank))
		}
	}
}
