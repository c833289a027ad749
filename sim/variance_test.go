package sim

import (
	"encoding/json"
	"fmt"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"
)

// ratioOf1 makes a noise whose variance is that of the signal.
func ratioOf1() *Noise { return &Noise{Law: &NormalNoise{}, SignalToNoise: number(1)} }

// Closed forms: the variance of sin 2πx is 1/2; beta moments; jumps by hand; the mean
// of a few values.
func TestSignalVarianceIsExact(t *testing.T) {
	for _, c := range []struct {
		f      string
		design Design
		want   float64
		tol    float64
	}{
		{"sin(2*pi*x)", Design{Law: &UniformDesign{}}, 0.5, 1e-13},
		{"sin(2*pi*x)", Design{Law: &EvenDesign{}}, 0.5, 1e-13},
		{"sin(2000*pi*x)", Design{Law: &UniformDesign{}}, 0.5, 1e-12},
		{"x", Design{Law: &UniformDesign{}}, 1.0 / 12, 1e-13},
		{"x > 0.3", Design{Law: &UniformDesign{}}, 0.3 * 0.7, 1e-12},
		{"x > 1/3 ? 2 : 5", Design{Law: &UniformDesign{}}, 9 * 2.0 / 9, 1e-12},
		{"abs(x - 1/3)", Design{Law: &UniformDesign{}}, (1.0/27+8.0/27)/3 - math.Pow(1.0/18+4.0/18, 2), 1e-12},
		{"x", Design{Law: &BetaDesign{A: 0.3, B: 0.4}}, 0.3 * 0.4 / (0.49 * 1.7), 1e-12},
		{"x", Design{Law: &BetaDesign{A: 2.5, B: 1.5}}, 2.5 * 1.5 / (16 * 5), 1e-12},
		{"x", Design{Law: &BetaDesign{A: 1000, B: 1000}}, 0.25 / 2001, 1e-12},
		{"x", Design{Law: &BetaDesign{A: 0.05, B: 1000}}, 0.05 * 1000 / (1000.05 * 1000.05 * 1001.05), 1e-12},
		{"x^2", Design{Law: &BetaDesign{A: 0.5, B: 0.5}}, 35.0/128 - 9.0/64, 1e-12},
		{"x", Design{Law: &GapDesign{From: 0.25, To: 0.5, Left: number(0.5)}}, 0.5*(1.0/48+7.0/12) - 0.4375*0.4375, 1e-13},
		{"1e6 + x", Design{Law: &UniformDesign{}}, 1.0 / 12, 1e-9}, // x has ten digits left in it
		{"x", Design{Law: &FileDesign{Column: Column{Values: []float64{0, 1, 0, 1, 1}}, Resample: true}}, 0.24, 1e-15},
		{"x", Design{Law: &UniformDesign{}, Resolution: 0.5}, 0.125, 1e-14}, // ¼, ½, ¼ on 0, ½, 1
	} {
		cell, err := NewCell(curve(t, c.f, 0, 1), &c.design, ratioOf1(), 10, 10)
		if err != nil {
			t.Errorf("%s over %s: %v", c.f, c.design.describe(), err)
			continue
		}
		if got := cell.NoiseVariance; math.Abs(got-c.want) > c.tol*c.want {
			t.Errorf("variance of %s over %s = %.15g, want %.15g", c.f, c.design.describe(), got, c.want)
		}
	}
}

// lawOf makes a law of its name in the reference, such as "beta 0.3 0.4".
func lawOf(t *testing.T, text string) DesignLaw {
	t.Helper()
	words := strings.Fields(text)
	var v [2]float64
	for i, w := range words[1:] {
		v[i], _ = strconv.ParseFloat(w, 64)
	}
	switch words[0] {
	case "uniform":
		return &UniformDesign{}
	case "beta":
		return &BetaDesign{A: v[0], B: v[1]}
	case "normal":
		return &NormalDesign{Mean: v[0], SD: v[1]}
	}
	t.Fatalf("no law %q", text)
	return nil
}

// Means and variances of published curves over design laws, by tanh-sinh quadrature
// in 40 digits (testdata/sim/make.py). 1e-12 of the mean square is what integration
// promises.
func TestVariancesAgreeWithHighPrecision(t *testing.T) {
	src, err := os.ReadFile("../testdata/sim/reference.json")
	if err != nil {
		t.Fatal(err)
	}
	var reference struct {
		Variances []struct{ F, Law, Mean, Variance string }
	}
	if err := json.Unmarshal(src, &reference); err != nil {
		t.Fatal(err)
	}
	if len(reference.Variances) < 40 {
		t.Fatalf("%d references", len(reference.Variances))
	}
	worst := 0.0
	for _, r := range reference.Variances {
		cell := cellOf(t, curve(t, r.F, 0, 1), lawOf(t, r.Law), ratioOf1(), 10, 10)
		mean, _ := strconv.ParseFloat(r.Mean, 64)
		want, _ := strconv.ParseFloat(r.Variance, 64)
		d := math.Abs(cell.NoiseVariance-want) / (want + mean*mean)
		if d > 1e-12 {
			t.Errorf("variance of %s over %s = %.15g, want %.15g", r.F, r.Law, cell.NoiseVariance, want)
		}
		worst = max(worst, d)
	}
	t.Logf("within %.1e of the mean square", worst)
}

