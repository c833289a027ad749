package results

// The tables. n is the number of training observations, m of held-out ones, S the
// smoother matrix, f the true curve, f̂ the fitted one, RSS the residual sum of
// squares, t = tr S; y² stands for the square of the unit of y.

// Cells has a row per cell.
var Cells = &Table[Cell]{
	Name: "cells",
	Doc:  "the cells of the study: truth × design × noise × n",
	columns: []column[Cell]{
		{"cell", "", "key of the cell: truth/design/noise/n", func(r *Cell) any { return &r.Cell }},
		{"hash", "", "hash of what defines the cell's data, by content", func(r *Cell) any { return &r.Hash }},
		{"truth", "", "name of the truth in the study", func(r *Cell) any { return &r.Truth }},
		{"design", "", "name of the design in the study", func(r *Cell) any { return &r.Design }},
		{"noise", "", "name of the noise in the study", func(r *Cell) any { return &r.Noise }},
		{"n", "observations", "training sample size", func(r *Cell) any { return &r.N }},
		{"heldout", "observations", "held-out sample size", func(r *Cell) any { return &r.HeldOut }},
		{"noise_variance", "y²", "noise floor: exact variance of y − f(x), averaged over the design law", func(r *Cell) any { return &r.NoiseVariance }},
		{"fixed_design", "", "whether the training x are the same in every replicate", func(r *Cell) any { return &r.FixedDesign }},
		{"seed", "", "seed of the study", func(r *Cell) any { return &r.Seed }},
		{"replicates", "", "number of replicates that were run", func(r *Cell) any { return &r.Replicates }},
	},
}

// Fits has a row per cell × replicate × smoother × df.
var Fits = &Table[Fit]{
	Name: "fits",
	Doc:  "every rung that was fitted, with its scores and criteria",
	columns: []column[Fit]{
		{"cell", "", "key of the cell", func(r *Fit) any { return &r.Cell }},
		{"replicate", "", "number of the replicate, from 0", func(r *Fit) any { return &r.Replicate }},
		{"smoother", "", "label of the smoother", func(r *Fit) any { return &r.Smoother }},
		{"df", "df", "equivalent degrees of freedom asked for", func(r *Fit) any { return &r.DF }},
		{"tr_s", "df", "tr S, the equivalent degrees of freedom attained", func(r *Fit) any { return &r.TrS }},
		{"tr_sts", "df", "tr SᵀS", func(r *Fit) any { return &r.TrSTS }},
		{"df_residual", "df", "n − tr(2S − SSᵀ)", func(r *Fit) any { return &r.DFResidual }},
		{"tuning", "family's own", "the family's native parameter: bandwidth, neighbour fraction, λ, number of interior knots, degree", func(r *Fit) any { return &r.Tuning }},
		{"status", "", "ok, or why there is no fit or no finite score", func(r *Fit) any { return &r.Status }},
		{"note", "", "what a reader of this row should know, or empty", func(r *Fit) any { return &r.Note }},
		{"train_mse", "y²", "training error, RSS/n", func(r *Fit) any { return &r.TrainMSE }},
		{"ase_train", "y²", "(1/n) Σ (f̂ − f)² at the training x", func(r *Fit) any { return &r.ASETrain }},
		{"heldout_mse", "y²", "held-out error, (1/m) Σ (y − f̂)² over the held-out set", func(r *Fit) any { return &r.HeldoutMSE }},
		{"heldout_noise", "y²", "(1/m) Σ (y − f)² over the same held-out set: what the truth itself scores", func(r *Fit) any { return &r.HeldoutNoise }},
		{"ase_heldout", "y²", "average squared error, (1/m) Σ (f̂ − f)² at the held-out x", func(r *Fit) any { return &r.ASEHeldout }},
		{"ase_inside", "y²", "average squared error over the held-out x within the training range; null if there are none", func(r *Fit) any { return &r.ASEInside }},
		{"ase_outside", "y²", "average squared error over the held-out x beyond the training range; null if there are none", func(r *Fit) any { return &r.ASEOutside }},
		{"coverage", "", "share of training x at which the 95 % pointwise band ŷ ± t σ̂ √(SSᵀ)_ii covers f, σ̂² = RSS/df_residual; null where nothing is left to estimate σ", func(r *Fit) any { return &r.Coverage }},
		{"coverage_bayes", "", "the same with √S_ii in place of √(SSᵀ)_ii; smoothing and penalised splines only", func(r *Fit) any { return &r.CoverageBayes }},
		{"line_p", "", "p-value of the test of the straight line within this rung; null where the rung is no more flexible or the test is not worked out", func(r *Fit) any { return &r.LineP }},
		{"gcv", "y²", "(RSS/n)/(1 − t/n)², infinite where t ≥ n", func(r *Fit) any { return &r.GCV }},
		{"loocv", "y²", "mean of (r_i/(1 − S_ii))²; neighbour widths and quantile knots are held; infinite where an observation determines its own fit", func(r *Fit) any { return &r.LOOCV }},
		{"kfold", "y²", "k-fold cross-validation, each fold refitted at the same df, with the study's first k; null without a kfold rule or where a fold cannot be fitted", func(r *Fit) any { return &r.KFold }},
		{"kfold_se", "y²", "standard deviation of the fold means ÷ √k", func(r *Fit) any { return &r.KFoldSE }},
		{"cp", "y²", "RSS/n + 2σ²t/n with the known noise variance σ²", func(r *Fit) any { return &r.CP }},
		{"aic", "", "log(RSS/n) + 2t/n", func(r *Fit) any { return &r.AIC }},
		{"aicc", "", "log(RSS/n) + 1 + 2(t + 1)/(n − t − 2), infinite where t ≥ n − 2", func(r *Fit) any { return &r.AICc }},
		{"bic", "", "log(RSS/n) + t log(n)/n", func(r *Fit) any { return &r.BIC }},
		{"reml", "", "(n − 2) log(yᵀ(I−S)y) − log det⁺(I − S); null where the family has no such form", func(r *Fit) any { return &r.REML }},
		{"ml", "", "n log(yᵀ(I−S)y) − log det⁺(I − S); null where the family has no such form", func(r *Fit) any { return &r.ML }},
	},
}

