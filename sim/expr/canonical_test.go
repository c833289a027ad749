package expr

import (
	"errors"
	"math"
	"reflect"
	"strings"
	"testing"
)

func TestCanonicalTextIsShortAndPlain(t *testing.T) {
	for text, want := range map[string]string{
		"3*exp(-2*x)+sin(2*pi*x)": "3*exp(-2*x) + sin(2*pi*x)",
		"((x))":                   "x",
		"(1 + x) + 2":             "1 + x + 2",
		"1 + (x + 2)":             "1 + (x + 2)",
		"1-(x-2)":                 "1 - (x - 2)",
		"(2*x)*3/x":               "2*x*3/x",
		"2*(x*(3/x))":             "2*(x*(3/x))",
		"x^(2^3)":                 "x^2^3",
		"(x^2)^3":                 "(x^2)^3",
		"x^(-2)":                  "x^-2",
		"(-x)^2":                  "(-x)^2",
		"-(x^2)":                  "-x^2",
		"-(x*2)":                  "-(x*2)",
		"(-x)*2":                  "-x*2",
		"2*(-x)":                  "2*-x",
		"x-(-2)":                  "x - -2",
		"-(-x)":                   "--x",
		"+x":                      "x",
		"(x<1)<2":                 "(x < 1) < 2",
		"(x<1)?(x):(2?3:4)":       "x < 1 ? x : 2 ? 3 : 4",
		"(x?1:2)?3:4":             "(x ? 1 : 2) ? 3 : 4",
		"(x?1:2)+1":               "(x ? 1 : 2) + 1",
		"x?(1?2:3):4":             "x ? 1 ? 2 : 3 : 4",
		"1.50e0+.5+1e3":           "1.5 + 0.5 + 1000",
		"min( x,( 2 ) )":          "min(x, 2)",
		"doppler":                 "doppler(x)",
		"pi":                      "pi",
	} {
		if got := compile(t, text).String(); got != want {
			t.Errorf("%q is %q, want %q", text, got, want)
		}
	}
}

// sameProgram compares what two expressions do, numbers by their bits.
func sameProgram(a, b *Expression) bool {
	for i, v := range a.constants {
		if i >= len(b.constants) || math.Float64bits(v) != math.Float64bits(b.constants[i]) {
			return false
		}
	}
	return len(a.constants) == len(b.constants) && a.result == b.result && a.registers == b.registers && reflect.DeepEqual(a.code, b.code)
}

func TestCanonicalTextMakesTheSameProgram(t *testing.T) {
	deep := strings.Repeat("(1 - ", maxDepth) + "x" + strings.Repeat(")", maxDepth)
	for _, text := range []string{
		"3*exp(-2*x)+sin(2*pi*x)", "-x^2", "x<1?-1:x^-2", "min(x,2)-(1-(2-x))", "doppler", "(x>1)*2^x^2", "1/0", "0/0*x",
		"x/-0 + x/0", deep, strings.Repeat("1/3*x+", 165) + "x", strings.Repeat("-", 900) + "x",
	} {
		a := compile(t, text)
		if b := compile(t, a.String()); a.String() != b.String() || !sameProgram(a, b) {
			t.Errorf("%.40q -> %.40q -> %.40q", text, a, b)
		}
	}
}

func FuzzCompile(f *testing.F) {
	for _, s := range []string{"3*exp(-2*x) + sin(2*pi*x)", "x<1?2:3", "-x^-2^x", "min(x,pow(x,2))", "((((", "1e5e", "doppler", "x/-0+x/0"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		e, err := Compile(text)
		if err != nil {
			var fault *SyntaxError
			if !errors.As(err, &fault) || fault.At < 0 || fault.At > len(text) || fault.Found == "" || fault.Want == "" {
				t.Fatalf("Compile(%q) = %v", text, err)
			}
			return
		}
		again, err := Compile(e.String())
		if err != nil {
			t.Fatalf("Compile(%q), canonical for %q: %v", e, text, err)
		}
		if !sameProgram(e, again) || e.String() != again.String() {
			t.Fatalf("%q -> %q -> %q", text, e, again)
		}
		for _, x := range []float64{-1.5, 0, 0.3, 2, math.Inf(1), math.NaN()} {
			e.At(x)
		}
	})
}
