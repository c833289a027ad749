package scoring

import (
	"slices"
	"testing"

	"bendtest/results"
	"bendtest/sim"
	"bendtest/sim/expr"
	"bendtest/smoothers"
)

// Common practice, no source: on 30 readings of a wave with about one period and
// noise of variance 0.0625, a regression spline's held-out error can come within 5 to
// 10 % of the noise variance, is least near 5 df (5 to 7 serve), clearly worse at 3
// and grows again past 11 and 17, while training error only falls. Medians over
// replicates, as a few points beyond the training range can rule a mean. The median
// cannot be that near the floor: a projection of p df with no bias has mean held-out
// error σ²(1 + p/n) at the same x, 17 % above it at 5 df; good samples are.
func TestRegressionSplineBehavesAsInCommonPractice(t *testing.T) {
	const replicates, noise = 400, 0.0625
	f, err := expr.Compile("cos(2*pi*x)")
	if err != nil {
		t.Fatal(err)
	}
	truth, err := sim.NewTruth(f, 0, 1)
	if err != nil {
		t.Fatal(err)
	}
	variance := noise
	cell, err := sim.NewCell(truth, &sim.Design{Law: &sim.UniformDesign{}, Redraw: true},
		&sim.Noise{Law: &sim.NormalNoise{}, Variance: &variance}, 30, 10000)
	if err != nil {
		t.Fatal(err)
	}
	dfs := []float64{3, 4, 5, 6, 7, 9, 11, 14, 17}
	contest := &Contest{Entrants: []Entrant{{"regression-spline", smoothers.NewRegressionSpline(), dfs}}}
	bench := NewBench("c", cell, contest, 20261201)
	for r := range replicates {
		bench.Replicate(r)
	}
	heldOut, train := map[float64]float64{}, map[float64]float64{}
	for _, df := range dfs {
		heldOut[df] = medianOf(bench.Rows().Fits, df, func(f *results.Fit) results.Number { return f.HeldoutMSE })
		train[df] = medianOf(bench.Rows().Fits, df, func(f *results.Fit) results.Number { return f.TrainMSE })
	}
	best := min(heldOut[5], heldOut[6], heldOut[7])
	for _, df := range dfs {
		if heldOut[df] < best {
			t.Errorf("held-out error is least at df %g", df)
		}
	}
	if ratio := best / noise; ratio < 1.17 || ratio > 1.3 {
		t.Errorf("least held-out error is %.3f of the noise variance", ratio)
	}
	within := 0
	for _, f := range bench.Rows().Fits {
		if f.DF == 5 && f.HeldoutMSE.Value < 1.1*noise {
			within++
		}
	}
	if within < replicates/20 {
		t.Errorf("at 5 df only %d of %d samples come within 10 %% of the noise variance", within, replicates)
	}
	if heldOut[3] < 1.3*best {
		t.Errorf("3 df is not clearly worse: %.4f against %.4f", heldOut[3], best)
	}
	if !(heldOut[11] > heldOut[7] && heldOut[17] > 1.1*heldOut[11]) {
		t.Errorf("held-out error does not grow: %.4f, %.4f, %.4f at 7, 11, 17 df", heldOut[7], heldOut[11], heldOut[17])
	}
	for i := range dfs[1:] {
		if train[dfs[i+1]] >= train[dfs[i]] {
			t.Errorf("training error does not fall from %g to %g df", dfs[i], dfs[i+1])
		}
	}
	t.Logf("held-out medians %v", heldOut)
}

// medianOf is the median of a figure over the fits at a df.
func medianOf(fits []results.Fit, df float64, figure func(*results.Fit) results.Number) float64 {
	var v []float64
	for i := range fits {
		if fits[i].DF == df && figure(&fits[i]).Known {
			v = append(v, figure(&fits[i]).Value)
		}
	}
	slices.Sort(v)
	return v[len(v)/2]
}
