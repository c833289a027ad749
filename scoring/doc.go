// Package scoring turns fitted rungs into judgements.
//
// In comes one replicate: a training set, a held-out set, and the rungs of every
// smoother on that design. Out go rows: one per rung with its scores and criteria
// (results.Fit), one per method and one per oracle with the rung that was picked
// and its regret (results.Pick), and, over replicates, summaries that each carry a
// Monte Carlo standard error and the count they rest on (results.Summary). What is
// averaged for every rung, whatever is picked, is added up in a Forest and becomes the
// rows of a CellReport: error curves, bias and variance, coverage of bands, tests of the
// straight line, and the audit, in which a Theory sets exact expectations beside the
// simulated means. JudgeMethods weighs the methods over all cells.
//
// The one idea worth knowing is the wall between the two kinds of figure. What a
// rule may see is a Path, made from the training set alone; what says how good a
// rung truly is comes from a HeldOut. Only Bench holds both, and it hands a rule
// nothing but the Path.
package scoring
