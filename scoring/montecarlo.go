package scoring

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/mathext"
	"gonum.org/v1/gonum/stat"

	"bendtest/results"
)

// An Estimate is a figure averaged over replicates, with its Monte Carlo standard
// error. Either is null where the replicates do not determine it.
type Estimate struct {
	Value, MCSE results.Number
}

// over returns the estimate divided by a known positive constant.
func (e Estimate) over(c float64) Estimate {
	if e.Value.Known {
		e.Value.Value /= c
	}
	if e.MCSE.Known {
		e.MCSE.Value /= c
	}
	return e
}

// Mean is the mean of v, with MCSE sd/√R (Morris, White & Crowther 2019, Stat.
// Med. 38:2074, table 6).
func Mean(v []float64) Estimate {
	if len(v) == 0 {
		return Estimate{}
	}
	m, sd := stat.MeanStdDev(v, nil)
	if len(v) == 1 {
		return Estimate{Value: results.Num(v[0])}
	}
	return Estimate{finite(m), finite(sd / math.Sqrt(float64(len(v))))}
}

// Proportion is the share of v that satisfies a condition, with MCSE √(p(1−p)/R)
// (the same table).
func Proportion(v []float64, holds func(float64) bool) Estimate {
	if len(v) == 0 {
		return Estimate{}
	}
	hits := 0.0
	for _, x := range v {
		if holds(x) {
			hits++
		}
	}
	r := float64(len(v))
	p := hits / r
	return Estimate{results.Num(p), results.Num(math.Sqrt(p * (1 - p) / r))}
}

// Spread is the standard deviation of v (divisor R − 1). Its MCSE is that of the
// square root of a sample variance, √((m₄ − s⁴(R−3)/(R−1))/R) / 2s with m₄ the
// fourth central moment, which does not suppose a normal law.
func Spread(v []float64) Estimate {
	if len(v) < 2 {
		return Estimate{}
	}
	m, sd := stat.MeanStdDev(v, nil)
	if sd == 0 {
		return Estimate{results.Num(0), results.Num(0)}
	}
	r, m4 := float64(len(v)), 0.0
	for _, x := range v {
		d := (x - m) * (x - m)
		m4 += d * d / r
	}
	variance := (m4 - sd*sd*sd*sd*(r-3)/(r-1)) / r
	return Estimate{finite(sd), finite(math.Sqrt(max(variance, 0)) / (2 * sd))}
}

// Quantile is the p-quantile of ascending v, by linear interpolation between the
// order statistics about position p(R−1). Its MCSE is the bootstrap's in closed
// form: the k-th order statistic is F⁻¹ of a Beta(k, R−k+1) variate, with the
// empirical F in place of the true one (Maritz & Jarrett 1978, JASA 73:194); k is
// taken as p(R−1) + 1, not rounded.
func Quantile(v []float64, p float64) Estimate {
	if len(v) == 0 {
		return Estimate{}
	}
	if !slices.IsSorted(v) {
		panic("scoring: Quantile needs ascending values")
	}
	r := float64(len(v))
	at := p * (r - 1)
	low := int(at)
	value := v[low]
	if low+1 < len(v) && at > float64(low) {
		value += (at - float64(low)) * (v[low+1] - v[low])
	}
	if len(v) == 1 {
		return Estimate{Value: finite(value)}
	}
	return Estimate{finite(value), finite(orderSD(v, at+1))}
}

// orderSD is the standard deviation of the k-th order statistic of a sample of
// v's size from v's own empirical law, k real.
func orderSD(v []float64, k float64) float64 {
	r := float64(len(v))
	a, b := k, r-k+1
	mean, sd := a/(a+b), math.Sqrt(a*b/((a+b)*(a+b)*(a+b+1)))
	from := max(0, int((mean-12*sd)*r)-1) // beyond 12 sd the weights vanish
	to := min(len(v), int((mean+12*sd)*r)+2)
	origin := v[int(k-1)] // keeps the digits of the difference below
	var first, second float64
	below := mathext.RegIncBeta(a, b, float64(from)/r)
	for i := from; i < to; i++ {
		above := mathext.RegIncBeta(a, b, float64(i+1)/r)
		d := v[i] - origin
		first += (above - below) * d
		second += (above - below) * d * d
		below = above
	}
	return math.Sqrt(max(second-first*first, 0))
}

// Correlation is the correlation of paired u and v, with the jackknife's standard
// error (Efron & Tibshirani 1993, An Introduction to the Bootstrap, §11.5), which
// stays right for discrete figures such as df. It is null where either does not
// vary.
func Correlation(u, v []float64) Estimate {
	n := float64(len(u))
	if len(u) < 3 {
		return Estimate{}
	}
	mu, mv := stat.Mean(u, nil), stat.Mean(v, nil)
	var uu, vv, uv float64
	for i := range u {
		du, dv := u[i]-mu, v[i]-mv
		uu, vv, uv = uu+du*du, vv+dv*dv, uv+du*dv
	}
	if !(uu > 0 && vv > 0) {
		return Estimate{}
	}
	left := make([]float64, len(u)) // the correlation without each pair
	for i := range u {
		du, dv, c := u[i]-mu, v[i]-mv, n/(n-1)
		left[i] = (uv - c*du*dv) / math.Sqrt((uu-c*du*du)*(vv-c*dv*dv))
	}
	_, sd := stat.MeanStdDev(left, nil)
	mcse := results.Number{}
	if !math.IsInf(sd, 0) {
		mcse = finite(sd * (n - 1) / math.Sqrt(n))
	}
	return Estimate{results.Num(uv / math.Sqrt(uu*vv)), mcse}
}

// finite returns v as a known number, or null if it is NaN.
func finite(v float64) results.Number {
	if math.IsNaN(v) {
		return results.Number{}
	}
	return results.Num(v)
}
