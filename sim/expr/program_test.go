package expr

import (
	"fmt"
	"math"
	"testing"
)

// calls counts the instructions that work one operation.
func calls(e *Expression, name string) int {
	n := 0
	for _, in := range e.code {
		if operations[in.op].Name == name {
			n++
		}
	}
	return n
}

func TestCommonPartsAreWorkedOnce(t *testing.T) {
	e := compile(t, "exp(-2*x)*sin(x) + exp(-2*x)*cos(x) + exp((-2)*x) + exp(-2*x + pi) + exp(-2*x + 3.141592653589793)")
	if n := calls(e, "exp"); n != 2 { // pi is its number
		t.Errorf("%d calls of exp, want 2", n)
	}
}

func TestConstantsAreFolded(t *testing.T) {
	for text, code := range map[string]int{
		"2*pi*x": 1, "sin(pi/6) + 1": 0, "2^3^2*x": 1, "x*(1 < 2 ? 3 : 4)": 1, "doppler(0.3)": 0, "1/0": 0,
	} {
		if e := compile(t, text); len(e.code) != code {
			t.Errorf("%q takes %d instructions, want %d", text, len(e.code), code)
		}
	}
}

func TestRegistersAreUsedAgain(t *testing.T) {
	text := "sin(x)"
	for range 60 {
		text = "sin(1 + " + text + ")"
	}
	if e := compile(t, text); e.registers > 1 {
		t.Errorf("a chain takes %d registers, want 1", e.registers)
	}
}

// Equal numbers need not be equal operands: 1/0 and 1/−0 differ.
func TestZerosKeepTheirSign(t *testing.T) {
	if v := compile(t, "x/0 + x/-0").At(1); !math.IsNaN(v) {
		t.Errorf("1/0 + 1/-0 = %v, want no number", v)
	}
}

// A value may depend on its x alone, not on its place, on its neighbours, on where
// the result goes or on what the scratch served before.
func TestValuesDoNotDependOnTheirPlace(t *testing.T) {
	other := compile(t, "cos(x) - 5*x + phi(x)")
	for _, text := range []string{
		"x < 0.5 ? sin(9*x) : exp(x)/(1 + x^3)", "3*exp(-2*x) + sin(2*pi*x)", "x", "4", "doppler(x) + heavisine(x)",
		"x^2 + x^7 + x^0.3", "(x + 1)*(x + 2) - (x + 1)/(x + 2)", "max(x, 1 - x)^x",
	} {
		e := compile(t, text)
		x := make([]float64, 1000)
		for i := range x {
			x[i] = float64(i) / 999
		}
		whole, parts, inPlace := make([]float64, len(x)), make([]float64, len(x)), append([]float64(nil), x...)
		var s Scratch
		e.Eval(whole, x, &s)
		other.Eval(parts, x, &s)
		for from, n := 0, 1; from < len(x); from, n = from+n, n*3%97+1 {
			to := min(len(x), from+n)
			e.Eval(parts[from:to], x[from:to], &s)
		}
		e.Eval(inPlace, inPlace, &s)
		for i := range x {
			if one := e.At(x[i]); one != whole[i] || parts[i] != whole[i] || inPlace[i] != whole[i] {
				t.Fatalf("%q at %g: %v alone, %v in a vector, %v in parts, %v in place", text, x[i], one, whole[i], parts[i], inPlace[i])
			}
		}
	}
}

func TestEvalDoesNotAllocate(t *testing.T) {
	e := compile(t, "3*exp(-2*x) + sin(2*pi*x) + phi((x-0.3)/0.1) + doppler(x) + heavisine(x)")
	x, dst := make([]float64, 1000), make([]float64, 1000)
	var s Scratch
	if n := testing.AllocsPerRun(10, func() { e.Eval(dst, x, &s) }); n != 0 {
		t.Errorf("%v allocations", n)
	}
}

func BenchmarkEval(b *testing.B) {
	for _, text := range []string{
		"1 - 0.8*x", "3*exp(-2*x) + sin(2*pi*x)", "1 + x^2 - x^3", "phi((x - 0.3)/0.1)", "x < 0.5 ? x : 1 - x",
		"log(1 + x)", "blocks", "bumps", "heavisine", "doppler",
	} {
		b.Run(fmt.Sprintf("f=%s/n=10000", text), func(b *testing.B) {
			e := compile(b, text)
			x, dst := make([]float64, 10000), make([]float64, 10000)
			for i := range x {
				x[i] = float64(i) / 10000
			}
			var s Scratch
			b.ReportAllocs()
			for b.Loop() {
				e.Eval(dst, x, &s)
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(len(x)), "ns/point")
		})
	}
}
