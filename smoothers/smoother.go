package smoothers

// A Smoother is one family with its options settled. Each family is a struct
// whose exported fields are its options, described by struct tags (see Family).
//
// All smoothers here are linear in y: on a design x of n observations the fitted
// values are ŷ = S y with S n × n, and df means tr S.
type Smoother interface {
	// Check returns an *OptionError for the first option that makes no sense.
	Check() error

	// On lays the smoother out on the design x, which must be finite and
	// ascending (ties allowed, n ≥ 1); it panics otherwise. The ladder keeps x
	// and takes its memory from mem; with a nil mem it allocates. A ladder is
	// valid until mem is reset and may be read by many goroutines.
	On(x []float64, mem *Arena) Ladder
}

// A Ladder is all flexibilities of one smoother on one design. What depends on x
// alone is worked out here, once; y comes last, in Rung.Fit.
type Ladder interface {
	// AtDF returns a rung per entry of dfs (any order), each with
	// |tr S − df| ≤ 1e-8·df or with a status that says why not.
	AtDF(dfs []float64) []Rung

	// AtTuning returns a rung per entry of tunings, in the family's own unit
	// (bandwidth, neighbour fraction, λ, number of interior knots, degree).
	// Rung.DF is then the achieved tr S.
	AtTuning(tunings []float64) []Rung
}

// A Rung is one flexibility on one design: everything about S that y does not
// touch. Figures of a rung whose Status is not OK are zero where unknown.
type Rung struct {
	DF         float64 // df as asked for
	Tuning     float64 // the family's native parameter
	TrS        float64 // tr S
	TrSTS      float64 // tr SᵀS
	DFResidual float64 // n − tr(2S − SSᵀ)
	Status     Status
	Note       string // what a reader of the row should know, or ""

	// Leverage holds S_ii and RowNorm2 holds (SSᵀ)_ii, both of length n.
	// Remainder holds 1 − S_ii without the cancellation of that difference.
	Leverage, RowNorm2, Remainder []float64

	// LogDet is the log of the product of the non-zero eigenvalues of I − S, for
	// families with a mixed-model form orthogonal to the straight line; HasLogDet
	// says whether the family has one.
	LogDet    float64
	HasLogDet bool

	Form  Form // what is known of S
	Lines bool // whether S leaves straight lines alone

	solver solver // nil unless Status is OK
}

// A solver is what a family must know of a rung to fit a y.
type solver interface {
	// solve sets f.Fitted (already of length n) and f.Curve from y.
	solve(y []float64, f *Fit)
}

// SolveBy sets how a y is fitted on the rung, for families outside this package: solve
// must fill f.Fitted, which has length n already, set f.Curve, and leave y alone. Nothing
// being known of such an S, the rung's form becomes General.
func (r *Rung) SolveBy(solve func(y []float64, f *Fit)) {
	r.solver, r.Form = solveFunc(solve), General
}

// A solveFunc is a solver that is a function.
type solveFunc func(y []float64, f *Fit)

func (s solveFunc) solve(y []float64, f *Fit) { s(y, f) }

// Fit smooths y (length n, in the order of the design) and leaves the result in
// f, whose memory is reused: in steady state it allocates nothing. Fit panics if
// the rung's status is not OK or the length is wrong.
func (r *Rung) Fit(y []float64, f *Fit) {
	if r.Status != OK {
		panic("smoothers: Fit on a rung with status " + r.Status.String())
	}
	if len(y) != len(r.Leverage) {
		panic("smoothers: y and the design differ in length")
	}
	f.Fitted = resize(f.Fitted, len(y))
	r.solver.solve(y, f)
}

// A Fit is one fitted curve and the memory it stands on. The zero value is ready;
// a Fit belongs to one goroutine, and fitting again overwrites it.
type Fit struct {
	Fitted []float64 // ŷ at the design, length n
	Curve  Curve     // the fitted function, on the whole line

	pieces Piecewise  // storage behind Curve for piecewise polynomials
	local  localCurve // storage behind Curve for local fits
	poly   polyCurve  // storage behind Curve for global polynomials
	work   []float64  // scratch of the family
}

// A Curve is a fitted function.
type Curve interface {
	// At writes the curve's values at t into dst, which must have t's length.
	// t must be ascending: all families walk it in one sweep.
	At(dst, t []float64)
}

// resize returns s with length n, reallocated only where its capacity is short.
func resize(s []float64, n int) []float64 {
	if cap(s) < n {
		return make([]float64, n)
	}
	return s[:n]
}
