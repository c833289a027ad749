package scoring

import "fmt"

// A Rule picks a rung of a path. Each kind is a struct whose exported fields are
// its options, described by the same tags as the options of smoothers.
type Rule interface {
	// Pick returns the index of the picked step, or a verdict that says why
	// there is none. Exact ties go to the smaller df.
	Pick(p *Path) (step int, verdict Verdict)
}

// A Verdict says whether a rule could pick, and if not, why.
type Verdict string

// Verdicts of a rule. A fixed df whose rung has a status passes that status on.
const (
	Picked        Verdict = "ok"
	NotApplicable Verdict = "not-applicable" // the rule has no meaning for this family or sample
	NoRung        Verdict = "no-rung"        // no rung of the ladder could be fitted and judged
)

// A RuleKind is one kind of rule.
type RuleKind struct {
	Name string
	Doc  string
	New  func() Rule // a pointer to the options struct, at its defaults
}

// Rules returns all kinds of rule in the order in which they are listed to people.
// The oracle is not among them: it is always computed and never a candidate.
func Rules() []RuleKind {
	return []RuleKind{
		{"gcv", "generalised cross-validation, (RSS/n)/(1 − γ tr S/n)²", func() Rule { return &ByGCV{Gamma: 1} }},
		{"loocv", "leave-one-out cross-validation by the short cut; neighbour widths and quantile knots are held", func() Rule { return &ByLOOCV{} }},
		{"kfold", "k-fold cross-validation, each fold refitted at the same df", func() Rule { return &ByKFold{K: 10} }},
		{"cp", "RSS/n + 2γσ² tr S/n with σ² known or estimated", func() Rule { return &ByCP{Gamma: 1, Variance: "known"} }},
		{"aic", "log(RSS/n) + 2 tr S/n", func() Rule { return &ByAIC{} }},
		{"aicc", "log(RSS/n) + 1 + 2(tr S + 1)/(n − tr S − 2)", func() Rule { return &ByAICc{} }},
		{"bic", "log(RSS/n) + tr S log(n)/n", func() Rule { return &ByBIC{} }},
		{"reml", "restricted likelihood of the mixed-model form; splines with a curvature penalty only", func() Rule { return &ByREML{} }},
		{"ml", "likelihood of the mixed-model form; splines with a curvature penalty only", func() Rule { return &ByML{} }},
		{"ftest", "from the smallest df upward, the first rung that is not rejected against the next at α", func() Rule { return &ByFTest{Alpha: 0.05} }},
		{"fixed", "the rung at a df chosen beforehand", func() Rule { return &FixedDF{} }},
	}
}

// ByGCV minimises GCV.
type ByGCV struct {
	Gamma float64 `option:"gamma" above:"0" max:"100" doc:"cost of a degree of freedom; 1.4 guards against wiggly picks"`
}

// Pick minimises the criterion.
func (r *ByGCV) Pick(p *Path) (int, Verdict) {
	return smallest(p, func(_ int, s *Step) (float64, bool) { return GCV(p.N, s.RSS, s.TrS, r.Gamma), true })
}

// ByLOOCV minimises leave-one-out cross-validation.
type ByLOOCV struct{}

// Pick minimises the criterion.
func (*ByLOOCV) Pick(p *Path) (int, Verdict) {
	return smallest(p, func(_ int, s *Step) (float64, bool) { return s.LOOCV, true })
}

// ByCP minimises Mallows' criterion with one of four noise variances.
type ByCP struct {
	Gamma    float64 `option:"gamma" above:"0" max:"100" doc:"cost of a degree of freedom; log(n)/2 gives the BIC of known variance"`
	Variance string  `option:"variance" oneof:"known difference rice largest" doc:"noise variance: known, by differences from neighbours, by first differences, or the residual variance at the largest df"`
}

// Pick minimises the criterion.
func (r *ByCP) Pick(p *Path) (int, Verdict) {
	variance, ok := r.variance(p)
	if !ok {
		return -1, NotApplicable
	}
	return smallest(p, func(_ int, s *Step) (float64, bool) { return CP(p.N, s.RSS, s.TrS, variance, r.Gamma), true })
}

// variance returns the noise variance that the rule uses on a path.
func (r *ByCP) variance(p *Path) (float64, bool) {
	switch r.Variance {
	case "known":
		return p.Noise.Known, true
	case "difference":
		return p.Noise.Difference, p.Noise.HasDiff
	case "rice":
		return p.Noise.Rice, p.Noise.HasRice
	case "largest":
		_, last := p.edges()
		if last < 0 || !(p.Steps[last].DFResidual > 0) {
			return 0, false
		}
		return p.Steps[last].RSS / p.Steps[last].DFResidual, true
	}
	panic(fmt.Sprintf("scoring: unknown variance %q", r.Variance))
}

// ByAIC minimises AIC.
type ByAIC struct{}

// Pick minimises the criterion.
func (*ByAIC) Pick(p *Path) (int, Verdict) {
	return smallest(p, func(_ int, s *Step) (float64, bool) { return AIC(p.N, s.RSS, s.TrS), true })
}

// ByAICc minimises AICc.
type ByAICc struct{}

// Pick minimises the criterion.
func (*ByAICc) Pick(p *Path) (int, Verdict) {
	return smallest(p, func(_ int, s *Step) (float64, bool) { return AICc(p.N, s.RSS, s.TrS), true })
}

// ByBIC minimises BIC.
type ByBIC struct{}

// Pick minimises the criterion.
func (*ByBIC) Pick(p *Path) (int, Verdict) {
	return smallest(p, func(_ int, s *Step) (float64, bool) { return BIC(p.N, s.RSS, s.TrS), true })
}

// ByREML minimises REML.
type ByREML struct{}

// Pick minimises the criterion.
func (*ByREML) Pick(p *Path) (int, Verdict) {
	return smallest(p, func(_ int, s *Step) (float64, bool) {
		return REML(p.N, s.Likelihood.Quad, s.Likelihood.LogDet), s.Likelihood.Known
	})
}

// ByML minimises ML.
type ByML struct{}

// Pick minimises the criterion.
func (*ByML) Pick(p *Path) (int, Verdict) {
	return smallest(p, func(_ int, s *Step) (float64, bool) {
		return ML(p.N, s.Likelihood.Quad, s.Likelihood.LogDet), s.Likelihood.Known
	})
}
