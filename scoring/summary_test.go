package scoring

import (
	"testing"

	"bendtest/results"
)

// Limits that stand in tables of the exact binomial interval (Clopper & Pearson 1934;
// from memory, to four digits), and their defining equation by symmetry.
func TestSharesHaveExactLimits(t *testing.T) {
	for _, c := range []struct {
		k, n   int
		lo, hi float64
	}{{0, 10, 0, 0.3085}, {5, 10, 0.1871, 0.8129}, {1, 20, 0.0013, 0.2487}, {10, 10, 0.6915, 1}} {
		s := shareOf(c.k, c.n)
		if !near(s.Lo.Value, c.lo, 5e-5) || !near(s.Hi.Value, c.hi, 5e-5) || s.Rate.Value != float64(c.k)/float64(c.n) {
			t.Errorf("%d of %d: %+v, want %g to %g", c.k, c.n, s, c.lo, c.hi)
		}
		mirror := shareOf(c.n-c.k, c.n)
		if !near(s.Lo.Value, 1-mirror.Hi.Value, 1e-12) {
			t.Errorf("%d of %d is not the mirror of %d", c.k, c.n, c.n-c.k)
		}
	}
	if s := shareOf(0, 0); s.Rate.Known || s.Lo.Known || s.Hi.Known {
		t.Errorf("0 of 0: %+v", s)
	}
}

// Four replicates by hand, one of them failed.
func TestSummaryByHand(t *testing.T) {
	s := NewSummariser("c", 0.5)
	for r, v := range []struct{ df, ase, oracle, coverage, criterion float64 }{
		{4, 0.2, 0.1, 0.9, 0.7}, {5, 0.3, 0.3, 1, 0.9}, {4, 0.1, 0.1, 0.8, 0.5},
	} {
		s.Add(&results.Pick{
			Replicate: r, Smoother: "s", Rule: "r", DF: results.Num(v.df), Status: "ok",
			HeldoutMSE: results.Num(0.5 + v.ase), HeldoutNoise: results.Num(0.5), ASEHeldout: results.Num(v.ase),
			OracleDF: results.Num(5), OracleASE: results.Num(v.oracle), Regret: results.Num(v.ase / v.oracle),
			Coverage: results.Num(v.coverage), Criterion: results.Num(v.criterion),
		})
	}
	s.Add(&results.Pick{Replicate: 3, Smoother: "s", Rule: "r", Status: "no-rung"})
	want := map[string]float64{
		"mean_heldout_mse": 0.7, "floor_ratio": 1.4, "mean_excess": 0.2, "mean_ase": 0.2, "mean_ase_difference": 0.1 / 3,
		"mean_regret": 4.0 / 3, "mean_df": 13.0 / 3, "near_oracle": 1, "coverage": 0.9, "mean_criterion": 0.7,
		"criterion_less_heldout": 0, "failure_rate": 0.25,
	}
	seen := 0
	for _, row := range s.Rows() {
		if row.Replicates != 3 || row.Failed != 1 || row.Failure != "no-rung" {
			t.Errorf("%s rests on %d, %d failed (%s)", row.Measure, row.Replicates, row.Failed, row.Failure)
		}
		if v, ok := want[row.Measure]; ok {
			seen++
			if !near(row.Value.Value, v, 1e-12) {
				t.Errorf("%s = %g, want %g", row.Measure, row.Value.Value, v)
			}
		}
	}
	if seen != len(want) {
		t.Errorf("%d of %d measures are there", seen, len(want))
	}
	choices := s.Choices()
	if len(choices) != 2 || choices[0].DF != 4 || choices[0].Picked != 2 || choices[1].Picked != 1 || choices[1].Replicates != 3 {
		t.Errorf("choices %+v", choices)
	}
}
