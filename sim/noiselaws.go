package sim

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// NormalNoise is standard normal.
type NormalNoise struct{}

// Check finds nothing wrong.
func (*NormalNoise) Check() error { return nil }

func (*NormalNoise) errors() errorLaw { return func(e []float64, s *Stream) { s.normals(e) } }

func (*NormalNoise) describe() string { return "normal" }

// StudentNoise is Student's t, scaled by √((ν−2)/ν).
type StudentNoise struct {
	Nu float64 `option:"nu" required:"true" above:"2" max:"1e6" doc:"degrees of freedom of the law, over 2 so that it has a variance"`
}

// Check finds nothing that the bounds of the options leave.
func (*StudentNoise) Check() error { return nil }

// errors draws a normal over the root of a mean square of ν, the latter as a gamma.
func (l *StudentNoise) errors() errorLaw {
	nu, scale := l.Nu, math.Sqrt((l.Nu-2)/l.Nu)
	return func(e []float64, s *Stream) {
		s.normals(e)
		square := distuv.Gamma{Alpha: nu / 2, Beta: nu / 2, Src: s}
		for i, z := range e {
			e[i] = scale * z / math.Sqrt(square.Rand())
		}
	}
}

func (l *StudentNoise) describe() string { return fmt.Sprintf("student-t %v", l.Nu) }

// LaplaceNoise is double exponential with mean size 1/√2.
type LaplaceNoise struct{}

// Check finds nothing wrong.
func (*LaplaceNoise) Check() error { return nil }

func (*LaplaceNoise) errors() errorLaw {
	return func(e []float64, s *Stream) {
		s.laplaces(e)
		for i := range e {
			e[i] *= 1 / math.Sqrt2
		}
	}
}

func (*LaplaceNoise) describe() string { return "laplace" }

// UniformNoise is uniform on ±√3.
type UniformNoise struct{}

// Check finds nothing wrong.
func (*UniformNoise) Check() error { return nil }

func (*UniformNoise) errors() errorLaw {
	half := math.Sqrt(3)
	return func(e []float64, s *Stream) {
		s.uniforms(e)
		for i, u := range e {
			e[i] = half * (2*u - 1)
		}
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

func (l *SkewedNoise) errors() errorLaw {
	shape, root := l.Shape, math.Sqrt(l.Shape)
	return func(e []float64, s *Stream) {
		law := distuv.Gamma{Alpha: shape, Beta: 1, Src: s}
		for i := range e {
			e[i] = (law.Rand() - shape) / root
		}
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

func (l *ContaminatedNoise) errors() errorLaw {
	share := l.Fraction
	narrow := 1 / math.Sqrt(1-share+share*l.Ratio*l.Ratio)
	wide := narrow * l.Ratio
	return func(e []float64, s *Stream) {
		s.normals(e)
		for i := range e {
			if open01(s.Uint64()) < share {
				e[i] *= wide
			} else {
				e[i] *= narrow
			}
		}
	}
}

func (l *ContaminatedNoise) describe() string {
	return fmt.Sprintf("contaminated %v %v", l.Fraction, l.Ratio)
}