// A Variant is a column that a study adds to the table fits: a criterion that follows from
// none of the others.
type Variant struct{ Column, Doc string }

// FitsWith is the table Fits with a study's own columns, at most MostVariants of them.
func FitsWith(variants []Variant) *Table[Fit] {
	t := *Fits
	t.columns = append([]column[Fit](nil), Fits.columns...)
	for i, v := range variants[:min(len(variants), MostVariants)] {
		t.columns = append(t.columns, column[Fit]{v.Column, "y²", v.Doc, func(r *Fit) any { return &r.Variants[i] }})
	}
	return &t
}

// HasColumn reports whether the table has a column of that name.
func (t *Table[R]) HasColumn(name string) bool {
	for i := range t.columns {
		if t.columns[i].name == name {
			return true
		}
	}
	return false
}

// Picks has a row per cell × replicate × smoother × rule, the oracle's included.
var Picks = &Table[Pick]{
	Name: "picks",
	Doc:  "the rung that each rule picked from each ladder, and the oracle's",
	columns: []column[Pick]{
		{"cell", "", "key of the cell", func(r *Pick) any { return &r.Cell }},
		{"replicate", "", "number of the replicate, from 0", func(r *Pick) any { return &r.Replicate }},
		{"smoother", "", "label of the smoother", func(r *Pick) any { return &r.Smoother }},
		{"rule", "", "label of the rule; oracle for the rung with the smallest true error", func(r *Pick) any { return &r.Rule }},
		{"df", "df", "df of the picked rung", func(r *Pick) any { return &r.DF }},
		{"heldout_mse", "y²", "held-out error of the pick", func(r *Pick) any { return &r.HeldoutMSE }},
		{"heldout_noise", "y²", "what the truth itself scores on the same held-out set", func(r *Pick) any { return &r.HeldoutNoise }},
		{"ase_heldout", "y²", "average squared error of the pick at the held-out x", func(r *Pick) any { return &r.ASEHeldout }},
		{"oracle_df", "df", "df of the oracle: the rung of this ladder with the smallest ASE in this replicate", func(r *Pick) any { return &r.OracleDF }},
		{"oracle_ase", "y²", "average squared error of the oracle", func(r *Pick) any { return &r.OracleASE }},
		{"regret", "ratio", "ASE of the pick ÷ ASE of the oracle", func(r *Pick) any { return &r.Regret }},
		{"coverage", "", "share of training x at which the pick's 95 % pointwise band covers f", func(r *Pick) any { return &r.Coverage }},
		{"coverage_bayes", "", "the same with √S_ii in place of √(SSᵀ)_ii; smoothing and penalised splines only", func(r *Pick) any { return &r.CoverageBayes }},
		{"criterion", "y²", "the rule's own criterion at the pick, for rules whose criterion estimates held-out error: gcv, loocv, kfold, cp", func(r *Pick) any { return &r.Criterion }},
		{"at_edge", "", "whether the pick is the first or last usable rung of the grid", func(r *Pick) any { return &r.AtEdge }},
		{"status", "", "ok, or why there is no pick", func(r *Pick) any { return &r.Status }},
	},
}

