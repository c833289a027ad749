package scoring

import (
	"math"

	"bendtest/smoothers"
)

// A trainer makes paths from one training set. It never sees the truth or the
// held-out set.
type trainer struct {
	x, y     []float64
	detrend  []float64 // y less its least-squares line
	lineRSS  float64   // its sum of squares
	residual []float64
	noise    Variances
	shared   Path // handed out again and again
}

// set takes a training set, x ascending, and the noise variance for the rules
// that may know it.
func (t *trainer) set(x, y []float64, known float64) {
	t.x, t.y = x, y
	t.detrend = append(t.detrend[:0], y...)
	subtractLine(x, t.detrend)
	t.lineRSS = 0
	for _, e := range t.detrend {
		t.lineRSS += e * e
	}
	t.noise = Variances{Known: known}
	t.noise.Difference, t.noise.HasDiff = DifferenceVariance(x, y)
	t.noise.Rice, t.noise.HasRice = RiceVariance(y)
}

// path returns an empty path with room for steps and numbers of folds. It is
// valid until the next call.
func (t *trainer) path(steps, folds int) *Path {
	p := &t.shared
	p.N, p.Noise, p.LineRSS = len(t.x), t.noise, t.lineRSS
	p.Steps = regrow(p.Steps, steps)
	p.Folds = regrow(p.Folds, folds)
	for k := range p.Folds {
		p.Folds[k].Steps = regrow(p.Folds[k].Steps, steps)
	}
	return p
}

// regrow returns s with length n, keeping its memory and what lies in it.
func regrow[T any](s []T, n int) []T {
	s = s[:cap(s)]
	for len(s) < n {
		var zero T
		s = append(s, zero)
	}
	return s[:n]
}

// step records rung r, with its fit f if its status is OK.
func (t *trainer) step(s *Step, r *smoothers.Rung, f *smoothers.Fit) {
	*s = Step{DF: r.DF, Status: r.Status}
	if r.Status != smoothers.OK {
		return
	}
	t.residual = regrow(t.residual, len(t.y))
	quad := 0.0
	for i, y := range t.y {
		e := y - f.Fitted[i]
		t.residual[i] = e
		s.RSS += e * e
		quad += t.detrend[i] * e
	}
	if math.IsNaN(s.RSS) || math.IsInf(s.RSS, 0) {
		s.Status = smoothers.NotFinite
		return
	}
	s.TrS, s.DFResidual = r.TrS, r.DFResidual
	s.LOOCV = LOOCV(t.residual, r.Remainder)
	s.Likelihood = Likelihood{Quad: quad, LogDet: r.LogDet, Known: r.HasLogDet && quad > 0}
}

// subtractLine takes the least-squares line in x off y. Where all x are equal it
// takes off the mean.
func subtractLine(x, y []float64) {
	n := float64(len(x))
	var mx, my float64
	for i := range x {
		mx += (x[i] - x[0]) / n
		my += (y[i] - y[0]) / n
	}
	mx, my = mx+x[0], my+y[0]
	var sxx, sxy float64
	for i := range x {
		sxx += (x[i] - mx) * (x[i] - mx)
		sxy += (x[i] - mx) * (y[i] - my)
	}
	slope := 0.0
	if sxx > 0 {
		slope = sxy / sxx
	}
	for i := range y {
		y[i] -= my + slope*(x[i]-mx)
	}
}
