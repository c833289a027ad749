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
	GCV, LOOCV, KFold, KFoldSE, CP, AIC, AICc, BIC, REML, ML Number
}

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
