package smoothertest

import (
	"math"
	"math/rand/v2"
	"slices"
)

// A design is a named set of ascending x.
type design struct {
	name string
	x    []float64
	// plain says that x may be shifted and scaled by any numbers: gaps are far above
	// rounding.
	plain bool
}

// designs are ordinary and hostile sets of x, the same in every run.
func designs() []design {
	rng := rand.New(rand.NewPCG(20261201, 3))
	set := func(n int, f func(i int) float64) []float64 {
		x := make([]float64, n)
		for i := range x {
			x[i] = f(i)
		}
		slices.Sort(x)
		return x
	}
	return []design{
		{"even", set(30, func(i int) float64 { return (float64(i) + 0.5) / 30 }), true},
		{"random", set(40, func(int) float64 { return rng.Float64() }), true},
		{"ties", set(45, func(int) float64 { return math.Round(20*rng.Float64()) / 20 }), true},
		{"near ties 1e-9 apart", set(40, func(i int) float64 { return float64(i/2)/20 + 1e-9*float64(i%2) }), false},
		{"both ends crowded", set(50, func(int) float64 { return crowd(rng.Float64()) }), false},
		{"1e4 + small", set(36, func(int) float64 { return 1e4 + rng.Float64() }), false},
		{"tiny", set(32, func(int) float64 { return 1e-6 * rng.Float64() }), false},
		{"huge", set(32, func(int) float64 { return 1e8 * (rng.Float64() - 0.3) }), false},
	}
}

// crowd pushes a number in [0, 1] towards the ends: its density there grows like that
// of a beta law with both parameters 1/4.
func crowd(u float64) float64 {
	s := 2*u - 1
	return 0.5 + 0.5*math.Copysign(1-math.Pow(1-math.Abs(s), 4), s)
}

// readings returns a y of n readings of size 1 with some shape, another for each seed.
func readings(x []float64, seed uint64) []float64 {
	rng := rand.New(rand.NewPCG(seed, uint64(len(x))))
	y := make([]float64, len(x))
	first, span := x[0], x[len(x)-1]-x[0]
	for i := range y {
		y[i] = 0.5 * rng.NormFloat64()
		if span > 0 {
			y[i] += math.Sin(5 * (x[i] - first) / span)
		}
	}
	return y
}
