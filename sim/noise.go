package sim

import (
	"fmt"
	"math"

	"bendtest/sim/expr"
)

// A NoiseLaw is a law of errors with mean 0 and variance exactly 1.
type NoiseLaw interface {
	// Check returns an *OptionError for the first option that makes no sense in
	// itself or beside the others.
	Check() error

	// errors returns what draws from the law; many goroutines may use it.
	errors() errorLaw
	// describe is the law's part of a cell's content.
	describe() string
}

// An errorLaw fills e with independent draws of mean 0 and variance 1.
type errorLaw func(e []float64, s *Stream)

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

// levels are the options that set the level, of which a noise has one.
func (n *Noise) levels() []level {
	return []level{{"sd", n.SD}, {"variance", n.Variance}, {"signal-to-noise", n.SignalToNoise}, {"r2", n.R2}}
}

// A level is an option that sets the level of a noise, and its value if given.
type level struct {
	option string
	value  *float64
}

// Check refuses a noise whose level is not set by exactly one option, and options
// that make no sense.
func (n *Noise) Check() error {
	set := 0
	for _, l := range n.levels() {
		if l.value != nil {
			set++
		}
	}
	if set != 1 {
		return &OptionError{"sd", fmt.Sprintf("%d levels", set), "exactly one of sd, variance, signal-to-noise, r2"}
	}
	for _, options := range []any{n, n.Law} {
		if err := checkBounds(options); err != nil {
			return err
		}
	}
	return n.Law.Check()
}

// describe is the noise's part of a cell's content.
func (n *Noise) describe() string {
	text := n.Law.describe()
	for _, l := range n.levels() {
		if l.value != nil {
			text += fmt.Sprint(" ", l.option, " ", *l.value)
		}
	}
	scale := "1"
	if n.Scale != nil {
		scale = n.Scale.String()
	}
	return fmt.Sprintf("%s scale %s ar1 %v", text, scale, n.AR1)
}

// variance returns the noise variance averaged over the design law, and the standard
// deviation where scale is 1, given E scale(X)². signal works out the variance of the
// truth over the design law; it is called only where the level depends on it.
func (n *Noise) variance(scale2 float64, signal func() (float64, error)) (variance, sd float64, err error) {
	switch {
	case n.SD != nil:
		return *n.SD * *n.SD * scale2, *n.SD, nil
	case n.Variance != nil:
		return *n.Variance * scale2, math.Sqrt(*n.Variance), nil
	}
	option, value, ratio := "signal-to-noise", n.SignalToNoise, 0.0
	if value != nil {
		ratio = *value
	} else {
		option, value = "r2", n.R2
		ratio = *value / (1 - *value)
	}
	of, err := signal()
	if err != nil {
		return 0, 0, &OptionError{option, fmt.Sprint(*value), fmt.Sprintf("sd or variance, since the truth is %v", err)}
	}
	if of == 0 {
		return 0, 0, &OptionError{option, fmt.Sprint(*value), "sd or variance, since the truth is constant over the design"}
	}
	variance = of / ratio
	return variance, math.Sqrt(variance / scale2), nil
}
