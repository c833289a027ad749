package expr

import (
	"errors"
	"math"
	"testing"
)

func TestValues(t *testing.T) {
	for _, c := range []struct {
		text    string
		x, want float64
	}{
		{"3*exp(-2*x) + sin(2*pi*x)", 0.3, 3*math.Exp(-0.6) + math.Sin(2*math.Pi*0.3)},
		{"1 - 2 - 3", 0, -4},
		{"8 / 4 / 2", 0, 1},
		{"2^3^2", 0, 512},
		{"-x^2", 3, -9},
		{"(-x)^2", 3, 9},
		{"2^-1", 0, 0.5},
		{"--x", 3, 3},
		{"+x", 3, 3},
		{"-2*x", 3, -6},
		{"2 + 3*x^2", 2, 14},
		{"x^0.5", 9, 3},
		{"x^13", 1.1, math.Pow(1.1, 13)},
		{"x^17", 1.1, math.Pow(1.1, 17)},
		{"x < 1", 0.5, 1}, {"x < 1", 1, 0}, {"x <= 1", 1, 1}, {"x > 1", 2, 1}, {"x >= 3", 2, 0}, {"x == 2", 2, 1}, {"x != 2", 2, 0},
		{"x < 1 ? 10 : x < 2 ? 20 : 30", 0, 10},
		{"x < 1 ? 10 : x < 2 ? 20 : 30", 1.5, 20},
		{"x < 1 ? 10 : x < 2 ? 20 : 30", 5, 30},
		{"2*(x > 1) + (x > 2)", 3, 3},
		{"min(x, 2) + max(x, 2)", 5, 7},
		{"abs(-x) + sign(-x) + sign(0)", 4, 3},
		{"sqrt(x) + log(x) + tan(x) + cos(x) + tanh(x)", 2, math.Sqrt2 + math.Log(2) + math.Tan(2) + math.Cos(2) + math.Tanh(2)},
		{"pow(x, 2.5)", 2, math.Pow(2, 2.5)},
		{"phi(0)", 0, 1 / math.Sqrt(2*math.Pi)},
		{"Phi(x)", 1.959963984540054, 0.975},
		{"1e2 + 1.5e-1 + .5", 0, 100.65},
		{"e", 0, math.E},
		{"doppler", 0.5, 0.5 * math.Sin(2*math.Pi*1.05/0.55)},
		{"2*doppler(x)", 0.5, math.Sin(2 * math.Pi * 1.05 / 0.55)},
	} {
		e, err := Compile(c.text)
		if err != nil {
			t.Errorf("Compile(%q): %v", c.text, err)
			continue
		}
		if got := e.At(c.x); math.Abs(got-c.want) > 1e-14*max(1, math.Abs(c.want)) {
			t.Errorf("%q at %g = %.17g, want %.17g", c.text, c.x, got, c.want)
		}
	}
}

// Values read off the printed formulas of Donoho & Johnstone 1994, Biometrika
// 81:425, table 1, by hand: between jumps blocks is a sum of heights; at a peak
// bumps is its height and the tails of the others; heavisine at its zeros of sine.
func TestPublishedFunctions(t *testing.T) {
	for _, c := range []struct {
		name    string
		x, want float64
	}{
		{"blocks", 0.05, 0}, {"blocks", 0.11, 4}, {"blocks", 0.14, -1}, {"blocks", 0.2, 2},
		{"blocks", 0.24, -2}, {"blocks", 0.3, 3}, {"blocks", 0.42, -1.2}, {"blocks", 0.5, 0.9},
		{"blocks", 0.7, 5.2}, {"blocks", 0.77, 2.1}, {"blocks", 0.8, 4.2}, {"blocks", 0.9, 0},
		{"heavisine", 0, 1 - 1}, {"heavisine", 0.5, -1 - 1}, {"heavisine", 0.75, -1 + 1},
		{"doppler", 0, 0}, {"doppler", 1, 0},
	} {
		e, err := Compile(c.name)
		if err != nil {
			t.Fatal(err)
		}
		if got := e.At(c.x); math.Abs(got-c.want) > 1e-13 {
			t.Errorf("%s(%g) = %v, want %v", c.name, c.x, got, c.want)
		}
	}
	e, _ := Compile("bumps(x)")
	if got := e.At(0.4); got < 4.2 || got > 4.25 {
		t.Errorf("bumps(0.4) = %v, want its height 4.2 and a little", got)
	}
}

func TestFaultsHaveTheirPlace(t *testing.T) {
	for _, c := range []struct {
		text string
		at   int
		near string
	}{
		{"", 0, ""}, {"1 +", 3, ""}, {"2 x", 2, ""}, {"coss(x)", 0, "cos"}, {"1 + dopler(x)", 4, "doppler"},
		{"sin x", 4, ""}, {"min(x)", 5, ""}, {"min(x, 1, 2)", 8, ""}, {"(x", 2, ""}, {"x)", 1, ""},
		{"x ? 1", 5, ""}, {"1 < x < 2", 6, ""}, {"x = 2", 2, ""}, {"2 $ 3", 2, ""}, {"x + é", 4, ""},
		{"1e999", 0, ""}, {"2e", 1, ""}, {"y", 0, ""}, {"..", 0, ""},
	} {
		_, err := Compile(c.text)
		var fault *SyntaxError
		if !errors.As(err, &fault) {
			t.Errorf("Compile(%q) = %v, want a SyntaxError", c.text, err)
			continue
		}
		if fault.At != c.at || fault.Near != c.near || fault.Want == "" {
			t.Errorf("Compile(%q): at %d near %q (%v), want at %d near %q", c.text, fault.At, fault.Near, fault, c.at, c.near)
		}
	}
}

