package sim

import (
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"math"
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

	x      xLaw
	errors errorLaw
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
	var err error
	if c.x, err = design.on(truth.Lo, truth.Hi); err == nil {
		c.fixedX, err = design.fixed(n, truth.Lo, truth.Hi)
	}
	if err != nil {
		return nil, &CellError{DesignPart, err}
	}
	for _, x := range [][]float64{c.x.atoms(), c.fixedX} {
		if err := truth.finiteAt(x); err != nil {
			return nil, &CellError{TruthPart, err}
		}
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
	c.NoiseVariance, c.SD, err = c.Noise.variance(scale2, c.signalVariance)
	if err != nil {
		return err
	}
	if !(c.NoiseVariance > 0) || math.IsInf(c.NoiseVariance, 0) {
		return fmt.Errorf("the noise variance comes out as %g; want a positive finite number", c.NoiseVariance)
	}
	c.errors = c.Noise.Law.errors()
	return nil
}

// contentHash hashes what defines a cell's data, as stated rather than as worked
// out, so that no rounding can change it.
func (c *Cell) contentHash() string {
	redraw := c.Design.Redraw || c.fixedX != nil // which need no draw to be kept
	content := fmt.Sprintf("cell 1\ntruth %s\ndesign %s redraw %v\nnoise %s\nn %d\n",
		c.Truth.describe(), c.Design.describe(), redraw, c.Noise.describe(), c.N)
	sum := sha256.Sum256([]byte(content))
	return hex.EncodeToString(sum[:8])
}

// Hash identifies what defines the cell's data: truth, design, noise and n, by
// content. Names, seed and held-out size do not enter.
func (c *Cell) Hash() string { return c.hash }

// FixedDesign reports whether the training x are the same in every replicate.
func (c *Cell) FixedDesign() bool { return c.fixedX != nil || !c.Design.Redraw }
