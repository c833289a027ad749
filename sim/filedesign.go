package sim

import (
	"fmt"
	"slices"
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

// checkOn refuses values outside the domain.
func (d *FileDesign) checkOn(lo, hi float64) error {
	for i, v := range d.Values {
		if !(lo <= v && v <= hi) {
			return &OptionError{"file", d.File, fmt.Sprintf("values within the domain [%g, %g] of the truth; value %d is %g", lo, hi, i+1, v)}
		}
	}
	return nil
}

func (d *FileDesign) fixed(n int, _, _ float64) ([]float64, error) {
	if d.Resample {
		return nil, nil
	}
	if n != len(d.Values) {
		return nil, &OptionError{"resample", "false", fmt.Sprintf("n = %d, the number of values in the file, not n = %d", len(d.Values), n)}
	}
	x := slices.Clone(d.Values)
	slices.Sort(x)
	return x, nil
}

func (d *FileDesign) draw(x []float64, _, _ float64, s *Stream) {
	for i := range x {
		x[i] = d.Values[s.intn(len(d.Values))]
	}
	slices.Sort(x)
}

func (d *FileDesign) mean(g func(dst, x []float64), _, _ float64) float64 {
	return average(g, d.Values)
}

func (d *FileDesign) cdf(x, _, _ float64) float64 {
	below := 0
	for _, v := range d.Values {
		if v <= x {
			below++
		}
	}
	return float64(below) / float64(len(d.Values))
}

func (d *FileDesign) describe() string {
	return fmt.Sprintf("from-file %s resample %v", d.digest(), d.Resample)
}
