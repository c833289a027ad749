package sim

import (
	"errors"
	"fmt"
	"math"

	"bendtest/sim/expr"
)

// signalVariance is the variance of f over the design law.
func (c *Cell) signalVariance() (float64, error) {
	return c.Truth.integrals.get("signal over "+c.Design.describe(), func() (float64, error) {
		var s expr.Scratch
		mean, err := c.x.mean(func(dst, x []float64) { c.Truth.Eval(dst, x, &s) }, exactly)
		if err != nil {
			return 0, err
		}
		variance, err := c.x.mean(func(dst, x []float64) {
			c.Truth.Eval(dst, x, &s)
			for i, f := range dst {
				dst[i] = (f - mean) * (f - mean)
			}
		}, exactly)
		if variance <= 1e-28*mean*mean { // a constant, to rounding
			variance = 0
		}
		return variance, err
	})
}

// meanSquareScale is E scale(X)² over the design law. It refuses a scale that is
// negative or not finite somewhere, or zero throughout.
func (c *Cell) meanSquareScale() (float64, error) {
	scale := c.Noise.Scale
	if scale == nil {
		return 1, nil
	}
	square, err := c.Truth.integrals.get("scale "+scale.String()+" over "+c.Design.describe(), func() (float64, error) {
		return c.integrateScale(scale)
	})
	if err == nil {
		err = scaleFault(scale, c.fixedX)
	}
	if err != nil {
		want := fmt.Sprintf("an expression that is nowhere negative and not zero throughout on [%g, %g]", c.Truth.Lo, c.Truth.Hi)
		if err != errNegative && err != errZero {
			want = fmt.Sprintf("an expression that is finite on [%g, %g]; this one is %v", c.Truth.Lo, c.Truth.Hi, err)
		}
		return 0, &OptionError{"scale", scale.String(), want}
	}
	return square, nil
}

// What may be wrong with the values of a scale, besides their not being finite.
var (
	errNegative = errors.New("negative")
	errZero     = errors.New("zero throughout")
)

// integrateScale is E scale(X)² over the design law, or why there is none.
func (c *Cell) integrateScale(scale *expr.Expression) (float64, error) {
	for _, x := range [][]float64{c.Truth.probes(), c.x.atoms()} {
		if err := scaleFault(scale, x); err != nil {
			return 0, err
		}
	}
	var s expr.Scratch
	negative := false
	square, err := c.x.mean(func(dst, x []float64) {
		scale.Eval(dst, x, &s)
		for i, v := range dst {
			negative = negative || v < 0
			dst[i] = v * v
		}
	}, exactly)
	switch {
	case err != nil:
		return 0, err
	case negative:
		return 0, errNegative
	case square == 0:
		return 0, errZero
	}
	return square, nil
}

// scaleFault says what is wrong with a scale at some x.
func scaleFault(scale *expr.Expression, x []float64) error {
	y := make([]float64, len(x))
	scale.Eval(y, x, new(expr.Scratch))
	for i, v := range y {
		switch {
		case v < 0:
			return errNegative
		case math.IsNaN(v) || math.IsInf(v, 0):
			return fmt.Errorf("%s at x = %g", inWords(v), x[i])
		}
	}
	return nil
}
