package scoring

// A figure is what is averaged over replicates for each rung, whatever a rule picks.
type figure int

// The figures, in the order of the table rungs.
const (
	trainMSE figure = iota
	aseTrain
	sameX
	heldoutMSE
	excess
	aseHeldout
	criterionGCV
	criterionLOOCV
	criterionKFold
	criterionCP
	gcvLessHeldout
	loocvLessHeldout
	kfoldLessHeldout
	cpLessHeldout
	covered
	coveredKnown
	coveredBayes
	nested   // 1 where the test of the line is one of nested projections, else 0
	rejected // and one for each further level
)

// testLevels are the levels α of the nonlinearity test.
func testLevels() [testCount]float64 { return [...]float64{0.1, 0.05, 0.01} }

const testCount = 3

// figureCount is the number of figures per rung.
const figureCount = int(rejected) + testCount

// A FigureDoc documents a figure.
type FigureDoc struct{ Name, Doc string }

// FigureDocs returns the figures of the table rungs, in order.
func FigureDocs() []FigureDoc {
	return []FigureDoc{
		trainMSE:         {"train_mse", "training error, RSS/n"},
		aseTrain:         {"ase_train", "ASE at the training x"},
		sameX:            {"heldout_same_x", "mean squared error for fresh readings at the training x; fixed designs only"},
		heldoutMSE:       {"heldout", "held-out error"},
		excess:           {"excess", "held-out error less what the truth itself scores on the same set"},
		aseHeldout:       {"ase_heldout", "ASE at the held-out x"},
		criterionGCV:     {"gcv", "the criterion gcv"},
		criterionLOOCV:   {"loocv", "the criterion loocv"},
		criterionKFold:   {"kfold", "the criterion kfold, with the study's first k"},
		criterionCP:      {"cp", "the criterion cp with the known noise variance"},
		gcvLessHeldout:   {"gcv_less_heldout", "gcv − held-out error: how far the criterion is off what it estimates"},
		loocvLessHeldout: {"loocv_less_heldout", "loocv − held-out error"},
		kfoldLessHeldout: {"kfold_less_heldout", "kfold − held-out error"},
		cpLessHeldout:    {"cp_less_heldout", "cp − held-out error"},
		covered:          {"coverage", "share of training x at which the 95 % band ŷ ± t σ̂ √(SSᵀ)_ii covers f; σ̂² = RSS/δ₁, t on δ₁²/δ₂ df, or δ₁ where δ₂ is not worked out"},
		coveredKnown:     {"coverage_known", "the same with the known noise variance and the normal quantile"},
		coveredBayes:     {"coverage_bayes", "the same with √S_ii in place of √(SSᵀ)_ii; smoothing and penalised splines"},
	}
}

// gridPoints is the number of x at which curves are averaged, the ends of the domain
// included.
const gridPoints = 51

// A layout says where in a cell's vector of moments a figure stands: for each entrant and
// rung the figures, then the curve on the grid.
type layout struct {
	first []int // first rung of each entrant
	rungs int
}

// newLayout lays out a contest.
func newLayout(c *Contest) layout {
	l := layout{first: make([]int, len(c.Entrants))}
	for i := range c.Entrants {
		l.first[i] = l.rungs
		l.rungs += len(c.Entrants[i].DF)
	}
	return l
}

// size is the length of the vector.
func (l *layout) size() int { return l.rungs * (figureCount + gridPoints) }

// rung is the part of a vector that belongs to a rung: its figures and its curve.
func (l *layout) rung(v []Moment, entrant, j int) (figures, curve []Moment) {
	at := (l.first[entrant] + j) * (figureCount + gridPoints)
	v = v[at : at+figureCount+gridPoints]
	return v[:figureCount], v[figureCount:]
}

// grid returns the x at which curves are averaged.
func grid(lo, hi float64) []float64 {
	x := make([]float64, gridPoints)
	for i := range x {
		x[i] = lo + (hi-lo)*float64(i)/(gridPoints-1)
	}
	x[gridPoints-1] = hi
	return x
}
