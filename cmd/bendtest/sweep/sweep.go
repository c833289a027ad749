package sweep

import (
	"context"
	"errors"
	"fmt"
	"runtime/debug"
	"sync"
	"time"

	"bendtest/results"
	"bendtest/scoring"
)

// A Report is what a sweep did.
type Report struct {
	Kept    int // units whose parts were there
	Worked  int // units worked now
	Broken  int // parts that were found broken and worked again
	Stopped bool
	Timings []results.Timing // of the units worked now, in the plan's order
}

// An Observer follows a sweep. Its methods may be called from several goroutines.
type Observer interface {
	// Begin is called once, with the units to work and those kept.
	Begin(todo, kept, broken int)
	// Done is called after each unit, with the fits it scored and how many of them
	// had a status.
	Done(fits, failures int)
}

// Run works those of the given units of the plan that have no intact part in dir, on the
// given number of workers. When ctx ends, units in hand are finished and Report.Stopped
// is set. The first fault ends the sweep likewise and is returned.
func Run(ctx context.Context, plan *Plan, dir *results.Dir, units []Unit, workers int, watch Observer) (Report, error) {
	todo, report, err := survey(units, dir)
	if err != nil {
		return report, err
	}
	watch.Begin(len(todo), report.Kept, report.Broken)
	timings := make([]results.Timing, len(todo))
	worked := make([]bool, len(todo))

	ctx, cancel := context.WithCancelCause(ctx)
	defer cancel(nil)
	queue := make(chan int)
	go func() {
		defer close(queue)
		for i := range todo {
			select {
			case queue <- i:
			case <-ctx.Done():
				return
			}
		}
	}()
	var wait sync.WaitGroup
	for range workers {
		wait.Go(func() {
			w := worker{plan: plan, dir: dir}
			for i := range queue {
				if ctx.Err() != nil {
					return
				}
				timing, failures, err := w.work(&todo[i])
				if err != nil {
					cancel(err)
					return
				}
				timings[i], worked[i] = timing, true
				watch.Done(timing.Fits, failures)
			}
		})
	}
	wait.Wait()
	for i, ok := range worked {
		if ok {
			report.Worked++
			report.Timings = append(report.Timings, timings[i])
		}
	}
	if err := context.Cause(ctx); err != nil && !errors.Is(err, context.Canceled) {
		return report, err
	}
	report.Stopped = report.Worked < len(todo)
	return report, nil
}

// survey finds the units that are still to be worked.
func survey(units []Unit, dir *results.Dir) (todo []Unit, report Report, err error) {
	for _, u := range units {
		there, err := dir.CheckPart(u.Key)
		var broken *results.BrokenPartError
		switch {
		case errors.As(err, &broken):
			report.Broken++
		case err != nil:
			return nil, report, err
		case there:
			report.Kept++
			continue
		}
		todo = append(todo, u)
	}
	return todo, report, nil
}

// A worker works units one after the other. It keeps its bench while the cell stays
// the same.
type worker struct {
	plan  *Plan
	dir   *results.Dir
	bench *scoring.Bench
	cell  int
}

// work scores a unit and keeps its part. A panic becomes an error that names the
// unit.
func (w *worker) work(u *Unit) (timing results.Timing, failures int, err error) {
	cell := &w.plan.Study.Cells[u.Cell]
	defer func() {
		if r := recover(); r != nil {
			err = &PanicError{Cell: cell.Key, From: u.From, To: u.To, Value: r, Stack: debug.Stack()}
		}
	}()
	start := time.Now()
	if w.bench == nil || w.cell != u.Cell {
		w.bench = scoring.NewBench(cell.Key, cell.Sim, w.plan.Contest, w.plan.Study.Seed)
		w.cell = u.Cell
	}
	w.bench.Clear()
	for r := u.From; r < u.To; r++ {
		w.bench.Replicate(r)
	}
	rows := w.bench.Rows()
	part := results.Part{
		Picks: rows.Picks, Moments: scoring.Pack(w.bench.Moments()), Variants: w.plan.Contest.Variants(),
	}
	if w.plan.KeepsFits() {
		part.Fits = rows.Fits
	}
	if err := w.dir.WritePart(u.Key, &part); err != nil {
		return timing, 0, fmt.Errorf("cell %s, replicates %d to %d: %w", cell.Key, u.From, u.To-1, err)
	}
	for i := range rows.Fits {
		if rows.Fits[i].Status != "ok" {
			failures++
		}
	}
	return results.Timing{
		Cell: cell.Key, From: u.From, To: u.To, Fits: len(rows.Fits), Seconds: time.Since(start).Seconds(),
	}, failures, nil
}

// A PanicError is a fault of the program itself while working a unit.
type PanicError struct {
	Cell     string
	From, To int
	Value    any
	Stack    []byte
}

func (e *PanicError) Error() string {
	return fmt.Sprintf("a fault of the program itself in cell %s, replicates %d to %d: %v", e.Cell, e.From, e.To-1, e.Value)
}
