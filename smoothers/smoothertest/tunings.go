package smoothertest

import (
	"math"
	"slices"

	"bendtest/smoothers"
)

func tuningReproduces(tr *trial, r *report) {
	for _, c := range tr.on() {
		ladder := tr.smoother.On(c.x, nil)
		for k := range c.rungs {
			want := &c.rungs[k]
			if want.Status != smoothers.OK {
				continue
			}
			got := ladder.AtTuning([]float64{want.Tuning})
			compareRungs(r, c.at(k)+": at its tuning", &got[0], want, slices.Clone[[]float64], 1)
			if got[0].DF != got[0].TrS && !(math.Abs(got[0].DF-got[0].TrS) <= rounding*got[0].TrS) {
				r.faultf("%s: at its tuning df is %.12g, not tr S", c.at(k), got[0].DF)
			}
		}
	}
}

// traceMonotone looks between the tunings of neighbouring df, which must be in order.
func traceMonotone(tr *trial, r *report) {
	if !tr.claims.Monotone {
		r.notef("a monotone trace is not claimed")
		return
	}
	for _, c := range tr.on() {
		ok := slices.DeleteFunc(slices.Clone(c.rungs), func(g smoothers.Rung) bool { return g.Status != smoothers.OK })
		for k := range max(0, len(ok)-1) {
			a, b := ok[k].Tuning, ok[k+1].Tuning
			if a == b || k > 0 && (a < b) != (ok[k-1].Tuning < a) {
				r.faultf("%s: tunings %g, %g of df %g, %g are out of order", c.name, a, b, ok[k].DF, ok[k+1].DF)
			}
			if tr.claims.WholeDF || math.IsInf(a, 0) || !(a*b > 0) {
				continue
			}
			last := ok[k].TrS
			for _, f := range []float64{0.2, 0.4, 0.6, 0.8, 1} {
				t := a * math.Pow(b/a, f)
				mid := tr.smoother.On(c.x, nil).AtTuning([]float64{t})[0]
				if mid.Status == smoothers.OK && !(mid.TrS >= last-rounding*last) {
					r.faultf("%s: tr S falls from %.9g to %.9g towards df %g", c.name, last, mid.TrS, ok[k+1].DF)
				}
				last = mid.TrS
			}
		}
	}
}

// identical reports where two rungs differ in a single bit.
func identical(r *report, where string, got, want *smoothers.Rung) {
	same := got.DF == want.DF && got.Status == want.Status && got.Note == want.Note &&
		sameBits([]float64{got.Tuning, got.TrS, got.TrSTS, got.DFResidual, got.LogDet}, []float64{want.Tuning, want.TrS, want.TrSTS, want.DFResidual, want.LogDet}) &&
		sameBits(got.Leverage, want.Leverage) && sameBits(got.RowNorm2, want.RowNorm2) && sameBits(got.Remainder, want.Remainder)
	if !same {
		r.faultf("%s: the rung differs: tr S %.17g and %.17g, tuning %.17g and %.17g", where, got.TrS, want.TrS, got.Tuning, want.Tuning)
		return
	}
	if got.Status != smoothers.OK {
		return
	}
	y := make([]float64, len(want.Leverage))
	for i := range y {
		y[i] = math.Cos(float64(i * i))
	}
	if !sameBits(fitted(got, y), fitted(want, y)) {
		r.faultf("%s: the fit differs", where)
	}
}

func rungsIndependent(tr *trial, r *report) {
	for _, c := range tr.on() {
		back := tr.smoother.On(c.x, nil).AtDF(reversed(tr.claims.DF))
		for k, df := range tr.claims.DF {
			alone := tr.smoother.On(c.x, nil).AtDF([]float64{df})
			identical(r, c.at(k)+" asked for alone", &alone[0], &c.rungs[k])
			identical(r, c.at(k)+" asked for in falling order", &back[len(back)-1-k], &c.rungs[k])
		}
		ladder := tr.smoother.On(c.x, nil)
		ladder.AtDF(tr.claims.DF[:1])
		for k, rung := range ladder.AtDF(tr.claims.DF) {
			identical(r, c.at(k)+" asked for in a second call", &rung, &c.rungs[k])
		}
	}
}

// memoryIndependent lays all designs out on one arena, used before and reset each time,
// then two at once, and fits into a Fit that has seen other designs.
func memoryIndependent(tr *trial, r *report) {
	var mem smoothers.Arena
	var f smoothers.Fit
	cases := tr.on()
	for range 2 {
		for i, c := range cases {
			mem.Reset()
			rungs := tr.smoother.On(c.x, &mem).AtDF(tr.claims.DF)
			tr.smoother.On(cases[(i+1)%len(cases)].x, &mem).AtDF(tr.claims.DF)
			for k := range rungs {
				identical(r, c.at(k)+" in used memory", &rungs[k], &c.rungs[k])
				if rungs[k].Status != smoothers.OK {
					continue
				}
				y := readings(c.x, 1)
				rungs[k].Fit(y, &f)
				var fresh smoothers.Fit
				c.rungs[k].Fit(y, &fresh)
				t := scan(c.x, 101)
				v, want := make([]float64, len(t)), make([]float64, len(t))
				f.Curve.At(v, t)
				fresh.Curve.At(want, t)
				if !sameBits(v, want) {
					r.faultf("%s: the curve in used memory differs", c.at(k))
				}
			}
		}
	}
}
