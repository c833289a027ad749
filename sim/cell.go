package sim

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"math"

	"bendtest/sim/expr"
)

// A Cell is one combination of truth, design, noise and sample size. It is
// immutable and may be used by many goroutines, each with a Sample of its own.
type Cell struct {
	Truth   *Truth
	Design  *Design
	Noise   *Noise
	N       int // training sample size
	HeldOut int // held-out sample size

	// NoiseVariance is the exact variance of y − f(x), averaged over the design
	// law: the held-out error of the truth itself.
	NoiseVariance float64
	SD            float64 // standard deviation of the noise where its scale is 1

	fixedX []float64 // training x that need no draw, or nil
	hash   string
}

// A Part names the part of a cell that an error is about.
type Part string

// The parts of a cell.
const (
	TruthPart  Part = "truth"
	DesignPart Part = "design"
	NoisePart  Part = "noise"
)

// A CellError says which part of a cell makes it impossible.
type CellError struct {
	Part Part
	Err  error
}

func (e *CellError) Error() string { return fmt.Sprintf("%s: %v", e.Part, e.Err) }
func (e *CellError) Unwrap() error { return e.Err }

// NewCell works out what is constant in a cell. n and heldOut must be positive. The
// error is a *CellError.
func NewCell(truth *Truth, design *Design, noise *Noise, n, heldOut int) (*Cell, error) {
	if n < 1 || heldOut < 1 {
		panic("sim: a cell needs positive sample sizes")
	}
	c := &Cell{Truth: truth, Design: design, Noise: noise, N: n, HeldOut: heldOut}
	if err := design.check(truth.Lo, truth.Hi); err != nil {
		return nil, &CellError{DesignPart, err}
	}
	if law, ok := design.Law.(fixedLaw); ok {
		x, err := law.fixed(n, truth.Lo, truth.Hi)
		if err != nil {
			return nil, &CellError{DesignPart, err}
		}
		design.round(x, truth.Lo, truth.Hi)
		c.fixedX = x
	}
	if err := c.setNoise(); err != nil {
		return nil, &CellError{NoisePart, err}
	}
	c.hash = c.contentHash()
	return c, nil
}

// setNoise works out the exact noise variance.
func (c *Cell) setNoise() error {
	if err := c.Noise.Check(); err != nil {
		return err
	}
	scale2, err := c.meanSquareScale()
	if err != nil {
		return err
	}
	c.SD, c.NoiseVariance, err = c.Noise.level(c.signalVariance, scale2)
	if err != nil {
		return err
	}
	if !(c.NoiseVariance > 0) || math.IsInf(c.NoiseVariance, 0) {
		return errors.New("the noise variance is not a positive finite number")
	}
	return nil
}

// signalVariance is the variance of f over the design law.
func (c *Cell) signalVariance() float64 {
	lo, hi := c.Truth.Lo, c.Truth.Hi
	var s expr.Scratch
	mean := c.Design.mean(func(dst, x []float64) { c.Truth.Eval(dst, x, &s) }, lo, hi)
	variance := c.Design.mean(func(dst, x []float64) {
		c.Truth.Eval(dst, x, &s)
		for i, f := range dst {
			dst[i] = (f - mean) * (f - mean)
		}
	}, lo, hi)
	if variance <= 1e-28*mean*mean { // a constant, to rounding
		return 0
	}
	return variance
}

// meanSquareScale is E scale(X)² over the design law.
func (c *Cell) meanSquareScale() (float64, error) {
	scale := c.Noise.Scale
	if scale == nil {
		return 1, nil
	}
	lo, hi := c.Truth.Lo, c.Truth.Hi
	if err := finiteOn(lo, hi, scale.Eval, "scale"); err != nil {
		return 0, &OptionError{"scale", scale.String(), err.Error()}
	}
	var s expr.Scratch
	negative := false
	square := c.Design.mean(func(dst, x []float64) {
		scale.Eval(dst, x, &s)
		for i, v := range dst {
			negative = negative || v < 0
			dst[i] = v * v
		}
	}, lo, hi)
	if negative || !(square > 0) {
		return 0, &OptionError{"scale", scale.String(), fmt.Sprintf("an expression that is nowhere negative and not zero throughout on [%g, %g]", lo, hi)}
	}
	return square, nil
}

// contentHash hashes what defines a cell's data, as stated rather than as worked
// out, so that no rounding can change it.
func (c *Cell) contentHash() string {
	content := fmt.Sprintf("cell 1\ntruth %s\ndesign %s\nnoise %s\nn %d\n",
		c.Truth.describe(), c.Design.describe(), c.Noise.describe(), c.N)
	sum := sha256.Sum256([]byte(content))
	return hex.EncodeToString(sum[:8])
}

// Hash identifies what defines the cell's data: truth, design, noise and n, by
// content. Names, seed and held-out size do not enter.
func (c *Cell) Hash() string { return c.hash }

// FixedDesign reports whether the training x are the same in every replicate.
func (c *Cell) FixedDesign() bool { return c.fixedX != nil || !c.Design.Redraw }
