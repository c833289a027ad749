package results

import (
	"math"
	"strconv"
)

// A Number is a figure that may be missing: the zero value is null.
type Number struct {
	Value float64
	Known bool
}

// Num returns a known number. It may be infinite; NaN is refused on writing.
func Num(v float64) Number { return Number{v, true} }

// A Cell is a row of the table cells.
type Cell struct {
	Cell          string
	Hash          string
	Truth         string
	Design        string
	Noise         string
	N             int
	HeldOut       int
	NoiseVariance float64
	FixedDesign   bool
	Seed          int
	Replicates    int
}

// A Fit is a row of the table fits: one rung of one smoother in one replicate.
type Fit struct {
	Cell      string
	Replicate int
	Smoother  string
	DF        float64
	TrS, TrSTS, DFResidual,
	Tuning Number
	Status string
	Note   string
	TrainMSE, ASETrain,
	HeldoutMSE, HeldoutNoise,
	ASEHeldout, ASEInside, ASEOutside Number
	Coverage, CoverageBayes,
	LineP Number
	GCV, LOOCV, KFold, KFoldSE, CP, AIC, AICc, BIC, REML, ML Number

	Variants [MostVariants]Number // of criteria that the study has besides (see FitsWith)
}

// MostVariants bounds the number of columns that a study adds to the table fits.
const MostVariants = 8

// A Pick is a row of the table picks: what one rule picked from one ladder in one
// replicate, or what the oracle would have.
type Pick struct {
	Cell      string
	Replicate int
	Smoother  string
	Rule      string
	DF        Number
	HeldoutMSE, HeldoutNoise,
	ASEHeldout Number
	OracleDF, OracleASE,
	Regret Number
	Coverage, CoverageBayes,
	Criterion Number
	AtEdge bool
	Status string
}

// A Summary is a row of the table summary: one measure of one method in one cell.
type Summary struct {
	Cell       string
	Smoother   string
	Rule       string
	Measure    string
	Value      Number
	MCSE       Number
	Replicates int
	Failed     int
	Failure    string
}

// A Rung is a row of the table rungs: one figure of one rung over the replicates of a
// cell, whatever the rules pick.
type Rung struct {
	Cell       string
	Smoother   string
	DF         float64
	Quantity   string
	Mean       Number
	MCSE       Number
	Replicates int
}

// A Curve is a row of the table curves: the fitted curves of one rung at one x, over the
// replicates of a cell.
type Curve struct {
	Cell       string
	Smoother   string
	DF         float64
	X          float64
	Truth      float64
	Mean       Number
	Bias2      Number
	Variance   Number
	MCSE       Number
	Replicates int
}

// A Test is a row of the table tests: how often the straight line was rejected at a rung.
type Test struct {
	Cell       string
	Smoother   string
	DF         float64
	Alpha      float64
	Rejected   int
	Replicates int
	Rate       Number
	Lo, Hi     Number
	Exact      bool
}

// An Audit is a row of the table audit: what theory expects of a figure on a fixed design,
// and what the simulation found.
type Audit struct {
	Cell      string
	Smoother  string
	DF        float64
	Quantity  string
	Expected  Number
	Simulated Number
	MCSE      Number
	Z         Number
}

// A Choice is a row of the table choices: how often a rule picked a df in a cell.
type Choice struct {
	Cell       string
	Smoother   string
	Rule       string
	DF         float64
	Picked     int
	Replicates int
	Rate       Number
	Lo, Hi     Number
}

// A Difference is a row of the table differences: two methods in the same replicates of a
// cell.
type Difference struct {
	Cell          string
	Smoother      string
	Rule          string
	ThanSmoother  string
	ThanRule      string
	ASEDifference Number
	MCSE          Number
	Better        Number
	Replicates    int
}

// A Verdict is a row of the table verdict: one method over all cells. Intervals are of
// 95 %.
type Verdict struct {
	Smoother string
	Rule     string
	MeanExcess, MeanLo, MeanHi,
	WorstExcess, WorstLo, WorstHi Number
	WorstCell string
	MeanRank,
	WorstRank Number
	Behind, BehindLo, BehindHi Number
	Tied                       bool
	MeanWins, MinimaxWins      Number
	Cells                      int
	Replicates                 int
	Failed                     int
	Failure                    string
	WorstFailureRate           Number
}

// A Moment is one entry of a part's vector of moments: how often a figure was seen, its
// mean, and the sum of squared deviations from it. Entries never seen are left out.
type Moment struct {
	Slot  int
	Count int
	Mean  float64
	M2    float64
}

// A Timing is a row of the table timings: how long one unit of work took.
type Timing struct {
	Cell    string
	From    int
	To      int
	Fits    int
	Seconds float64
}

// A ColumnDoc is a row of the table columns: what one column of one table means.
type ColumnDoc struct {
	Table       string
	Column      string
	Type        string
	Unit        string
	Description string
}

// MarshalJSON writes null for a missing figure and the strings "inf" and "-inf" for
// infinite ones, which JSON has no numbers for.
func (n Number) MarshalJSON() ([]byte, error) {
	switch {
	case !n.Known:
		return []byte("null"), nil
	case math.IsInf(n.Value, 0):
		return []byte(`"` + realText(n.Value) + `"`), nil
	}
	return strconv.AppendFloat(nil, n.Value, 'g', -1, 64), nil
}
