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

	stream       Stream
	truth, scale expr.Scratch // one each, as a scratch keeps the constants of what it served last
	at           []float64    // scale at the x of a set
}

// Purposes of streams. They are part of the output format.
const (
	forTrainX = "training x"
	forTrainE = "training errors"
	forHeldX  = "held-out x"
	forHeldE  = "held-out errors"
	forFreshE = "fresh errors"
)

// Draw draws a replicate into s, overwriting what it held. What comes out depends
// on the seed, the cell and the replicate alone.
func (c *Cell) Draw(seed uint64, replicate int, s *Sample) {
	s.Train.resize(c.N)
	s.Held.resize(c.HeldOut)
	c.trainX(seed, replicate, s)
	c.readings(seed, replicate, forTrainE, c.Noise.AR1, &s.Train, s)

	s.stream.set(seed, c.hash, replicate, forHeldX)
	c.x.draw(s.Held.X, &s.stream)
	c.readings(seed, replicate, forHeldE, 0, &s.Held, s)
}

// Fresh draws a second set of readings at the training x of a replicate drawn into s,
// with errors like those of a held-out set, into dst, of length n.
func (c *Cell) Fresh(seed uint64, replicate int, s *Sample, dst []float64) {
	s.stream.set(seed, c.hash, replicate, forFreshE)
	c.errors(dst, &s.stream)
	c.shape(dst, s.Train.X, 0, s)
	for i, f := range s.Train.F {
		dst[i] += f
	}
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
	c.x.draw(s.Train.X, &s.stream)
}

// readings sets the means and the readings of a set whose x are drawn, with errors
// correlated by rho in x order.
func (c *Cell) readings(seed uint64, replicate int, purpose string, rho float64, set *Set, s *Sample) {
	c.Truth.Eval(set.F, set.X, &s.truth)
	s.stream.set(seed, c.hash, replicate, purpose)
	e := set.Y
	c.errors(e, &s.stream)
	c.shape(e, set.X, rho, s)
	for i, f := range set.F {
		e[i] += f
	}
}

// shape turns independent errors of variance 1 at x into errors of the cell, correlated
// by rho in x order. s lends its memory.
func (c *Cell) shape(e, x []float64, rho float64, s *Sample) {
	if rho != 0 {
		correlate(e, rho)
	}
	if c.Noise.Scale != nil {
		s.at = resize(s.at, len(e))
		c.Noise.Scale.Eval(s.at, x, &s.scale)
		for i, v := range s.at {
			e[i] *= v
		}
	}
	for i := range e {
		e[i] *= c.SD
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
	s := new(Stream)
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
