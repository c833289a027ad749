package scoring

import (
	"fmt"
	"testing"

	"bendtest/sim"
	"bendtest/smoothers"
)

// A workload is what a sweep does over and over: four families at 17 df each on n
// observations, all criteria but kfold, 10,000 fresh held-out points per replicate.
type workload struct {
	n       int
	fixed   bool
	contest *Contest
	cell    *sim.Cell
}

// workloads are three sizes on random designs, and on fixed ones.
func workloads(tb testing.TB) []workload {
	var list []workload
	for _, fixed := range []bool{false, true} {
		for _, n := range []int{30, 300, 3000} {
			var law sim.DesignLaw = &sim.UniformDesign{}
			if fixed {
				law = &sim.EvenDesign{}
			}
			list = append(list, workload{n, fixed, workloadContest(), testCell(tb, law, n, 10_000)})
		}
	}
	return list
}

// workloadContest enters the four families that everybody uses, and every rule but kfold.
func workloadContest() *Contest {
	c := &Contest{}
	for _, f := range smoothers.Families() {
		var from float64
		switch f.Name {
		case "kernel", "smoothing-spline":
			from = 2
		case "local":
			from = 3
		case "regression-spline":
			from = 4
		default:
			continue
		}
		e := Entrant{Name: f.Name, Smoother: f.New()}
		for k := range 17 {
			df := from + 0.75*float64(k)
			if f.WholeDF {
				df = from + float64(k)
			}
			e.DF = append(e.DF, df)
		}
		c.Entrants = append(c.Entrants, e)
	}
	for _, k := range Rules() {
		if r := k.New(); k.Name != "kfold" && k.Name != "fixed" && k.Name != "ftest" {
			c.Rules = append(c.Rules, NamedRule{k.Name, r})
		}
	}
	return c
}

// BenchmarkWorkload takes a replicate apart. The stage draw is the generation floor: what
// any program must spend that keeps the promise of fresh held-out sets. The stages
// moments to score add up to most of whole; the rest is criteria, rules and rows.
func BenchmarkWorkload(b *testing.B) {
	for _, w := range workloads(b) {
		name := fmt.Sprintf("n=%d/fixed=%v", w.n, w.fixed)
		b.Run(name+"/stage=draw", func(b *testing.B) {
			var s sim.Sample
			b.ReportAllocs()
			for r := 0; b.Loop(); r++ {
				w.cell.Draw(1, r, &s)
			}
		})
		b.Run(name+"/stage=moments", func(b *testing.B) {
			var s sim.Sample
			w.cell.Draw(1, 0, &s)
			var h HeldOut
			b.ReportAllocs()
			for b.Loop() {
				h.Set(&s.Held, s.Train.X)
			}
		})
		for i := range w.contest.Entrants {
			w.family(b, name, i)
		}
		b.Run(name+"/stage=whole", func(b *testing.B) {
			bench := NewBench("c", w.cell, w.contest, 1)
			b.ReportAllocs()
			for r := 0; b.Loop(); r++ {
				bench.Clear()
				bench.Replicate(r)
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(4*17), "ns/rung")
		})
	}
}

// family takes the work on one ladder apart.
func (w *workload) family(b *testing.B, name string, i int) {
	e := &w.contest.Entrants[i]
	stage := func(what string, f func(b *testing.B, s *sim.Sample, rungs []smoothers.Rung)) {
		b.Run(fmt.Sprintf("%s/stage=%s/family=%s", name, what, e.Name), func(b *testing.B) {
			var s sim.Sample
			w.cell.Draw(1, 0, &s)
			rungs := e.Smoother.On(s.Train.X, &smoothers.Arena{Lasting: w.fixed}).AtDF(e.DF)
			b.ReportAllocs()
			f(b, &s, rungs)
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/17, "ns/rung")
		})
	}
	if !w.fixed {
		stage("ladder", func(b *testing.B, s *sim.Sample, _ []smoothers.Rung) {
			mem := &smoothers.Arena{}
			for b.Loop() {
				mem.Reset()
				e.Smoother.On(s.Train.X, mem).AtDF(e.DF)
			}
		})
		stage("tests", func(b *testing.B, s *sim.Sample, rungs []smoothers.Rung) {
			var t ladderTests
			for b.Loop() {
				t.lay(rungs, s.Train.X, w.n <= everyReplicate, false)
			}
		})
	}
	stage("fit", func(b *testing.B, s *sim.Sample, rungs []smoothers.Rung) {
		var f smoothers.Fit
		for b.Loop() {
			for j := range rungs {
				if rungs[j].Status == smoothers.OK {
					rungs[j].Fit(s.Train.Y, &f)
				}
			}
		}
	})
	stage("fit+score", func(b *testing.B, s *sim.Sample, rungs []smoothers.Rung) {
		var f smoothers.Fit
		var h HeldOut
		h.Set(&s.Held, s.Train.X)
		for b.Loop() {
			for j := range rungs {
				if rungs[j].Status == smoothers.OK {
					rungs[j].Fit(s.Train.Y, &f)
					h.Score(f.Curve)
				}
			}
		}
	})
}