func TestLimitsAreRefusals(t *testing.T) {
	deep, long, wide := "", "", "1"
	for range 200 {
		deep += "("
	}
	for range 5000 {
		long += " "
	}
	for range 1200 {
		wide += "+x"
	}
	wide2 := "0"
	for i := range 400 {
		wide2 += "+" + string(rune('1'+i%9)) + "*x/" + string(rune('1'+i%7))
	}
	for name, text := range map[string]string{"deep": deep, "long": long + "x", "signs": deep[:0] + dashes(300) + "x"} {
		if _, err := Compile(text); err == nil {
			t.Errorf("%s expression is accepted", name)
		}
	}
	for name, text := range map[string]string{"wide": wide, "wide2": wide2} {
		e, err := Compile(text)
		if err == nil && len(e.code) > maxNodes {
			t.Errorf("%s expression has %d operations", name, len(e.code))
		}
	}
}

func dashes(n int) string {
	s := ""
	for range n {
		s += "-"
	}
	return s
}

func TestCommonPartsAreWorkedOnce(t *testing.T) {
	e, err := Compile("exp(-2*x)*sin(x) + exp(-2*x)*cos(x) + exp(2*-x*1)")
	if err != nil {
		t.Fatal(err)
	}
	calls := 0
	for _, in := range e.code {
		if operations[in.op].Name == "exp" {
			calls++
		}
	}
	if calls != 2 { // 2*-x*1 is another product, not recognised as the same
		t.Errorf("%d calls of exp, want 2", calls)
	}
}

func TestCanonicalTextMakesTheSameProgram(t *testing.T) {
	for _, text := range []string{
		"3*exp(-2*x)+sin(2*pi*x)", "-x^2", "x<1?-1:x^-2", "min(x,2)-(1-(2-x))", "doppler", "(x>1)*2^x^2", "1/0", "0/0*x",
	} {
		a, err := Compile(text)
		if err != nil {
			t.Fatal(err)
		}
		b, err := Compile(a.String())
		if err != nil {
			t.Fatalf("%q -> %q: %v", text, a, err)
		}
		if a.String() != b.String() || len(a.code) != len(b.code) {
			t.Errorf("%q -> %q -> %q", text, a, b)
		}
	}
}

// A value may depend on its x alone, not on its place or on its neighbours.
func TestValuesDoNotDependOnTheirPlace(t *testing.T) {
	e, err := Compile("x < 0.5 ? sin(9*x) : exp(x)/(1 + x^3)")
	if err != nil {
		t.Fatal(err)
	}
	x := make([]float64, 1000)
	for i := range x {
		x[i] = float64(i) / 999
	}
	whole := make([]float64, len(x))
	var s Scratch
	e.Eval(whole, x, &s)
	for i := range x {
		if one := e.At(x[i]); one != whole[i] {
			t.Fatalf("at %g: %v alone, %v in a vector", x[i], one, whole[i])
		}
	}
}

func TestEvalDoesNotAllocate(t *testing.T) {
	e, err := Compile("3*exp(-2*x) + sin(2*pi*x) + phi((x-0.3)/0.1)")
	if err != nil {
		t.Fatal(err)
	}
	x, dst := make([]float64, 1000), make([]float64, 1000)
	var s Scratch
	if n := testing.AllocsPerRun(10, func() { e.Eval(dst, x, &s) }); n != 0 {
		t.Errorf("%v allocations", n)
	}
}

func FuzzCompile(f *testing.F) {
	for _, s := range []string{"3*exp(-2*x) + sin(2*pi*x)", "x<1?2:3", "-x^-2^x", "min(x,pow(x,2))", "((((", "1e5e", "doppler"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		e, err := Compile(text)
		if err != nil {
			var fault *SyntaxError
			if !errors.As(err, &fault) || fault.At < 0 || fault.At > len(text) {
				t.Fatalf("Compile(%q) = %v", text, err)
			}
			return
		}
		again, err := Compile(e.String())
		if err != nil {
			if len(e.String()) > maxText || len(text) > 1000 {
				return // parentheses added to a text near the limits may pass them
			}
			t.Fatalf("Compile(%q) of %q: %v", e.String(), text, err)
		}
		for _, x := range []float64{-1.5, 0, 0.3, 2} {
			a, b := e.At(x), again.At(x)
			if a != b && !(math.IsNaN(a) && math.IsNaN(b)) {
				t.Fatalf("%q at %g: %v, canonical %q: %v", text, x, a, e.String(), b)
			}
		}
	})
}

func BenchmarkEval(b *testing.B) {
	for _, text := range []string{"1 - 0.8*x", "3*exp(-2*x) + sin(2*pi*x)", "doppler", "bumps"} {
		e, err := Compile(text)
		if err != nil {
			b.Fatal(err)
		}
		x, dst := make([]float64, 10000), make([]float64, 10000)
		for i := range x {
			x[i] = float64(i) / 10000
		}
		b.Run(text, func(b *testing.B) {
			var s Scratch
			b.ReportAllocs()
			for b.Loop() {
				e.Eval(dst, x, &s)
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(len(x)), "ns/point")
		})
	}
}
