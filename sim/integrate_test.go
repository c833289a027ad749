package sim

import (
	"math"
	"strings"
	"testing"
)

// vector makes an integrand of a function of one number.
func vector(f func(x float64) float64) integrand {
	return func(dst, x []float64) {
		for i, v := range x {
			dst[i] = f(v)
		}
	}
}

func TestIntegralsHaveTheirClosedForms(t *testing.T) {
	for _, c := range []struct {
		name   string
		f      func(float64) float64
		lo, hi float64
		want   float64
	}{
		{"cubic", func(x float64) float64 { return x * x * x }, -1, 3, 20},
		{"exp", math.Exp, 0, 1, math.E - 1},
		{"root", math.Sqrt, 0, 1, 2.0 / 3},
		{"logarithm", math.Log, 1, math.E, 1},
		{"narrow peak", func(x float64) float64 { return 1e-3 / (1e-6 + (x-0.3)*(x-0.3)) }, 0, 1, math.Atan(700) + math.Atan(300)},
		{"steps", func(x float64) float64 { return math.Floor(7 * x) }, 0, 1, 3},
		{"far from 0", func(x float64) float64 { return x }, 1e6, 1e6 + 1, 1e6 + 0.5},
		{"nothing", func(float64) float64 { return 0 }, 0, 1, 0},
	} {
		got, err := integrate(vector(c.f), c.lo, c.hi, exactly)
		if err != nil || math.Abs(got-c.want) > 1e-13*math.Abs(c.want) {
			t.Errorf("%s: %.16g, want %.16g (%v)", c.name, got, c.want, err)
		}
	}
}

func TestIntegralsThatCannotBeSay(t *testing.T) {
	for want, f := range map[string]func(float64) float64{
		"not finite at x =": func(x float64) float64 { return math.Log(x - 0.5) },
		"too rough":         func(x float64) float64 { return x*1e9 - math.Floor(x*1e9) },
	} {
		if got, err := integrate(vector(f), 0, 1, exactly); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("want an error of %q; got %v, %v", want, got, err)
		}
	}
}

// Wherever a jump lies, it must be seen: 2,000 places, some of them within a
// thousandth of the end of a panel.
func TestJumpsAreSeenWhereverTheyLie(t *testing.T) {
	for k := range 2000 {
		at := (float64(k) + 0.37) / 2000
		if k%4 == 0 {
			at = float64(k/4)/panels + 1e-3/panels*float64(k%7)/7
		}
		got, err := integrate(vector(func(x float64) float64 {
			if x > at {
				return 1
			}
			return 0
		}), 0, 1, exactly)
		if err != nil || math.Abs(got-(1-at)) > 1e-14 {
			t.Errorf("jump at %v: off by %.1e (%v)", at, got-(1-at), err)
		}
	}
}

// A curve may have no values beside its domain, and rounding must not ask for any.
func TestPointsStayWithinTheInterval(t *testing.T) {
	for k := range 300 {
		lo := math.Sqrt(float64(k)) / 7
		hi := lo + math.Exp(float64(k%37)-30)
		if _, err := integrate(vector(func(x float64) float64 {
			if x < lo || x > hi {
				return math.NaN()
			}
			return 1
		}), lo, hi, exactly); err != nil {
			t.Errorf("on [%v, %v]: %v", lo, hi, err)
		}
	}
}
