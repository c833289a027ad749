package scoring

import "bendtest/smoothers"

// A Path is one ladder fitted to one training set: all that a rule may see. It
// holds nothing of the held-out set and nothing of the truth, save the noise
// variance, for rules that ask for a known one.
type Path struct {
	N     int    // number of observations
	Steps []Step // a rung each, by ascending df
	Noise Variances
	Folds []Folds // one entry per number of folds in the study

	LineRSS float64 // residual sum of squares of the least-squares line
}

// A Step is one rung fitted to the training set.
type Step struct {
	DF     float64 // df as asked for
	Status smoothers.Status

	// The rest is known only where Status is OK.
	TrS        float64
	DFResidual float64 // n − tr(2S − SSᵀ)
	RSS        float64
	LOOCV      float64
	Likelihood Likelihood
	Next       PValue // of the test of this rung within the next usable one
}

// A PValue is the probability of a test's statistic as large as it was, if known.
type PValue struct {
	P     float64
	Known bool
}

// Likelihood holds what REML and ML need of a rung. Known is false for families
// without the mixed-model form, and where a fit leaves nothing to measure.
type Likelihood struct {
	Quad   float64 // yᵀ(I−S)y
	LogDet float64 // log of the product of the non-zero eigenvalues of I − S
	Known  bool
}

// Variances holds the noise variance as known and as estimated from the training
// data, without a smoother. The estimates may be missing on tiny samples.
type Variances struct {
	Known      float64
	Difference float64 // Gasser, Sroka & Jennen-Steinmetz
	Rice       float64
	HasDiff    bool
	HasRice    bool
}

// Folds holds k-fold cross-validation over a path.
type Folds struct {
	K     int
	Steps []FoldScore // in step with Path.Steps
}

// A FoldScore is the cross-validated error of one rung. Known is false where some
// fold could not be fitted at the rung's df.
type FoldScore struct {
	Mean  float64 // mean squared error over all left-out points
	SE    float64 // sd of the fold means / √k
	Known bool
}

// folds returns the cross-validation with k folds, or nil.
func (p *Path) folds(k int) *Folds {
	for i := range p.Folds {
		if p.Folds[i].K == k {
			return &p.Folds[i]
		}
	}
	return nil
}

// edges returns the first and last usable step, or −1, −1 if there is none.
func (p *Path) edges() (first, last int) {
	first, last = -1, -1
	for i := range p.Steps {
		if p.Steps[i].Status != smoothers.OK {
			continue
		}
		if first < 0 {
			first = i
		}
		last = i
	}
	return first, last
}
