// Package bendtest documents the module; the command is in cmd/bendtest.
//
// A study runs like this. scenarios reads the study file and makes its cells. For
// each cell and replicate sim draws a training and a held-out set; smoothers lays
// every ladder on the training x, gives its rungs, and fits them to the training y;
// scoring judges the curves on the held-out set, lets the rules pick from what the
// training set alone shows, and hands rows to results, which keeps them as parts and
// gathers the parts into tables:
//
//	cell.Draw(seed, replicate, &sample)
//	for each smoother:
//		rungs := smoother.On(sample.Train.X, mem).AtDF(df)
//		for each rung:
//			rung.Fit(sample.Train.Y, &fit)
//			row := held.Score(fit.Curve)
//		picks := rules.Pick(path)
package bendtest
