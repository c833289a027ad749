package scoring

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"bendtest/sim"
	"bendtest/smoothers"
)

// heldSet draws a held-out set of m points on [lo, hi], with y offset by shift.
func heldSet(rng *rand.Rand, m int, lo, hi, shift float64) *sim.Set {
	s := &sim.Set{X: make([]float64, m), Y: make([]float64, m), F: make([]float64, m)}
	for i := range s.X {
		s.X[i] = lo + (hi-lo)*rng.Float64()
	}
	slices.Sort(s.X)
	for i, x := range s.X {
		u := (x - lo) / (hi - lo)
		s.F[i] = shift + math.Sin(6*u) + u*u
		s.Y[i] = s.F[i] + 0.3*rng.NormFloat64()
	}
	return s
}

// splines returns a piecewise polynomial of random coefficients near the set's
// values, with breaks at random x of the inner nine tenths.
func splines(rng *rand.Rand, s *sim.Set, pieces, order int) *smoothers.Piecewise {
	lo, hi := s.X[0], s.X[len(s.X)-1]
	p := &smoothers.Piecewise{Order: order}
	for range pieces + 1 {
		p.Break = append(p.Break, lo+(hi-lo)*(0.05+0.9*rng.Float64()))
	}
	slices.Sort(p.Break)
	for k := range pieces {
		p.Origin = append(p.Origin, p.Break[k])
		p.Width = append(p.Width, p.Break[k+1]-p.Break[k])
		p.Coef = append(p.Coef, s.F[0]+rng.Float64())
		for range order - 1 {
			p.Coef = append(p.Coef, 0.3*rng.NormFloat64())
		}
	}
	return p
}

// pointwise sums over the points one by one: the plain reference.
func pointwise(s *sim.Set, c smoothers.Curve, lo, hi float64) HeldOutScore {
	g := make([]float64, len(s.X))
	c.At(g, s.X)
	var all, in, out sums
	for i, x := range s.X {
		to := &out
		if lo <= x && x <= hi {
			to = &in
		}
		for _, t := range []*sums{&all, to} {
			t.add(s.Y[i]-g[i], s.F[i]-g[i])
			t.n++
		}
	}
	score := HeldOutScore{MSE: all.mse(), ASE: all.ase(), HasInside: in.n > 0, HasOutside: out.n > 0}
	if score.HasInside {
		score.Inside = in.ase()
	}
	if score.HasOutside {
		score.Outside = out.ase()
	}
	return score
}

// The bound is 1e-11 relative: a sum over 10,000 squares carries about 1e-14, and
// the moments of a block lose at most the ratio of its spread to the error summed.
func TestScoringByMomentsEqualsSummingThePoints(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 1))
	for _, c := range []struct {
		pieces, order, points, training int
		lo, hi, shift                   float64
	}{
		{1, 4, 10000, 30, 0, 1, 0}, {29, 4, 10000, 30, 0, 1, 0}, {12, 4, 10000, 30, 1e4, 1e4 + 1, 1e6},
		{5, 2, 1000, 100, -3e8, 5e8, 0}, {300, 4, 10000, 300, 0, 1e-6, 5}, {7, 1, 100, 10, 0, 1, 0},
		{3000, 4, 10000, 3000, 0, 1, 0}, {8, 4, 10000, 2, 0, 1, 0},
	} {
		t.Run(fmt.Sprintf("pieces=%d/order=%d/points=%d/training=%d/shift=%g", c.pieces, c.order, c.points, c.training, c.shift), func(t *testing.T) {
			s := heldSet(rng, c.points, c.lo, c.hi, c.shift)
			curve := splines(rng, s, c.pieces, c.order)
			lo, hi := s.X[c.points/20], s.X[c.points-c.points/10]
			var h HeldOut
			train := []float64{lo}
			for _, v := range s.X {
				if lo < v && v < hi && rng.IntN(c.points) < c.training {
					train = append(train, v)
				}
			}
			train = append(train, hi)
			h.Set(s, train)
			got, finite := h.Score(curve)
			want := pointwise(s, curve, lo, hi)
			if !finite {
				t.Fatal("not finite")
			}
			tol := 1e-11
			if c.shift > 1e5 {
				tol = 1e-8 // y itself is known to 1e-10 of the noise at this offset
			}
			for _, f := range []struct {
				name      string
				got, want float64
			}{{"mse", got.MSE, want.MSE}, {"ase", got.ASE, want.ASE}, {"inside", got.Inside, want.Inside}, {"outside", got.Outside, want.Outside}} {
				if math.Abs(f.got-f.want) > tol*f.want {
					t.Errorf("%s = %.17g, want %.17g", f.name, f.got, f.want)
				}
			}
		})
	}
}

