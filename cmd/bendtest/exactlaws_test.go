package main

import (
	"fmt"
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/mathext"
	"gonum.org/v1/gonum/stat/distuv"

	"bendtest/results"
)

// Whole studies against laws that hold exactly. Each test of fit is made at level
// 1e-6 and the seed is fixed: a false alarm could only come with a change of the random
// draws.
const falseAlarm = 1e-6

// selectionStudy picks among nested polynomials, the truth a straight line.
const selectionStudy = `seed = 4
held-out = 100
replicates = 20000
keep = "summary"
[cells]
n = [100]
[truth.line]
f = "1 - 2*x"
[design.even]
law = "even"
[noise.normal]
law = "normal"
sd = 0.7
[[smoother]]
name = "5 more"
family = "polynomial"
df = "2..7"
[[smoother]]
name = "10 more"
family = "polynomial"
df = "2..12"
[[rule]]
name = "cp"
kind = "cp"
[[rule]]
name = "cp, inflated"
kind = "cp"
gamma = 1.4
[[rule]]
name = "bic, variance known"
kind = "cp"
gamma = 2.302585092994046
`

// sizeLaw is the law of the number of extra df that a rule picks out of most: the argmax
// of the walk Σ(χ²₁ − c), by P_k = Pr(χ²_k > ck), p_0 = q_0 = 1, m p_m = Σ_{k≤m} P_k p_{m−k}, m
// q_m = Σ_{k≤m} (1 − P_k) q_{m−k}, Pr(L = m) = p_m q_{M−m} (Spitzer's identity; Shibata
// 1976, Biometrika 63:117; Woodroofe 1982, Ann. Stat. 10:1182).
func sizeLaw(c float64, most int) []float64 {
	p, q := []float64{1}, []float64{1}
	for m := 1; m <= most; m++ {
		var a, b float64
		for k := 1; k <= m; k++ {
			tail := distuv.ChiSquared{K: float64(k)}.Survival(c * float64(k))
			a += tail * p[m-k]
			b += (1 - tail) * q[m-k]
		}
		p, q = append(p, a/float64(m)), append(q, b/float64(m))
	}
	law := make([]float64, most+1)
	for m := range law {
		law[m] = p[m] * q[most-m]
	}
	return law
}

// The law as it is printed in derived tables.
func TestTheLawOfTheSelectedSize(t *testing.T) {
	for _, c := range []struct {
		c     float64
		most  int
		want  []float64
		extra float64
	}{
		{2, 5, []float64{.734926, .11713, .06085, .03819}, .571058},
		{2, 10, []float64{.717157, .11307, .05771, .03512}, .791015},
		{2.8, 10, []float64{.860373, .08111, .02999, .01362}, .258857},
		{math.Log(100), 10, []float64{.962444, .03068, .00530, .00117}, .046563},
	} {
		law, mean := sizeLaw(c.c, c.most), 0.0
		for m, p := range law {
			mean += float64(m) * p
			if m < len(c.want) && math.Abs(p-c.want[m]) > 5.5e-6 {
				t.Errorf("c = %g: Pr(%d) = %.6f, want %.6f", c.c, m, p, c.want[m])
			}
		}
		if math.Abs(mean-c.extra) > 1e-6 {
			t.Errorf("c = %g: mean %.6f, want %.6f", c.c, mean, c.extra)
		}
	}
}

func TestRulesPickSizesByTheirExactLaw(t *testing.T) {
	choices := tableRows(t, runStudy(t, selectionStudy), results.Choices)
	for _, c := range []struct {
		smoother, rule string
		c              float64
		most           int
	}{
		{"5 more", "cp", 2, 5},
		{"10 more", "cp", 2, 10},
		{"10 more", "cp, inflated", 2.8, 10},
		{"10 more", "bic, variance known", math.Log(100), 10},
	} {
		observed := make([]float64, c.most+1)
		for _, row := range choices {
			if row.Smoother == c.smoother && row.Rule == c.rule {
				observed[int(row.DF)-2] = float64(row.Picked)
				if row.Replicates != 20000 {
					t.Errorf("%s, %s: %d replicates", c.smoother, c.rule, row.Replicates)
				}
			}
		}
		p, cells := chiSquare(observed, sizeLaw(c.c, c.most))
		t.Logf("%s, %s: χ² on %d cells, p = %.3g", c.smoother, c.rule, cells, p)
		if p < falseAlarm {
			t.Errorf("%s, %s: %v does not fit the law (p = %.2g)", c.smoother, c.rule, observed, p)
		}
	}
}

// chiSquare is the p-value of counts under a law; classes of fewer than 5 expected are
// thrown together with the one before.
func chiSquare(observed, law []float64) (p float64, classes int) {
	total := 0.0
	for _, o := range observed {
		total += o
	}
	var obs, want []float64
	for m, q := range law {
		if k := len(want) - 1; k >= 0 && (q*total < 5 || want[k] < 5) {
			obs[k] += observed[m]
			want[k] += q * total
			continue
		}
		obs, want = append(obs, observed[m]), append(want, q*total)
	}
	sum := 0.0
	for k := range obs {
		sum += (obs[k] - want[k]) * (obs[k] - want[k]) / want[k]
	}
	return distuv.ChiSquared{K: float64(len(obs) - 1)}.Survival(sum), len(obs)
}

// testStudy tests the straight line against nested polynomials and regression splines.
const testStudy = `seed = 5
held-out = 100
replicates = 20000
[cells]
n = [40]
[truth.line]
f = "1 - 2*x"
[truth.bow]
f = "1 - 2*x + 0.9*x^2"
[design.even]
law = "even"
[noise.normal]
law = "normal"
sd = 0.25
[[smoother]]
family = "polynomial"
df = [2, 5]
[[smoother]]
family = "regression-spline"
df = [7]
[[smoother]]
family = "smoothing-spline"
df = [5]
`

