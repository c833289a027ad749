package sim

import (
	"fmt"
	"slices"

	"gonum.org/v1/gonum/floats"
)

// FileDesign draws x from a file of values, with replacement; or takes the values
// as they stand for the training set, and draws the held-out x from them.
type FileDesign struct {
	Column
	Resample bool `option:"resample" doc:"draw n values with replacement; false takes all values as they stand, and n must be their number"`
}

// Check refuses an empty file.
func (d *FileDesign) Check() error {
	if len(d.Values) == 0 {
		return &OptionError{"file", d.File, "a file of at least one value"}
	}
	return nil
}

func (d *FileDesign) on(lo, hi float64) (xLaw, error) {
	for i, v := range d.Values {
		if !(lo <= v && v <= hi) {
			return nil, &OptionError{"file", d.File, fmt.Sprintf("values within the domain [%g, %g] of the truth; value %d is %g", lo, hi, i+1, v)}
		}
	}
	return &valuesLaw{d.ascending()}, nil
}

// ascending returns the values in ascending order.
func (d *FileDesign) ascending() []float64 {
	x := slices.Clone(d.Values)
	slices.Sort(x)
	return x
}

func (d *FileDesign) fixed(n int, _, _ float64) ([]float64, error) {
	if d.Resample {
		return nil, nil
	}
	if n != len(d.Values) {
		return nil, &OptionError{"resample", "false", fmt.Sprintf("n = %d, the number of values in the file, not n = %d", len(d.Values), n)}
	}
	return d.ascending(), nil
}

func (d *FileDesign) describe() string {
	return fmt.Sprintf("from-file %s resample %v", d.digest(), d.Resample)
}

// valuesLaw draws from ascending values with replacement.
type valuesLaw struct{ values []float64 }

// draw takes the values at ascending places, so that nothing is to be sorted.
func (l *valuesLaw) draw(x []float64, s *Stream) {
	s.ascending(x, 0, 1)
	n := len(l.values)
	for i, u := range x {
		x[i] = l.values[min(int(u*float64(n)), n-1)]
	}
}

func (l *valuesLaw) mean(g integrand, within float64) (float64, error) {
	v := make([]float64, len(l.values))
	g(v, l.values)
	return floats.Sum(v) / float64(len(v)), nil
}

func (l *valuesLaw) atoms() []float64 { return l.values }