// Summaries has a row per cell × smoother × rule × measure.
var Summaries = &Table[Summary]{
	Name: "summary",
	Doc:  "figures over replicates, each with its Monte Carlo standard error",
	columns: []column[Summary]{
		{"cell", "", "key of the cell", func(r *Summary) any { return &r.Cell }},
		{"smoother", "", "label of the smoother", func(r *Summary) any { return &r.Smoother }},
		{"rule", "", "label of the rule, or oracle", func(r *Summary) any { return &r.Rule }},
		{"measure", "", "name of the figure", func(r *Summary) any { return &r.Measure }},
		{"value", "measure's own", "the figure; null where the replicates do not determine it", func(r *Summary) any { return &r.Value }},
		{"mcse", "measure's own", "its Monte Carlo standard error; null where it has none", func(r *Summary) any { return &r.MCSE }},
		{"replicates", "", "number of replicates that the figure rests on", func(r *Summary) any { return &r.Replicates }},
		{"failed", "", "number of replicates without a scored pick, left out of the figure", func(r *Summary) any { return &r.Failed }},
		{"failure", "", "most frequent status of those replicates, or empty", func(r *Summary) any { return &r.Failure }},
	},
}

// Rungs has a row per cell × smoother × df × quantity.
var Rungs = &Table[Rung]{
	Name: "rungs",
	Doc:  "figures of every rung over replicates, whatever the rules pick: training and held-out error, criteria, coverage",
	columns: []column[Rung]{
		{"cell", "", "key of the cell", func(r *Rung) any { return &r.Cell }},
		{"smoother", "", "label of the smoother", func(r *Rung) any { return &r.Smoother }},
		{"df", "df", "equivalent degrees of freedom asked for", func(r *Rung) any { return &r.DF }},
		{"quantity", "", "name of the figure; describe table rungs lists them", func(r *Rung) any { return &r.Quantity }},
		{"mean", "quantity's own", "mean over the replicates in which it is known and finite", func(r *Rung) any { return &r.Mean }},
		{"mcse", "quantity's own", "its Monte Carlo standard error", func(r *Rung) any { return &r.MCSE }},
		{"replicates", "", "number of those replicates", func(r *Rung) any { return &r.Replicates }},
	},
}

// Curves has a row per cell × smoother × df × x.
var Curves = &Table[Curve]{
	Name: "curves",
	Doc:  "mean, squared bias and variance of the fitted curves over the domain",
	columns: []column[Curve]{
		{"cell", "", "key of the cell", func(r *Curve) any { return &r.Cell }},
		{"smoother", "", "label of the smoother", func(r *Curve) any { return &r.Smoother }},
		{"df", "df", "equivalent degrees of freedom asked for", func(r *Curve) any { return &r.DF }},
		{"x", "x", "point of an even grid over the domain, ends included", func(r *Curve) any { return &r.X }},
		{"truth", "y", "f(x)", func(r *Curve) any { return &r.Truth }},
		{"mean", "y", "mean of f̂(x) over the replicates in which it is finite", func(r *Curve) any { return &r.Mean }},
		{"bias2", "y²", "(mean − truth)², of which variance/replicates is Monte Carlo noise", func(r *Curve) any { return &r.Bias2 }},
		{"variance", "y²", "variance of f̂(x) over replicates, divisor replicates − 1", func(r *Curve) any { return &r.Variance }},
		{"mcse", "y", "Monte Carlo standard error of the mean", func(r *Curve) any { return &r.MCSE }},
		{"replicates", "", "number of those replicates", func(r *Curve) any { return &r.Replicates }},
	},
}

// Tests has a row per cell × smoother × df × α.
var Tests = &Table[Test]{
	Name: "tests",
	Doc:  "the test of the straight line at every rung: size on straight truths, power on curved ones",
	columns: []column[Test]{
		{"cell", "", "key of the cell", func(r *Test) any { return &r.Cell }},
		{"smoother", "", "label of the smoother", func(r *Test) any { return &r.Smoother }},
		{"df", "df", "equivalent degrees of freedom of the alternative", func(r *Test) any { return &r.DF }},
		{"alpha", "", "level of the test", func(r *Test) any { return &r.Alpha }},
		{"rejected", "", "number of replicates in which the straight line was rejected", func(r *Test) any { return &r.Rejected }},
		{"replicates", "", "number of replicates with a test; 0 where the rung is no more flexible than the line; fewer than were run for kernel and local on designs of over 100 observations drawn anew, where a test takes work of order n³, and 0 over 1000", func(r *Test) any { return &r.Replicates }},
		{"rate", "", "rejected ÷ replicates", func(r *Test) any { return &r.Rate }},
		{"lo", "", "lower end of the exact (Clopper–Pearson) 95 % interval", func(r *Test) any { return &r.Lo }},
		{"hi", "", "upper end of that interval", func(r *Test) any { return &r.Hi }},
		{"exact", "", "whether the test keeps its level exactly: nested projections with normal, independent errors of one variance; else the two-moment approximation", func(r *Test) any { return &r.Exact }},
	},
}

