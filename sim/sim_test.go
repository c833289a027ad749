package sim

import (
	"fmt"
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/stat"

	"bendtest/sim/expr"
)

func number(v float64) *float64 { return &v }

func expression(t testing.TB, text string) *expr.Expression {
	t.Helper()
	e, err := expr.Compile(text)
	if err != nil {
		t.Fatal(err)
	}
	return e
}

func curve(t testing.TB, text string, lo, hi float64) *Truth {
	t.Helper()
	truth, err := NewTruth(expression(t, text), lo, hi)
	if err != nil {
		t.Fatal(err)
	}
	return truth
}

func cellOf(t testing.TB, truth *Truth, law DesignLaw, noise *Noise, n, heldOut int) *Cell {
	t.Helper()
	c, err := NewCell(truth, &Design{Law: law, Redraw: true}, noise, n, heldOut)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

func normalNoise(sd float64) *Noise { return &Noise{Law: &NormalNoise{}, SD: number(sd)} }

// laws are all design laws, on a domain [-1, 3].
func laws() []DesignLaw {
	return []DesignLaw{
		&UniformDesign{}, &EvenDesign{}, &BetaDesign{A: 0.3, B: 0.4}, &BetaDesign{A: 2.5, B: 1}, &BetaDesign{A: 0.7, B: 3},
		&NormalDesign{Mean: 0.5, SD: 0.7}, &NormalDesign{Mean: -1, SD: 3}, &GapDesign{From: 0, To: 1.5},
		&GapDesign{From: 0, To: 1.5, Left: number(0.8)},
		&FileDesign{Column: Column{Values: []float64{0, 0, 1.5, 2, 2.25}}, Resample: true},
	}
}

// The Kolmogorov–Smirnov distance of 4,000 draws from the law's own distribution
// function passes 2.6/√4000 with probability 2e-6 (two-sided limit law), 11 laws:
// false alarm 2e-5. Discrete laws keep well below it.
func TestDesignsFollowTheirDistribution(t *testing.T) {
	const lo, hi, m = -1.0, 3.0, 4000
	s := newStream()
	for i, law := range laws() {
		s.set(1, "ks", i, "test")
		x := make([]float64, m)
		law.draw(x, lo, hi, s)
		if !slices.IsSorted(x) || x[0] < lo || x[m-1] > hi {
			t.Errorf("%s: not ascending within the domain", law.describe())
		}
		worst := 0.0
		for k := range x {
			if k+1 < m && x[k+1] == x[k] {
				continue // the top of a jump
			}
			worst = max(worst, math.Abs(law.cdf(x[k], lo, hi)-float64(k+1)/m))
		}
		if limit := 2.6/math.Sqrt(m) + 1.0/m; worst > limit {
			t.Errorf("%s: distance %.4f, limit %.4f", law.describe(), worst, limit)
		}
	}
}

// E X and E X² from the law's mean must equal the integrals of the distribution
// function, E X = hi − ∫F and E X² = hi² − ∫2xF, worked by the midpoint rule on a
// fine grid (error below 2e-6 here, the pole of beta(0.3, ·) included).
func TestMeansAgreeWithTheDistributionFunction(t *testing.T) {
	const lo, hi, grid = -1.0, 3.0, 400_000
	for _, law := range laws() {
		first, second := hi, hi*hi
		for k := range grid {
			x := lo + (hi-lo)*(float64(k)+0.5)/grid
			p := law.cdf(x, lo, hi) * (hi - lo) / grid
			first -= p
			second -= 2 * x * p
		}
		one := law.mean(func(dst, x []float64) { copy(dst, x) }, lo, hi)
		two := law.mean(func(dst, x []float64) {
			for i, v := range x {
				dst[i] = v * v
			}
		}, lo, hi)
		if math.Abs(one-first) > 2e-5 || math.Abs(two-second) > 2e-5 {
			t.Errorf("%s: E X = %.9f and %.9f, E X² = %.9f and %.9f", law.describe(), one, first, two, second)
		}
	}
}

// Closed forms: the variance of sin 2πx is 1/2; beta moments; a jump function by
// hand.
func TestSignalVarianceIsExact(t *testing.T) {
	jump := 0.3 * 0.7 // of a 0–1 function that is 1 on a share of 0.7
	for _, c := range []struct {
		f    string
		law  DesignLaw
		want float64
	}{
		{"sin(2*pi*x)", &UniformDesign{}, 0.5},
		{"sin(2*pi*x)", &EvenDesign{}, 0.5},
		{"x", &UniformDesign{}, 1.0 / 12},
		{"x > 0.3", &UniformDesign{}, jump},
		{"x > 1/3 ? 2 : 5", &UniformDesign{}, 9 * 2.0 / 9},
		{"x", &BetaDesign{A: 0.3, B: 0.4}, 0.3 * 0.4 / (0.49 * 1.7)},
		{"x", &BetaDesign{A: 2.5, B: 1.5}, 2.5 * 1.5 / (16 * 5)},
		{"x^2", &BetaDesign{A: 0.5, B: 0.5}, 35.0/128 - 9.0/64},
		{"1e6 + x", &UniformDesign{}, 1.0 / 12},
	} {
		cell := cellOf(t, curve(t, c.f, 0, 1), c.law, normalNoise(1), 10, 10)
		got := cell.signalVariance()
		tol := 1e-12
		if c.f == "1e6 + x" {
			tol = 1e-9
		}
		if math.Abs(got-c.want) > tol*c.want {
			t.Errorf("variance of %s over %s = %.15g, want %.15g", c.f, c.law.describe(), got, c.want)
		}
	}
}

func TestNoiseVarianceIsExact(t *testing.T) {
	truth := curve(t, "sin(2*pi*x)", 0, 1)
	for _, c := range []struct {
		name  string
		noise *Noise
		want  float64
	}{
		{"sd", normalNoise(0.4), 0.16},
		{"variance", &Noise{Law: &NormalNoise{}, Variance: number(0.3)}, 0.3},
		{"signal to noise", &Noise{Law: &LaplaceNoise{}, SignalToNoise: number(4)}, 0.125},
		{"r2", &Noise{Law: &NormalNoise{}, R2: number(0.8)}, 0.125},
		{"scaled sd", &Noise{Law: &NormalNoise{}, SD: number(0.4), Scale: expression(t, "1 + x")}, 0.16 * 7 / 3},
		{"scaled signal to noise", &Noise{Law: &NormalNoise{}, SignalToNoise: number(4), Scale: expression(t, "1 + x")}, 0.125},
		{"scale with a jump", &Noise{Law: &NormalNoise{}, SD: number(1), Scale: expression(t, "x < 0.25 ? 2 : 1")}, 1.75},
	} {
		cell := cellOf(t, truth, &UniformDesign{}, c.noise, 10, 10)
		if math.Abs(cell.NoiseVariance-c.want) > 1e-12*c.want {
			t.Errorf("%s: %.15g, want %.15g", c.name, cell.NoiseVariance, c.want)
		}
	}
}

// noiseLaws are all noise laws.
func noiseLaws() []NoiseLaw {
	return []NoiseLaw{
		&NormalNoise{}, &StudentNoise{Nu: 9}, &LaplaceNoise{}, &UniformNoise{}, &SkewedNoise{Shape: 2},
		&SkewedNoise{Shape: 0.5}, &ContaminatedNoise{Fraction: 0.1, Ratio: 4},
		&FileNoise{Column{Values: []float64{3, 4, 8, 8, 1}}},
	}
}

// Mean and mean square of 400,000 draws lie within 5 standard errors of 0 and 1:
// false alarm about 1e-5 over all laws.
func TestNoisesHaveMeanZeroAndVarianceOne(t *testing.T) {
	const m = 400_000
	s := newStream()
	e, square := make([]float64, m), make([]float64, m)
	for i, law := range noiseLaws() {
		s.set(2, "noise", i, "test")
		law.fill(e, s)
		for k, v := range e {
			square[k] = v * v
		}
		mean, sd := stat.MeanStdDev(e, nil)
		if math.Abs(mean) > 5*sd/math.Sqrt(m) {
			t.Errorf("%s: mean %.5f", law.describe(), mean)
		}
		power, spread := stat.MeanStdDev(square, nil)
		if math.Abs(power-1) > 5*spread/math.Sqrt(m) {
			t.Errorf("%s: mean square %.5f ± %.5f", law.describe(), power, spread/math.Sqrt(m))
		}
	}
}

// Neighbours of a stationary AR(1) correlate by ρ, points k apart by ρ^k, all with
// variance 1; 2,000 replicates of 50 points, limits of 5 standard errors.
func TestTrainingErrorsAreCorrelatedInOrderOfX(t *testing.T) {
	noise := normalNoise(1)
	noise.AR1 = 0.6
	cell := cellOf(t, curve(t, "0*x", 0, 1), &UniformDesign{}, noise, 50, 60)
	var s Sample
	lag := map[int][]float64{}
	var held []float64
	for r := range 2000 {
		cell.Draw(3, r, &s)
		for _, k := range []int{0, 1, 3} {
			lag[k] = append(lag[k], s.Train.Y[20]*s.Train.Y[20+k])
		}
		lag[-1] = append(lag[-1], s.Train.Y[0]*s.Train.Y[0])
		held = append(held, s.Held.Y[20]*s.Held.Y[21])
	}
	for k, want := range map[int]float64{-1: 1, 0: 1, 1: 0.6, 3: 0.216} {
		mean, sd := stat.MeanStdDev(lag[k], nil)
		if math.Abs(mean-want) > 5*sd/math.Sqrt(2000) {
			t.Errorf("lag %d: %.4f, want %.4f", k, mean, want)
		}
	}
	if mean, sd := stat.MeanStdDev(held, nil); math.Abs(mean) > 5*sd/math.Sqrt(2000) {
		t.Errorf("held-out neighbours correlate: %.4f", mean)
	}
}

func TestDrawDependsOnSeedCellAndReplicateAlone(t *testing.T) {
	truth := curve(t, "sin(x)", 0, 1)
	cell := cellOf(t, truth, &UniformDesign{}, normalNoise(1), 20, 300)
	same := cellOf(t, truth, &UniformDesign{}, normalNoise(1), 20, 300)
	more := cellOf(t, truth, &UniformDesign{}, normalNoise(1), 20, 500)
	var fresh, used, larger Sample
	for r := range 5 {
		same.Draw(9, 4-r, &used) // another order
	}
	same.Draw(9, 3, &used)
	cell.Draw(9, 3, &fresh)
	more.Draw(9, 3, &larger)
	if !slices.Equal(fresh.Train.Y, used.Train.Y) || !slices.Equal(fresh.Held.Y, used.Held.Y) {
		t.Error("a sample depends on what was drawn before")
	}
	if !slices.Equal(fresh.Train.Y, larger.Train.Y) {
		t.Error("the training set depends on the held-out size")
	}
	var other Sample
	for name, draw := range map[string]func(){
		"seed":      func() { cell.Draw(10, 3, &other) },
		"replicate": func() { cell.Draw(9, 4, &other) },
		"cell": func() {
			cellOf(t, curve(t, "sin(x) + 0", 0, 2), &UniformDesign{}, normalNoise(1), 20, 300).Draw(9, 3, &other)
		},
	} {
		draw()
		if other.Train.X[0] == fresh.Train.X[0] || other.Held.X[0] == fresh.Held.X[0] {
			t.Errorf("another %s draws the same", name)
		}
	}
	if fresh.Train.X[0] == fresh.Held.X[0] {
		t.Error("training and held-out sets share a stream")
	}
}

func TestHashIsOfContent(t *testing.T) {
	base := func() (*Truth, *Design, *Noise, int) {
		return curve(t, "1 + x", 0, 1), &Design{Law: &UniformDesign{}, Redraw: true}, normalNoise(1), 20
	}
	hash := func(change func(truth **Truth, d *Design, noise *Noise, n *int)) string {
		truth, d, noise, n := base()
		change(&truth, d, noise, &n)
		c, err := NewCell(truth, d, noise, n, 100)
		if err != nil {
			t.Fatal(err)
		}
		return c.Hash()
	}
	seen := map[string]string{}
	for name, change := range map[string]func(truth **Truth, d *Design, noise *Noise, n *int){
		"none":       func(**Truth, *Design, *Noise, *int) {},
		"curve":      func(f **Truth, _ *Design, _ *Noise, _ *int) { *f = curve(t, "1 - x", 0, 1) },
		"domain":     func(f **Truth, _ *Design, _ *Noise, _ *int) { *f = curve(t, "1 + x", 0, 2) },
		"law":        func(_ **Truth, d *Design, _ *Noise, _ *int) { d.Law = &EvenDesign{} },
		"redraw":     func(_ **Truth, d *Design, _ *Noise, _ *int) { d.Redraw = false },
		"resolution": func(_ **Truth, d *Design, _ *Noise, _ *int) { d.Resolution = 0.1 },
		"sd":         func(_ **Truth, _ *Design, e *Noise, _ *int) { e.SD = number(2) },
		"noise law":  func(_ **Truth, _ *Design, e *Noise, _ *int) { e.Law = &LaplaceNoise{} },
		"ar1":        func(_ **Truth, _ *Design, e *Noise, _ *int) { e.AR1 = 0.1 },
		"scale":      func(_ **Truth, _ *Design, e *Noise, _ *int) { e.Scale = expression(t, "2 + x") },
		"n":          func(_ **Truth, _ *Design, _ *Noise, n *int) { *n = 21 },
	} {
		h := hash(change)
		if before, ok := seen[h]; ok {
			t.Errorf("%q and %q share a hash", name, before)
		}
		seen[h] = name
	}
	if spaced := hash(func(f **Truth, _ *Design, _ *Noise, _ *int) { *f = curve(t, " (1+x) ", 0, 1) }); seen[spaced] != "none" {
		t.Error("spacing changes the hash")
	}
}

func TestFixedDesigns(t *testing.T) {
	truth := curve(t, "x", 2, 4)
	file := Column{Values: []float64{3.5, 2, 2.5}}
	for _, c := range []struct {
		name   string
		design *Design
		want   []float64
	}{
		{"even", &Design{Law: &EvenDesign{}, Redraw: true}, []float64{2 + 1.0/3, 3, 4 - 1.0/3}},
		{"even, rounded", &Design{Law: &EvenDesign{}, Redraw: true, Resolution: 0.5}, []float64{2.5, 3, 3.5}},
		{"file as it stands", &Design{Law: &FileDesign{Column: file}, Redraw: true}, []float64{2, 2.5, 3.5}},
		{"kept first draw", &Design{Law: &UniformDesign{}}, nil},
	} {
		cell, err := NewCell(truth, c.design, normalNoise(1), 3, 50)
		if err != nil {
			t.Fatal(err)
		}
		var a, b Sample
		cell.Draw(1, 0, &a)
		cell.Draw(1, 7, &b)
		if !cell.FixedDesign() || !slices.Equal(a.Train.X, b.Train.X) {
			t.Errorf("%s: not fixed", c.name)
		}
		if a.Train.Y[0] == b.Train.Y[0] || a.Held.X[0] == b.Held.X[0] && c.name != "even, rounded" && c.name != "file as it stands" {
			t.Errorf("%s: replicates are alike", c.name)
		}
		for i, want := range c.want {
			if math.Abs(a.Train.X[i]-want) > 1e-15*4 {
				t.Errorf("%s: x = %v, want %v", c.name, a.Train.X, c.want)
				break
			}
		}
	}
}

// A rounded uniform on [0, 1] in tenths puts half a step's mass on either end.
func TestRoundedDesignHasItsDiscreteLaw(t *testing.T) {
	d := &Design{Law: &UniformDesign{}, Redraw: true, Resolution: 0.1}
	got := d.mean(func(dst, x []float64) {
		for i, v := range x {
			dst[i] = v * v
		}
	}, 0, 1)
	want := 0.0
	for k := range 11 {
		p := 0.1
		if k == 0 || k == 10 {
			p = 0.05
		}
		want += p * float64(k*k) / 100
	}
	if math.Abs(got-want) > 1e-14 {
		t.Errorf("E X² = %v, want %v", got, want)
	}
}

func TestImpossibleCellsAreRefused(t *testing.T) {
	line := curve(t, "x", 0, 1)
	constant := curve(t, "3", 0, 1)
	for _, c := range []struct {
		name   string
		truth  *Truth
		design *Design
		noise  *Noise
		part   Part
	}{
		{"two levels", line, nil, &Noise{Law: &NormalNoise{}, SD: number(1), R2: number(0.5)}, NoisePart},
		{"no level", line, nil, &Noise{Law: &NormalNoise{}}, NoisePart},
		{"ratio to a constant", constant, nil, &Noise{Law: &NormalNoise{}, SignalToNoise: number(2)}, NoisePart},
		{"negative scale", line, nil, &Noise{Law: &NormalNoise{}, SD: number(1), Scale: expression(t, "x - 0.5")}, NoisePart},
		{"zero scale", line, nil, &Noise{Law: &NormalNoise{}, SD: number(1), Scale: expression(t, "0*x")}, NoisePart},
		{"infinite scale", line, nil, &Noise{Law: &NormalNoise{}, SD: number(1), Scale: expression(t, "1/x")}, NoisePart},
		{"gap outside", line, &Design{Law: &GapDesign{From: 0.5, To: 2}}, normalNoise(1), DesignPart},
		{"normal elsewhere", line, &Design{Law: &NormalDesign{Mean: 90, SD: 1}}, normalNoise(1), DesignPart},
		{"resolution too fine", line, &Design{Law: &UniformDesign{}, Resolution: 1e-12}, normalNoise(1), DesignPart},
		{"resolution too coarse", line, &Design{Law: &UniformDesign{}, Resolution: 3}, normalNoise(1), DesignPart},
		{"values outside", line, &Design{Law: &FileDesign{Column: Column{Values: []float64{2}}}}, normalNoise(1), DesignPart},
		{"other n than the file", line, &Design{Law: &FileDesign{Column: Column{Values: []float64{0.2}}}}, normalNoise(1), DesignPart},
		{"no residuals", line, nil, &Noise{Law: &FileNoise{Column{Values: []float64{1, 1}}}, SD: number(1)}, NoisePart},
	} {
		if c.design == nil {
			c.design = &Design{Law: &UniformDesign{}, Redraw: true}
		}
		_, err := NewCell(c.truth, c.design, c.noise, 10, 100)
		fault, ok := err.(*CellError)
		if !ok || fault.Part != c.part {
			t.Errorf("%s: %v", c.name, err)
		}
	}
	for _, f := range []string{"1/x", "log(x)", "sqrt(x - 1)"} {
		if _, err := NewTruth(expression(t, f), 0, 1); err == nil {
			t.Errorf("the curve %s on [0, 1] is accepted", f)
		}
	}
	if _, err := NewTruth(expression(t, "x"), 1, 1); err == nil {
		t.Error("an empty domain is accepted")
	}
}

// Three points have a natural cubic spline known in closed form: through (0, 0),
// (1, 1), (2, 0) it is 1.5u − 0.5u³ on [0, 1].
func TestSplineTruth(t *testing.T) {
	truth, err := NewSplineTruth([]float64{0, 1, 2}, []float64{0, 1, 0}, 0, 2)
	if err != nil {
		t.Fatal(err)
	}
	x := []float64{0, 0.25, 0.5, 1, 1.5, 2}
	got := make([]float64, len(x))
	truth.Eval(got, x, nil)
	for i, v := range x {
		u := min(v, 2-v)
		if want := 1.5*u - 0.5*u*u*u; math.Abs(got[i]-want) > 1e-15 {
			t.Errorf("at %g: %v, want %v", v, got[i], want)
		}
	}
	for name, bad := range map[string]func() error{
		"lengths":    func() error { _, err := NewSplineTruth([]float64{0, 1}, []float64{0}, 0, 1); return err },
		"two points": func() error { _, err := NewSplineTruth([]float64{0, 1}, []float64{0, 1}, 0, 1); return err },
		"order":      func() error { _, err := NewSplineTruth([]float64{0, 2, 1}, []float64{0, 1, 2}, 0, 1); return err },
		"domain":     func() error { _, err := NewSplineTruth([]float64{0, 1, 2}, []float64{0, 1, 2}, 0, 3); return err },
	} {
		if bad() == nil {
			t.Errorf("%s: accepted", name)
		}
	}
}

// The first draws of each law are frozen: they are part of the output format. This
// table is never edited; whoever must change a draw changes streamVersion and says
// so in the change log.
func TestFirstDrawsAreFrozen(t *testing.T) {
	s := newStream()
	s.set(20261201, "0123456789abcdef", 7, "frozen")
	if got := fmt.Sprintf("%016x %016x", s.Uint64(), s.Uint64()); got != frozenBits {
		t.Errorf("bits %s, frozen %s", got, frozenBits)
	}
	for i, law := range noiseLaws() {
		s.set(20261201, "0123456789abcdef", 7, "frozen")
		e := make([]float64, 3)
		law.fill(e, s)
		if got := fmt.Sprintf("%.12g", e); got != frozenNoise[i] {
			t.Errorf("%s: %s, frozen %s", law.describe(), got, frozenNoise[i])
		}
	}
	for i, law := range laws() {
		s.set(20261201, "0123456789abcdef", 7, "frozen")
		x := make([]float64, 3)
		law.draw(x, -1, 3, s)
		if got := fmt.Sprintf("%.12g", x); got != frozenDesign[i] {
			t.Errorf("%s: %s, frozen %s", law.describe(), got, frozenDesign[i])
		}
	}
}

func TestDrawDoesNotAllocate(t *testing.T) {
	noise := normalNoise(0.3)
	noise.Scale = expression(t, "1 + x")
	noise.AR1 = 0.2
	for _, law := range laws() {
		truth := curve(t, "3*exp(-2*x) + sin(2*pi*x)", -1, 3)
		cell := cellOf(t, truth, law, noise, 30, 1000)
		var s Sample
		r := 0
		if n := testing.AllocsPerRun(5, func() { cell.Draw(1, r, &s); r++ }); n != 0 {
			t.Errorf("%s: %v allocations", law.describe(), n)
		}
	}
}

func BenchmarkDraw(b *testing.B) {
	for _, f := range []string{"1 - 0.8*x", "3*exp(-2*x) + sin(2*pi*x)"} {
		cell := cellOf(b, curve(b, f, 0, 1), &UniformDesign{}, normalNoise(0.3), 30, 10000)
		b.Run(fmt.Sprintf("f=%s/n=30/heldout=10000", f), func(b *testing.B) {
			var s Sample
			b.ReportAllocs()
			r := 0
			for b.Loop() {
				cell.Draw(1, r, &s)
				r++
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/10030, "ns/point")
		})
	}
}
