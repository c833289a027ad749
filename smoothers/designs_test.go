package smoothers

import (
	"math"
	"math/rand/v2"
	"slices"
)

// hostileDesigns are designs that break careless splines.
func hostileDesigns() map[string][]float64 {
	rng := rand.New(rand.NewPCG(8, 1))
	designs := map[string][]float64{}
	add := func(name string, n int, f func(i int) float64) {
		x := make([]float64, n)
		for i := range x {
			x[i] = f(i)
		}
		slices.Sort(x)
		designs[name] = x
	}
	add("random", 40, func(int) float64 { return rng.Float64() })
	add("even", 30, func(i int) float64 { return (float64(i) + 0.5) / 30 })
	add("ties", 50, func(int) float64 { return math.Round(rng.Float64()*12) / 12 })
	add("near ties", 40, func(i int) float64 { return float64(i/2)/20 + float64(i%2)*1e-9 })
	add("crowded ends", 60, func(int) float64 { b := rng.Float64(); return 0.5 - 0.5*math.Cos(math.Pi*b*b*(3-2*b)) })
	add("offset", 40, func(int) float64 { return 1e4 + rng.Float64() })
	add("tiny", 30, func(int) float64 { return 1e-6 * rng.Float64() })
	add("huge", 30, func(int) float64 { return 1e8 * rng.Float64() })
	return designs
}

// distinct counts the distinct values of ascending x.
func distinct(x []float64) int { return len(slices.Compact(slices.Clone(x))) }

// evenReadings returns n even x in [0, 1] and some readings.
func evenReadings(n int) (x, y []float64) {
	x, y = make([]float64, n), make([]float64, n)
	for i := range x {
		x[i] = (float64(i) + 0.5) / float64(n)
		y[i] = math.Sin(6*x[i]) + math.Cos(float64(i*i))
	}
	return x, y
}
