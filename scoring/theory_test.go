package scoring

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"

	"bendtest/results"
	"bendtest/sim"
	"bendtest/sim/expr"
	"bendtest/smoothers"
)

// waveCell is a cell of n even x on [0, 1], f = sin 2πx, errors of sd 0.3.
func waveCell(t testing.TB, n, heldOut int, noise *sim.Noise) *sim.Cell {
	t.Helper()
	if noise == nil {
		sd := 0.3
		noise = &sim.Noise{Law: &sim.NormalNoise{}, SD: &sd}
	}
	return cellOf(t, "sin(2*pi*x)", &sim.EvenDesign{}, noise, n, heldOut)
}

// An exactMean is a row of exact means worked out in independent dense arithmetic for n =
// 100, x = (i − ½)/100, f = sin 2πx and normal errors of sd 0.3.
type exactMean struct {
	name                 string
	smoother             smoothers.Smoother
	tuning               float64
	trS, trSST           float64
	train, same, leftOut float64
}

func exactMeans() []exactMean {
	kernel := smoothers.NewKernel()
	kernel.Kernel = "gaussian"
	local := smoothers.NewLocal()
	local.Kernel, local.Width, local.Degree = "gaussian", "bandwidth", 1
	return []exactMean{
		{"kernel", kernel, 0.05, 8.44342379, 6.07567377, 8.3933889036e-2, 9.9132051851e-2, 1.0045173490e-1},
		{"local", local, 0.05, 9.34792382, 7.04264519, 8.0639535486e-2, 9.7465798353e-2, 9.8347516187e-2},
		{"smoothing spline", smoothers.NewSmoothingSpline(), 6.49545019e-4, 8, 6.25084452, 8.1380169997e-2, 9.5780169997e-2, 9.6258866773e-2},
		// The published knots and segments span [0, 1], not the data: hence a smoother of
		// its own for both. Five segments without a penalty have knots at j/5.
		{"regression spline", wholeInterval{5}, 0, 8, 8, 8.2807086749e-2, 9.7207086749e-2, 9.8390267874e-2},
		{"penalised spline", wholeInterval{20}, 3.78961370, 8, 6.46980571, 8.1512238481e-2, 9.5912238481e-2, 9.6413722928e-2},
	}
}

// wholeInterval is the penalised spline with its segments over [0, 1], by dense algebra.
type wholeInterval struct{ segments int }

func (wholeInterval) Check() error { return nil }

func (s wholeInterval) On(x []float64, _ *smoothers.Arena) smoothers.Ladder {
	return wholeLadder{s.segments, x}
}

type wholeLadder struct {
	segments int
	x        []float64
}

// basis is the cubic B-splines at x, by their recurrence on equal knots.
func (l wholeLadder) basis(x []float64) *mat.Dense {
	q := l.segments + 3
	b := mat.NewDense(len(x), q, nil)
	for i, v := range x {
		u := v * float64(l.segments)
		k := min(int(u), l.segments-1)
		r := u - float64(k)
		for j, w := range []float64{(1 - r) * (1 - r) * (1 - r), 3*r*r*r - 6*r*r + 4, -3*r*r*r + 3*r*r + 3*r + 1, r * r * r} {
			b.Set(i, k+j, w/6)
		}
	}
	return b
}

func (l wholeLadder) AtDF(dfs []float64) []smoothers.Rung {
	rungs := l.AtTuning(make([]float64, len(dfs)))
	for i, df := range dfs {
		lo, hi := -40.0, 20.0
		for range 100 {
			mid := (lo + hi) / 2
			if rungs[i] = l.AtTuning([]float64{math.Exp(mid)})[0]; rungs[i].TrS > df {
				lo = mid
			} else {
				hi = mid
			}
		}
		rungs[i].DF = df
	}
	return rungs
}

