package scoring

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/stat/distuv"

	"bendtest/smoothers"
)

// testDesigns are designs of 40 observations: even; random with ties; crowded ends.
func testDesigns() map[string][]float64 {
	even, ties, crowded := make([]float64, 40), make([]float64, 40), make([]float64, 40)
	for i := range even {
		u := (float64(i) + 0.5) / 40
		even[i] = u
		ties[i] = math.Round(u*u*25) / 25
		crowded[i] = 0.5 - 0.5*math.Cos(math.Pi*u)
	}
	return map[string][]float64{"even": even, "ties": ties, "crowded": crowded}
}

// residualForm is Q = (I−S)ᵀ(I−S) from fits of unit readings.
func residualForm(r *smoothers.Rung) *mat.Dense {
	n := len(r.Leverage)
	rest, unit := mat.NewDense(n, n, nil), make([]float64, n)
	var f smoothers.Fit
	for j := range n {
		unit[j] = 1
		r.Fit(unit, &f)
		unit[j] = 0
		for i, v := range f.Fitted {
			rest.Set(i, j, -v)
		}
		rest.Set(j, j, rest.At(j, j)+1)
	}
	var q mat.Dense
	q.Mul(rest.T(), rest)
	return &q
}

// lineForm is Q of the straight line: the projection off 1 and x, by Gram–Schmidt.
func lineForm(x []float64) *mat.Dense {
	n := len(x)
	q := mat.NewDense(n, n, nil)
	mean, square := 0.0, 0.0
	for _, v := range x {
		mean += v / float64(n)
	}
	for _, v := range x {
		square += (v - mean) * (v - mean)
	}
	for i := range n {
		for j := range n {
			q.Set(i, j, -1/float64(n)-(x[i]-mean)*(x[j]-mean)/square)
		}
		q.Set(i, i, q.At(i, i)+1)
	}
	return q
}

// moments2 are ν1 = tr D and ν2 = tr D² of D = Q_N − Q_A.
func moments2(n, a *mat.Dense) (nu1, nu2 float64) {
	var d, dd mat.Dense
	d.Sub(n, a)
	dd.Mul(&d, &d)
	return mat.Trace(&d), mat.Trace(&dd)
}

// Every short cut of the tests agrees with the definition worked out in full.
func TestTestsAgreeWithTheirDefinition(t *testing.T) {
	broken := smoothers.NewSmoothingSpline()
	broken.Order = 1
	fine := smoothers.NewPenalisedSpline()
	fine.Segments = 35
	all := map[string]smoothers.Smoother{"smoothing-spline order=1": broken, "penalised-spline segments=35": fine}
	for _, f := range smoothers.Families() {
		all[f.Name] = f.New()
	}
	for design, x := range testDesigns() {
		line := lineForm(x)
		for name, s := range all {
			rungs := s.On(x, nil).AtDF([]float64{2, 3, 4, 5, 9, 10})
			var lt ladderTests
			lt.lay(rungs, x, true, true)
			for j := range rungs {
				if rungs[j].Status != smoothers.OK {
					continue
				}
				w, q := &lt.rungs[j], residualForm(&rungs[j])
				var qq mat.Dense
				qq.Mul(q, q)
				if !w.known || !near(w.delta1, mat.Trace(q), 1e-9) || !near(w.delta2, mat.Trace(&qq), 1e-9) {
					t.Errorf("%s on %s, df %g: δ = %.10g, %.10g, want %.10g, %.10g", name, design, rungs[j].DF, w.delta1, w.delta2, mat.Trace(q), mat.Trace(&qq))
				}
				check := func(what string, c comparison, nu1, nu2 float64) {
					if wants := nu1 > 1e-6 && nu2 > 1e-6; c.known != wants || wants && !(near(c.nu1, nu1, 1e-9) && near(c.nu2, nu2, 1e-9)) {
						t.Errorf("%s on %s, df %g, %s: ν = %.10g, %.10g (%v), want %.10g, %.10g", name, design, rungs[j].DF, what, c.nu1, c.nu2, c.known, nu1, nu2)
					}
				}
				nu1, nu2 := moments2(line, q)
				check("the line", w.line, nu1, nu2)
				if w.at >= 0 {
					nu1, nu2 = moments2(q, residualForm(&rungs[w.at]))
					check("the next rung", w.next, nu1, nu2)
				}
			}
		}
	}
}

