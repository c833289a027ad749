package sim

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/stat"
	"gonum.org/v1/gonum/stat/distuv"
)

// NormalNoise is standard normal.
type NormalNoise struct{}

// Check finds nothing wrong.
func (*NormalNoise) Check() error { return nil }

func (*NormalNoise) fill(e []float64, s *Stream) {
	for i := range e {
		e[i] = s.normal()
	}
}

func (*NormalNoise) describe() string { return "normal" }

// StudentNoise is Student's t, scaled by √((ν−2)/ν).
type StudentNoise struct {
	Nu float64 `option:"nu" required:"true" above:"2" max:"1e6" doc:"degrees of freedom of the law, over 2 so that it has a variance"`
}

// Check finds nothing that the bounds of the options leave.
func (*StudentNoise) Check() error { return nil }

// fill draws a normal over the root of a mean square of ν, the latter as a gamma.
func (l *StudentNoise) fill(e []float64, s *Stream) {
	square := distuv.Gamma{Alpha: l.Nu / 2, Beta: l.Nu / 2, Src: s}
	scale := math.Sqrt((l.Nu - 2) / l.Nu)
	for i := range e {
		e[i] = scale * s.normal() / math.Sqrt(square.Rand())
	}
}

func (l *StudentNoise) describe() string { return fmt.Sprintf("student-t %v", l.Nu) }

// LaplaceNoise is double exponential with scale 1/√2.
type LaplaceNoise struct{}

// Check finds nothing wrong.
func (*LaplaceNoise) Check() error { return nil }

func (*LaplaceNoise) fill(e []float64, s *Stream) {
	for i := range e {
		v := s.exponential() / math.Sqrt2
		if s.Uint64()>>63 == 1 {
			v = -v
		}
		e[i] = v
	}
}

func (*LaplaceNoise) describe() string { return "laplace" }

// UniformNoise is uniform on ±√3.
type UniformNoise struct{}

// Check finds nothing wrong.
func (*UniformNoise) Check() error { return nil }

func (*UniformNoise) fill(e []float64, s *Stream) {
	for i := range e {
		e[i] = math.Sqrt(3) * (2*s.float64() - 1)
	}
}

func (*UniformNoise) describe() string { return "uniform" }

// SkewedNoise is a gamma law of the given shape k, as (G − k)/√k; its skewness is
// 2/√k.
type SkewedNoise struct {
	Shape float64 `option:"shape" required:"true" min:"0.01" max:"1e6" doc:"shape of the gamma law; its skewness is 2/√shape"`
}

// Check finds nothing that the bounds of the options leave.
func (*SkewedNoise) Check() error { return nil }

func (l *SkewedNoise) fill(e []float64, s *Stream) {
	law := distuv.Gamma{Alpha: l.Shape, Beta: 1, Src: s}
	for i := range e {
		e[i] = (law.Rand() - l.Shape) / math.Sqrt(l.Shape)
	}
}

func (l *SkewedNoise) describe() string { return fmt.Sprintf("skewed %v", l.Shape) }

// ContaminatedNoise is a normal law of which a fraction ε of draws is r times as
// wide, scaled by 1/√(1 − ε + εr²).
type ContaminatedNoise struct {
	Fraction float64 `option:"fraction" required:"true" min:"0" max:"1" doc:"share of draws from the wider law"`
	Ratio    float64 `option:"ratio" required:"true" min:"1" max:"1000" doc:"its standard deviation over that of the others"`
}

// Check finds nothing that the bounds of the options leave.
func (*ContaminatedNoise) Check() error { return nil }

func (l *ContaminatedNoise) fill(e []float64, s *Stream) {
	sd := 1 / math.Sqrt(1-l.Fraction+l.Fraction*l.Ratio*l.Ratio)
	for i := range e {
		v := sd * s.normal()
		if s.float64() < l.Fraction {
			v *= l.Ratio
		}
		e[i] = v
	}
}

func (l *ContaminatedNoise) describe() string {
	return fmt.Sprintf("contaminated %v %v", l.Fraction, l.Ratio)
}

// FileNoise draws from a file of residuals with replacement, less their mean and
// over the root of their mean square deviation, so that the law drawn from has
// variance 1.
type FileNoise struct{ Column }

// Check refuses residuals that do not vary.
func (l *FileNoise) Check() error {
	if _, sd := l.moments(); !(sd > 0) {
		return &OptionError{"file", l.File, "a file of at least two different residuals"}
	}
	return nil
}

// moments returns the mean and the standard deviation with divisor N.
func (l *FileNoise) moments() (mean, sd float64) {
	if len(l.Values) == 0 {
		return 0, 0
	}
	mean, variance := stat.PopMeanVariance(l.Values, nil)
	return mean, math.Sqrt(variance)
}

func (l *FileNoise) fill(e []float64, s *Stream) {
	mean, sd := l.moments()
	for i := range e {
		e[i] = (l.Values[s.intn(len(l.Values))] - mean) / sd
	}
}

func (l *FileNoise) describe() string { return "from-file " + l.digest() }