func (l wholeLadder) AtTuning(lambdas []float64) []smoothers.Rung {
	n, q := len(l.x), l.segments+3
	b := l.basis(l.x)
	rungs := make([]smoothers.Rung, len(lambdas))
	for k, lambda := range lambdas {
		a := mat.NewDense(q, q, nil)
		a.Mul(b.T(), b)
		for j := range q - 2 { // λ times the outer products of (1, −2, 1)
			for u, du := range []float64{1, -2, 1} {
				for v, dv := range []float64{1, -2, 1} {
					a.Set(j+u, j+v, a.At(j+u, j+v)+lambda*du*dv)
				}
			}
		}
		var gain, s mat.Dense
		if err := gain.Solve(a, b.T()); err != nil {
			continue
		}
		s.Mul(b, &gain)
		r := &rungs[k]
		r.Tuning, r.DFResidual = lambda, float64(n)
		r.Leverage, r.RowNorm2, r.Remainder = make([]float64, n), make([]float64, n), make([]float64, n)
		for i := range n {
			r.Leverage[i], r.Remainder[i] = s.At(i, i), 1-s.At(i, i)
			for j := range n {
				r.RowNorm2[i] += s.At(i, j) * s.At(i, j)
			}
			r.TrS += r.Leverage[i]
			r.TrSTS += r.RowNorm2[i]
			r.DFResidual += r.RowNorm2[i] - 2*r.Leverage[i]
		}
		r.DF = r.TrS
		r.SolveBy(func(y []float64, f *smoothers.Fit) {
			var c, fitted mat.VecDense
			c.MulVec(&gain, mat.NewVecDense(n, y))
			fitted.MulVec(b, &c)
			copy(f.Fitted, fitted.RawVector().Data)
			f.Curve = wholeCurve{l, &c}
		})
	}
	return rungs
}

type wholeCurve struct {
	l wholeLadder
	c *mat.VecDense
}

func (c wholeCurve) At(dst, t []float64) {
	var v mat.VecDense
	v.MulVec(c.l.basis(t), c.c)
	copy(dst, v.RawVector().Data)
}

// The reference is given to 11 digits, of traces to 9.
func TestTheoryHasTheExactMeans(t *testing.T) {
	cell := waveCell(t, 100, 1000, nil)
	theory, ok := NewTheory(cell, 1)
	if !ok {
		t.Fatal("no theory for a fixed design")
	}
	for _, c := range exactMeans() {
		r := &c.smoother.On(theory.X(), nil).AtTuning([]float64{c.tuning})[0]
		e := theory.Expect(r)
		for _, v := range []struct {
			name           string
			got, want, tol float64
		}{
			{"tr S", r.TrS, c.trS, 1e-8},
			{"tr SSᵀ", r.TrSTS, c.trSST, 1e-8},
			{"training error", e.Train.Value, c.train, 1e-10},
			{"error at the same x", e.SameX.Value, c.same, 1e-10},
			{"LOOCV", e.LOOCV.Value, c.leftOut, 1e-10},
			{"Cp", e.CP.Value, c.train + 2*0.09*c.trS/100, 1e-10},
			{"ASE", e.ASE.Value, c.same - 0.09, 1e-10},
		} {
			if !(math.Abs(v.got-v.want) <= v.tol) {
				t.Errorf("%s: %s = %.12g, want %.12g", c.name, v.name, v.got, v.want)
			}
		}
	}
}

// Held-out x are uniform, so that E held-out is an integral: here by the midpoint rule on
// a grid whose error is below 1e-7, with the weights l(x) from fits of unit readings.
func TestTheoryIntegratesOverTheHeldOutX(t *testing.T) {
	cell := waveCell(t, 20, 1000, nil)
	theory, _ := NewTheory(cell, 1)
	r := &smoothers.NewSmoothingSpline().On(theory.X(), nil).AtDF([]float64{6})[0]
	const points = 20000
	at, risk := make([]float64, points), make([]float64, points)
	for i := range at {
		at[i] = (float64(i) + 0.5) / points
	}
	bias := make([]float64, points)
	values, unit := make([]float64, points), make([]float64, 20)
	var f smoothers.Fit
	for j, fj := range cell.TruthAt(theory.X()) {
		unit[j] = 1
		r.Fit(unit, &f)
		unit[j] = 0
		f.Curve.At(values, at)
		for i, l := range values {
			bias[i] += l * fj
			risk[i] += 0.09 * l * l
		}
	}
	want := 0.09
	for i, v := range cell.TruthAt(at) {
		want += (risk[i] + (bias[i]-v)*(bias[i]-v)) / points
	}
	if got := theory.Expect(r).HeldOut.Value; math.Abs(got-want) > 1e-7 {
		t.Errorf("E held-out = %.10g, want %.10g", got, want)
	}
}

