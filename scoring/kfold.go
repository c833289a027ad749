package scoring

import (
	"math"
	"math/rand/v2"
	"strconv"

	"bendtest/smoothers"
)

// A folder cuts a training set into k folds and refits a smoother without each.
// It owns its memory and belongs to one goroutine.
type folder struct {
	k      int
	fold   []int // fold of each observation, in x order
	x, y   []float64
	tx, ty []float64 // left-out points
	pred   []float64
	sum    [][]float64 // k × rungs: summed squared error of a fold
	count  []int
	arena  smoothers.Arena
	fit    smoothers.Fit
}

// purpose names the random stream that deals the folds, one per number of folds.
func (d *folder) purpose() string { return "folds/" + strconv.Itoa(d.k) }

// deal assigns the n observations to k folds of sizes that differ by at most one,
// in random order.
func (d *folder) deal(n int, src rand.Source) {
	d.fold = d.fold[:0]
	for i := range n {
		d.fold = append(d.fold, i%d.k)
	}
	rand.New(src).Shuffle(n, func(i, j int) { d.fold[i], d.fold[j] = d.fold[j], d.fold[i] })
}

// validate cross-validates the smoother at each df of dfs on the training set
// (x ascending) with the folds dealt, and writes a FoldScore per df into out.
func (d *folder) validate(s smoothers.Smoother, dfs, x, y []float64, out []FoldScore) {
	for i := range out {
		out[i] = FoldScore{Known: len(x) >= d.k}
	}
	if len(x) < d.k {
		return
	}
	d.grow(len(dfs))
	for f := range d.k {
		d.split(f, x, y)
		d.count[f] = len(d.tx)
		d.arena.Reset()
		rungs := s.On(d.x, &d.arena).AtDF(dfs)
		for j := range rungs {
			if rungs[j].Status != smoothers.OK {
				out[j].Known = false
				continue
			}
			rungs[j].Fit(d.y, &d.fit)
			d.sum[f][j] = d.squaredError()
		}
	}
	for j := range out {
		d.summarise(j, len(x), &out[j])
	}
}

// grow makes room for one summed error per fold and rung.
func (d *folder) grow(rungs int) {
	for len(d.sum) < d.k {
		d.sum = append(d.sum, nil)
		d.count = append(d.count, 0)
	}
	for f := range d.sum {
		if cap(d.sum[f]) < rungs {
			d.sum[f] = make([]float64, rungs)
		}
		d.sum[f] = d.sum[f][:rungs]
	}
}

// split parts the observations into the left-out fold f and the rest.
func (d *folder) split(f int, x, y []float64) {
	d.x, d.y, d.tx, d.ty = d.x[:0], d.y[:0], d.tx[:0], d.ty[:0]
	for i, g := range d.fold {
		if g == f {
			d.tx, d.ty = append(d.tx, x[i]), append(d.ty, y[i])
		} else {
			d.x, d.y = append(d.x, x[i]), append(d.y, y[i])
		}
	}
}

// squaredError sums (y − f̂)² over the left-out points for the fit at hand.
func (d *folder) squaredError() float64 {
	if cap(d.pred) < len(d.tx) {
		d.pred = make([]float64, len(d.tx))
	}
	d.pred = d.pred[:len(d.tx)]
	d.fit.Curve.At(d.pred, d.tx)
	sum := 0.0
	for i, p := range d.pred {
		r := d.ty[i] - p
		sum += r * r
	}
	return sum
}

// summarise turns the summed errors of rung j over n observations into its mean
// and the standard error of that mean over folds.
func (d *folder) summarise(j, n int, out *FoldScore) {
	if !out.Known {
		return
	}
	total, mean := 0.0, 0.0
	for f := range d.k {
		total += d.sum[f][j]
		mean += d.sum[f][j] / float64(d.count[f]) / float64(d.k)
	}
	spread := 0.0
	for f := range d.k {
		dev := d.sum[f][j]/float64(d.count[f]) - mean
		spread += dev * dev
	}
	k := float64(d.k)
	out.Mean, out.SE = total/float64(n), math.Sqrt(spread/(k-1)/k)
	if math.IsNaN(out.Mean) || math.IsInf(out.Mean, 0) {
		*out = FoldScore{}
	}
}
