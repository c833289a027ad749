package scoring

import (
	"math"

	"bendtest/smoothers"
)

// smallest picks the usable step with the smallest criterion; the first of exact
// equals, which has the smaller df. The criterion says whether it applies to a
// step; if it applies to none, the rule is not applicable to the path.
func smallest(p *Path, criterion func(i int, s *Step) (float64, bool)) (int, Verdict) {
	best, least := -1, math.Inf(1)
	usable, applies := false, false
	for i := range p.Steps {
		s := &p.Steps[i]
		if s.Status != smoothers.OK {
			continue
		}
		usable = true
		v, ok := criterion(i, s)
		if !ok {
			continue
		}
		applies = true
		if v < least {
			best, least = i, v
		}
	}
	switch {
	case best >= 0:
		return best, Picked
	case usable && !applies:
		return -1, NotApplicable
	}
	return -1, NoRung
}

// FixedDF takes the rung at a df chosen beforehand.
type FixedDF struct {
	DF float64 `option:"df" required:"true" above:"0" doc:"the df to use; it must be on the smoothers' grids"`
}

// Pick returns the step at the fixed df. Where the ladder has no such df the rule
// is not applicable; where the rung has a status, that is the verdict.
func (r *FixedDF) Pick(p *Path) (int, Verdict) {
	for i := range p.Steps {
		if s := &p.Steps[i]; s.DF == r.DF {
			if s.Status != smoothers.OK {
				return -1, Verdict(s.Status.String())
			}
			return i, Picked
		}
	}
	return -1, NotApplicable
}

// ByKFold minimises k-fold cross-validation, or takes the smallest df within one
// standard error of that minimum (Breiman, Friedman, Olshen & Stone 1984,
// Classification and Regression Trees, §3.4.3).
type ByKFold struct {
	K     int  `option:"k" min:"2" max:"1000" doc:"number of folds"`
	OneSE bool `option:"one-se" doc:"take the smallest df within one standard error of the minimum"`
}

// Pick minimises the criterion, then steps down if one-se is asked for.
func (r *ByKFold) Pick(p *Path) (int, Verdict) {
	f := p.folds(r.K)
	if f == nil {
		return -1, NotApplicable
	}
	best, verdict := smallest(p, func(i int, _ *Step) (float64, bool) {
		return f.Steps[i].Mean, f.Steps[i].Known
	})
	if best < 0 || !r.OneSE {
		return best, verdict
	}
	bound := f.Steps[best].Mean + f.Steps[best].SE
	for i := range best {
		if p.Steps[i].Status == smoothers.OK && f.Steps[i].Known && f.Steps[i].Mean <= bound {
			return i, Picked
		}
	}
	return best, Picked
}

// ByFTest goes up from the smallest df and stops at the first rung that is not rejected
// against the next usable one: exactly for nested projections, by the two-moment
// approximation for others (Cleveland & Devlin 1988, JASA 83:596). It is not applicable
// where a test on its way cannot be made.
type ByFTest struct {
	Alpha float64 `option:"alpha" above:"0" below:"1" doc:"level of each test"`
}

// Pick walks up the path.
func (r *ByFTest) Pick(p *Path) (int, Verdict) {
	at, last := p.edges()
	if at < 0 {
		return -1, NoRung
	}
	for ; at < last; at++ {
		s := &p.Steps[at]
		switch {
		case s.Status != smoothers.OK:
		case !s.Next.Known:
			return -1, NotApplicable
		case s.Next.P > r.Alpha:
			return at, Picked
		}
	}
	return last, Picked
}