// With correlation matrix C and variances s²: E train = |b|²/n + s²(n − 2 tr SC + tr
// SCSᵀ)/n and the risk |b|²/n + s² tr SCSᵀ/n, from S and C in full.
func TestTheoryKnowsCorrelatedAndUnequalErrors(t *testing.T) {
	scale, err := expr.Compile("0.5 + x")
	if err != nil {
		t.Fatal(err)
	}
	sd := 0.3
	for _, noise := range []*sim.Noise{
		{Law: &sim.NormalNoise{}, SD: &sd, AR1: 0.6},
		{Law: &sim.NormalNoise{}, SD: &sd, AR1: -0.4, Scale: scale},
	} {
		cell := waveCell(t, 40, 1000, noise)
		theory, _ := NewTheory(cell, 1)
		x, n := theory.X(), 40
		v := mat.NewDense(n, n, nil)
		same := 0.0
		for i := range n {
			for j := range n {
				si, sj := sd, sd
				if noise.Scale != nil {
					si, sj = sd*(0.5+x[i]), sd*(0.5+x[j])
				}
				v.Set(i, j, si*sj*math.Pow(noise.AR1, math.Abs(float64(i-j))))
			}
			same += v.At(i, i) / float64(n)
		}
		for _, family := range smoothers.Families() {
			r := &family.New().On(x, nil).AtDF([]float64{6})[0]
			e := theory.Expect(r)
			data := make([]float64, n*n)
			var fit smoothers.Fit
			r.Matrix(data, make([]float64, n), &fit)
			s := mat.NewDense(n, n, data)
			var sv, svs mat.Dense
			sv.Mul(s, v)
			svs.Mul(&sv, s.T())
			f := cell.TruthAt(x)
			r.Fit(f, &fit)
			bias := 0.0
			for i := range f {
				bias += (fit.Fitted[i] - f[i]) * (fit.Fitted[i] - f[i]) / float64(n)
			}
			risk := bias + mat.Trace(&svs)/float64(n)
			train := bias + same - 2*mat.Trace(&sv)/float64(n) + mat.Trace(&svs)/float64(n)
			if !near(e.ASE.Value, risk, 1e-10) || !near(e.Train.Value, train, 1e-10) || !near(e.SameX.Value, risk+same, 1e-10) {
				t.Errorf("%s: E train %.12g, risk %.12g, same x %.12g, want %.12g, %.12g, %.12g", family.Name,
					e.Train.Value, e.ASE.Value, e.SameX.Value, train, risk, risk+same)
			}
		}
	}
}

// auditOf simulates a contest in a cell and audits it; tamper may spoil each sample.
func auditOf(cell *sim.Cell, c *Contest, replicates int, tamper func(*sim.Sample)) []results.Audit {
	b := NewBench("c", cell, c, 5)
	var sample sim.Sample
	for r := range replicates {
		cell.Draw(5, r, &sample)
		if tamper != nil {
			tamper(&sample)
		}
		b.Score(r, &sample)
	}
	report := CellReport{Key: "c", Cell: cell, Contest: c, Moments: b.Moments()}
	return report.Audit(5)
}

// meansContest enters the smoothers of exactMeans at the df of their rows.
func meansContest() *Contest {
	c := &Contest{}
	for _, m := range exactMeans() {
		c.Entrants = append(c.Entrants, Entrant{Name: m.name, Smoother: m.smoother, DF: []float64{m.trS}})
	}
	return c
}

