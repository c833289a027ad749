package sweep

import (
	"time"

	"bendtest/results"
	"bendtest/scoring"
)

// An Estimate says what a study will take.
type Estimate struct {
	Cells   []CellEstimate
	Fits    int
	Seconds float64 // on one worker
	Bytes   int     // of parts and tables together
}

// A CellEstimate says what one cell will take.
type CellEstimate struct {
	Cell      string
	N         int
	Seconds   float64 // on one worker, all replicates
	FailShare float64 // share of the fits tried that had a status
}

// trialReplicates is how many replicates of a cell are tried: the first pays for
// memory, the others are timed.
const trialReplicates = 4

// Predict tries a few replicates of every cell, writing nothing, and scales up. The
// first is not timed.
func Predict(plan *Plan) (Estimate, error) {
	e := Estimate{Fits: plan.Fits()}
	bytes, rows := 0, 0
	for _, cell := range plan.Study.Cells {
		bench := scoring.NewBench(cell.Key, cell.Sim, plan.Contest, plan.Study.Seed)
		bench.Replicate(0)
		start := time.Now()
		for r := 1; r < trialReplicates; r++ {
			bench.Replicate(r)
		}
		each := time.Since(start).Seconds() / (trialReplicates - 1)
		found := bench.Rows()
		part := results.Part{Fits: found.Fits, Picks: found.Picks} // moments are few beside them
		size, err := part.Size()
		if err != nil {
			return e, err
		}
		bytes += size
		rows += len(found.Fits)
		c := CellEstimate{Cell: cell.Key, N: cell.N, Seconds: each * float64(plan.Study.Replicates)}
		for i := range found.Fits {
			if found.Fits[i].Status != "ok" {
				c.FailShare += 1 / float64(len(found.Fits))
			}
		}
		e.Seconds += c.Seconds
		e.Cells = append(e.Cells, c)
	}
	// Parts and tables hold the same rows, each compressed.
	e.Bytes = 2 * int(float64(bytes)/float64(rows)*float64(e.Fits))
	return e, nil
}
