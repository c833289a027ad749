package smoothertest

import (
	"fmt"
	"testing"

	"bendtest/smoothers"
)

// Claims states what a smoother promises beyond the contract that holds for all.
type Claims struct {
	// DF are the df to try, ascending, at least two. All must be attained on 30 even x.
	DF []float64
	// WholeDF says that only whole df exist; others must get a status.
	WholeDF bool
	// Lines says that rungs of 2 df and more reproduce straight lines: S x = x.
	Lines bool
	// LeaveOneOut says for which observations r_i/(1 − S_ii) is the error of the fit
	// without observation i at the same tuning.
	LeaveOneOut Scope
	// Monotone says that tr S is monotone in the tuning.
	Monotone bool
	// TuningPower is p where x·c needs a tuning times c^p for the same fit.
	TuningPower float64
}

// A Scope says to which observations a claim applies.
type Scope int

const (
	Nowhere    Scope = iota
	Inside           // those without which the range of x stays as it is
	Everywhere       // all
)

// A Fault is a check that a smoother fails.
type Fault struct {
	Check   string   // name of the check
	Why     string   // why it matters
	Details []string // what was seen: a few cases, not all
}

// A check is one promise. It reports to r what it sees, and panics stand for faults.
type check struct {
	name string
	why  string
	run  func(tr *trial, r *report)
}

// checks are all promises in the order in which they build on each other.
func checks() []check {
	return []check{
		{"df-on-target", "a rung is at the df asked for or says why not: a fit at another df is a wrong answer nobody notices", dfOnTarget},
		{"df-attained", "the claimed df exist on even x, or the family is of no use", dfAttained},
		{"figures-add-up", "criteria take traces and leverages from the same S", figuresAddUp},
		{"matrix", "what a rung states of S must be what Fit does to y", matrixAgrees},
		{"forms", "tests take short cuts where S is a projection or a ridge", forms},
		{"linear", "all theory of df rests on ŷ = S y", linear},
		{"constants", "S 1 = 1: the level of y must not matter", constants},
		{"lines", "families that claim it pass straight lines through unchanged", lines},
		{"inputs-untouched", "x and y are shared by all families of a replicate", inputsUntouched},
		{"y-affine", "the units of y must not matter, nor a reading near 1e6", yAffine},
		{"y-plus-line", "a trend in y comes back as that trend", yPlusLine},
		{"x-affine", "the units of x must not matter", xAffine},
		{"x-reflected", "left and right are alike", xReflected},
		{"ties", "tied observations are interchangeable", tiesInterchangeable},
		{"curve-meets-fit", "held-out scores read the curve, training scores the fitted values", curveMeetsFit},
		{"curve-continuous", "a jump in the curve is an error in some piece", curveContinuous},
		{"curve-finite", "a NaN that travels spoils every mean", curveFinite},
		{"leave-one-out", "LOOCV uses the short cut and nobody refits", leaveOneOut},
		{"tuning-reproduces", "a tuning printed in a table must give the same fit again", tuningReproduces},
		{"trace-monotone", "df orders the rungs only if tr S is monotone", traceMonotone},
		{"rungs-independent", "adding a df to a grid must change no number that was there", rungsIndependent},
		{"memory-independent", "results may not depend on what a worker did before", memoryIndependent},
		{"absurd-df", "whatever a file asks for ends in a status", absurdDF},
		{"absurd-tuning", "whatever a file asks for ends in a status", absurdTuning},
		{"small-designs", "folds and subsets leave few distinct x", smallDesigns},
		{"fits-shared", "many goroutines read one ladder", fitsShared},
		{"allocations", "a sweep makes millions of fits", allocations},
	}
}

// Run runs every check as a subtest.
func Run(t *testing.T, s smoothers.Smoother, claims Claims) {
	t.Helper()
	tr := newTrial(s, claims)
	for _, c := range checks() {
		t.Run(c.name, func(t *testing.T) {
			r := tr.try(c)
			for _, note := range r.notes {
				t.Log(note)
			}
			for _, detail := range r.details {
				t.Error(detail)
			}
			if len(r.details) > 0 {
				t.Logf("%d in all. Why it matters: %s", r.seen, c.why)
			}
		})
	}
}

// Faults returns the checks that a smoother fails, for tools other than tests.
func Faults(s smoothers.Smoother, claims Claims) []Fault {
	var faults []Fault
	tr := newTrial(s, claims)
	for _, c := range checks() {
		if r := tr.try(c); len(r.details) > 0 {
			faults = append(faults, Fault{c.name, c.why, r.details})
		}
	}
	return faults
}

// A report gathers what a check sees.
type report struct {
	details []string // the first few faults
	seen    int      // number of all faults
	notes   []string // what was not checked, and why
}

// mostDetails bounds what one check prints.
const mostDetails = 6

// faultf reports a fault.
func (r *report) faultf(format string, args ...any) {
	r.seen++
	if len(r.details) < mostDetails {
		r.details = append(r.details, fmt.Sprintf(format, args...))
	}
}

// notef says what was not checked.
func (r *report) notef(format string, args ...any) {
	r.notes = append(r.notes, fmt.Sprintf(format, args...))
}

// try runs a check; a panic is a fault.
func (tr *trial) try(c check) (r *report) {
	r = &report{}
	defer func() {
		if p := recover(); p != nil {
			r.faultf("panic: %v", p)
		}
	}()
	c.run(tr, r)
	return r
}
