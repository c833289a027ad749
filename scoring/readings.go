package scoring

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"bendtest/results"
	"bendtest/smoothers"
)

// A Sheet is what to do with one data set: fit a smoother at several flexibilities,
// judge each by the criteria, and predict.
type Sheet struct {
	X, Y     []float64 // the data, in any order, of equal length
	At       []float64 // where to predict, in any order; may be empty
	Smoother smoothers.Smoother
	DF       []float64 // the flexibilities, as df …
	Tuning   []float64 // … or, if DF is empty, in the family's own unit
	Gamma    float64   // cost of a degree of freedom in gcv and cp
	Variance *float64  // the noise variance if it is known; cp needs it
}

// A Reading is one flexibility on one data set.
type Reading struct {
	DF         float64
	Status     smoothers.Status
	Note       string
	TrS        results.Number
	TrSTS      results.Number
	DFResidual results.Number
	Tuning     results.Number
	RSS        results.Number
	Criteria   Criteria
	Fitted     []float64 // in the order of Sheet.X; nil unless the status is ok
	Leverage   []float64 // likewise
	Predicted  []float64 // in the order of Sheet.At
}

// Criteria holds every criterion of one rung, null where it does not apply.
type Criteria struct {
	GCV, LOOCV, CP, AIC, AICc, BIC, REML, ML results.Number
}

// Readings works a sheet through. It refuses data that no smoother could take.
func Readings(s *Sheet) ([]Reading, error) {
	if err := s.check(); err != nil {
		return nil, err
	}
	order := ascending(s.X)
	x, y := pick(s.X, order), pick(s.Y, order)
	ladder := s.Smoother.On(x, nil)
	var rungs []smoothers.Rung
	if len(s.DF) > 0 {
		rungs = ladder.AtDF(s.DF)
	} else {
		rungs = ladder.AtTuning(s.Tuning)
	}
	var t trainer
	t.set(x, y, 0) // the known variance of a path is for rules; none is applied here
	path := t.path(len(rungs), 0)
	readings := make([]Reading, len(rungs))
	for j := range rungs {
		readings[j] = s.read(&rungs[j], order, y, &t, &path.Steps[j])
	}
	return readings, nil
}

// read fits and judges one rung; order sorts the data.
func (s *Sheet) read(r *smoothers.Rung, order []int, y []float64, t *trainer, step *Step) Reading {
	out := Reading{DF: r.DF, Status: r.Status, Note: r.Note}
	var fit smoothers.Fit
	if r.Status == smoothers.OK {
		r.Fit(y, &fit)
	}
	t.step(step, r, &fit)
	out.Status = step.Status
	if out.Status != smoothers.OK {
		return out
	}
	out.TrS, out.TrSTS = results.Num(r.TrS), results.Num(r.TrSTS)
	out.DFResidual, out.Tuning = results.Num(r.DFResidual), results.Num(r.Tuning)
	out.RSS = results.Num(step.RSS)
	out.Criteria = step.criteria(len(y), s.Gamma, s.Variance)
	out.Fitted = place(fit.Fitted, order)
	out.Leverage = place(r.Leverage, order)
	if len(s.At) > 0 {
		by := ascending(s.At)
		values := make([]float64, len(s.At))
		fit.Curve.At(values, pick(s.At, by))
		out.Predicted = place(values, by)
	}
	return out
}

// check refuses data that no smoother could take.
func (s *Sheet) check() error {
	if len(s.X) != len(s.Y) {
		panic("scoring: x and y differ in length")
	}
	if len(s.X) == 0 {
		return errors.New("there are no observations")
	}
	for _, list := range []struct {
		name string
		v    []float64
	}{{"x", s.X}, {"y", s.Y}, {"the points to predict at", s.At}} {
		for i, v := range list.v {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				return fmt.Errorf("value %d of %s is %g; all must be finite", i+1, list.name, v)
			}
		}
	}
	return nil
}

// ascending returns the order that sorts v; equals keep their order.
func ascending(v []float64) []int {
	order := make([]int, len(v))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int {
		switch {
		case v[a] < v[b]:
			return -1
		case v[a] > v[b]:
			return 1
		}
		return 0
	})
	return order
}

// pick returns v in the given order.
func pick(v []float64, order []int) []float64 {
	out := make([]float64, len(v))
	for i, o := range order {
		out[i] = v[o]
	}
	return out
}

// place undoes pick.
func place(v []float64, order []int) []float64 {
	out := make([]float64, len(v))
	for i, o := range order {
		out[o] = v[i]
	}
	return out
}
