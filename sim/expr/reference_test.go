package expr

import (
	"encoding/json"
	"math"
	"os"
	"strconv"
	"testing"
)

// reference is what testdata/sim/make.py computes with mpmath in 40 digits, from the
// functions of mathematics and the printed formulas of the published functions.
type reference struct {
	Values []struct {
		F     string
		X     []float64
		Value []string
	}
	Sine struct{ Coefficients []float64 }
}

func readReference(t *testing.T) (r reference) {
	t.Helper()
	src, err := os.ReadFile("../../testdata/sim/reference.json")
	if err == nil {
		err = json.Unmarshal(src, &r)
	}
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// A tolerance is in units of 2⁻⁵² of the value or, for functions whose terms cancel,
// of their largest term where that is more. An argument has half a unit itself, and
// what multiplies a change of the argument multiplies that.
type tolerance struct{ units, largest float64 }

var tolerances = map[string]tolerance{
	"exp(x)":    {1, 0}, // half a unit for the last operation, less than half for those before
	"sin(x)":    {1, 0},
	"cos(x)":    {1, 0},
	"tanh(x)":   {2, 0},
	"phi(x)":    {40, 0},  // the exponent is down to −40
	"Phi(x)":    {80, 0},  // likewise, twice: x/√2 is squared within erfc
	"blocks":    {16, 5},  // eleven terms
	"bumps":     {64, 5},  // at a peak, half a unit of x is worth 800 times as much
	"heavisine": {16, 4},  // the angle 4πx is up to 13
	"doppler":   {140, 1}, // the angle is up to 132
	"1.5*phi((x - 0.35)/0.15) - phi((x - 0.8)/0.04)":                        {16, 1},
	"sqrt(x*(1 - x))*sin(2*pi*(1 + 2^((9 - 4*3)/5))/(x + 2^((9 - 4*3)/5)))": {16, 1},
}

func TestFunctionsAgreeWithHighPrecision(t *testing.T) {
	for _, row := range readReference(t).Values {
		limit, ok := tolerances[row.F]
		if !ok {
			t.Errorf("no tolerance for %s", row.F)
		}
		e := compile(t, row.F)
		worst, where := 0.0, 0.0
		for i, x := range row.X {
			want, err := strconv.ParseFloat(row.Value[i], 64)
			if err != nil && want != 0 { // what underflows is 0, and says so
				t.Fatal(err)
			}
			size := max(math.Abs(want), limit.largest, 0x1p-1022)
			if d := math.Abs(e.At(x)-want) / size / 0x1p-52; d > worst {
				worst, where = d, x
			}
		}
		t.Logf("%s: within %.2f units", row.F, worst)
		if worst > limit.units {
			t.Errorf("%s: off by %.2f units at %v, limit %g", row.F, worst, where, limit.units)
		}
	}
}

func TestSineHasTheCoefficientsWorkedOut(t *testing.T) {
	for i, want := range readReference(t).Sine.Coefficients {
		if got := [...]float64{p0, p1, p2, p3, p4, p5, p6, p7}[i]; got != want {
			t.Errorf("p%d = %v, worked out %v", i, got, want)
		}
	}
}

// Between jumps blocks is a sum of heights, by hand from the printed table.
func TestBlocksBetweenItsJumps(t *testing.T) {
	e := compile(t, "blocks")
	for x, want := range map[float64]float64{
		0.05: 0, 0.11: 4, 0.14: -1, 0.2: 2, 0.24: -2, 0.3: 3, 0.42: -1.2, 0.5: 0.9, 0.7: 5.2, 0.77: 2.1, 0.8: 4.2, 0.9: 0,
	} {
		if got := e.At(x); math.Abs(got-want) > 1e-14 {
			t.Errorf("blocks(%g) = %v, want %v", x, got, want)
		}
	}
}

func TestFunctionsAtTheEndsOfTheirRange(t *testing.T) {
	inf, none := math.Inf(1), math.NaN()
	for _, c := range []struct {
		f       string
		x, want float64
	}{
		{"exp(x)", 710, inf}, {"exp(x)", -746, 0}, {"exp(x)", inf, inf}, {"exp(x)", -inf, 0}, {"exp(x)", none, none},
		{"sin(x)", inf, none}, {"cos(x)", none, none}, {"cos(x)", 0, 1}, {"sin(x)", 1e300, math.Sin(1e300)},
		{"sin(x)", 0, 0}, {"log(x)", 0, -inf}, {"sqrt(x)", -1, none}, {"tanh(x)", 1e9, 1}, {"Phi(x)", 40, 1},
		{"doppler(x)", 0, 0}, {"doppler(x)", 1, 0}, {"doppler(x)", -3, 0},
	} {
		if got := compile(t, c.f).At(c.x); got != c.want && !(math.IsNaN(got) && math.IsNaN(c.want)) {
			t.Errorf("%s at %v = %v, want %v", c.f, c.x, got, c.want)
		}
	}
}
