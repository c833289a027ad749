package scoring

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"
)

// Student's quantiles at 0.975 as every table prints them, and the normal's.
func TestBandsHaveStudentsQuantiles(t *testing.T) {
	c := newStudentTable()
	for nu, want := range map[float64]float64{
		1: 12.7062, 2: 4.30265, 3: 3.18245, 5: 2.57058, 10: 2.22814, 30: 2.04227, 120: 1.97993, 1e9: 1.959964,
	} {
		if got := c.half(nu); !near(got, want, 6e-6*want) {
			t.Errorf("%g df: %.8g, want %.6g", nu, got, want)
		}
	}
	if !near(normalHalf, distuv.UnitNormal.Quantile((1+bandLevel)/2), 1e-14) {
		t.Error("the normal quantile is another")
	}
}

// The table is checked by the distribution function at what it returns.
func TestStudentTableIsGoodBetweenItsPoints(t *testing.T) {
	c := newStudentTable()
	for nu := 0.3; nu < 3000; nu *= 1.037 {
		law := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: nu}
		if p := law.CDF(c.half(nu)); !near(p, 0.975, 1e-11) {
			t.Errorf("%g df: P = %.14f", nu, p)
		}
	}
}

func TestCoverageCountsPointsWithinTheBand(t *testing.T) {
	f, fitted := []float64{0, 1, 2, 3}, []float64{0.5, 1, 2.9, 2}
	if got := coverage(f, fitted, []float64{1, 0, 0.25, 1}, 1); got != 0.75 { // 0.9 > 0.5 alone lies outside
		t.Errorf("coverage %v, want 0.75", got)
	}
	if !math.IsNaN(coverage(nil, nil, nil, 1)) {
		t.Error("an empty design has a coverage")
	}
}
