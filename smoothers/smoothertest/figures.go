package smoothertest

import (
	"math"

	"bendtest/smoothers"
)

// dfTolerance is how far tr S may be off df, relative to df: the promise of package
// smoothers.
const dfTolerance = 1e-8

// judge reports what is wrong with a rung by itself: a status without a fit, or a fit
// with all its figures.
func judge(r *report, where string, rung *smoothers.Rung, n int) {
	if rung.Status != smoothers.OK {
		if !finite(rung.TrS, rung.TrSTS, rung.DFResidual, rung.LogDet) {
			r.faultf("%s: %v, yet a figure is not finite: %g, %g, %g", where, rung.Status, rung.TrS, rung.TrSTS, rung.DFResidual)
		}
		return
	}
	if len(rung.Leverage) != n || len(rung.RowNorm2) != n || len(rung.Remainder) != n {
		r.faultf("%s: lengths %d, %d, %d for %d observations", where, len(rung.Leverage), len(rung.RowNorm2), len(rung.Remainder), n)
		return
	}
	ok := finite(rung.TrS, rung.TrSTS, rung.DFResidual, rung.LogDet) &&
		finite(rung.Leverage...) && finite(rung.RowNorm2...) && finite(rung.Remainder...)
	if !ok || math.IsNaN(rung.Tuning) {
		r.faultf("%s: ok, yet a figure is not finite", where)
	}
}

func dfOnTarget(tr *trial, r *report) {
	for _, c := range tr.on() {
		if len(c.rungs) != len(tr.claims.DF) {
			r.faultf("%s: %d rungs for %d df", c.name, len(c.rungs), len(tr.claims.DF))
			continue
		}
		for k, df := range tr.claims.DF {
			rung := &c.rungs[k]
			judge(r, c.at(k), rung, len(c.x))
			if rung.DF != df {
				r.faultf("%s: rung %d says df %g, asked for %g", c.name, k, rung.DF, df)
			}
			if rung.Status == smoothers.OK && !(math.Abs(rung.TrS-df) <= dfTolerance*df) {
				r.faultf("%s: tr S = %.12g without a status", c.at(k), rung.TrS)
			}
		}
	}
}

func dfAttained(tr *trial, r *report) {
	even := tr.on()[0]
	for k := range even.rungs {
		if status := even.rungs[k].Status; status != smoothers.OK {
			r.faultf("%s: %v", even.at(k), status)
		}
	}
	if !tr.claims.WholeDF {
		return
	}
	df := tr.claims.DF[0] + 0.5
	if rung := tr.smoother.On(even.x, nil).AtDF([]float64{df})[0]; rung.Status == smoothers.OK {
		r.faultf("%s: df %g is ok though only whole df are claimed", even.name, df)
	}
}

func figuresAddUp(tr *trial, r *report) {
	tr.each(func(c *trialCase, k int, rung *smoothers.Rung) {
		n := float64(len(c.x))
		if d := sum(rung.Leverage) - rung.TrS; !(math.Abs(d) <= rounding*rung.TrS) {
			r.faultf("%s: the leverages add up to tr S %+.2g", c.at(k), d)
		}
		if d := sum(rung.RowNorm2) - rung.TrSTS; !(math.Abs(d) <= rounding*rung.TrSTS) {
			r.faultf("%s: the row norms add up to tr SᵀS %+.2g", c.at(k), d)
		}
		if d := n - 2*rung.TrS + rung.TrSTS - rung.DFResidual; !(math.Abs(d) <= rounding*n) {
			r.faultf("%s: n − 2 tr S + tr SᵀS is df_residual %+.2g", c.at(k), d)
		}
		for i, v := range rung.Leverage {
			if d := 1 - v - rung.Remainder[i]; !(math.Abs(d) <= rounding) {
				r.faultf("%s: 1 − leverage %d is its remainder %+.2g", c.at(k), i, d)
				break
			}
		}
	})
}

func matrixAgrees(tr *trial, r *report) {
	tr.each(func(c *trialCase, k int, rung *smoothers.Rung) {
		s := c.matrix(k)
		trace, norm := 0.0, 0.0
		for i := range c.x {
			row := 0.0
			for j := range s {
				row += s[j][i] * s[j][i]
			}
			trace += s[i][i]
			norm += row
			if !(math.Abs(s[i][i]-rung.Leverage[i]) <= rounding) {
				r.faultf("%s: S has %.12g at (%d, %d), the leverage is %.12g", c.at(k), s[i][i], i, i, rung.Leverage[i])
			}
			if !(math.Abs(row-rung.RowNorm2[i]) <= rounding) {
				r.faultf("%s: row %d of S has squared length %.12g, stated %.12g", c.at(k), i, row, rung.RowNorm2[i])
			}
			if !(math.Abs(1-s[i][i]-rung.Remainder[i]) <= rounding) {
				r.faultf("%s: 1 − S_ii of %d is %.12g, the remainder %.12g", c.at(k), i, 1-s[i][i], rung.Remainder[i])
			}
		}
		n := float64(len(c.x))
		for _, v := range []struct {
			name      string
			got, want float64
		}{{"tr S", rung.TrS, trace}, {"tr SᵀS", rung.TrSTS, norm}, {"df_residual", rung.DFResidual, n - 2*trace + norm}} {
			if !(math.Abs(v.got-v.want) <= rounding*n) {
				r.faultf("%s: %s = %.12g, of the fits %.12g", c.at(k), v.name, v.got, v.want)
			}
		}
	})
}
