package smoothers_test

import (
	"testing"

	"bendtest/smoothers"
	"bendtest/smoothers/smoothertest"
)

func TestSmoothingSplineConforms(t *testing.T) {
	smoothertest.Run(t, smoothers.NewSmoothingSpline(), smoothertest.Claims{
		DF: []float64{2, 2.001, 2.5, 4, 7.3, 12}, Lines: true, Monotone: true,
		LeaveOneOut: smoothertest.Everywhere, TuningPower: 3,
	})
}

func TestSmoothingSplineOfOrderOneConforms(t *testing.T) {
	smoothertest.Run(t, &smoothers.SmoothingSpline{Order: 1, Beyond: "hold"}, smoothertest.Claims{
		DF: []float64{1, 1.001, 1.5, 4, 7.3, 12}, Monotone: true,
		LeaveOneOut: smoothertest.Everywhere, TuningPower: 1,
	})
}

func TestPolynomialConforms(t *testing.T) {
	smoothertest.Run(t, smoothers.NewPolynomial(), smoothertest.Claims{
		DF: []float64{1, 2, 3, 5, 8, 10}, WholeDF: true, Lines: true, Monotone: true,
		LeaveOneOut: smoothertest.Everywhere,
	})
}
