package sim

import (
	"math"

	"bendtest/sim/expr"
)

// A Set is a data set in ascending order of x, with the true means beside the
// readings. All have one length.
type Set struct {
	X []float64
	Y []float64 // readings
	F []float64 // true means f(x)
}

// A Sample is one replicate of a cell and the memory that drawing takes. The zero
// value is ready; it belongs to one goroutine.
type Sample struct {
	Train Set
	Held  Set

	stream  *Stream
	scratch expr.Scratch
	scale   []float64
}

// Purposes of streams. They are part of the output format.
const (
	forTrainX = "training x"
	forTrainE = "training errors"
	forHeldX  = "held-out x"
	forHeldE  = "held-out errors"
)

// Draw draws a replicate into s, overwriting what it held. What comes out depends
// on the seed, the cell and the replicate alone.
func (c *Cell) Draw(seed uint64, replicate int, s *Sample) {
	if s.stream == nil {
		s.stream = newStream()
	}
	s.Train.resize(c.N)
	s.Held.resize(c.HeldOut)
	c.trainX(seed, replicate, s)
	c.fill(seed, replicate, forTrainE, c.Noise.AR1, &s.Train, s)

	s.stream.set(seed, c.hash, replicate, forHeldX)
	c.Design.Law.draw(s.Held.X, c.Truth.Lo, c.Truth.Hi, s.stream)
	c.Design.round(s.Held.X, c.Truth.Lo, c.Truth.Hi)
	c.fill(seed, replicate, forHeldE, 0, &s.Held, s)
}

// trainX sets the training x: as given, as first drawn, or drawn anew.
func (c *Cell) trainX(seed uint64, replicate int, s *Sample) {
	if c.fixedX != nil {
		copy(s.Train.X, c.fixedX)
		return
	}
	if !c.Design.Redraw {
		replicate = 0
	}
	s.stream.set(seed, c.hash, replicate, forTrainX)
	c.Design.Law.draw(s.Train.X, c.Truth.Lo, c.Truth.Hi, s.stream)
	c.Design.round(s.Train.X, c.Truth.Lo, c.Truth.Hi)
}

// fill sets the means and the readings of a set whose x are drawn.
func (c *Cell) fill(seed uint64, replicate int, purpose string, rho float64, set *Set, s *Sample) {
	c.Truth.Eval(set.F, set.X, &s.scratch)
	s.stream.set(seed, c.hash, replicate, purpose)
	e := set.Y
	c.Noise.Law.fill(e, s.stream)
	if rho != 0 {
		correlate(e, rho)
	}
	if c.Noise.Scale != nil {
		s.scale = resize(s.scale, len(e))
		c.Noise.Scale.Eval(s.scale, set.X, &s.scratch)
		for i, v := range s.scale {
			e[i] *= v
		}
	}
	for i, f := range set.F {
		set.Y[i] = f + c.SD*e[i]
	}
}

// correlate turns independent errors of variance 1 into a stationary first-order
// autoregression of variance 1: e_i ← ρ e_{i−1} + √(1−ρ²) e_i.
func correlate(e []float64, rho float64) {
	fresh := math.Sqrt(1 - rho*rho)
	for i := 1; i < len(e); i++ {
		e[i] = rho*e[i-1] + fresh*e[i]
	}
}

// Stream returns a stream of its own for a purpose that is not one of drawing, such
// as dealing folds.
func (c *Cell) Stream(seed uint64, replicate int, purpose string) *Stream {
	s := newStream()
	s.set(seed, c.hash, replicate, "use: "+purpose)
	return s
}

// resize gives the set room for n points.
func (s *Set) resize(n int) {
	s.X, s.Y, s.F = resize(s.X, n), resize(s.Y, n), resize(s.F, n)
}

// resize returns v with length n, reallocated only where its capacity is short.
func resize(v []float64, n int) []float64 {
	if cap(v) < n {
		return make([]float64, n)
	}
	return v[:n]
}
