package scoring

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"

	"bendtest/results"
	"bendtest/sim"
	"bendtest/smoothers"
)

// mostTheory is the n up to which exact expectations are worked out: they take work of
// order n² per rung, and more for the held-out x.
const mostTheory = 500

// An Expectation is what theory says of one rung's scores on a fixed design. With the
// readings y = f + Ae, e of covariance I, b = (S − I)f and l(x) the weights with which
// the curve at x takes the readings:
//
//	train   mean of b_i² + |((I−S)A)_i|²
//	ase     mean of b_i² + |(SA)_i|²
//	same x  ase + mean noise variance at the training x
//	heldout noise variance + E (l(X)ᵀf − f(X))² + |Aᵀl(X)|²
//	loocv   mean of (b_i² + |((I−S)A)_i|²)/(1 − S_ii)², none where a point determines its own fit
//	cp      train + 2σ² tr S/n
//
// for any law of the errors; A_i stands for row i. Coverage of the band with known σ is
// the mean of Φ((zσq_i − b_i)/v_i) − Φ((−zσq_i − b_i)/v_i), q_i² = (SSᵀ)_ii, v_i = |(SA)_i|,
// and needs normal errors.
type Expectation struct {
	Train, ASE, SameX, HeldOut, LOOCV, CP, Coverage results.Number
}

// A Theory works out expectations on the fixed design of one cell.
type Theory struct {
	cell  *sim.Cell
	x, f  []float64
	root  [][]float64 // columns of A
	sameX float64     // mean noise variance at the training x

	mean    smoothers.Fit   // of f
	columns []smoothers.Fit // of A
	at      []float64
}

// NewTheory prepares a cell; ok is false where its design is not fixed or n is too large.
func NewTheory(cell *sim.Cell, seed uint64) (t *Theory, ok bool) {
	if !cell.FixedDesign() || cell.N > mostTheory {
		return nil, false
	}
	t = &Theory{cell: cell, x: cell.FixedX(seed), columns: make([]smoothers.Fit, cell.N)}
	t.f = cell.TruthAt(t.x)
	t.root = cell.ErrorRoot(t.x)
	for _, v := range cell.ErrorVariances(t.x) {
		t.sameX += v / float64(cell.N)
	}
	return t, true
}

// X returns the training x.
func (t *Theory) X() []float64 { return t.x }

// Expect works out the expectations of a rung laid out on the training x; all are null
// unless its status is ok.
func (t *Theory) Expect(r *smoothers.Rung) Expectation {
	var e Expectation
	if r.Status != smoothers.OK {
		return e
	}
	n := float64(len(t.x))
	r.Fit(t.f, &t.mean)
	for k := range t.columns {
		r.Fit(t.root[k], &t.columns[k])
	}
	var train, ase, loocv, inside float64
	alone := false // a point determines its own fit
	for i, f := range t.f {
		bias := t.mean.Fitted[i] - f
		var noise, rest float64
		for k := range t.columns {
			s := t.columns[k].Fitted[i]
			noise += s * s
			rest += (t.root[k][i] - s) * (t.root[k][i] - s)
		}
		train += (bias*bias + rest) / n
		ase += (bias*bias + noise) / n
		alone = alone || !(r.Remainder[i] >= ownFit)
		loocv += (bias*bias + rest) / (r.Remainder[i] * r.Remainder[i]) / n
		inside += t.inside(bias, math.Sqrt(noise), r.RowNorm2[i]) / n
	}
	e.Train, e.ASE, e.SameX = results.Num(train), results.Num(ase), results.Num(ase+t.sameX)
	e.CP = results.Num(train + 2*t.cell.NoiseVariance*r.TrS/n)
	if !alone {
		e.LOOCV = results.Num(loocv)
	}
	if t.cell.NormalErrors() {
		e.Coverage = results.Num(inside)
	}
	if risk, err := t.cell.HeldOutMean(t.risk); err == nil {
		e.HeldOut = results.Num(t.cell.NoiseVariance + risk)
	}
	return e
}

// inside is the probability that a band of half width zσ√q covers the true mean, for a
// fit with the given bias and standard deviation.
func (t *Theory) inside(bias, sd, q float64) float64 {
	half := normalHalf * math.Sqrt(t.cell.NoiseVariance*q)
	if !(sd > 0) {
		if math.Abs(bias) <= half {
			return 1
		}
		return 0
	}
	return distuv.UnitNormal.CDF((half-bias)/sd) - distuv.UnitNormal.CDF((-half-bias)/sd)
}

// risk writes the expected squared error about the truth at ascending x into dst.
func (t *Theory) risk(dst, x []float64) {
	t.at = regrow(t.at, len(x))
	t.mean.Curve.At(dst, x)
	for i, f := range t.cell.TruthAt(x) {
		dst[i] = (dst[i] - f) * (dst[i] - f)
	}
	for k := range t.columns {
		t.columns[k].Curve.At(t.at, x)
		for i, v := range t.at {
			dst[i] += v * v
		}
	}
}
