package smoothertest

import (
	"sync"
	"testing"

	"bendtest/smoothers"
)

// fitsShared fits on the same rungs from several goroutines at once. Under the race
// detector it sees what is written to shared memory; without, what goes wrong by it.
func fitsShared(tr *trial, r *report) {
	const goroutines = 4
	tr.each(func(c *trialCase, k int, rung *smoothers.Rung) {
		var got, want [goroutines][]float64
		for g := range goroutines {
			want[g] = fitted(rung, readings(c.x, uint64(g)))
		}
		var wait sync.WaitGroup
		for g := range goroutines {
			wait.Go(func() {
				var f smoothers.Fit
				rung.Fit(readings(c.x, uint64(g)), &f)
				f.Curve.At(make([]float64, len(c.x)), c.x)
				got[g] = f.Fitted
			})
		}
		wait.Wait()
		for g := range goroutines {
			if !sameBits(got[g], want[g]) {
				r.faultf("%s: fits from several goroutines disturb each other", c.at(k))
				return
			}
		}
	})
}

// allocations counts what a fit allocates once its Fit has seen the rung, and what
// a rung allocates once the arena has grown.
func allocations(tr *trial, r *report) {
	tr.each(func(c *trialCase, k int, rung *smoothers.Rung) {
		var f smoothers.Fit
		y, v := readings(c.x, 1), make([]float64, len(c.x))
		count := testing.AllocsPerRun(5, func() {
			rung.Fit(y, &f)
			f.Curve.At(v, c.x)
		})
		if count > 0 {
			r.faultf("%s: %g allocations per fit", c.at(k), count)
		}
	})
	for _, c := range tr.on() {
		few, many := tr.laying(c.x, tr.claims.DF[:1]), tr.laying(c.x, tr.claims.DF)
		if many > few {
			r.faultf("%s: %g allocations for a ladder of %d rungs, %g for one rung", c.name, many, len(tr.claims.DF), few)
		}
	}
}

// laying counts the allocations of a ladder in a grown arena.
func (tr *trial) laying(x, dfs []float64) float64 {
	var mem smoothers.Arena
	return testing.AllocsPerRun(5, func() {
		mem.Reset()
		tr.smoother.On(x, &mem).AtDF(dfs)
	})
}
