package smoothers

import "math"

// dfTolerance is how far, relative to df, tr S may be off a df asked for.
const dfTolerance = 1e-8

// solveDF finds the log tuning θ in [lo, hi] at which tr S = df, for a trace that
// falls from ceiling to floor as θ grows, floor < df < ceiling. trace returns tr S
// and its derivative by θ; start is a first guess, which changes the cost and not,
// beyond rounding, the answer. found is false where the trace stays off df.
//
// It is Newton's method on log((t − floor)/(ceiling − t)), nearly straight in θ for
// penalised smoothers, kept to a bracket that halves whenever a step leaves it.
func solveDF(df, floor, ceiling, lo, hi, start float64, trace func(theta float64) (t, slope float64)) (theta float64, found bool) {
	goal := math.Log((df - floor) / (ceiling - df))
	theta = min(max(start, lo), hi)
	for range 200 {
		t, slope := trace(theta)
		if math.Abs(t-df) <= 1e-14*df {
			return theta, true
		}
		if t > df {
			lo = theta
		} else {
			hi = theta
		}
		next := theta - newtonStep(t, slope, floor, ceiling, goal)
		if !(next > lo && next < hi) {
			next = lo + (hi-lo)/2
		}
		if next == theta || math.Abs(next-theta) <= 1e-15*math.Abs(theta) {
			return theta, math.Abs(t-df) <= dfTolerance*df
		}
		theta = next
	}
	t, _ := trace(theta)
	return theta, math.Abs(t-df) <= dfTolerance*df
}

// newtonStep is the step of solveDF; NaN where the trace has reached an end.
func newtonStep(t, slope, floor, ceiling, goal float64) float64 {
	at := math.Log((t - floor) / (ceiling - t))
	return (at - goal) / (slope * (1/(t-floor) + 1/(ceiling-t)))
}