func TestNestedTestsHaveTheirExactLaws(t *testing.T) {
	dir := runStudy(t, testStudy)
	const n, sd = 40, 0.25
	rss := map[string][]float64{}
	var p []float64
	for _, f := range tableRows(t, dir, results.Fits) {
		if f.Cell != "line/even/normal/n=40" {
			continue
		}
		key := fmt.Sprint(f.Smoother, " ", f.DF)
		rss[key] = append(rss[key], n*f.TrainMSE.Value)
		if f.Smoother == "polynomial" && f.DF == 5 {
			p = append(p, f.LineP.Value)
		}
	}
	fits := func(what string, values []float64, cdf func(float64) float64) {
		t.Helper()
		if q := kolmogorov(values, cdf); q < falseAlarm {
			t.Errorf("%s does not follow its law (p = %.2g)", what, q)
		} else {
			t.Logf("%s: Kolmogorov–Smirnov p = %.3g of %d", what, q, len(values))
		}
	}
	fits("the p-value of the F test", p, func(v float64) float64 { return v })
	line := rss["polynomial 2"]
	for key, df := range map[string]float64{"polynomial 5": 5, "regression-spline 7": 7} {
		ratio, scaled := make([]float64, len(line)), make([]float64, len(line))
		for i, r := range rss[key] {
			ratio[i], scaled[i] = r/line[i], r/(sd*sd)
		}
		fits("RSS ÷ RSS of the line, "+key, ratio, distuv.Beta{Alpha: (n - df) / 2, Beta: (df - 2) / 2}.CDF)
		fits("RSS ÷ σ², "+key, scaled, distuv.ChiSquared{K: n - df}.CDF)
	}
	power(t, tableRows(t, dir, results.Tests), n, sd)
}

// power checks rejection rates against the F and the noncentral F law: 12 rates, each
// binomial, at falseAlarm each.
func power(t *testing.T, tests []results.Test, n int, sd float64) {
	t.Helper()
	centre, gain := 0.0, 0.0
	for i := range n { // what the line leaves of 0.9 x², which cubics and splines take up
		x := (float64(i) + 0.5) / float64(n)
		q := (x-0.5)*(x-0.5) - (1-1/float64(n*n))/12 // orthogonal to 1 and x
		gain += 0.81 * q * q
		centre += q
	}
	if math.Abs(centre) > 1e-12 {
		t.Fatalf("the parabola is not centred: %g", centre)
	}
	checked := 0
	for _, row := range tests {
		if row.DF == 2 {
			continue
		}
		if exact := row.Smoother != "smoothing-spline"; row.Exact != exact {
			t.Errorf("%s at df %g says exact = %v", row.Smoother, row.DF, row.Exact)
		}
		if !row.Exact {
			continue
		}
		noncentrality := 0.0
		if row.Cell == "bow/even/normal/n=40" {
			noncentrality = gain / (sd * sd)
		}
		want := noncentralTail(row.Alpha, row.DF-2, float64(n)-row.DF, noncentrality)
		z := (row.Rate.Value - want) / math.Sqrt(want*(1-want)/float64(row.Replicates))
		if 2*distuv.UnitNormal.Survival(math.Abs(z)) < falseAlarm {
			t.Errorf("%s, %s at df %g: rejected %.4f at α = %g, want %.4f", row.Cell, row.Smoother, row.DF, row.Rate.Value, row.Alpha, want)
		}
		if !(row.Lo.Value <= row.Rate.Value && row.Rate.Value <= row.Hi.Value) {
			t.Errorf("limits %g, %g about %g", row.Lo.Value, row.Hi.Value, row.Rate.Value)
		}
		checked++
	}
	if checked != 12 {
		t.Errorf("%d rates checked", checked)
	}
}

// noncentralTail is the power of the F test on (u, v) df at level α: Poisson weights on
// central laws (Johnson, Kotz & Balakrishnan 1995, Continuous Univariate Distributions
// 2, ch. 30).
func noncentralTail(alpha, u, v, noncentrality float64) float64 {
	critical := distuv.F{D1: u, D2: v}.Quantile(1 - alpha)
	x := u * critical / (u*critical + v)
	sum := 0.0
	for k := range 400 {
		lg, _ := math.Lgamma(float64(k + 1))
		weight := math.Exp(-noncentrality/2 - lg)
		if noncentrality > 0 {
			weight = math.Exp(float64(k)*math.Log(noncentrality/2) - noncentrality/2 - lg)
		} else if k > 0 {
			break
		}
		sum += weight * (1 - mathext.RegIncBeta(u/2+float64(k), v/2, x))
	}
	return sum
}

// kolmogorov is the p-value of the largest distance between the empirical law of values
// and cdf (Kolmogorov 1933; the limit law, right to 1e-3 in p for 20,000 values).
func kolmogorov(values []float64, cdf func(float64) float64) float64 {
	v := slices.Sorted(slices.Values(values))
	n, distance := float64(len(v)), 0.0
	for i, u := range v {
		p := cdf(u)
		distance = max(distance, p-float64(i)/n, float64(i+1)/n-p)
	}
	s, sum := distance*math.Sqrt(n), 0.0
	for k := 1; k < 100; k++ {
		sum += 2 * math.Pow(-1, float64(k-1)) * math.Exp(-2*float64(k*k)*s*s)
	}
	if s < 0.2 { // where the series does not converge, and p is 1
		return 1
	}
	return min(max(sum, 0), 1)
}
