package sim

import (
	"fmt"
	"gonum.org/v1/gonum/stat"
	"math"
	"slices"
	"sync"
	"testing"
)

func TestDrawDependsOnSeedCellAndReplicateAlone(t *testing.T) {
	truth := curve(t, "sin(x)", 0, 1)
	cell := cellOf(t, truth, &UniformDesign{}, normalNoise(1), 20, 300)
	same := cellOf(t, truth, &UniformDesign{}, normalNoise(1), 20, 300)
	more := cellOf(t, truth, &UniformDesign{}, normalNoise(1), 20, 500)
	var fresh, used, larger Sample
	for r := range 5 {
		same.Draw(9, 4-r, &used) // another order
	}
	same.Draw(9, 3, &used)
	cell.Draw(9, 3, &fresh)
	more.Draw(9, 3, &larger)
	if !slices.Equal(fresh.Train.Y, used.Train.Y) || !slices.Equal(fresh.Held.Y, used.Held.Y) {
		t.Error("a sample depends on what was drawn before")
	}
	if !slices.Equal(fresh.Train.Y, larger.Train.Y) {
		t.Error("the training set depends on the held-out size")
	}
	var other Sample
	for name, draw := range map[string]func(){
		"seed":      func() { cell.Draw(10, 3, &other) },
		"replicate": func() { cell.Draw(9, 4, &other) },
		"cell": func() {
			cellOf(t, curve(t, "sin(x) + 0", 0, 2), &UniformDesign{}, normalNoise(1), 20, 300).Draw(9, 3, &other)
		},
	} {
		draw()
		if other.Train.X[0] == fresh.Train.X[0] || other.Held.X[0] == fresh.Held.X[0] {
			t.Errorf("another %s draws the same", name)
		}
	}
	if fresh.Train.X[0] == fresh.Held.X[0] {
		t.Error("training and held-out sets share a stream")
	}
}

// Neighbours of a stationary AR(1) correlate by ρ, points k apart by ρ^k, all with
// variance 1; 2,000 replicates of 50 points, limits of 5 standard errors.
func TestTrainingErrorsAreCorrelatedInOrderOfX(t *testing.T) {
	noise := normalNoise(1)
	noise.AR1 = 0.6
	cell := cellOf(t, curve(t, "0*x", 0, 1), &UniformDesign{}, noise, 50, 60)
	var s Sample
	lag := map[int][]float64{}
	var held []float64
	for r := range 2000 {
		cell.Draw(3, r, &s)
		for _, k := range []int{0, 1, 3} {
			lag[k] = append(lag[k], s.Train.Y[20]*s.Train.Y[20+k])
		}
		lag[-1] = append(lag[-1], s.Train.Y[0]*s.Train.Y[0])
		held = append(held, s.Held.Y[20]*s.Held.Y[21])
	}
	for k, want := range map[int]float64{-1: 1, 0: 1, 1: 0.6, 3: 0.216} {
		mean, sd := stat.MeanStdDev(lag[k], nil)
		if math.Abs(mean-want) > 5*sd/math.Sqrt(2000) {
			t.Errorf("lag %d: %.4f, want %.4f", k, mean, want)
		}
	}
	if mean, sd := stat.MeanStdDev(held, nil); math.Abs(mean) > 5*sd/math.Sqrt(2000) {
		t.Errorf("held-out neighbours correlate: %.4f", mean)
	}
}

func TestDrawDoesNotAllocate(t *testing.T) {
	noise := normalNoise(0.3)
	noise.Scale = expression(t, "1 + x")
	noise.AR1 = 0.2
	for i, law := range laws() {
		truth := curve(t, "3*exp(-2*x) + sin(2*pi*x)", testLo, testHi)
		noise.Law = noiseLaws()[i%len(noiseLaws())]
		cell := cellOf(t, truth, law, noise, 30, 1000)
		var s Sample
		r := 0
		if n := testing.AllocsPerRun(5, func() { cell.Draw(1, r, &s); r++ }); n != 0 {
			t.Errorf("%s: %v allocations", law.describe(), n)
		}
	}
}

// A cell may be used by many goroutines, each with a sample of its own; so may what
// cells share. (The race detector sees what this cannot.)
func TestCellsMayBeShared(t *testing.T) {
	truth, design, noise := curve(t, "doppler", 0, 1), &Design{Law: &BetaDesign{A: 2, B: 3}, Redraw: true}, ratioOf1()
	noise.Scale = expression(t, "1 + x")
	var want Sample
	cellOf(t, truth, design.Law, noise, 20, 500).Draw(1, 5, &want)
	var all sync.WaitGroup
	for range 4 {
		all.Go(func() {
			cell, err := NewCell(truth, design, noise, 20, 500)
			if err != nil {
				t.Error(err)
				return
			}
			var s Sample
			for r := range 6 {
				cell.Draw(1, r, &s)
			}
			if !slices.Equal(s.Held.Y, want.Held.Y) || !slices.Equal(s.Train.Y, want.Train.Y) {
				t.Error("another goroutine draws another sample")
			}
		})
	}
	all.Wait()
}

func BenchmarkDraw(b *testing.B) {
	line, frost := "1 - 0.8*x", "3*exp(-2*x) + sin(2*pi*x)"
	for _, c := range []struct {
		f     string
		law   DesignLaw
		noise NoiseLaw
	}{
		{line, &UniformDesign{}, &NormalNoise{}},
		{frost, &UniformDesign{}, &NormalNoise{}},
		{frost, &NormalDesign{Mean: 0.5, SD: 0.2}, &NormalNoise{}},
		{frost, &BetaDesign{A: 2, B: 3}, &NormalNoise{}},
		{frost, &UniformDesign{}, &StudentNoise{Nu: 5}},
		{frost, &UniformDesign{}, &ContaminatedNoise{Fraction: 0.1, Ratio: 3}},
	} {
		cell := cellOf(b, curve(b, c.f, 0, 1), c.law, &Noise{Law: c.noise, SD: number(0.3)}, 30, 10000)
		b.Run(fmt.Sprintf("f=%s/law=%s/noise=%s/n=30/heldout=10000", c.f, c.law.describe(), c.noise.describe()), func(b *testing.B) {
			var s Sample
			b.ReportAllocs()
			r := 0
			for b.Loop() {
				cell.Draw(1, r, &s)
				r++
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/10030, "ns/point")
		})
	}
}
