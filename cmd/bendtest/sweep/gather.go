package sweep

import (
	"errors"
	"fmt"
	"math/rand/v2"
	"strings"

	"bendtest/results"
	"bendtest/scoring"
)

// Gather reads the plan's parts in order and writes the tables. All parts must be
// there. It holds no more than one cell's picks in memory. Exact expectations are worked
// out on several workers.
func Gather(plan *Plan, dir *results.Dir, workers int) error {
	if err := results.WriteRows(dir, results.Cells, cellRows(plan)); err != nil {
		return err
	}
	if err := gatherFits(plan, dir); err != nil {
		return err
	}
	if err := gatherPicks(plan, dir); err != nil {
		return err
	}
	if err := gatherSummaries(plan, dir); err != nil {
		return err
	}
	if err := gatherRungs(plan, dir, workers); err != nil {
		return err
	}
	return results.WriteRows(dir, results.ColumnDocs, results.ColumnRows(plan.Contest.Variants()))
}

// gatherFits writes the table fits, or removes it where the study does not keep it.
func gatherFits(plan *Plan, dir *results.Dir) error {
	if !plan.KeepsFits() {
		return dir.RemoveTable(results.Fits.Name)
	}
	own := plan.Contest.Variants()
	return results.WriteTable(dir, results.FitsWith(own), func(add func(*results.Fit) error) error {
		return eachPart(plan, dir, func(Unit) results.PartReader { return results.PartReader{Fit: add, Variants: own} })
	})
}

// gatherPicks writes the table picks, or removes it where the study does not keep it.
func gatherPicks(plan *Plan, dir *results.Dir) error {
	if plan.Study.Keep == keepSummary {
		return dir.RemoveTable(results.Picks.Name)
	}
	return results.WriteTable(dir, results.Picks, func(add func(*results.Pick) error) error {
		return eachPart(plan, dir, func(Unit) results.PartReader { return results.PartReader{Pick: add} })
	})
}

// eachPart reads the plan's parts in order, each into the reader that to returns for its
// unit.
func eachPart(plan *Plan, dir *results.Dir, to func(Unit) results.PartReader) error {
	for _, u := range plan.Units {
		if err := readPart(plan, dir, u, to(u)); err != nil {
			return err
		}
	}
	return nil
}

// readPart reads the part of a unit.
func readPart(plan *Plan, dir *results.Dir, u Unit, to results.PartReader) error {
	if err := dir.ReadPart(u.Key, to); err != nil {
		return fmt.Errorf("cell %s, replicates %d to %d: %w", plan.Study.Cells[u.Cell].Key, u.From, u.To-1, err)
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

// gatherSummaries writes what comes of the picks: the tables summary, choices, differences
// and verdict. It reads them once, a cell at a time.
func gatherSummaries(plan *Plan, dir *results.Dir) error {
	var appraisals []*scoring.Appraisal
	var sources []rand.Source
	err := results.WriteTable(dir, results.Summaries, func(addSummary func(*results.Summary) error) error {
		return results.WriteTable(dir, results.Choices, func(addChoice func(*results.Choice) error) error {
			return results.WriteTable(dir, results.Differences, func(addDifference func(*results.Difference) error) error {
				return eachCell(plan, func(c int, units []Unit) error {
					cell := &plan.Study.Cells[c]
					summary := scoring.NewSummariser(cell.Key, cell.Sim.NoiseVariance)
					pairs := scoring.NewPairs(cell.Key)
					appraisal := scoring.NewAppraisal(cell.Key, plan.Study.Replicates)
					if err := eachPick(plan, dir, units, func(p *results.Pick) {
						summary.Add(p)
						pairs.Add(p)
						appraisal.Add(p)
					}); err != nil {
						return err
					}
					appraisals = append(appraisals, appraisal)
					sources = append(sources, cell.Sim.Stream(plan.Study.Seed, 0, "verdict"))
					return errors.Join(
						addAll(addSummary, summary.Rows()),
						addAll(addChoice, summary.Choices()),
						addAll(addDifference, pairs.Rows()),
					)
				})
			})
		})
	})
	if err != nil {
		return err
	}
	return results.WriteRows(dir, results.Verdicts, scoring.JudgeMethods(appraisals, sources))
}

// eachPick reads the picks of units in order.
func eachPick(plan *Plan, dir *results.Dir, units []Unit, take func(*results.Pick)) error {
	for _, u := range units {
		err := readPart(plan, dir, u, results.PartReader{Pick: func(p *results.Pick) error {
			take(clone(p))
			return nil
		}})
		if err != nil {
			return err
		}
	}
	return nil
}

// eachCell calls f for every cell with its units, in order.
func eachCell(plan *Plan, f func(cell int, units []Unit) error) error {
	for from := 0; from < len(plan.Units); {
		to := from
		for to < len(plan.Units) && plan.Units[to].Cell == plan.Units[from].Cell {
			to++
		}
		if err := f(plan.Units[from].Cell, plan.Units[from:to]); err != nil {
			return err
		}
		from = to
	}
	return nil
}

// addAll hands rows to a table.
func addAll[R any](add func(*R) error, rows []R) error {
	for i := range rows {
		if err := add(&rows[i]); err != nil {
			return err
		}
	}
	return nil
}

// clone copies a row whose text lies in a file's buffer, so that the buffer can go.
func clone(p *results.Pick) *results.Pick {
	c := *p
	c.Smoother, c.Rule = strings.Clone(p.Smoother), strings.Clone(p.Rule)
	return &c
}
