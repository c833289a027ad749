package sim

import (
	"math"
	"slices"
	"testing"
)

// The root of the covariance against the covariance itself: variances times ρ^|i−j|.
func TestErrorRootIsARootOfTheCovariance(t *testing.T) {
	sd := 0.5
	scale := expression(t, "1 + x")
	for _, noise := range []*Noise{
		{Law: &NormalNoise{}, SD: &sd},
		{Law: &LaplaceNoise{}, SD: &sd, AR1: 0.6, Scale: scale},
		{Law: &NormalNoise{}, SD: &sd, AR1: -0.3},
	} {
		c := theoryCell(t, noise)
		x := c.FixedX(1)
		root, variances := c.ErrorRoot(x), c.ErrorVariances(x)
		for i := range x {
			for j := range x {
				got := 0.0
				for k := range root {
					got += root[k][i] * root[k][j]
				}
				want := math.Sqrt(variances[i]*variances[j]) * math.Pow(noise.AR1, math.Abs(float64(i-j)))
				if math.Abs(got-want) > 1e-14 {
					t.Fatalf("ar1 = %g: covariance (%d, %d) is %.15g, want %.15g", noise.AR1, i, j, got, want)
				}
			}
			want := sd * sd
			if noise.Scale != nil {
				want *= (1 + x[i]) * (1 + x[i])
			}
			if math.Abs(variances[i]-want) > 1e-14 {
				t.Errorf("variance at %g is %g, want %g", x[i], variances[i], want)
			}
		}
	}
}

// Fresh readings are of the law of held-out ones, and drawing them changes nothing else.
// Of 100,000 readings the variance is off by more than 3 % with probability below 1e-9.
func TestFreshReadingsAreIndependentOfTheSample(t *testing.T) {
	sd := 0.5
	c := theoryCell(t, &Noise{Law: &NormalNoise{}, SD: &sd, AR1: 0.6})
	var first, again Sample
	fresh := make([]float64, c.N)
	var square, lag, cross float64
	const replicates = 5000
	for r := range replicates {
		c.Draw(3, r, &first)
		c.Fresh(3, r, &first, fresh)
		c.Draw(3, r, &again)
		if !slices.Equal(first.Train.Y, again.Train.Y) || !slices.Equal(first.Held.Y, again.Held.Y) {
			t.Fatal("fresh readings change the sample")
		}
		for i, y := range fresh {
			e := y - first.Train.F[i]
			square += e * e
			cross += e * (first.Train.Y[i] - first.Train.F[i])
			if i > 0 {
				lag += e * (fresh[i-1] - first.Train.F[i-1])
			}
		}
	}
	n := float64(replicates * c.N)
	if math.Abs(square/n/(sd*sd)-1) > 0.03 || math.Abs(lag/n/(sd*sd)) > 0.03 || math.Abs(cross/n/(sd*sd)) > 0.03 {
		t.Errorf("variance %g, with the neighbour %g, with the reading before %g", square/n, lag/n, cross/n)
	}
}

func TestHeldOutMeanIsThatOfTheLaw(t *testing.T) {
	sd := 0.5
	c := theoryCell(t, &Noise{Law: &NormalNoise{}, SD: &sd})
	got, err := c.HeldOutMean(func(dst, x []float64) {
		if !slices.IsSorted(x) {
			t.Fatal("x are not in order")
		}
		for i, v := range x {
			dst[i] = math.Abs(v - 0.3)
		}
	})
	if want := (0.09 + 0.49) / 2; err != nil || math.Abs(got-want) > 1e-9 {
		t.Errorf("E|X − 0.3| = %.12g, want %.12g (%v)", got, want, err)
	}
}

// theoryCell has 20 even x on [0, 1].
func theoryCell(t *testing.T, noise *Noise) *Cell {
	t.Helper()
	truth, err := NewTruth(expression(t, "sin(5*x)"), 0, 1)
	if err != nil {
		t.Fatal(err)
	}
	c, err := NewCell(truth, &Design{Law: &EvenDesign{}, Redraw: true}, noise, 20, 100)
	if err != nil {
		t.Fatal(err)
	}
	return c
}
