package sweep

import (
	"fmt"
	"strings"

	"bendtest/results"
	"bendtest/scoring"
)

// Gather reads the plan's parts in order and writes the tables. All parts must be
// there. It holds no more than one cell's picks in memory.
func Gather(plan *Plan, dir *results.Dir) error {
	if err := results.WriteRows(dir, results.Cells, cellRows(plan)); err != nil {
		return err
	}
	if err := gatherFits(plan, dir); err != nil {
		return err
	}
	if err := gatherPicks(plan, dir); err != nil {
		return err
	}
	if err := results.WriteTable(dir, results.Summaries, func(add func(*results.Summary) error) error {
		return summarise(plan, dir, add)
	}); err != nil {
		return err
	}
	return results.WriteRows(dir, results.ColumnDocs, results.ColumnRows())
}

// gatherFits writes the table fits, or removes it where the study does not keep it.
func gatherFits(plan *Plan, dir *results.Dir) error {
	if !plan.KeepsFits() {
		return dir.RemoveTable(results.Fits.Name)
	}
	return results.WriteTable(dir, results.Fits, func(add func(*results.Fit) error) error {
		return eachPart(plan, dir, func(Unit) (func(*results.Fit) error, func(*results.Pick) error) {
			return add, skip[results.Pick]
		})
	})
}

// gatherPicks writes the table picks, or removes it where the study does not keep it.
func gatherPicks(plan *Plan, dir *results.Dir) error {
	if plan.Study.Keep == keepSummary {
		return dir.RemoveTable(results.Picks.Name)
	}
	return results.WriteTable(dir, results.Picks, func(add func(*results.Pick) error) error {
		return eachPart(plan, dir, func(Unit) (func(*results.Fit) error, func(*results.Pick) error) {
			return skip[results.Fit], add
		})
	})
}

func skip[R any](*R) error { return nil }

// eachPart reads the plan's parts in order, each through the functions that to
// returns for its unit.
func eachPart(plan *Plan, dir *results.Dir, to func(Unit) (func(*results.Fit) error, func(*results.Pick) error)) error {
	for _, u := range plan.Units {
		fit, pick := to(u)
		if err := dir.ReadPart(u.Key, fit, pick); err != nil {
			return fmt.Errorf("cell %s, replicates %d to %d: %w", plan.Study.Cells[u.Cell].Key, u.From, u.To-1, err)
		}
	}
	return nil
}

// cellRows are the rows of the table cells.
func cellRows(plan *Plan) []results.Cell {
	rows := make([]results.Cell, len(plan.Study.Cells))
	for i, c := range plan.Study.Cells {
		rows[i] = results.Cell{
			Cell: c.Key, Hash: c.Sim.Hash(), Truth: c.Truth, Design: c.Design, Noise: c.Noise, N: c.N,
			HeldOut: c.Sim.HeldOut, NoiseVariance: c.Sim.NoiseVariance, FixedDesign: c.Sim.FixedDesign(),
			Seed: int(plan.Study.Seed), Replicates: plan.Study.Replicates,
		}
	}
	return rows
}

// summarise writes the summary of each cell once its last pick is read.
func summarise(plan *Plan, dir *results.Dir, add func(*results.Summary) error) error {
	var s *scoring.Summariser
	at := -1
	flush := func() error {
		if s == nil {
			return nil
		}
		rows := s.Rows()
		for i := range rows {
			if err := add(&rows[i]); err != nil {
				return err
			}
		}
		return nil
	}
	err := eachPart(plan, dir, func(u Unit) (func(*results.Fit) error, func(*results.Pick) error) {
		return skip[results.Fit], func(p *results.Pick) error {
			if u.Cell != at {
				if err := flush(); err != nil {
					return err
				}
				cell := &plan.Study.Cells[u.Cell]
				s, at = scoring.NewSummariser(cell.Key, cell.Sim.NoiseVariance), u.Cell
			}
			s.Add(clone(p))
			return nil
		}
	})
	if err != nil {
		return err
	}
	return flush()
}

// clone copies a row whose text lies in a file's buffer, so that the buffer can go.
func clone(p *results.Pick) *results.Pick {
	c := *p
	c.Smoother, c.Rule = strings.Clone(p.Smoother), strings.Clone(p.Rule)
	return &c
}
