package scoring

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/stat"
)

// vectors are R replicates of three figures: one always there, one often missing, one with
// a large offset.
func vectors(r int) [][]Moment {
	rng := rand.New(rand.NewPCG(1, 2))
	v := make([][]Moment, r)
	for i := range v {
		v[i] = []Moment{{1, rng.NormFloat64(), 0}, {}, {1, 1e6 + rng.NormFloat64(), 0}}
		if rng.IntN(3) > 0 {
			v[i][1] = Moment{1, rng.ExpFloat64(), 0}
		}
	}
	return v
}

func TestMomentsAreThoseOfTheSample(t *testing.T) {
	var f Forest
	var sample [3][]float64
	for _, v := range vectors(1000) {
		f.Add(v)
		for k, m := range v {
			if m.Count > 0 {
				sample[k] = append(sample[k], m.Mean)
			}
		}
	}
	for k, m := range f.Total(nil) {
		mean, variance := stat.MeanVariance(sample[k], nil)
		if m.Count != len(sample[k]) || !near(m.Mean, mean, 1e-12*(1+math.Abs(mean))) || !near(m.Variance().Value, variance, 1e-8*variance) {
			t.Errorf("figure %d: %+v of %d, want mean %v, variance %v", k, m, len(sample[k]), mean, variance)
		}
	}
}

// However replicates are cut into blocks of a power of 2, no bit of the total changes.
func TestBlocksChangeNoBitOfATotal(t *testing.T) {
	for _, r := range []int{1, 2, 3, 31, 32, 100, 577} {
		all := vectors(r)
		var whole Forest
		for _, v := range all {
			whole.Add(v)
		}
		want := whole.Total(nil)
		for block := 1; block < 2*r; block *= 2 {
			var outer, inner Forest
			var tail []Moment
			for from := 0; from < r; from += block {
				inner.Reset()
				for _, v := range all[from:min(from+block, r)] {
					inner.Add(v)
				}
				if from+block <= r {
					outer.Add(inner.Total(nil))
				} else {
					tail = inner.Total(nil)
				}
			}
			got := outer.Total(tail)
			for k := range want {
				if got[k] != want[k] {
					t.Errorf("%d replicates in blocks of %d: figure %d is %+v, want %+v", r, block, k, got[k], want[k])
				}
			}
		}
	}
}

func TestAForestAllocatesNothingInSteadyState(t *testing.T) {
	var f Forest
	all := vectors(64)
	add := func() {
		f.Reset()
		for _, v := range all {
			f.Add(v)
		}
	}
	add()
	if n := testing.AllocsPerRun(10, add); n > 0 {
		t.Errorf("%v allocations", n)
	}
}
