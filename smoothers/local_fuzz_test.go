package smoothers

import (
	"math"
	"slices"
	"testing"
)

// fuzzDesign makes a design of bytes: each is a step from the last x, of a size from
// none (a tie) through near ties to gaps.
func fuzzDesign(steps []byte, scale, offset float64) []float64 {
	if len(steps) > 60 {
		steps = steps[:60]
	}
	x := []float64{0}
	for _, b := range steps {
		step := float64(b%16) / 16
		switch b / 16 % 8 {
		case 0:
			step = 0
		case 1:
			step *= 1e-9
		case 2:
			step *= 1e-4
		case 3:
			step *= 20
		}
		x = append(x, x[len(x)-1]+step)
	}
	for i := range x {
		x[i] = offset + scale*x[i]
	}
	slices.Sort(x)
	return x
}

func FuzzLocal(f *testing.F) {
	f.Add([]byte("even even even"), byte(0), 1.0, 0.0, 4.5)
	f.Add([]byte{0, 17, 33, 200, 90, 21, 60, 100, 18, 0, 0, 77, 130, 140, 222}, byte(9), 1e-6, 1e4, 3.1)
	f.Add([]byte{200, 0, 0}, byte(19), 1e8, -1e9, 2.0)
	f.Fuzz(func(t *testing.T, steps []byte, which byte, scale, offset, df float64) {
		if !(math.Abs(scale) < 1e100) || !(math.Abs(offset) < 1e100) || math.Abs(scale) < 1e-100 {
			return
		}
		x := fuzzDesign(steps, scale, offset)
		all := allLocal()
		names := make([]string, 0, len(all))
		for name := range all {
			names = append(names, name)
		}
		slices.Sort(names)
		name := names[int(which)%len(names)]
		mem := &Arena{Lasting: which >= 128}
		rungs := all[name].On(x, mem).AtDF([]float64{df, math.Mod(math.Abs(df), float64(len(x)))})
		for i := range rungs {
			fuzzRung(t, name, x, &rungs[i])
		}
	})
}

// fuzzRung wants a status, or finite figures with tr S on target and finite fits.
func fuzzRung(t *testing.T, name string, x []float64, r *Rung) {
	if r.Status != OK {
		return
	}
	finite := func(what string, v ...float64) {
		for i, u := range v {
			if math.IsNaN(u) || math.IsInf(u, 0) {
				t.Fatalf("%s on %v, df %g, tuning %g: %s %d is %g", name, x, r.DF, r.Tuning, what, i, u)
			}
		}
	}
	if !(math.Abs(r.TrS-r.DF) <= dfTolerance*r.DF) {
		t.Fatalf("%s on %v: tr S = %.12g for df %.12g", name, x, r.TrS, r.DF)
	}
	finite("figure", r.TrS, r.TrSTS, r.DFResidual, r.Tuning)
	finite("leverage", r.Leverage...)
	finite("row norm", r.RowNorm2...)
	finite("remainder", r.Remainder...)
	for i, v := range r.Leverage {
		if !(v >= 0 && v <= 1 && r.Remainder[i] >= 0 && math.Abs(v+r.Remainder[i]-1) < 1e-12) {
			t.Fatalf("%s on %v, df %g: leverage %g, remainder %g", name, x, r.DF, v, r.Remainder[i])
		}
	}
	var f Fit
	r.Fit(wiggle(x, 1), &f)
	finite("fitted value", f.Fitted...)
	for _, copies := range []int{1, 20} { // point by point, and by pieces
		var at []float64
		for range copies {
			at = append(at, targets(x, 2)...)
		}
		slices.Sort(at)
		v := make([]float64, len(at))
		f.Curve.At(v, at)
		finite("curve", v...)
	}
}
