package smoothertest

import (
	"fmt"
	"math"

	"bendtest/smoothers"
)

func absurdDF(tr *trial, r *report) {
	dfs := []float64{0, -1, -1e9, 1e9, math.NaN(), math.Inf(1), math.Inf(-1), 1e-300}
	for _, d := range designs() {
		for k, rung := range tr.smoother.On(d.x, nil).AtDF(dfs) {
			where := fmt.Sprintf("%s, df %g", d.name, dfs[k])
			judge(r, where, &rung, len(d.x))
			if rung.Status == smoothers.OK {
				r.faultf("%s: ok", where)
			}
		}
	}
}

func absurdTuning(tr *trial, r *report) {
	tunings := []float64{math.NaN(), math.Inf(-1), -1, 0, 1e-300, 1e300, math.Inf(1)}
	for _, d := range designs() {
		for k, rung := range tr.smoother.On(d.x, nil).AtTuning(tunings) {
			tr.usable(r, fmt.Sprintf("%s, tuning %g", d.name, tunings[k]), &rung, d.x)
			if math.IsNaN(tunings[k]) && rung.Status == smoothers.OK {
				r.faultf("%s: a tuning of NaN is ok", d.name)
			}
		}
	}
}

// usable reports a rung that is neither a status nor a fit with finite values.
func (tr *trial) usable(r *report, where string, rung *smoothers.Rung, x []float64) {
	judge(r, where, rung, len(x))
	if rung.Status != smoothers.OK {
		return
	}
	if !(rung.TrS > 0 && rung.TrS <= float64(len(x))*(1+rounding)) {
		r.faultf("%s: tr S = %g of %d observations", where, rung.TrS, len(x))
	}
	var f smoothers.Fit
	rung.Fit(readings(x, 1), &f)
	v := make([]float64, len(x))
	f.Curve.At(v, x)
	if !finite(f.Fitted...) || !finite(v...) {
		r.faultf("%s: ok, yet the fit is not finite", where)
	}
}

func smallDesigns(tr *trial, r *report) {
	dfs := append([]float64{1, 2, 3}, tr.claims.DF...)
	for _, x := range [][]float64{{0.3}, {1, 2}, {5, 5}, {0, 1, 7}, {0, 0, 1}, {2, 2, 2}, {4, 4, 4, 4, 4, 4, 4, 4}, {0, 1, 1, 1, 1, 1, 1, 3}} {
		rungs := tr.smoother.On(x, nil).AtDF(dfs)
		for k := range rungs {
			where := fmt.Sprintf("x = %v, df %g", x, dfs[k])
			tr.usable(r, where, &rungs[k], x)
			if rungs[k].Status == smoothers.OK && !(math.Abs(rungs[k].TrS-dfs[k]) <= dfTolerance*dfs[k]) {
				r.faultf("%s: tr S = %.12g without a status", where, rungs[k].TrS)
			}
		}
		tunings := []float64{0, 0.1, 1, 2, 1e6}
		rungs = tr.smoother.On(x, nil).AtTuning(tunings)
		for k := range rungs {
			tr.usable(r, fmt.Sprintf("x = %v, tuning %g", x, tunings[k]), &rungs[k], x)
		}
	}
}
