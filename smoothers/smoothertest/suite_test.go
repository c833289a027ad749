package smoothertest

import (
	"math"
	"slices"
	"sync"
	"testing"
	"time"

	"bendtest/smoothers"
)

// honest are the claims that the smoothing spline keeps.
func honest() Claims {
	return Claims{DF: []float64{2.5, 4, 12}, Lines: true, LeaveOneOut: Everywhere, Monotone: true, TuningPower: 3}
}

func TestAnHonestSmootherHasNoFaults(t *testing.T) {
	for _, f := range Faults(smoothers.NewSmoothingSpline(), honest()) {
		t.Errorf("%s: %v", f.Check, f.Details)
	}
}

// A bent smoother is a smoothing spline of which one thing is wrong.
type bent struct {
	x       func(x []float64) []float64                                                 // the design it uses
	askDF   func(dfs []float64) []float64                                               // the df it looks for
	askAt   func(x, tunings []float64) []float64                                        // the tunings it looks for
	rung    func(k int, x []float64, mem *smoothers.Arena, r *smoothers.Rung)           // what it does to its rungs
	fit     func(r *smoothers.Rung, x, y []float64, f *smoothers.Fit)                   // how it fits
	curve   func(x []float64, inner smoothers.Curve) func(t float64, v float64) float64 // what it does to its curve
	refuses int                                                                         // panics on fewer observations
}

func (b bent) Check() error { return nil }

func (b bent) On(x []float64, mem *smoothers.Arena) smoothers.Ladder {
	if len(x) < b.refuses {
		panic("too few observations")
	}
	used := x
	if b.x != nil {
		used = b.x(x)
	}
	return &bentLadder{b, smoothers.NewSmoothingSpline().On(used, mem), x, mem}
}

type bentLadder struct {
	bent
	inner smoothers.Ladder
	x     []float64
	mem   *smoothers.Arena
}

func (l *bentLadder) AtDF(dfs []float64) []smoothers.Rung {
	asked := dfs
	if l.askDF != nil {
		asked = l.askDF(dfs)
	}
	rungs := l.inner.AtDF(asked)
	for k := range rungs {
		rungs[k].DF = dfs[k]
	}
	return l.change(rungs)
}

func (l *bentLadder) AtTuning(tunings []float64) []smoothers.Rung {
	if l.askAt != nil {
		tunings = l.askAt(l.x, tunings)
	}
	return l.change(l.inner.AtTuning(tunings))
}

func (l *bentLadder) change(rungs []smoothers.Rung) []smoothers.Rung {
	for k := range rungs {
		r := &rungs[k]
		if r.Status != smoothers.OK {
			continue
		}
		if l.rung != nil {
			l.rung(k, l.x, l.mem, r)
		}
		if l.fit == nil && l.curve == nil {
			continue
		}
		inner := *r
		r.SolveBy(func(y []float64, f *smoothers.Fit) {
			if l.fit != nil {
				l.fit(&inner, l.x, y, f)
				return
			}
			inner.Fit(y, f)
			f.Curve = bentCurve{f.Curve, l.curve(l.x, f.Curve)}
		})
	}
	return rungs
}

type bentCurve struct {
	inner smoothers.Curve
	value func(t, v float64) float64
}

func (c bentCurve) At(dst, t []float64) {
	c.inner.At(dst, t)
	for i := range dst {
		dst[i] = c.value(t[i], dst[i])
	}
}

// tweak fits and then changes the fitted values.
func tweak(change func(y, fitted []float64)) func(r *smoothers.Rung, x, y []float64, f *smoothers.Fit) {
	return func(r *smoothers.Rung, _, y []float64, f *smoothers.Fit) {
		r.Fit(y, f)
		change(y, f.Fitted)
	}
}

// roundWhere rounds fits to single precision where the readings' largest size is as said.
func roundWhere(from, to float64) func(y, fitted []float64) {
	return func(y, fitted []float64) {
		size := math.Abs(y[0])
		for _, v := range y {
			size = max(size, math.Abs(v))
		}
		for i, v := range fitted {
			if size > from && size < to {
				fitted[i] = float64(float32(v))
			}
		}
	}
}

// swallow replaces NaN by 5.
func swallow(v []float64) []float64 {
	return transformed(v, func(u float64) float64 {
		if math.IsNaN(u) {
			return 5
		}
		return u
	})
}

