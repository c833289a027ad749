package sim_test

import (
	"fmt"

	"bendtest/sim"
	"bendtest/sim/expr"
)

// Thirty readings of a frost night, and a large held-out set to judge a curve by.
func Example() {
	f, err := expr.Compile("3*exp(-2*x) + sin(2*pi*x)")
	if err != nil {
		panic(err)
	}
	truth, err := sim.NewTruth(f, 0, 1)
	if err != nil {
		panic(err)
	}
	sd := 0.4
	cell, err := sim.NewCell(truth,
		&sim.Design{Law: &sim.UniformDesign{}, Redraw: true},
		&sim.Noise{Law: &sim.NormalNoise{}, SD: &sd}, 30, 10_000)
	if err != nil {
		panic(err)
	}
	var sample sim.Sample
	cell.Draw(20261201, 0, &sample) // seed and replicate decide the rest

	held, floor := sample.Held, 0.0
	for i, y := range held.Y {
		floor += (y - held.F[i]) * (y - held.F[i]) / float64(len(held.Y))
	}
	fmt.Printf("training set: %d readings\n", len(sample.Train.Y))
	fmt.Printf("noise floor:  %.4f, and %.4f in this held-out set\n", cell.NoiseVariance, floor)
	// Output:
	// training set: 30 readings
	// noise floor:  0.1600, and 0.1593 in this held-out set
}
