package smoothers_test

import (
	"testing"

	"bendtest/smoothers"
	"bendtest/smoothers/smoothertest"
)

func TestRegressionSplineConforms(t *testing.T) {
	// Quantile knots move with the observation that is left out.
	smoothertest.Run(t, smoothers.NewRegressionSpline(), smoothertest.Claims{
		DF: []float64{4, 5, 8, 12}, WholeDF: true, Lines: true, Monotone: true,
	})
}

func TestRegressionSplineOnEqualSpacingConforms(t *testing.T) {
	s := &smoothers.RegressionSpline{Degree: 2, Knots: "equispaced", Beyond: "hold"}
	smoothertest.Run(t, s, smoothertest.Claims{
		DF: []float64{3, 5, 8, 12}, WholeDF: true, Lines: true, Monotone: true,
		LeaveOneOut: smoothertest.Inside,
	})
}

func TestNaturalRegressionSplineConforms(t *testing.T) {
	s := &smoothers.RegressionSpline{Degree: 3, Knots: "equispaced", Natural: true, Beyond: "extend"}
	smoothertest.Run(t, s, smoothertest.Claims{
		DF: []float64{2, 3, 4, 8, 12}, WholeDF: true, Lines: true, Monotone: true,
		LeaveOneOut: smoothertest.Inside,
	})
}

func TestPenalisedSplineConforms(t *testing.T) {
	smoothertest.Run(t, smoothers.NewPenalisedSpline(), smoothertest.Claims{
		DF: []float64{2, 2.001, 2.5, 4, 7.3, 12, 15}, Lines: true, Monotone: true,
		LeaveOneOut: smoothertest.Inside,
	})
}

func TestPenalisedSplineOfFewSegmentsConforms(t *testing.T) {
	s := &smoothers.PenalisedSpline{Segments: 5, Beyond: "hold"}
	smoothertest.Run(t, s, smoothertest.Claims{
		DF: []float64{2, 2.5, 4, 7.3, 8}, Lines: true, Monotone: true,
		LeaveOneOut: smoothertest.Inside,
	})
}