// Audits has a row per cell with a fixed design × smoother × df × quantity.
var Audits = &Table[Audit]{
	Name: "audit",
	Doc:  "exact expectations on fixed designs of up to 500 observations beside what the simulation found",
	columns: []column[Audit]{
		{"cell", "", "key of the cell", func(r *Audit) any { return &r.Cell }},
		{"smoother", "", "label of the smoother", func(r *Audit) any { return &r.Smoother }},
		{"df", "df", "equivalent degrees of freedom asked for", func(r *Audit) any { return &r.DF }},
		{"quantity", "", "train_mse, ase_train, heldout_same_x, heldout, loocv, cp, and under normal errors coverage_known", func(r *Audit) any { return &r.Quantity }},
		{"expected", "quantity's own", "exact expectation; null where there is none", func(r *Audit) any { return &r.Expected }},
		{"simulated", "quantity's own", "mean over replicates", func(r *Audit) any { return &r.Simulated }},
		{"mcse", "quantity's own", "its Monte Carlo standard error", func(r *Audit) any { return &r.MCSE }},
		{"z", "", "(simulated − expected)/mcse; 0 where they agree to rounding; null with fewer than two replicates, and under errors whose squares have no variance, for which mcse means nothing", func(r *Audit) any { return &r.Z }},
	},
}

// Choices has a row per cell × smoother × rule × df picked.
var Choices = &Table[Choice]{
	Name: "choices",
	Doc:  "how often each rule picked each df",
	columns: []column[Choice]{
		{"cell", "", "key of the cell", func(r *Choice) any { return &r.Cell }},
		{"smoother", "", "label of the smoother", func(r *Choice) any { return &r.Smoother }},
		{"rule", "", "label of the rule, or oracle", func(r *Choice) any { return &r.Rule }},
		{"df", "df", "a df that was picked", func(r *Choice) any { return &r.DF }},
		{"picked", "", "number of replicates in which it was", func(r *Choice) any { return &r.Picked }},
		{"replicates", "", "number of replicates with a scored pick", func(r *Choice) any { return &r.Replicates }},
		{"rate", "", "picked ÷ replicates", func(r *Choice) any { return &r.Rate }},
		{"lo", "", "lower end of the exact (Clopper–Pearson) 95 % interval", func(r *Choice) any { return &r.Lo }},
		{"hi", "", "upper end of that interval", func(r *Choice) any { return &r.Hi }},
	},
}

// Differences has a row per cell × pair of methods.
var Differences = &Table[Difference]{
	Name: "differences",
	Doc:  "paired differences between methods, replicate by replicate on the same data",
	columns: []column[Difference]{
		{"cell", "", "key of the cell", func(r *Difference) any { return &r.Cell }},
		{"smoother", "", "label of the first method's smoother", func(r *Difference) any { return &r.Smoother }},
		{"rule", "", "label of its rule", func(r *Difference) any { return &r.Rule }},
		{"than_smoother", "", "label of the second method's smoother", func(r *Difference) any { return &r.ThanSmoother }},
		{"than_rule", "", "label of its rule", func(r *Difference) any { return &r.ThanRule }},
		{"ase_difference", "y²", "mean of the first's ASE − the second's at the held-out x; negative where the first is better", func(r *Difference) any { return &r.ASEDifference }},
		{"mcse", "y²", "its Monte Carlo standard error, sd of the differences ÷ √replicates", func(r *Difference) any { return &r.MCSE }},
		{"better", "", "share of replicates in which the first has the smaller ASE, exact ties counted half", func(r *Difference) any { return &r.Better }},
		{"replicates", "", "number of replicates in which both have a scored pick", func(r *Difference) any { return &r.Replicates }},
	},
}

