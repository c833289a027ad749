package scoring

import (
	"math"
	"slices"

	"bendtest/results"
)

// A Measure is one figure of the table summary.
type Measure struct {
	Name string
	Doc  string
	of   func(*tally) Estimate
}

// A tally holds the replicates of one method in one cell in which it had a pick,
// in replicate order; regret ascending.
type tally struct {
	floor  float64 // the known noise variance
	mse    []float64
	excess []float64
	ase    []float64
	df     []float64
	oracle []float64 // the oracle's df
	edge   []float64 // 1 where the pick lies at the grid's edge
	regret []float64
	behind []float64 // ASE of the pick − ASE of the oracle

	coverage, coverageBayes []float64 // where known
	criterion, calibration  []float64 // the rule's own criterion, and that less held-out error, where known
	failed                  int
}

// Measures returns all measures of the table summary, in its order.
func Measures() []Measure {
	quantile := func(p float64) func(*tally) Estimate {
		return func(t *tally) Estimate { return Quantile(t.regret, p) }
	}
	return []Measure{
		{"mean_heldout_mse", "mean held-out error of the pick", func(t *tally) Estimate { return Mean(t.mse) }},
		{"median_heldout_mse", "median held-out error of the pick", func(t *tally) Estimate { return median(t.mse) }},
		{"floor_ratio", "mean held-out error ÷ known noise variance", func(t *tally) Estimate { return Mean(t.mse).over(t.floor) }},
		{"mean_excess", "mean of held-out error − what the truth itself scores on the same set", func(t *tally) Estimate { return Mean(t.excess) }},
		{"median_excess", "median of held-out error − what the truth itself scores on the same set", func(t *tally) Estimate { return median(t.excess) }},
		{"mean_ase", "mean average squared error at the held-out x", func(t *tally) Estimate { return Mean(t.ase) }},
		{"mean_ase_difference", "mean of ASE of the pick − ASE of the oracle", func(t *tally) Estimate { return Mean(t.behind) }},
		{"mean_regret", "mean of ASE of the pick ÷ ASE of the oracle", func(t *tally) Estimate { return Mean(t.regret) }},
		{"median_regret", "median regret", quantile(0.5)},
		{"q90_regret", "regret exceeded in one replicate of 10", quantile(0.9)},
		{"q95_regret", "regret exceeded in one replicate of 20", quantile(0.95)},
		{"q99_regret", "regret exceeded in one replicate of 100", quantile(0.99)},
		{"worst_regret", "largest regret seen; it grows with the number of replicates", worst},
		{"mean_df", "mean df of the pick", func(t *tally) Estimate { return Mean(t.df) }},
		{"sd_df", "standard deviation of the pick's df", func(t *tally) Estimate { return Spread(t.df) }},
		{"near_oracle", "share of picks within 1 df of the oracle", nearOracle},
		{"regret_over_2", "share of picks with regret over 2", func(t *tally) Estimate {
			return Proportion(t.regret, func(r float64) bool { return r > 2 })
		}},
		{"at_edge", "share of picks at either end of the grid", func(t *tally) Estimate {
			return Proportion(t.edge, func(e float64) bool { return e == 1 })
		}},
		{"coverage", "coverage of the pick's 95 % pointwise band, averaged over the design", func(t *tally) Estimate { return Mean(t.coverage) }},
		{"coverage_bayes", "the same for the Bayesian band of smoothing and penalised splines", func(t *tally) Estimate { return Mean(t.coverageBayes) }},
		{"mean_criterion", "mean of the rule's own criterion at the pick, where that estimates held-out error", func(t *tally) Estimate { return Mean(t.criterion) }},
		{"criterion_less_heldout", "mean of the rule's own criterion at the pick − held-out error: how optimistic the rule is about its choice", func(t *tally) Estimate { return Mean(t.calibration) }},
		{"failure_rate", "share of replicates without a scored pick", failureRate},
		{"df_oracle_correlation", "correlation of the df of pick and oracle", func(t *tally) Estimate { return Correlation(t.df, t.oracle) }},
	}
}

// median is the median of unsorted v.
func median(v []float64) Estimate {
	return Quantile(slices.Sorted(slices.Values(v)), 0.5)
}

// worst is the largest regret; it has no standard error.
func worst(t *tally) Estimate {
	if len(t.regret) == 0 {
		return Estimate{}
	}
	return Estimate{Value: finite(t.regret[len(t.regret)-1])}
}

// nearOracle is the share of picks within 1 df of the oracle.
func nearOracle(t *tally) Estimate {
	gap := make([]float64, len(t.df))
	for i := range gap {
		gap[i] = t.df[i] - t.oracle[i]
	}
	return Proportion(gap, func(g float64) bool { return -1 <= g && g <= 1 })
}

// failureRate is the share of replicates without a scored pick.
func failureRate(t *tally) Estimate {
	r := len(t.regret) + t.failed
	if r == 0 {
		return Estimate{}
	}
	p := float64(t.failed) / float64(r)
	return Estimate{results.Num(p), results.Num(math.Sqrt(p * (1 - p) / float64(r)))}
}