func TestNoiseVarianceIsExact(t *testing.T) {
	truth := curve(t, "sin(2*pi*x)", 0, 1)
	scaled := func(text string) *Noise {
		return &Noise{Law: &NormalNoise{}, SD: number(0.4), Scale: expression(t, text)}
	}
	for _, c := range []struct {
		name     string
		noise    *Noise
		variance float64
		sd       float64
	}{
		{"sd", normalNoise(0.4), 0.16, 0.4},
		{"variance", &Noise{Law: &NormalNoise{}, Variance: number(0.25)}, 0.25, 0.5},
		{"signal to noise", &Noise{Law: &LaplaceNoise{}, SignalToNoise: number(4)}, 0.125, math.Sqrt(0.125)},
		{"r2", &Noise{Law: &NormalNoise{}, R2: number(0.8)}, 0.125, math.Sqrt(0.125)},
		{"scaled sd", scaled("1 + x"), 0.16 * 7 / 3, 0.4},
		{"scale with a jump", scaled("x < 0.25 ? 2 : 1"), 0.16 * 1.75, 0.4},
		{"scale that is zero in part", scaled("x < 0.25 ? 2 : 0"), 0.16, 0.4},
		{"scaled signal to noise", &Noise{Law: &NormalNoise{}, SignalToNoise: number(4), Scale: expression(t, "1 + x")}, 0.125, math.Sqrt(0.125 * 3 / 7)},
	} {
		cell := cellOf(t, truth, &UniformDesign{}, c.noise, 10, 10)
		if math.Abs(cell.NoiseVariance-c.variance) > 1e-12*c.variance || math.Abs(cell.SD-c.sd) > 1e-12*c.sd {
			t.Errorf("%s: variance %.15g, want %.15g; sd %.15g, want %.15g", c.name, cell.NoiseVariance, c.variance, cell.SD, c.sd)
		}
	}
}

// Integrals are kept with the truth; each must be kept for its own law and scale.
func TestIntegralsAreKeptApart(t *testing.T) {
	truth := curve(t, "x", 0, 1)
	for range 2 {
		for _, c := range []struct {
			law  DesignLaw
			want float64
		}{
			{&UniformDesign{}, 1.0 / 12}, {&BetaDesign{A: 2, B: 2}, 1.0 / 20}, {&BetaDesign{A: 2, B: 1}, 1.0 / 18},
		} {
			if got := cellOf(t, truth, c.law, ratioOf1(), 10, 10).NoiseVariance; math.Abs(got-c.want) > 1e-12 {
				t.Errorf("signal over %s: %v, want %v", c.law.describe(), got, c.want)
			}
		}
		for scale, want := range map[string]float64{"x": 1.0 / 3, "2*x": 4.0 / 3, "sqrt(x)": 1.0 / 2} {
			noise := &Noise{Law: &NormalNoise{}, SD: number(1), Scale: expression(t, scale)}
			if got := cellOf(t, truth, &UniformDesign{}, noise, 10, 10).NoiseVariance; math.Abs(got-want) > 1e-12 {
				t.Errorf("scale %s: %v, want %v", scale, got, want)
			}
		}
	}
}

// The noise variance that a cell states is the mean of ε² that it draws: held-out
// sets with a scale over laws of all kinds, limits of 5 standard errors over 100
// replicates, false alarm 1e-5.
func TestStatedVarianceIsTheVarianceDrawn(t *testing.T) {
	for i, law := range laws() {
		noise := &Noise{Law: noiseLaws()[i%len(noiseLaws())], SignalToNoise: number(2), Scale: expression(t, "0.2 + abs(x)")}
		cell := cellOf(t, curve(t, "exp(-x)", testLo, testHi), law, noise, 20, 2000)
		var s Sample
		var sum, square float64
		const replicates = 100
		for r := range replicates {
			cell.Draw(11, r, &s)
			mean := 0.0
			for k, y := range s.Held.Y {
				e := y - s.Held.F[k]
				mean += e * e / float64(len(s.Held.Y))
			}
			sum += mean / replicates
			square += mean * mean / replicates
		}
		if z := (sum - cell.NoiseVariance) / math.Sqrt((square-sum*sum)/replicates); math.Abs(z) > 5 {
			t.Errorf("%s over %s: %.5f drawn, %.5f stated, z = %.1f", noise.describe(), law.describe(), sum, cell.NoiseVariance, z)
		}
	}
}

func BenchmarkNewCell(b *testing.B) {
	for _, c := range []struct {
		name  string
		noise *Noise
	}{{"sd", normalNoise(1)}, {"ratio", ratioOf1()}} {
		for _, law := range []DesignLaw{&UniformDesign{}, &BetaDesign{A: 0.3, B: 0.4}} {
			b.Run(fmt.Sprintf("level=%s/law=%s", c.name, law.describe()), func(b *testing.B) {
				f := expression(b, "3*exp(-2*x) + sin(2*pi*x)")
				for b.Loop() {
					b.StopTimer()
					truth, _ := NewTruth(f, 0, 1) // that knows no integrals yet
					b.StartTimer()
					cellOf(b, truth, law, c.noise, 30, 10000)
				}
			})
		}
	}
}