// plain hides a curve's pieces, so that it is scored point by point.
type plain struct{ smoothers.Curve }

func TestInsideAndOutsideSplitTheSet(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 1))
	s := heldSet(rng, 500, 0, 1, 0)
	curve := splines(rng, s, 4, 4)
	for _, c := range []struct {
		name            string
		lo, hi          float64
		inside, outside bool
	}{
		{"all inside", -1, 2, true, false},
		{"all outside", 3, 4, false, true},
		{"both", s.X[10], s.X[490], true, true},
		{"only above", -1, s.X[490], true, true},
	} {
		var h HeldOut
		h.Set(s, []float64{c.lo, c.hi})
		for _, curve := range []smoothers.Curve{curve, plain{curve}} {
			got, _ := h.Score(curve)
			want := pointwise(s, curve, c.lo, c.hi)
			if got.HasInside != c.inside || got.HasOutside != c.outside {
				t.Errorf("%s: inside %v, outside %v", c.name, got.HasInside, got.HasOutside)
			}
			if !near(got.Inside, want.Inside, 1e-12) || !near(got.Outside, want.Outside, 1e-12) || !near(got.ASE, want.ASE, 1e-12) {
				t.Errorf("%s: %+v, want %+v", c.name, got, want)
			}
		}
	}
}

func TestTheTruthScoresTheNoiseItself(t *testing.T) {
	s := heldSet(rand.New(rand.NewPCG(9, 1)), 2000, 0, 1, 0)
	var h HeldOut
	h.Set(s, []float64{0.1, 0.9})
	got, _ := h.Score(truth{s})
	if got.ASE != 0 || !near(got.MSE, h.Noise(), 1e-15) {
		t.Errorf("the truth scores %+v, noise %v", got, h.Noise())
	}
}

// truth is the curve through a set's true means.
type truth struct{ set *sim.Set }

func (c truth) At(dst, t []float64) { copy(dst, c.set.F) }

func TestACurveThatLeavesTheNumbersIsNotFinite(t *testing.T) {
	s := heldSet(rand.New(rand.NewPCG(9, 1)), 200, 0, 1, 0)
	var h HeldOut
	h.Set(s, []float64{0.1, 0.9})
	for _, v := range []float64{math.NaN(), math.Inf(1), 1e200} {
		p := &smoothers.Piecewise{Order: 1, Break: []float64{0, 1}, Origin: []float64{0}, Width: []float64{1}, Coef: []float64{v}}
		if _, finite := h.Score(p); finite {
			t.Errorf("a curve of %v is finite", v)
		}
	}
}

func TestScoringDoesNotAllocate(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 1))
	s := heldSet(rng, 10000, 0, 1, 0)
	curve := splines(rng, s, 20, 4)
	train := []float64{0.01, 0.3, 0.5, 0.99}
	var h HeldOut
	if n := testing.AllocsPerRun(5, func() {
		h.Set(s, train)
		h.Score(curve)
		h.Score(plain{curve})
	}); n > 1 { // wrapping the curve
		t.Errorf("%v allocations", n)
	}
}

func BenchmarkHeldOut(b *testing.B) {
	rng := rand.New(rand.NewPCG(3, 1))
	s := heldSet(rng, 10000, 0, 1, 0)
	for _, n := range []int{30, 300, 3000} {
		train := make([]float64, n)
		for i := range train {
			train[i] = rng.Float64()
		}
		slices.Sort(train)
		var h HeldOut
		b.Run(fmt.Sprintf("set/n=%d", n), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				h.Set(s, train)
			}
		})
		at := splines(rng, s, n-1, 4)
		copy(at.Break, train)
		for name, curve := range map[string]*smoothers.Piecewise{"breaks=training-x": at, "breaks=8": splines(rng, s, 9, 4)} {
			b.Run(fmt.Sprintf("score/n=%d/%s", n, name), func(b *testing.B) {
				b.ReportAllocs()
				for b.Loop() {
					h.Score(curve)
				}
			})
			b.Run(fmt.Sprintf("pointwise/n=%d/%s", n, name), func(b *testing.B) {
				for b.Loop() {
					h.Score(plain{curve})
				}
			})
		}
	}
}
