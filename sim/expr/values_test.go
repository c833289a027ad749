package expr

import (
	"errors"
	"math"
	"testing"
)

// compile compiles what must compile.
func compile(t testing.TB, text string) *Expression {
	t.Helper()
	e, err := Compile(text)
	if err != nil {
		t.Fatalf("Compile(%q): %v", text, err)
	}
	return e
}

func TestValuesFollowTheRulesOfAlgebra(t *testing.T) {
	for _, c := range []struct {
		text    string
		x, want float64
	}{
		{"1 - 2 - 3", 0, -4},
		{"8 / 4 / 2", 0, 1},
		{"8 / (4 / 2)", 0, 4},
		{"2^3^2", 0, 512},
		{"(2^3)^2", 0, 64},
		{"-x^2", 3, -9},
		{"(-x)^2", 3, 9},
		{"2^-1", 0, 0.5},
		{"2^-x^2", 2, 1.0 / 16},
		{"x^-2*8", 2, 2},
		{"--x", 3, 3},
		{"-+-+x", 3, 3},
		{"+x", 3, 3},
		{"-2*x", 3, -6},
		{"4*-x", 3, -12},
		{"4 - -x", 3, 7},
		{"2 + 3*x^2", 2, 14},
		{"2*3 + 4*5", 0, 26},
		{"1 + 2 < x - 1", 5, 1},
		{"-1 < x ? 1 + 1 : 2*2", 0, 2},
		{"x < 1", 0.5, 1}, {"x < 1", 1, 0}, {"x <= 1", 1, 1}, {"x > 1", 2, 1}, {"x >= 3", 2, 0}, {"x == 2", 2, 1}, {"x != 2", 2, 0},
		{"(0 < x) < x", 2, 1},
		{"x < 1 ? 10 : x < 2 ? 20 : 30", 0, 10},
		{"x < 1 ? 10 : x < 2 ? 20 : 30", 1.5, 20},
		{"x < 1 ? 10 : x < 2 ? 20 : 30", 5, 30},
		{"x > 1 ? x > 2 ? 3 : 2 : 1", 1.5, 2},
		{"2*(x > 1) + (x > 2)", 3, 3},
		{"min(x, 2) + max(x, 2)", 5, 7},
		{"abs(-x) + sign(-x) + sign(0)", 4, 3},
		{"sqrt(x) + log(x) + tan(x) + cos(x) + tanh(x)", 2, math.Sqrt2 + math.Log(2) + math.Tan(2) + math.Cos(2) + math.Tanh(2)},
		{"pow(x, 2.5)", 2, math.Pow(2, 2.5)},
		{"pow(2, 3) + pow(x, 3)", 2, 16},
		{"x^0.5", 9, 3}, {"x^0", 0, 1}, {"x^1", -7, -7},
		{"x^2", -7, 49}, {"x^3", -7, -343}, {"x^16", 2, 65536}, {"x^17", 2, 131072}, {"x^13", 1.1, math.Pow(1.1, 13)},
		{"sin(x)*sin(x) + cos(x)*cos(x) + exp(x)*exp(x)", 0.7, 1 + math.Exp(1.4)}, // operands used twice
		{"phi(0)", 0, 1 / math.Sqrt(2*math.Pi)},
		{"Phi(x)", 1.959963984540054, 0.975},
		{"1e2 + 1.5e-1 + .5 + 2.", 0, 102.65},
		{"e + pi", 0, math.E + math.Pi},
		{"2*e", 0, 2 * math.E},
		{"x", 7, 7}, {"7", 3, 7},
		{"doppler", 0.5, 0.5 * math.Sin(2*math.Pi*1.05/0.55)},
		{" doppler ", 0.5, 0.5 * math.Sin(2*math.Pi*1.05/0.55)},
		{"2*doppler(x)", 0.5, math.Sin(2 * math.Pi * 1.05 / 0.55)},
		{"doppler(2*x)", 0.25, 0.5 * math.Sin(2*math.Pi*1.05/0.55)},
	} {
		if got := compile(t, c.text).At(c.x); math.Abs(got-c.want) > 1e-14*max(1, math.Abs(c.want)) {
			t.Errorf("%q at %g = %.17g, want %.17g", c.text, c.x, got, c.want)
		}
	}
}

func TestFaultsHaveTheirPlace(t *testing.T) {
	for _, c := range []struct {
		text string
		at   int
		near string
	}{
		{"", 0, ""}, {"1 +", 3, ""}, {"2 x", 2, ""}, {"coss(x)", 0, "cos"}, {"1 + dopler(x)", 4, "doppler"},
		{"sin x", 4, ""}, {"sin", 3, ""}, {"min(x)", 5, ""}, {"min(x, 1, 2)", 8, ""}, {"(x", 2, ""}, {"x)", 1, ""},
		{"x ? 1", 5, ""}, {"1 < x < 2", 6, ""}, {"x = 2", 2, ""}, {"2 $ 3", 2, ""}, {"x + é", 4, ""},
		{"1e999", 0, ""}, {"2e", 1, ""}, {"y", 0, ""}, {"..", 0, ""}, {"1 + * 2", 4, ""}, {"x ^ / 2", 4, ""},
		{"()", 1, ""}, {"doppler + 1", 8, ""}, {"x(2)", 1, ""}, {"Pi", 0, "pi"}, {"SIN(x)", 0, "sin"}, {"?", 0, ""}, {"x\x00", 1, ""},
	} {
		_, err := Compile(c.text)
		var fault *SyntaxError
		if !errors.As(err, &fault) {
			t.Errorf("Compile(%q) = %v, want a SyntaxError", c.text, err)
			continue
		}
		if fault.At != c.at || fault.Offset() != c.at || fault.Near != c.near || fault.Want == "" || fault.Found == "" {
			t.Errorf("Compile(%q): at %d near %q (%v), want at %d near %q", c.text, fault.At, fault.Near, fault, c.at, c.near)
		}
	}
}
