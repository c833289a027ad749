package sim

import (
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/mathext"
	"gonum.org/v1/gonum/stat"
	"gonum.org/v1/gonum/stat/distuv"
)

// noiseLaws are all noise laws.
func noiseLaws() []NoiseLaw {
	return []NoiseLaw{
		&NormalNoise{}, &StudentNoise{Nu: 9}, &LaplaceNoise{}, &UniformNoise{}, &SkewedNoise{Shape: 2},
		&SkewedNoise{Shape: 0.5}, &SkewedNoise{Shape: 0.1}, &ContaminatedNoise{Fraction: 0.1, Ratio: 4},
		&FileNoise{Column{Values: []float64{3, 4, 8, 8, 1}}},
	}
}

// Mean and mean square of 400,000 draws lie within 5 standard errors of 0 and 1:
// false alarm about 1e-5 over all laws.
func TestNoisesHaveMeanZeroAndVarianceOne(t *testing.T) {
	const m = 400_000
	var s Stream
	e, square := make([]float64, m), make([]float64, m)
	for i, law := range noiseLaws() {
		s.set(2, "noise", i, "test")
		law.errors()(e, &s)
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

// The distribution functions are those of the textbook, stretched to variance 1;
// distances as in TestDesignsFollowTheirDistribution, over 200,000 draws.
func TestNoisesFollowTheirDistribution(t *testing.T) {
	const m = 200_000
	normal := distuv.UnitNormal.CDF
	gamma := func(k float64) func(float64) float64 {
		return func(e float64) float64 { return mathext.GammaIncReg(k, max(0, k+math.Sqrt(k)*e)) }
	}
	c := math.Sqrt(0.9 + 0.1*16)
	var s Stream
	for i, l := range []struct {
		law NoiseLaw
		cdf func(float64) float64
	}{
		{&NormalNoise{}, normal},
		{&StudentNoise{Nu: 5}, func(e float64) float64 { return distuv.StudentsT{Sigma: 1, Nu: 5}.CDF(e * math.Sqrt(5.0/3)) }},
		{&StudentNoise{Nu: 2.1}, func(e float64) float64 { return distuv.StudentsT{Sigma: 1, Nu: 2.1}.CDF(e * math.Sqrt(2.1/0.1)) }},
		{&LaplaceNoise{}, distuv.Laplace{Scale: 1 / math.Sqrt2}.CDF},
		{&UniformNoise{}, distuv.Uniform{Min: -math.Sqrt(3), Max: math.Sqrt(3)}.CDF},
		{&SkewedNoise{Shape: 2}, gamma(2)},
		{&SkewedNoise{Shape: 0.5}, gamma(0.5)},
		{&SkewedNoise{Shape: 400}, gamma(400)},
		{&ContaminatedNoise{Fraction: 0.1, Ratio: 4}, func(e float64) float64 { return 0.9*normal(e*c) + 0.1*normal(e*c/4) }},
	} {
		s.set(4, "noise", i, "test")
		e := make([]float64, m)
		l.law.errors()(e, &s)
		slices.Sort(e)
		if d := distance(e, l.cdf); d > 2.9/math.Sqrt(m) {
			t.Errorf("%s: distance %.5f, limit %.5f", l.law.describe(), d, 2.9/math.Sqrt(m))
		}
	}
}

// Residuals from a file have mean 0 and mean square 1 over the file itself, which is
// the law that is drawn from.
func TestResidualsFromAFileAreExact(t *testing.T) {
	var s Stream
	seen := map[float64]bool{}
	e := make([]float64, 1000)
	(&FileNoise{Column{Values: []float64{3, 4, 9, 8, 1}}}).errors()(e, &s)
	for _, v := range e {
		seen[v] = true
	}
	mean, square := 0.0, 0.0
	for v := range seen {
		mean += v / 5
		square += v * v / 5
	}
	if len(seen) != 5 || math.Abs(mean) > 1e-15 || math.Abs(square-1) > 1e-15 {
		t.Errorf("%d values of mean %v and mean square %v", len(seen), mean, square)
	}
}
