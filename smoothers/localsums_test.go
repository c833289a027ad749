package smoothers

import (
	"math"
	"testing"
)

// sumsTol is what sums of powers may lose against the fit point by point: with terms
// 100 times the weights, tricube of degree 2 at the ends of the data has moments
// whose determinant is a thousandth of its terms.
const sumsTol = 2e-11

func TestSumsEqualPointByPoint(t *testing.T) {
	for _, n := range []int{30, 100, 300} {
		x := uniformDesign(n, 1)
		if n == 100 {
			for i := range x { // ties, and an origin far from 0
				x[i] = 1e4 + math.Round(x[i]*70)/70
			}
		}
		for name, s := range allLocal() {
			l := s.On(x, nil).(*localLadder)
			for _, df := range []float64{2, 3, 5, 8, 14, 30} {
				if tuning, status, _ := l.tune(df); status == OK && l.wide(tuning) {
					compareSums(t, name, l, tuning)
				}
			}
		}
	}
}

// compareSums holds leverages, their slopes, row norms and values by sums against localFit.
func compareSums(t *testing.T, name string, l *localLadder, tuning float64) {
	t.Helper()
	y := make([]float64, len(l.z))
	l.sums(y, wiggle(l.given, 1))
	s, q, g := l.sumsOn(tuning, y), l.squaredSumsOn(tuning), l.gaze(tuning)
	check := func(what string, at, got, want, tol float64) {
		if !(math.Abs(got-want) <= tol*math.Abs(want)) {
			t.Errorf("%s, n = %d, tuning %g: %s at %g is %.15g, want %.15g", name, len(l.x), tuning, what, at, got, want)
		}
	}
	left := 0
	for i, v := range l.z {
		g.at(v)
		if !s.at(v, true) || !q.gather(v, false) {
			left++
			continue
		}
		lev, slope := s.leverage(l.degree)
		want, wantSlope := l.fit.leverageAt(&g, v)
		check("leverage", v, lev, want, sumsTol)
		check("its slope", v, slope, wantSlope, 1e-8) // a guide for steps only
		row, _, _ := l.fit.row(&g, i)
		norm := want * want * l.count[i]
		for j, w := range row {
			norm += w * w * l.count[l.fit.lo+j]
		}
		if l.shape == gaussian {
			rescale(q.m[:], 1/math.Sqrt2)
		}
		check("row norm", v, s.quadratic(l.degree, q.m[:]), norm, sumsTol)
	}
	if left > len(l.z)/5 {
		t.Errorf("%s, tuning %g: sums gave up at %d of %d points", name, tuning, left, len(l.z))
	}
	c := localCurve{rung: &localRung{l: l, tuning: tuning}, sums: y, fit: l.fitOn(make([]float64, l.scratch()))}
	direct := sweep{sums: l.sumsOn(tuning, y)}
	for _, v := range targets(l.x, 4) {
		if s.at(v, false) {
			check("value", v, s.value(l.degree), c.value(&direct, v), sumsTol)
		}
	}
}

func TestRungBySumsEqualsRungByRows(t *testing.T) {
	x := uniformDesign(300, 1)
	for name, s := range allLocal() {
		rungs := s.On(x, nil).AtDF([]float64{2.5, 4, 9, 40})
		for i := range rungs {
			r := &rungs[i]
			if r.Status != OK {
				continue
			}
			l := s.On(x, nil).(*localLadder)
			want := Rung{Tuning: r.Tuning, Leverage: make([]float64, 300), RowNorm2: make([]float64, 300), Remainder: make([]float64, 300)}
			l.layByRows(&want, &localRung{})
			for _, v := range [][2]float64{{r.TrS, want.TrS}, {r.TrSTS, want.TrSTS}, {r.DFResidual, want.DFResidual}} {
				if math.Abs(v[0]-v[1]) > sumsTol*v[1] {
					t.Errorf("%s, df %g: got %.15g, want %.15g", name, r.DF, v[0], v[1])
				}
			}
			if d := max(apart(r.Leverage, want.Leverage, 1), apart(r.RowNorm2, want.RowNorm2, 1), apart(r.Remainder, want.Remainder, 1)); d > sumsTol {
				t.Errorf("%s, df %g: leverages, row norms or remainders %g apart", name, r.DF, d)
			}
		}
	}
}
