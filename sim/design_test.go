package sim

import (
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/stat"
	"gonum.org/v1/gonum/stat/distuv"
)

// The domain of laws under test.
const testLo, testHi = -1.0, 3.0

// laws are all design laws, on the domain of test.
func laws() []DesignLaw {
	return []DesignLaw{
		&UniformDesign{}, &EvenDesign{}, &BetaDesign{A: 0.3, B: 0.4}, &BetaDesign{A: 2.5, B: 1}, &BetaDesign{A: 0.7, B: 3},
		&NormalDesign{Mean: 0.5, SD: 0.7}, &NormalDesign{Mean: -1, SD: 3}, &NormalDesign{Mean: -4, SD: 1}, &NormalDesign{Mean: 6, SD: 1},
		&GapDesign{From: 0, To: 1.5}, &GapDesign{From: 0, To: 1.5, Left: number(0.8)},
		&FileDesign{Column: Column{Values: []float64{0, 2, 0, 1.5, 2.25}}, Resample: true},
	}
}

// placed is a law on the domain of test, with its options.
func placed(t testing.TB, d *Design) xLaw {
	t.Helper()
	law, err := d.on(testLo, testHi)
	if err != nil {
		t.Fatal(err)
	}
	return law
}

// The Kolmogorov–Smirnov distance of 20,000 draws from the law's own distribution
// function passes 2.9/√20000 with probability 1e-7 (two-sided limit law): false alarm
// about 1e-6 over all laws.
func TestDesignsFollowTheirDistribution(t *testing.T) {
	const m = 20_000
	var s Stream
	for i, law := range laws() {
		on, ok := placed(t, &Design{Law: law}).(continuousLaw)
		if !ok {
			continue
		}
		s.set(1, "ks", i, "test")
		x := make([]float64, m)
		on.draw(x, &s)
		if !slices.IsSorted(x) || x[0] < testLo || x[m-1] > testHi {
			t.Errorf("%s: not ascending within the domain", law.describe())
		}
		if d := distance(x, on.cdf); d > 2.9/math.Sqrt(m) {
			t.Errorf("%s: distance %.4f, limit %.4f", law.describe(), d, 2.9/math.Sqrt(m))
		}
	}
}

// distance is the Kolmogorov–Smirnov distance of ascending x from a distribution
// function.
func distance(x []float64, cdf func(float64) float64) float64 {
	worst, m := 0.0, float64(len(x))
	for k, v := range x {
		p := cdf(v)
		worst = max(worst, p-float64(k)/m, float64(k+1)/m-p)
	}
	return worst
}

// How often each value of a discrete law is drawn, by χ² at a false alarm of 1e-6:
// a rounded gap law with ends and gap off the lattice, and values from a file.
func TestDiscreteDesignsHaveTheirProbabilities(t *testing.T) {
	const m = 100_000
	gap := &GapDesign{From: 0.03, To: 0.58}
	for i, c := range []struct {
		design *Design
		p      map[float64]float64 // by hand, times their sum
	}{
		// On [−1, 3], in halves: [−1, 0.03] and [0.58, 3] have density 1.
		{&Design{Law: gap, Resolution: 0.5}, map[float64]float64{
			-1: 0.25, -0.5: 0.5, 0: 0.28, 0.5: 0.17, 1: 0.5, 1.5: 0.5, 2: 0.5, 2.5: 0.5, 3: 0.25}},
		{&Design{Law: &FileDesign{Column: Column{Values: []float64{2, 0, 1.4, 2, -1}}, Resample: true}}, map[float64]float64{
			2: 2, 0: 1, 1.4: 1, -1: 1}},
		{&Design{Law: &FileDesign{Column: Column{Values: []float64{2, 0, 1.4, 2, -1}}, Resample: true}, Resolution: 3}, map[float64]float64{
			3: 2, 0: 3}},
	} {
		law := placed(t, c.design)
		var s Stream
		s.set(3, "discrete", i, "test")
		x := make([]float64, m)
		law.draw(x, &s)
		count := map[float64]float64{}
		for _, v := range x {
			count[v]++
		}
		total := 0.0
		for _, p := range c.p {
			total += p
		}
		var obs, exp []float64
		for v, p := range c.p {
			obs, exp = append(obs, count[v]), append(exp, m*p/total)
			delete(count, v)
		}
		if len(count) > 0 {
			t.Errorf("%s: draws %v", c.design.describe(), count)
		}
		if x2 := stat.ChiSquare(obs, exp); x2 > (distuv.ChiSquared{K: float64(len(obs) - 1)}).Quantile(1-1e-6) {
			t.Errorf("%s: χ² = %.1f on %d", c.design.describe(), x2, len(obs)-1)
		}
		mean, err := law.mean(func(dst, x []float64) { copy(dst, x) }, exactly)
		want := 0.0
		for v, p := range c.p {
			want += v * p / total
		}
		if err != nil || math.Abs(mean-want) > 1e-14 {
			t.Errorf("%s: mean %.16g, by hand %.16g (%v)", c.design.describe(), mean, want, err)
		}
	}
}

// E X and E X² from the law's mean must equal the integrals of the distribution
// function, E X = hi − ∫F and E X² = hi² − ∫2xF, worked by the midpoint rule on a
// fine grid (error below 2e-5 here, the pole of beta(0.3, ·) included).
func TestMeansAgreeWithTheDistributionFunction(t *testing.T) {
	const grid = 100_000
	for _, law := range laws() {
		on, ok := placed(t, &Design{Law: law}).(continuousLaw)
		if !ok {
			continue
		}
		first, second := testHi, testHi*testHi
		for k := range grid {
			x := testLo + (testHi-testLo)*(float64(k)+0.5)/grid
			p := on.cdf(x) * (testHi - testLo) / grid
			first -= p
			second -= 2 * x * p
		}
		one, err := on.mean(func(dst, x []float64) { copy(dst, x) }, exactly)
		if err != nil {
			t.Fatal(err)
		}
		two, err := on.mean(func(dst, x []float64) {
			for i, v := range x {
				dst[i] = v * v
			}
		}, exactly)
		if err != nil {
			t.Fatal(err)
		}
		if math.Abs(one-first) > 2e-5 || math.Abs(two-second) > 2e-5 {
			t.Errorf("%s: E X = %.9f and %.9f, E X² = %.9f and %.9f", law.describe(), one, first, two, second)
		}
	}
}

// A rounded uniform on [0, 1] in tenths puts half a step's mass on either end.
func TestRoundedDesignHasItsDiscreteLaw(t *testing.T) {
	law, err := (&Design{Law: &UniformDesign{}, Resolution: 0.1}).on(0, 1)
	if err != nil {
		t.Fatal(err)
	}
	got, err := law.mean(func(dst, x []float64) {
		for i, v := range x {
			dst[i] = v * v
		}
	}, exactly)
	want := 0.0
	for k := range 11 {
		p := 0.1
		if k == 0 || k == 10 {
			p = 0.05
		}
		want += p * float64(k*k) / 100
	}
	if err != nil || math.Abs(got-want) > 1e-14 {
		t.Errorf("E X² = %v, want %v (%v)", got, want, err)
	}
}
