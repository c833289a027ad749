// Package sim draws the data of a study.
//
// In comes a cell: a truth (the true mean curve on an interval), a design (how x
// arises), a noise, and a sample size. Out come samples: a training set and a large
// held-out set from the same truth, design law and noise, with the true means
// beside the readings, and the exact noise variance that no method can beat.
//
// The one idea worth knowing is the stream. Each (seed, cell content, replicate,
// purpose) has a random stream of its own, derived by hashing, so what is drawn
// depends on nothing else: not on order, workers, or what else a study holds.
package sim
