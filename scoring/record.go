package scoring

import (
	"math"

	"bendtest/results"
	"bendtest/smoothers"
)

// criteria returns the criteria of a usable step fitted to n observations, with
// gamma the cost of a degree of freedom in gcv and cp, and variance the noise
// variance, or nil if it is not known.
func (s *Step) criteria(n int, gamma float64, variance *float64) Criteria {
	c := Criteria{
		GCV:   results.Num(GCV(n, s.RSS, s.TrS, gamma)),
		LOOCV: results.Num(s.LOOCV),
		AIC:   results.Num(AIC(n, s.RSS, s.TrS)),
		AICc:  results.Num(AICc(n, s.RSS, s.TrS)),
		BIC:   results.Num(BIC(n, s.RSS, s.TrS)),
	}
	if variance != nil {
		c.CP = results.Num(CP(n, s.RSS, s.TrS, *variance, gamma))
	}
	if l := s.Likelihood; l.Known {
		c.REML = results.Num(REML(n, l.Quad, l.LogDet))
		c.ML = results.Num(ML(n, l.Quad, l.LogDet))
	}
	return c
}

// record writes the criteria of step j, in their standard forms and then the variants,
// into a row. A criterion that does not apply stays null.
func (p *Path) record(j int, row *results.Fit, more []variant) {
	s := &p.Steps[j]
	if s.Status != smoothers.OK {
		return
	}
	row.TrainMSE = results.Num(s.RSS / float64(p.N))
	c := s.criteria(p.N, 1, &p.Noise.Known)
	row.GCV, row.LOOCV, row.CP = c.GCV, c.LOOCV, c.CP
	row.AIC, row.AICc, row.BIC = c.AIC, c.AICc, c.BIC
	row.REML, row.ML = c.REML, c.ML
	if len(p.Folds) > 0 && p.Folds[0].Steps[j].Known {
		f := p.Folds[0].Steps[j]
		row.KFold, row.KFoldSE = results.Num(f.Mean), results.Num(f.SE)
	}
	for i := range more {
		if v, known := more[i].rule.estimate(p, j); known {
			row.Variants[i] = results.Num(v)
		}
	}
}

// picks applies every rule to one entrant's path and appends the rows, the
// oracle's last.
func (b *Bench) picks(e *Entrant, path *Path, fits []results.Fit) {
	oracle := bestASE(fits)
	first, last := path.edges()
	add := func(rule string, step int, verdict Verdict) *results.Pick {
		row := results.Pick{
			Cell: b.key, Replicate: fits[0].Replicate, Smoother: e.Name, Rule: rule,
			HeldoutNoise: fits[0].HeldoutNoise, Status: string(verdict),
		}
		if oracle >= 0 {
			row.OracleDF, row.OracleASE = results.Num(fits[oracle].DF), fits[oracle].ASEHeldout
		}
		if step >= 0 {
			fill(&row, &fits[step])
			row.AtEdge = step == first || step == last
		}
		b.rows.Picks = append(b.rows.Picks, row)
		return &b.rows.Picks[len(b.rows.Picks)-1]
	}
	for _, r := range b.contest.Rules {
		step, verdict := r.Rule.Pick(path)
		row := add(r.Name, step, verdict)
		if e, ok := r.Rule.(estimator); ok && step >= 0 {
			if v, known := e.estimate(path, step); known {
				row.Criterion = results.Num(v)
			}
		}
	}
	if oracle < 0 {
		add(Oracle, -1, NoRung)
		return
	}
	add(Oracle, oracle, Picked)
}

// bestASE returns the row with the smallest true error, the first of equals, or
// −1 if none was scored.
func bestASE(fits []results.Fit) int {
	best, least := -1, math.Inf(1)
	for j := range fits {
		if a := fits[j].ASEHeldout; a.Known && a.Value < least {
			best, least = j, a.Value
		}
	}
	return best
}

// fill writes the picked rung's scores and its regret into a row. A rung whose
// held-out score is not finite passes its status on.
func fill(row *results.Pick, f *results.Fit) {
	row.DF = results.Num(f.DF)
	row.HeldoutMSE, row.ASEHeldout = f.HeldoutMSE, f.ASEHeldout
	row.Coverage, row.CoverageBayes = f.Coverage, f.CoverageBayes
	if !f.ASEHeldout.Known {
		row.Status = f.Status
		return
	}
	row.Regret = results.Num(regret(f.ASEHeldout.Value, row.OracleASE.Value))
}

// regret is the pick's ASE over the oracle's. Both are zero only if the pick is
// perfect, which regrets nothing.
func regret(pick, oracle float64) float64 {
	if pick == oracle {
		return 1
	}
	return pick / oracle
}
