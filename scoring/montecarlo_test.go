package scoring

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"gonum.org/v1/gonum/stat"
)

func TestMeanAndProportionByHand(t *testing.T) {
	v := []float64{1, 2, 3, 6}
	m := Mean(v) // mean 3, sd √(14/3)
	if m.Value.Value != 3 || !near(m.MCSE.Value, math.Sqrt(14.0/3)/2, 1e-15) {
		t.Errorf("Mean = %+v", m)
	}
	p := Proportion(v, func(x float64) bool { return x > 2 })
	if p.Value.Value != 0.5 || p.MCSE.Value != 0.25 {
		t.Errorf("Proportion = %+v", p)
	}
}

func TestTooFewReplicatesGiveNoStandardError(t *testing.T) {
	if e := Mean(nil); e.Value.Known || e.MCSE.Known {
		t.Errorf("Mean of nothing = %+v", e)
	}
	if e := Mean([]float64{4}); e.Value.Value != 4 || e.MCSE.Known {
		t.Errorf("Mean of one = %+v", e)
	}
	if e := Spread([]float64{4}); e.Value.Known {
		t.Errorf("Spread of one = %+v", e)
	}
	if e := Quantile([]float64{4}, 0.9); e.Value.Value != 4 || e.MCSE.Known {
		t.Errorf("Quantile of one = %+v", e)
	}
	if e := Correlation([]float64{1, 1, 1}, []float64{1, 2, 3}); e.Value.Known {
		t.Errorf("Correlation with a constant = %+v", e)
	}
}

func TestQuantileInterpolatesBetweenOrderStatistics(t *testing.T) {
	v := []float64{0, 1, 4, 9, 16}
	for _, c := range []struct{ p, want float64 }{{0, 0}, {0.5, 4}, {0.9, 13.2}, {1, 16}, {0.125, 0.5}} {
		if got := Quantile(v, c.p).Value.Value; !near(got, c.want, 1e-15) {
			t.Errorf("Quantile(%v) = %v, want %v", c.p, got, c.want)
		}
	}
}

func TestCorrelationJackknifeEqualsLeavingOut(t *testing.T) {
	u := []float64{4, 5, 5, 7, 3, 9, 6}
	v := []float64{5, 5, 6, 6, 4, 7, 8}
	e := Correlation(u, v)
	if want := stat.Correlation(u, v, nil); !near(e.Value.Value, want, 1e-14) {
		t.Errorf("Correlation = %v, want %v", e.Value.Value, want)
	}
	var left []float64
	for i := range u {
		left = append(left, stat.Correlation(
			slices.Delete(slices.Clone(u), i, i+1), slices.Delete(slices.Clone(v), i, i+1), nil))
	}
	_, sd := stat.MeanStdDev(left, nil)
	if want := sd * 6 / math.Sqrt(7); !near(e.MCSE.Value, want, 1e-12) {
		t.Errorf("jackknife error = %v, want %v", e.MCSE.Value, want)
	}
}

// Each standard error must match the spread of its estimate over 4,000 repeated
// samples of 200 from a skewed law. The spread itself is known to about 1.1 % (1
// sd); the formulas are asymptotic, good to a few per cent at 200; 12 % is beyond
// four sd of both. Seed fixed.
func TestStandardErrorsMatchTheSpreadOverRepetitions(t *testing.T) {
	const samples, size = 4000, 200
	rng := rand.New(rand.NewPCG(11, 7))
	for _, c := range []struct {
		name string
		of   func(u, v []float64) Estimate
	}{
		{"mean", func(u, _ []float64) Estimate { return Mean(u) }},
		{"spread", func(u, _ []float64) Estimate { return Spread(u) }},
		{"median", func(u, _ []float64) Estimate { return median(u) }},
		{"q90", func(u, _ []float64) Estimate { return Quantile(slices.Sorted(slices.Values(u)), 0.9) }},
		{"proportion", func(u, _ []float64) Estimate {
			return Proportion(u, func(x float64) bool { return x > 1 })
		}},
		{"correlation", Correlation},
	} {
		var values, errors []float64
		for range samples {
			u, v := make([]float64, size), make([]float64, size)
			for i := range u {
				u[i] = rng.Float64() + rng.ExpFloat64()/2
				v[i] = u[i] + rng.ExpFloat64()/2
			}
			e := c.of(u, v)
			values, errors = append(values, e.Value.Value), append(errors, e.MCSE.Value)
		}
		_, spread := stat.MeanStdDev(values, nil)
		if got := stat.Mean(errors, nil); math.Abs(got/spread-1) > 0.12 {
			t.Errorf("%s: mean standard error %.4g, spread over repetitions %.4g", c.name, got, spread)
		}
	}
}