// For nested projections the two-moment test is the F test of textbooks.
func TestNestedProjectionsHaveTheOrdinaryF(t *testing.T) {
	x := testDesigns()["even"]
	rungs := smoothers.NewPolynomial().On(x, nil).AtDF([]float64{2, 5})
	var lt ladderTests
	lt.lay(rungs, x, true, true)
	const rssN, rssA = 12.5, 9.25
	want := distuv.F{D1: 3, D2: 35}.Survival((rssN - rssA) / 3 / (rssA / 35))
	for what, c := range map[string]comparison{"line": lt.rungs[1].line, "next": lt.rungs[0].next} {
		if got := c.pValue(rssN, rssA, lt.rungs[1].spread); !near(got, want, 1e-12) {
			t.Errorf("%s: p = %.14g, want %.14g", what, got, want)
		}
	}
	if p := lt.rungs[1].line.pValue(9, 9.5, lt.rungs[1].spread); p != 1 {
		t.Errorf("no gain: p = %g", p)
	}
	if p := lt.rungs[1].line.pValue(9, 0, lt.rungs[1].spread); p != 0 {
		t.Errorf("a perfect fit: p = %g", p)
	}
}

// Where they take work of order n³, tests are made as often as that of everyReplicate
// observations would allow.
func TestGeneralTestsKeepToTheirBudget(t *testing.T) {
	for _, c := range []struct {
		n     int
		fixed bool
		want  int // of 1000 replicates
	}{
		{100, false, 1000}, {101, false, 500}, {200, false, 125}, {500, false, 8}, {1000, false, 1}, {1001, false, 0}, {400, true, 1000}, {1001, true, 0},
	} {
		made := 0
		for r := range 1000 {
			if generalTests(c.n, r, c.fixed) {
				made++
			}
		}
		if made != c.want {
			t.Errorf("%+v: tests in %d of 1000 replicates", c, made)
		}
	}
}

// A rule that goes by tests of neighbouring rungs has them in every replicate, and what
// else there is stays as it was.
func TestTestsOfNeighboursChangeNothingElse(t *testing.T) {
	rungs := smoothers.NewLocal().On(testDesigns()["even"], nil).AtDF([]float64{4, 5})
	var with, without ladderTests
	with.lay(rungs, testDesigns()["even"], false, true)
	without.lay(rungs, testDesigns()["even"], false, false)
	if !with.rungs[0].next.known || without.rungs[0].next.known {
		t.Error("neighbours are not tested as they should")
	}
	if with.rungs[0].spread != without.rungs[0].spread || with.rungs[0].line != without.rungs[0].line {
		t.Errorf("%+v with a test of neighbours, %+v without", with.rungs[0], without.rungs[0])
	}
}

func TestWhatHasAFormIsTestedWithoutWorkingOutS(t *testing.T) {
	x := testDesigns()["even"]
	for _, f := range smoothers.Families() {
		rungs := f.New().On(x, nil).AtDF([]float64{4, 5})
		var lt ladderTests
		lt.lay(rungs, x, false, false)
		general := f.Name == "kernel" || f.Name == "local"
		if lt.rungs[0].line.known == general {
			t.Errorf("%s: the test of the line is worked out: %v", f.Name, lt.rungs[0].line.known)
		}
	}
}

func TestFTestWalksUp(t *testing.T) {
	p := ladderPath()
	rule := &ByFTest{Alpha: 0.05}
	for _, c := range []struct {
		next    []float64
		step    int
		verdict Verdict
	}{
		{[]float64{0.5, 0, 0, 0}, 0, Picked},
		{[]float64{0, 0, 0, 0}, 4, Picked},
		{[]float64{0.05, 0.0500001, 0, 0}, 1, Picked},
		{[]float64{0, -1, 0, 0}, -1, NotApplicable},
	} {
		for i := range p.Steps {
			p.Steps[i].Next = PValue{}
			if i < 4 {
				p.Steps[i].Next = PValue{c.next[i], c.next[i] >= 0}
			}
		}
		if step, verdict := rule.Pick(p); step != c.step || verdict != c.verdict {
			t.Errorf("%v: step %d, %s; want %d, %s", c.next, step, verdict, c.step, c.verdict)
		}
	}
	for i := range p.Steps {
		p.Steps[i].Status = smoothers.NotFinite
	}
	if _, verdict := rule.Pick(p); verdict != NoRung {
		t.Errorf("nothing to pick from: %s", verdict)
	}
}
