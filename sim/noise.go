package sim

import (
	"fmt"
	"math"

	"bendtest/sim/expr"
)

// A NoiseLaw is a law of errors with mean 0 and variance exactly 1.
type NoiseLaw interface {
	// Check returns an *OptionError for the first option that makes no sense.
	Check() error

	// fill fills e with independent draws.
	fill(e []float64, s *Stream)
	// describe is the law's part of a cell's content.
	describe() string
}

// A NoiseKind is one kind of noise law.
type NoiseKind struct {
	Name string
	Doc  string
	New  func() NoiseLaw // a pointer to the options struct, at its defaults
}

// Noises returns all noise laws, in the order in which they are listed to people.
func Noises() []NoiseKind {
	return []NoiseKind{
		{"normal", "normal", func() NoiseLaw { return &NormalNoise{} }},
		{"student-t", "Student's t with nu degrees of freedom: heavy tails", func() NoiseLaw { return &StudentNoise{} }},
		{"laplace", "double exponential", func() NoiseLaw { return &LaplaceNoise{} }},
		{"uniform", "uniform", func() NoiseLaw { return &UniformNoise{} }},
		{"skewed", "gamma, centred: skewed to the right", func() NoiseLaw { return &SkewedNoise{} }},
		{"contaminated", "normal, with a fraction of draws from a wider normal", func() NoiseLaw { return &ContaminatedNoise{} }},
		{"from-file", "residuals drawn from a file, centred and scaled", func() NoiseLaw { return &FileNoise{} }},
	}
}

// A Noise is a law with its level and the options that all laws share. Exactly one
// of SD, Variance, SignalToNoise and R2 is set.
//
// The error at x is sd·scale(x)·e with e of variance 1, so the noise variance of a
// cell is sd² E scale(X)² over the design law; scale is 1 unless given.
type Noise struct {
	Law           NoiseLaw
	SD            *float64         `option:"sd" above:"0" unit:"y" doc:"standard deviation where scale is 1"`
	Variance      *float64         `option:"variance" above:"0" unit:"y²" doc:"variance where scale is 1"`
	SignalToNoise *float64         `option:"signal-to-noise" above:"0" doc:"variance of f over the design law ÷ noise variance"`
	R2            *float64         `option:"r2" above:"0" below:"1" doc:"share of the variance of y that f explains, over the design law"`
	Scale         *expr.Expression `option:"scale" doc:"expression in x that multiplies the standard deviation"`
	AR1           float64          `option:"ar1" above:"-1" below:"1" doc:"correlation of neighbouring errors of the training sample, in x order"`
}

// Check refuses a noise whose level is not set by exactly one option.
func (n *Noise) Check() error {
	set := 0
	for _, level := range []*float64{n.SD, n.Variance, n.SignalToNoise, n.R2} {
		if level != nil {
			set++
		}
	}
	if set != 1 {
		return &OptionError{"sd", fmt.Sprintf("%d levels", set), "exactly one of sd, variance, signal-to-noise, r2"}
	}
	return n.Law.Check()
}

// describe is the noise's part of a cell's content.
func (n *Noise) describe() string {
	scale, level := "1", ""
	if n.Scale != nil {
		scale = n.Scale.String()
	}
	for _, l := range []struct {
		name string
		v    *float64
	}{{"sd", n.SD}, {"variance", n.Variance}, {"signal-to-noise", n.SignalToNoise}, {"r2", n.R2}} {
		if l.v != nil {
			level = fmt.Sprint(l.name, " ", *l.v)
		}
	}
	return fmt.Sprintf("%s %s scale %s ar1 %v", n.Law.describe(), level, scale, n.AR1)
}

// level returns the standard deviation where scale is 1 and the noise variance
// averaged over the design law. signalVariance works out the variance of the truth
// over that law, where the level needs it; scale2 is E scale(X)².
func (n *Noise) level(signalVariance func() float64, scale2 float64) (sd, variance float64, err error) {
	ratio := func(option string, value, signal float64) error {
		varF := signalVariance()
		if !(varF > 0) {
			return &OptionError{option, fmt.Sprint(value), "sd or variance, since the truth is constant over the design"}
		}
		variance = varF / signal
		sd = math.Sqrt(variance / scale2)
		return nil
	}
	switch {
	case n.SD != nil:
		sd = *n.SD
		variance = sd * sd * scale2
	case n.Variance != nil:
		sd = math.Sqrt(*n.Variance)
		variance = *n.Variance * scale2
	case n.SignalToNoise != nil:
		err = ratio("signal-to-noise", *n.SignalToNoise, *n.SignalToNoise)
	default:
		err = ratio("r2", *n.R2, *n.R2/(1-*n.R2))
	}
	return sd, variance, err
}
