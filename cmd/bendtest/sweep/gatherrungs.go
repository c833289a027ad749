package sweep

import (
	"errors"
	"sync"

	"bendtest/results"
	"bendtest/scoring"
)

// gatherRungs writes the tables that have to do with every rung: rungs, curves, tests
// and audit. Each is a pass over the parts, so that no more than the sums of a cell per
// worker are in memory.
func gatherRungs(plan *Plan, dir *results.Dir, workers int) error {
	if err := writeReports(plan, dir, results.Rungs, (*scoring.CellReport).Rungs); err != nil {
		return err
	}
	if err := writeReports(plan, dir, results.Curves, (*scoring.CellReport).Curves); err != nil {
		return err
	}
	if err := writeReports(plan, dir, results.Tests, (*scoring.CellReport).Tests); err != nil {
		return err
	}
	rows, err := audits(plan, dir, workers)
	if err != nil {
		return err
	}
	return results.WriteRows(dir, results.Audits, rows)
}

// writeReports writes a table from what each cell's report has for it.
func writeReports[R any](plan *Plan, dir *results.Dir, t *results.Table[R], rows func(*scoring.CellReport) []R) error {
	return results.WriteTable(dir, t, func(add func(*R) error) error {
		return eachCell(plan, func(_ int, units []Unit) error {
			report, err := cellReport(plan, dir, units)
			if err != nil {
				return err
			}
			return addAll(add, rows(report))
		})
	})
}

// cellReport reads the report of the cell that the units are of.
func cellReport(plan *Plan, dir *results.Dir, units []Unit) (*scoring.CellReport, error) {
	moments, err := cellMoments(plan, dir, units)
	cell := &plan.Study.Cells[units[0].Cell]
	return &scoring.CellReport{Key: cell.Key, Cell: cell.Sim, Contest: plan.Contest, Moments: moments}, err
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
func audits(plan *Plan, dir *results.Dir, workers int) ([]results.Audit, error) {
	var cells [][]Unit
	if err := eachCell(plan, func(_ int, units []Unit) error {
		cells = append(cells, units)
		return nil
	}); err != nil {
		return nil, err
	}
	found, faults := make([][]results.Audit, len(cells)), make([]error, len(cells))
	queue := make(chan int)
	var wait sync.WaitGroup
	for range workers {
		wait.Go(func() {
			for c := range queue {
				var report *scoring.CellReport
				if report, faults[c] = cellReport(plan, dir, cells[c]); faults[c] == nil {
					found[c] = report.Audit(plan.Study.Seed)
				}
			}
		})
	}
	for c := range cells {
		queue <- c
	}
	close(queue)
	wait.Wait()
	var rows []results.Audit
	for _, f := range found {
		rows = append(rows, f...)
	}
	return rows, errors.Join(faults...)
}