// Verdicts has a row per method.
var Verdicts = &Table[Verdict]{
	Name: "verdict",
	Doc:  "every method over all cells, each cell with equal weight, the least mean relative excess first",
	columns: []column[Verdict]{
		{"smoother", "", "label of the smoother", func(r *Verdict) any { return &r.Smoother }},
		{"rule", "", "label of the rule", func(r *Verdict) any { return &r.Rule }},
		{"mean_relative_excess", "", "mean over cells of mean ASE ÷ that of the cell's best method − 1; ASE is the expectation of the excess", func(r *Verdict) any { return &r.MeanExcess }},
		{"mean_lo", "", "lower end of its 95 % bootstrap interval over replicates", func(r *Verdict) any { return &r.MeanLo }},
		{"mean_hi", "", "upper end", func(r *Verdict) any { return &r.MeanHi }},
		{"worst_relative_excess", "", "largest relative excess over the cells", func(r *Verdict) any { return &r.WorstExcess }},
		{"worst_lo", "", "lower end of its interval", func(r *Verdict) any { return &r.WorstLo }},
		{"worst_hi", "", "upper end", func(r *Verdict) any { return &r.WorstHi }},
		{"worst_cell", "", "key of the cell where that is", func(r *Verdict) any { return &r.WorstCell }},
		{"mean_rank", "", "mean over cells of the rank by mean ASE, 1 the best, ties averaged", func(r *Verdict) any { return &r.MeanRank }},
		{"worst_rank", "", "worst rank in any cell", func(r *Verdict) any { return &r.WorstRank }},
		{"behind", "", "(1 + mean relative excess) ÷ (1 + the least one of a method judged in all cells) − 1", func(r *Verdict) any { return &r.Behind }},
		{"behind_lo", "", "lower end of its interval", func(r *Verdict) any { return &r.BehindLo }},
		{"behind_hi", "", "upper end", func(r *Verdict) any { return &r.BehindHi }},
		{"tied", "", "whether behind is within the indifference margin of 0.05", func(r *Verdict) any { return &r.Tied }},
		{"mean_wins", "", "share of bootstrap resamplings in which the method has the least mean relative excess", func(r *Verdict) any { return &r.MeanWins }},
		{"minimax_wins", "", "share in which it has the least worst relative excess", func(r *Verdict) any { return &r.MinimaxWins }},
		{"cells", "", "number of cells in which it was judged; with fewer than others it cannot win", func(r *Verdict) any { return &r.Cells }},
		{"replicates", "", "number of replicates with a scored pick, over all cells", func(r *Verdict) any { return &r.Replicates }},
		{"failed", "", "number of replicates without one", func(r *Verdict) any { return &r.Failed }},
		{"failure", "", "most frequent status of those, or empty", func(r *Verdict) any { return &r.Failure }},
		{"worst_failure_rate", "", "largest share of replicates without a scored pick in any cell", func(r *Verdict) any { return &r.WorstFailureRate }},
	},
}

// moments has a row per entry of a part's vector of moments. It is kept in parts alone.
var moments = &Table[Moment]{
	Name: "moments",
	Doc:  "sums over the replicates of a part",
	columns: []column[Moment]{
		{"slot", "", "place in the cell's vector", func(r *Moment) any { return &r.Slot }},
		{"count", "", "number of replicates that it was seen in", func(r *Moment) any { return &r.Count }},
		{"mean", "", "its mean over them", func(r *Moment) any { return &r.Mean }},
		{"m2", "", "sum of squared deviations from the mean", func(r *Moment) any { return &r.M2 }},
	},
}

// Timings has a row per unit of work. It alone varies from run to run.
var Timings = &Table[Timing]{
	Name: "timings",
	Doc:  "how long the units of work took; not reproducible, hence apart",
	columns: []column[Timing]{
		{"cell", "", "key of the cell", func(r *Timing) any { return &r.Cell }},
		{"from", "", "first replicate of the unit", func(r *Timing) any { return &r.From }},
		{"to", "", "replicate after the last of the unit", func(r *Timing) any { return &r.To }},
		{"fits", "", "number of rungs fitted", func(r *Timing) any { return &r.Fits }},
		{"seconds", "s", "elapsed time on one worker, writing included", func(r *Timing) any { return &r.Seconds }},
	},
}

// ColumnDocs has a row per column of every table.
var ColumnDocs = &Table[ColumnDoc]{
	Name: "columns",
	Doc:  "what every column of every table means",
	columns: []column[ColumnDoc]{
		{"table", "", "name of the table", func(r *ColumnDoc) any { return &r.Table }},
		{"column", "", "name of the column", func(r *ColumnDoc) any { return &r.Column }},
		{"type", "", "text, integer, real, real or null, true or false", func(r *ColumnDoc) any { return &r.Type }},
		{"unit", "", "unit, where the column has one", func(r *ColumnDoc) any { return &r.Unit }},
		{"description", "", "what the column means", func(r *ColumnDoc) any { return &r.Description }},
	},
}
