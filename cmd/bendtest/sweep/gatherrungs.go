package sweep

import (
	"sync"

	"bendtest/results"
	"bendtest/scoring"
)

// gatherRungs writes the tables that have to do with every rung: rungs, curves, tests
// and audit.
func gatherRungs(plan *Plan, dir *results.Dir, workers int) error {
	var reports []*scoring.CellReport
	err := eachCell(plan, func(c int, units []Unit) error {
		moments, err := cellMoments(plan, dir, units)
		cell := &plan.Study.Cells[c]
		reports = append(reports, &scoring.CellReport{Key: cell.Key, Cell: cell.Sim, Contest: plan.Contest, Moments: moments})
		return err
	})
	if err != nil {
		return err
	}
	if err := writeReports(dir, results.Rungs, reports, (*scoring.CellReport).Rungs); err != nil {
		return err
	}
	if err := writeReports(dir, results.Curves, reports, (*scoring.CellReport).Curves); err != nil {
		return err
	}
	if err := writeReports(dir, results.Tests, reports, (*scoring.CellReport).Tests); err != nil {
		return err
	}
	return results.WriteRows(dir, results.Audits, audits(plan, reports, workers))
}

// writeReports writes a table from what each cell's report has for it.
func writeReports[R any](dir *results.Dir, t *results.Table[R], reports []*scoring.CellReport, rows func(*scoring.CellReport) []R) error {
	return results.WriteTable(dir, t, func(add func(*R) error) error {
		for _, c := range reports {
			if err := addAll(add, rows(c)); err != nil {
				return err
			}
		}
		return nil
	})
}

// cellMoments adds up the moments of a cell's units. All units but the last are whole
// blocks, which is what a forest wants.
func cellMoments(plan *Plan, dir *results.Dir, units []Unit) ([]scoring.Moment, error) {
	var forest scoring.Forest
	var tail []scoring.Moment
	for _, u := range units {
		moments := make([]scoring.Moment, scoring.MomentsOf(plan.Contest))
		err := readPart(plan, dir, u, results.PartReader{Moment: func(m *results.Moment) error {
			moments[m.Slot] = scoring.Moment{Count: m.Count, Mean: m.Mean, M2: m.M2}
			return nil
		}})
		if err != nil {
			return nil, err
		}
		if u.To-u.From == plan.block {
			forest.Add(moments)
		} else {
			tail = moments
		}
	}
	return forest.Total(tail), nil
}

// audits works out the table audit, cells side by side, rows in the order of the cells.
func audits(plan *Plan, reports []*scoring.CellReport, workers int) []results.Audit {
	found := make([][]results.Audit, len(reports))
	queue := make(chan int)
	var wait sync.WaitGroup
	for range workers {
		wait.Go(func() {
			for c := range queue {
				found[c] = reports[c].Audit(plan.Study.Seed)
			}
		})
	}
	for c := range reports {
		queue <- c
	}
	close(queue)
	wait.Wait()
	var rows []results.Audit
	for _, f := range found {
		rows = append(rows, f...)
	}
	return rows
}
