package scoring

// An estimator is a rule whose criterion estimates the held-out error, in its units.
type estimator interface {
	// estimate returns the rule's own criterion at a step, if it is known there.
	estimate(p *Path, step int) (value float64, known bool)
}

func (r *ByGCV) estimate(p *Path, step int) (float64, bool) {
	s := &p.Steps[step]
	return GCV(p.N, s.RSS, s.TrS, r.Gamma), true
}

func (*ByLOOCV) estimate(p *Path, step int) (float64, bool) { return p.Steps[step].LOOCV, true }

func (r *ByKFold) estimate(p *Path, step int) (float64, bool) {
	f := p.folds(r.K)
	if f == nil {
		return 0, false
	}
	return f.Steps[step].Mean, f.Steps[step].Known
}

func (r *ByCP) estimate(p *Path, step int) (float64, bool) {
	v, known := r.variance(p)
	s := &p.Steps[step]
	return CP(p.N, s.RSS, s.TrS, v, r.Gamma), known
}