// bentSmoothers are deliberately wrong, each with the check that must catch it.
func bentSmoothers() map[string]bent {
	var lock sync.Mutex
	var shared []float64
	return map[string]bent{
		"df-on-target": {askDF: func(dfs []float64) []float64 {
			return transformed(dfs, func(df float64) float64 { return df * (1 + 1e-7) })
		}},
		"df-attained": {askDF: func(dfs []float64) []float64 {
			return transformed(dfs, func(df float64) float64 {
				if df > 10 {
					return -1
				}
				return df
			})
		}},
		"figures-add-up": {rung: func(_ int, _ []float64, _ *smoothers.Arena, r *smoothers.Rung) { r.TrSTS = r.TrS }},
		"matrix": {rung: func(_ int, _ []float64, _ *smoothers.Arena, r *smoothers.Rung) {
			for _, v := range [][]float64{r.Leverage, r.RowNorm2, r.Remainder} {
				last := v[len(v)-1]
				copy(v[1:], v)
				v[0] = last
			}
		}},
		"forms": {rung: func(_ int, _ []float64, _ *smoothers.Arena, r *smoothers.Rung) { r.Form = smoothers.Projection }},
		"linear": {fit: tweak(func(y, fitted []float64) {
			for i := range fitted {
				fitted[i] = min(max(fitted[i], slices.Min(y)+0.5), slices.Max(y)-0.5)
			}
		})},
		"constants": {fit: tweak(func(_, fitted []float64) {
			for i := range fitted {
				fitted[i] *= 1 - 1e-8
			}
		})},
		"lines": {x: func(x []float64) []float64 { // squares the distance from the left end
			return transformed(x, func(v float64) float64 { return (v - x[0]) * (v - x[0]) })
		}},
		"inputs-untouched": {fit: func(r *smoothers.Rung, _, y []float64, f *smoothers.Fit) {
			r.Fit(y, f)
			for i := range y {
				y[i] -= f.Fitted[i]
			}
		}},
		"y-affine":    {fit: tweak(roundWhere(1e5, 1e9))},
		"y-plus-line": {fit: tweak(roundWhere(900, 1e5))},
		"x-affine": {x: func(x []float64) []float64 { // takes absolute 1e-3 for a tie
			return transformed(x, func(v float64) float64 { return math.Round(v*1000) / 1000 })
		}},
		"x-reflected": {x: func(x []float64) []float64 { // stretches the right half a little
			mid := (x[0] + x[len(x)-1]) / 2
			return transformed(x, func(v float64) float64 { return v + 1e-4*max(0, v-mid) })
		}},
		"ties": {x: func(x []float64) []float64 { // forces ties apart
			w := slices.Clone(x)
			for i := 1; i < len(w); i++ {
				w[i] = max(w[i], w[i-1]+1e-6*(x[len(x)-1]-x[0]))
			}
			return w
		}},
		"curve-meets-fit": {curve: func([]float64, smoothers.Curve) func(t, v float64) float64 {
			return func(_, v float64) float64 { return v + 1e-8 }
		}},
		"curve-continuous": {curve: func(x []float64, _ smoothers.Curve) func(t, v float64) float64 {
			mid := (x[10] + x[11]) / 2
			return func(t, v float64) float64 {
				if t > mid {
					return v + 0.1
				}
				return v
			}
		}},
		"curve-finite": {curve: func(x []float64, _ smoothers.Curve) func(t, v float64) float64 {
			return func(t, v float64) float64 {
				if t > x[len(x)-1] {
					return math.NaN()
				}
				return v
			}
		}},
		"leave-one-out": {
			rung: func(_ int, x []float64, _ *smoothers.Arena, r *smoothers.Rung) { r.Tuning /= float64(len(x)) },
			askAt: func(x, t []float64) []float64 {
				return transformed(t, func(v float64) float64 { return v * float64(len(x)) })
			},
		},
		"tuning-reproduces": {rung: func(_ int, _ []float64, _ *smoothers.Arena, r *smoothers.Rung) { r.Tuning *= 2 }},
		"trace-monotone": {rung: func(k int, _ []float64, _ *smoothers.Arena, r *smoothers.Rung) {
			r.Tuning = math.Abs(float64(k) - 1.2)
		}},
		"rungs-independent": {rung: func(k int, _ []float64, _ *smoothers.Arena, r *smoothers.Rung) { r.TrS *= 1 + 1e-15*float64(k) }},
		"memory-independent": {rung: func(_ int, _ []float64, mem *smoothers.Arena, r *smoothers.Rung) {
			if mem != nil {
				r.TrS *= 1 + 1e-15
			}
		}},
		"absurd-df":     {askDF: swallow},
		"absurd-tuning": {askAt: func(_, tunings []float64) []float64 { return swallow(tunings) }},
		"small-designs": {refuses: 4},
		"fits-shared": {fit: func(r *smoothers.Rung, _, y []float64, f *smoothers.Fit) {
			lock.Lock()
			shared = append(shared[:0], y...)
			lock.Unlock()
			time.Sleep(20 * time.Microsecond)
			lock.Lock()
			defer lock.Unlock()
			r.Fit(shared, f)
		}},
		"allocations": {fit: func(r *smoothers.Rung, _, y []float64, f *smoothers.Fit) { r.Fit(slices.Clone(y), f) }},
	}
}

func TestEveryCheckCatchesABentSmoother(t *testing.T) {
	all := bentSmoothers()
	for _, c := range checks() {
		s, ok := all[c.name]
		if !ok {
			t.Errorf("no wrong smoother for the check %s", c.name)
			continue
		}
		delete(all, c.name)
		if r := newTrial(s, honest()).try(c); len(r.details) == 0 {
			t.Errorf("%s lets its wrong smoother pass", c.name)
		}
	}
	for name := range all {
		t.Errorf("a wrong smoother for the check %s, which there is none of", name)
	}
}

// What a check looks at must be the thing itself: the wrong smoothers below may fail in
// their own check and in no other.
func TestAFaultIsCalledByItsName(t *testing.T) {
	all := bentSmoothers()
	for _, name := range []string{"y-plus-line", "leave-one-out", "absurd-df", "absurd-tuning", "small-designs"} {
		for _, f := range Faults(all[name], honest()) {
			// Bending a fit takes a closure for each rung.
			if f.Check != name && f.Check != "allocations" {
				t.Errorf("%s: also caught by %s: %v", name, f.Check, f.Details[0])
			}
		}
	}
}
