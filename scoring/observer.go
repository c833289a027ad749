package scoring

import (
	"math"

	"bendtest/results"
	"bendtest/sim"
	"bendtest/smoothers"
)

// An observer adds up what is averaged over replicates for every rung. It sees the truth;
// nothing of it reaches a rule.
type observer struct {
	layout  layout
	student *studentTable
	sd      float64 // standard deviation of the noise
	grid    []float64
	drawn   []float64 // a curve on the grid
	forest  Forest
	leaf    []Moment // the replicate at hand
	truth   []float64
	fresh   []float64 // second readings at the training x of a fixed design, else empty
}

// newObserver returns one for a cell.
func newObserver(cell *sim.Cell, contest *Contest) observer {
	o := observer{
		layout: newLayout(contest), student: newStudentTable(), sd: math.Sqrt(cell.NoiseVariance),
		grid: grid(cell.Truth.Lo, cell.Truth.Hi), drawn: make([]float64, gridPoints),
	}
	o.leaf = make([]Moment, o.layout.size())
	return o
}

// Moments returns what was added up since the bench was last cleared.
func (o *observer) Moments() []Moment { return o.forest.Total(nil) }

// begin starts a replicate.
func (o *observer) begin(cell *sim.Cell, seed uint64, replicate int, sample *sim.Sample) {
	clear(o.leaf)
	o.truth = sample.Train.F
	o.fresh = o.fresh[:0]
	if cell.FixedDesign() {
		o.fresh = regrow(o.fresh, len(o.truth))
		cell.Fresh(seed, replicate, sample, o.fresh)
	}
}

// one is a figure of one replicate; figures that are null or infinite are not counted.
func one(v float64, known bool) Moment {
	if !known || math.IsNaN(v) || math.IsInf(v, 0) {
		return Moment{}
	}
	return Moment{Count: 1, Mean: v}
}

// fitted takes what has to do with the fit itself of rung j of an entrant: how much of the
// truth its bands cover, which goes to the row too, its error for fresh readings, and its
// curve.
func (o *observer) fitted(entrant, j int, row *results.Fit, r *smoothers.Rung, w *rungTests, rss float64, f *smoothers.Fit) {
	figures, curve := o.layout.rung(o.leaf, entrant, j)
	figures[coveredKnown] = one(coverage(o.truth, f.Fitted, r.RowNorm2, normalHalf*o.sd), true)
	if len(o.fresh) > 0 {
		sum := 0.0
		for i, y := range o.fresh {
			sum += (y - f.Fitted[i]) * (y - f.Fitted[i])
		}
		figures[sameX] = one(sum/float64(len(o.fresh)), true)
	}
	f.Curve.At(o.drawn, o.grid)
	for i, v := range o.drawn {
		curve[i] = one(v, true)
	}
	if !(w.delta1 > 1e-9*float64(len(o.truth))) {
		return // nothing is left to estimate σ by
	}
	half := o.student.half(w.free()) * math.Sqrt(rss/w.delta1)
	row.Coverage = results.Num(coverage(o.truth, f.Fitted, r.RowNorm2, half))
	if r.Form == smoothers.Ridge {
		row.CoverageBayes = results.Num(coverage(o.truth, f.Fitted, r.Leverage, half))
	}
}

// collect takes the figures of a complete row.
func (o *observer) collect(entrant, j int, row *results.Fit, isNested bool) {
	figures, _ := o.layout.rung(o.leaf, entrant, j)
	take := func(f figure, n results.Number) { figures[f] = one(n.Value, n.Known) }
	less := func(f figure, n, from results.Number) { figures[f] = one(n.Value-from.Value, n.Known && from.Known) }
	take(trainMSE, row.TrainMSE)
	take(aseTrain, row.ASETrain)
	take(heldoutMSE, row.HeldoutMSE)
	take(aseHeldout, row.ASEHeldout)
	take(criterionGCV, row.GCV)
	take(criterionLOOCV, row.LOOCV)
	take(criterionKFold, row.KFold)
	take(criterionCP, row.CP)
	take(covered, row.Coverage)
	take(coveredBayes, row.CoverageBayes)
	less(excess, row.HeldoutMSE, row.HeldoutNoise)
	less(gcvLessHeldout, row.GCV, row.HeldoutMSE)
	less(loocvLessHeldout, row.LOOCV, row.HeldoutMSE)
	less(kfoldLessHeldout, row.KFold, row.HeldoutMSE)
	less(cpLessHeldout, row.CP, row.HeldoutMSE)
	if !row.LineP.Known {
		return
	}
	figures[nested] = one(indicator(isNested), true)
	for k, alpha := range testLevels() {
		figures[int(rejected)+k] = one(indicator(row.LineP.Value <= alpha), true)
	}
}

// indicator is 1 where something holds, else 0.
func indicator(holds bool) float64 {
	if holds {
		return 1
	}
	return 0
}