// 35 figures, of which one beyond 4 MCSE has probability 2e-3; the seed is fixed.
func TestASimulationAgreesWithItsTheory(t *testing.T) {
	rows := auditOf(waveCell(t, 100, 1000, nil), meansContest(), 2000, nil)
	if len(rows) != 5*len(audited()) {
		t.Fatalf("%d rows", len(rows))
	}
	for _, r := range rows {
		if !(math.Abs(r.Z.Value) <= 4) {
			t.Errorf("%s, %s: expected %.6g, simulated %.6g ± %.2g", r.Smoother, r.Quantity, r.Expected.Value, r.Simulated.Value, r.MCSE.Value)
		}
	}
	want := map[string]exactMean{}
	for _, m := range exactMeans() {
		want[m.name] = m
	}
	for _, r := range rows { // the table itself has the published means
		m := want[r.Smoother]
		for quantity, v := range map[string]float64{"train_mse": m.train, "heldout_same_x": m.same, "loocv": m.leftOut} {
			if r.Quantity == quantity && !(math.Abs(r.Expected.Value-v) <= 1e-7*v) {
				t.Errorf("%s: %s is expected to be %.10g, want %.10g", r.Smoother, quantity, r.Expected.Value, v)
			}
		}
	}
}

// Each fault is far smaller than anybody would see in a figure; it must be seen here.
func TestTheAuditCatchesAWrongSimulation(t *testing.T) {
	cell := waveCell(t, 100, 1000, nil)
	for name, tamper := range map[string]func(*sim.Sample){
		"errors with a mean of 0.03": func(s *sim.Sample) {
			for i := range s.Train.Y {
				s.Train.Y[i] += 0.03
			}
		},
		"errors 3 % too large": func(s *sim.Sample) {
			for i, f := range s.Train.F {
				s.Train.Y[i] += 0.03 * (s.Train.Y[i] - f)
			}
		},
		"held-out errors 1 % too small": func(s *sim.Sample) {
			for i, f := range s.Held.F {
				s.Held.Y[i] -= 0.01 * (s.Held.Y[i] - f)
			}
		},
		"neighbouring errors correlated by 0.1": func(s *sim.Sample) {
			last := 0.0
			for i, f := range s.Train.F {
				e := s.Train.Y[i] - f
				last = 0.1*last + math.Sqrt(1-0.01)*e
				s.Train.Y[i] = f + last
			}
		},
	} {
		within, of := Agreement(auditOf(cell, meansContest(), 1000, tamper))
		if of != 35 || within > of-5 {
			t.Errorf("%s: %d of %d within 4 MCSE", name, within, of)
		}
	}
	if within, of := Agreement(auditOf(cell, meansContest(), 1000, nil)); within != of {
		t.Errorf("an honest simulation: %d of %d", within, of)
	}
}

// Squares of Student errors on 3 df have no variance, so that z would be no measure.
func TestHeavyTailsAreNotJudged(t *testing.T) {
	sd := 0.3
	for nu, judged := range map[float64]bool{3: false, 4: false, 9: true} {
		cell := waveCell(t, 20, 200, &sim.Noise{Law: &sim.StudentNoise{Nu: nu}, SD: &sd})
		c := &Contest{Entrants: []Entrant{{Name: "s", Smoother: smoothers.NewSmoothingSpline(), DF: []float64{5}}}}
		if _, of := Agreement(auditOf(cell, c, 50, nil)); (of > 0) != judged {
			t.Errorf("nu = %g: %d figures judged", nu, of)
		}
	}
}

// A fit through all readings leaves rounding, which agrees with 0, and no LOOCV.
func TestTheAuditOfAFitThroughAllReadings(t *testing.T) {
	cell := waveCell(t, 8, 200, nil)
	c := &Contest{Entrants: []Entrant{{Name: "p", Smoother: smoothers.NewPolynomial(), DF: []float64{8}}}}
	seen := map[string]float64{}
	for _, r := range auditOf(cell, c, 200, nil) {
		seen[r.Quantity] = r.Z.Value
	}
	if z, there := seen["train_mse"]; !there || z != 0 {
		t.Errorf("training error of nothing: z = %g (%v)", z, there)
	}
	if _, there := seen["loocv"]; there {
		t.Error("LOOCV of points that determine their own fit")
	}
}

func ExampleAgreement() {
	rows := []results.Audit{{Z: results.Num(-1.2)}, {Z: results.Num(4.5)}, {}}
	fmt.Println(Agreement(rows))
	// Output: 1 2
}
