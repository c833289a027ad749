package smoothers_test

import (
	"fmt"
	"math"

	"bendtest/smoothers"
)

// The air over an orchard through a night of frost: hours after sunset and degrees.
var (
	hours   = []float64{0, 1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11}
	degrees = []float64{6.1, 4.2, 3.4, 2.1, 1.6, 0.4, 0.1, -0.9, -1.2, -1.4, -0.2, 1.9}
)

// A smoother is laid out on x, asked for df, and fitted to y.
func Example() {
	rungs := smoothers.NewSmoothingSpline().On(hours, nil).AtDF([]float64{5})
	var fit smoothers.Fit
	rungs[0].Fit(degrees, &fit)

	at := []float64{8.5, 9, 9.5}
	curve := make([]float64, len(at))
	fit.Curve.At(curve, at)
	for i, hour := range at {
		fmt.Printf("%.1f h  %5.2f °C\n", hour, curve[i])
	}
	// Output:
	// 8.5 h  -1.10 °C
	// 9.0 h  -0.89 °C
	// 9.5 h  -0.51 °C
}

// A grid of df; what can't be had says so.
func ExampleLadder() {
	ladder := smoothers.NewSmoothingSpline().On(hours, nil)
	for _, rung := range ladder.AtDF([]float64{2, 3.5, 6, 40}) {
		if rung.Status != smoothers.OK {
			fmt.Printf("df %g: %v\n", rung.DF, rung.Status)
			continue
		}
		var fit smoothers.Fit
		rung.Fit(degrees, &fit)
		rss := 0.0
		for i, y := range degrees {
			rss += (y - fit.Fitted[i]) * (y - fit.Fitted[i])
		}
		fmt.Printf("df %g: RSS %.2f on %.2f residual df\n", rung.DF, rss, rung.DFResidual)
	}
	// Output:
	// df 2: RSS 23.71 on 10.00 residual df
	// df 3.5: RSS 3.29 on 7.89 residual df
	// df 6: RSS 0.51 on 4.82 residual df
	// df 40: df-unattainable
}

// A 95 % pointwise band: the variance of a fitted value is σ² times the squared length of
// its row of S. (It covers the mean of the fit; bias is not in it.)
func ExampleRung() {
	rung := smoothers.NewSmoothingSpline().On(hours, nil).AtDF([]float64{5})[0]
	var fit smoothers.Fit
	rung.Fit(degrees, &fit)
	rss := 0.0
	for i, y := range degrees {
		rss += (y - fit.Fitted[i]) * (y - fit.Fitted[i])
	}
	sd := math.Sqrt(rss / rung.DFResidual)
	for _, i := range []int{0, 6, 11} {
		half := 1.96 * sd * math.Sqrt(rung.RowNorm2[i])
		fmt.Printf("%2.0f h  %5.2f ± %.2f °C\n", hours[i], fit.Fitted[i], half)
	}
	// Output:
	//  0 h   5.86 ± 0.64 °C
	//  6 h  -0.23 ± 0.40 °C
	// 11 h   1.37 ± 0.64 °C
}
