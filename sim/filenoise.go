package sim

import (
	"math"

	"gonum.org/v1/gonum/stat"
)

// FileNoise draws from a file of residuals with replacement, less their mean and
// over the root of their mean square deviation, so that the law drawn from has
// variance 1.
type FileNoise struct{ Column }

// Check refuses residuals that do not vary.
func (l *FileNoise) Check() error {
	if len(l.Values) > 0 {
		if _, variance := stat.PopMeanVariance(l.Values, nil); variance > 0 && variance < math.MaxFloat64 {
			return nil
		}
	}
	return &OptionError{"file", l.File, "a file of at least two different residuals"}
}

func (l *FileNoise) errors() errorLaw {
	mean, variance := stat.PopMeanVariance(l.Values, nil)
	unit := make([]float64, len(l.Values))
	for i, v := range l.Values {
		unit[i] = (v - mean) / math.Sqrt(variance)
	}
	return func(e []float64, s *Stream) {
		for i := range e {
			e[i] = unit[s.below(len(unit))]
		}
	}
}

func (l *FileNoise) describe() string { return "from-file " + l.digest() }
