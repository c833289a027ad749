package sim

import (
	"errors"
	"math"
	"strings"
	"testing"
)

// refusal is what NewCell must say about a cell.
type refusal struct {
	name   string
	truth  *Truth  // a line if nil
	design *Design // uniform if nil
	noise  *Noise  // normal if nil
	part   Part
	says   string
}

// refusals are impossible cells on the domain [0, 1], with n = 10.
func refusals(t *testing.T) []refusal {
	law := func(l DesignLaw) *Design { return &Design{Law: l, Redraw: true} }
	file := func(v ...float64) *FileDesign { return &FileDesign{Column: Column{File: "x.csv", Values: v}} }
	resampled := func(v ...float64) *FileDesign { d := file(v...); d.Resample = true; return d }
	noise := func(l NoiseLaw) *Noise { return &Noise{Law: l, SD: number(1)} }
	scale := func(text string) *Noise {
		return &Noise{Law: &NormalNoise{}, SD: number(1), Scale: expression(t, text)}
	}
	ar1 := func(rho float64) *Noise { return &Noise{Law: &NormalNoise{}, SD: number(1), AR1: rho} }
	pole := curve(t, "1/(x - 0.3)", 0, 1) // passes the grid, is infinite at 3/10
	return []refusal{
		{"two levels", nil, nil, &Noise{Law: &NormalNoise{}, SD: number(1), R2: number(0.5)}, NoisePart, "exactly one"},
		{"no level", nil, nil, &Noise{Law: &NormalNoise{}}, NoisePart, "exactly one"},
		{"ratio to a constant", curve(t, "3", 0, 1), nil, &Noise{Law: &NormalNoise{}, SignalToNoise: number(2)}, NoisePart, "signal-to-noise = 2; want sd or variance"},
		{"share of a constant", curve(t, "x*0 + 1/3", 0, 1), nil, &Noise{Law: &NormalNoise{}, R2: number(0.5)}, NoisePart, "r2 = 0.5; want sd or variance"},
		{"ratio to one value", nil, law(resampled(0.5, 0.5)), &Noise{Law: &NormalNoise{}, R2: number(0.5)}, NoisePart, "constant over the design"},
		{"ratio to what is too rough", curve(t, "sin(1e9*x)", 0, 1), nil, &Noise{Law: &NormalNoise{}, R2: number(0.5)}, NoisePart, "too rough"},
		{"sd of zero", nil, nil, normalNoise(0), NoisePart, "sd = 0; want a number above 0"},
		{"sd of no number", nil, nil, normalNoise(math.NaN()), NoisePart, "sd = NaN"},
		{"sd beyond all bounds", nil, nil, normalNoise(1e200), NoisePart, "noise variance"},
		{"negative variance", nil, nil, &Noise{Law: &NormalNoise{}, Variance: number(-1)}, NoisePart, "variance = -1"},
		{"r2 of 1", nil, nil, &Noise{Law: &NormalNoise{}, R2: number(1)}, NoisePart, "r2 = 1; want a number above 0 and below 1"},
		{"unit root", nil, nil, ar1(1), NoisePart, "ar1 = 1"},
		{"explosive errors", nil, nil, ar1(-1.5), NoisePart, "ar1 = -1.5; want a number above -1 and below 1"},
		{"infinite variance", nil, nil, noise(&StudentNoise{Nu: 2}), NoisePart, "nu = 2"},
		{"fraction", nil, nil, noise(&ContaminatedNoise{Fraction: 1.1, Ratio: 3}), NoisePart, "fraction = 1.1"},
		{"ratio", nil, nil, noise(&ContaminatedNoise{Fraction: 0.1, Ratio: 0.5}), NoisePart, "ratio = 0.5"},
		{"shape", nil, nil, noise(&SkewedNoise{}), NoisePart, "shape = 0"},
		{"negative scale", nil, nil, scale("x - 0.5"), NoisePart, "nowhere negative"},
		{"scale negative between probes", nil, nil, scale("abs(x - 1228.5/4096) - 1e-4"), NoisePart, "nowhere negative"},
		{"zero scale", nil, nil, scale("0*x"), NoisePart, "not zero throughout"},
		{"infinite scale", nil, nil, scale("1/x"), NoisePart, "+inf at x = 0"},
		{"scale of no number", nil, nil, scale("sqrt(x - 0.5)"), NoisePart, "not a number at x = 0"},
		{"residuals that do not vary", nil, nil, noise(&FileNoise{Column{Values: []float64{1, 1}}}), NoisePart, "two different"},
		{"no residuals", nil, nil, noise(&FileNoise{}), NoisePart, "two different"},
		{"residuals of no number", nil, nil, noise(&FileNoise{Column{Values: []float64{1, math.NaN()}}}), NoisePart, "two different"},

		{"gap outside", nil, law(&GapDesign{From: 0.5, To: 2}), nil, DesignPart, "a gap inside the domain"},
		{"gap backwards", nil, law(&GapDesign{From: 0.5, To: 0.2}), nil, DesignPart, "to = 0.2; want a number above from = 0.5"},
		{"all of a gap", nil, law(&GapDesign{From: 0.2, To: 0.5, Left: number(1)}), nil, DesignPart, "left = 1"},
		{"normal elsewhere", nil, law(&NormalDesign{Mean: 90, SD: 1}), nil, DesignPart, "a millionth"},
		{"normal of no width", nil, law(&NormalDesign{Mean: 0.5}), nil, DesignPart, "sd = 0"},
		{"beta", nil, law(&BetaDesign{A: 1}), nil, DesignPart, "b = 0; want a number at least 0.05 and at most 1000"},
		{"resolution too fine", nil, &Design{Law: &UniformDesign{}, Resolution: 1e-12}, nil, DesignPart, "resolution = 1e-12"},
		{"resolution too coarse", nil, &Design{Law: &UniformDesign{}, Resolution: 3}, nil, DesignPart, "resolution = 3"},
		{"negative resolution", nil, &Design{Law: &UniformDesign{}, Resolution: -1}, nil, DesignPart, "resolution = -1"},
		{"no values", nil, law(file()), nil, DesignPart, "at least one value"},
		{"values outside", nil, law(file(0.5, 2)), nil, DesignPart, "value 2 is 2"},
		{"values of no number", nil, law(resampled(math.NaN())), nil, DesignPart, "value 1 is NaN"},
		{"other n than the file", nil, law(file(0.2)), nil, DesignPart, "n = 1, the number of values in the file, not n = 10"},

		{"pole at a value", pole, law(resampled(0.1, 0.3)), nil, TruthPart, "x = 0.3"},
		{"pole on the lattice", curve(t, "1/(x - 3/10*1)", 0, 1), &Design{Law: &UniformDesign{}, Resolution: 0.3}, nil, TruthPart, "x = 0.3"},
	}
}

