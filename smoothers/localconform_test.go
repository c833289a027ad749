package smoothers_test

import (
	"fmt"
	"testing"

	"bendtest/smoothers"
	"bendtest/smoothers/smoothertest"
)

func TestKernelConforms(t *testing.T) {
	for _, kernel := range []string{"gaussian", "epanechnikov", "biweight", "tricube"} {
		for _, beyond := range []string{"extend", "hold"} {
			s := smoothers.NewKernel()
			s.Kernel, s.Beyond = kernel, beyond
			claims := smoothertest.Claims{
				DF: []float64{2, 3.5, 8}, LeaveOneOut: smoothertest.Everywhere, Monotone: true, TuningPower: 1,
			}
			if beyond == "hold" { // without an end observation, the refit is held short of it
				claims.LeaveOneOut = smoothertest.Inside
			}
			t.Run(kernel+" "+beyond, func(t *testing.T) { smoothertest.Run(t, s, claims) })
		}
	}
}

func TestLocalConforms(t *testing.T) {
	for _, kernel := range []string{"gaussian", "epanechnikov", "biweight", "tricube"} {
		for degree := 1; degree <= 2; degree++ {
			for _, width := range []string{"neighbours", "bandwidth"} {
				s := smoothers.NewLocal()
				s.Kernel, s.Degree, s.Width = kernel, degree, width
				// From about 7 df on, windows of compact support beyond the data are left
				// with near ties alone on the design that has them. The line through two
				// x 1e−9 apart is then met between two adjacent numbers t, which the
				// suite takes for a jump.
				claims := smoothertest.Claims{DF: []float64{4, 5, 6}, Lines: true, Monotone: true}
				if width == "bandwidth" { // with neighbours the width would change too
					claims.LeaveOneOut, claims.TuningPower = smoothertest.Everywhere, 1
				}
				t.Run(fmt.Sprint(kernel, " ", degree, " ", width), func(t *testing.T) {
					smoothertest.Run(t, s, claims)
				})
			}
		}
	}
}
