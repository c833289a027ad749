package scoring

import (
	"gonum.org/v1/gonum/mathext"

	"bendtest/results"
)

// A Share is how often something happened, with its exact 95 % limits (Clopper & Pearson
// 1934, Biometrika 26:404). It is null out of nothing.
type Share struct{ Rate, Lo, Hi results.Number }

// shareOf returns k out of n.
func shareOf(k, n int) Share {
	if n == 0 {
		return Share{}
	}
	const tail = 0.025
	s := Share{results.Num(float64(k) / float64(n)), results.Num(0), results.Num(1)}
	if k > 0 {
		s.Lo = results.Num(mathext.InvRegIncBeta(float64(k), float64(n-k+1), tail))
	}
	if k < n {
		s.Hi = results.Num(mathext.InvRegIncBeta(float64(k+1), float64(n-k), 1-tail))
	}
	return s
}