func TestImpossibleCellsAreRefused(t *testing.T) {
	for _, c := range refusals(t) {
		if c.truth == nil {
			c.truth = curve(t, "x", 0, 1)
		}
		if c.design == nil {
			c.design = &Design{Law: &UniformDesign{}, Redraw: true}
		}
		if c.noise == nil {
			c.noise = normalNoise(1)
		}
		for range 2 { // what is known from the first time must not hide the fault
			_, err := NewCell(c.truth, c.design, c.noise, 10, 100)
			var fault *CellError
			if !errors.As(err, &fault) || fault.Part != c.part || !strings.Contains(err.Error(), c.says) {
				t.Errorf("%s: %v; want a fault of the %s that says %q", c.name, err, c.part, c.says)
			}
		}
	}
}

func TestCurvesThatAreNotFiniteAreRefused(t *testing.T) {
	for f, says := range map[string]string{
		"1/x": "+inf at x = 0", "log(x)": "-inf at x = 0", "sqrt(x - 1)": "not a number at x = 0", "1/(1 - x)": "+inf at x = 1", "exp(1000*x)": "+inf",
	} {
		truth, err := NewTruth(expression(t, f), 0, 1)
		if truth != nil || err == nil || !strings.Contains(err.Error(), says) {
			t.Errorf("%s on [0, 1]: %v, want it to say %q", f, err, says)
		}
	}
	for _, domain := range [][2]float64{{1, 1}, {2, 1}, {math.NaN(), 1}, {0, math.Inf(1)}, {-math.MaxFloat64, math.MaxFloat64}} {
		if _, err := NewTruth(expression(t, "x"), domain[0], domain[1]); err == nil {
			t.Errorf("the domain %v is accepted", domain)
		}
	}
}
