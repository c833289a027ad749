package scoring

import "math"

// The criteria below compare the rungs of one ladder from training data alone;
// lower is better. Throughout n is the number of observations, rss the residual
// sum of squares, t = tr S the equivalent degrees of freedom, all of one rung.

// GCV is generalised cross-validation, (RSS/n) / (1 − γt/n)², and +∞ where γt ≥ n.
// γ = 1 is the criterion of Craven & Wahba (1979, Numer. Math. 31:377); γ = 1.4
// guards against wiggly picks (Kim & Gu 2004, JRSSB 66:337).
func GCV(n int, rss, t, gamma float64) float64 {
	free := 1 - gamma*t/float64(n)
	if !(free > 0) {
		return math.Inf(1)
	}
	return rss / float64(n) / (free * free)
}

// ownFit is the 1 − S_ii below which an observation determines its own fit: a residual
// divided by less would be more rounding than figure.
const ownFit = 1e-9

// LOOCV is leave-one-out cross-validation by the short cut
// (1/n) Σ (r_i / (1 − S_ii))², with residuals r and remainder 1 − S_ii, both of
// length n. It equals refitting without each point wherever the tuning means the
// same thing after a deletion; for neighbour widths it holds the widths, for
// quantile knots the knots. It is +∞ where a point determines its own fit.
func LOOCV(residual, remainder []float64) float64 {
	if len(residual) != len(remainder) {
		panic("scoring: residual and remainder differ in length")
	}
	sum := 0.0
	for i, r := range residual {
		if !(remainder[i] >= ownFit) {
			return math.Inf(1)
		}
		d := r / remainder[i]
		sum += d * d
	}
	return sum / float64(len(residual))
}

// CP is Mallows' criterion in the units of the error, RSS/n + 2γσ²t/n. With γ = 1
// and the noise variance σ² known it is unbiased for the held-out error at the
// same x (Mallows 1973, Technometrics 15:661); γ = log(n)/2 gives the BIC of known
// variance.
func CP(n int, rss, t, variance, gamma float64) float64 {
	return (rss + 2*gamma*variance*t) / float64(n)
}

// AIC is log(RSS/n) + 2t/n (Akaike 1974, IEEE Trans. Autom. Control 19:716). It
// falls to −∞ as t approaches n.
func AIC(n int, rss, t float64) float64 {
	return math.Log(rss/float64(n)) + 2*t/float64(n)
}

// BIC is log(RSS/n) + t·log(n)/n (Schwarz 1978, Ann. Stat. 6:461). It falls to −∞
// as t approaches n.
func BIC(n int, rss, t float64) float64 {
	return math.Log(rss/float64(n)) + t*math.Log(float64(n))/float64(n)
}

// AICc is log(RSS/n) + 1 + 2(t+1)/(n−t−2), and +∞ where t ≥ n − 2 (Hurvich,
// Simonoff & Tsai 1998, JRSSB 60:271).
func AICc(n int, rss, t float64) float64 {
	free := float64(n) - t - 2
	if !(free > 0) {
		return math.Inf(1)
	}
	return math.Log(rss/float64(n)) + 1 + 2*(t+1)/free
}

// REML is the profile restricted-likelihood criterion of the mixed-model form,
// (n−2) log(yᵀ(I−S)y) − log det⁺(I−S), where quad is yᵀ(I−S)y and logDet the log
// of the product of the n−2 non-zero eigenvalues of I − S (Wahba 1985, Ann. Stat.
// 13:1378).
func REML(n int, quad, logDet float64) float64 {
	return float64(n-2)*math.Log(quad) - logDet
}

// ML is the profile likelihood criterion n log(yᵀ(I−S)y) − log det⁺(I−S), with the
// arguments of REML.
func ML(n int, quad, logDet float64) float64 {
	return float64(n)*math.Log(quad) - logDet
}
