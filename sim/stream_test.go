package sim

import (
	"fmt"
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/stat"
	"gonum.org/v1/gonum/stat/distuv"
)

// Whatever a stream is for enters its state: no two of these start alike.
func TestStreamsAreDistinct(t *testing.T) {
	seen := map[string]string{}
	var s Stream
	add := func(seed uint64, cell string, replicate int, purpose string) {
		s.set(seed, cell, replicate, purpose)
		name := fmt.Sprintf("%d %q %d %q", seed, cell, replicate, purpose)
		start := fmt.Sprint(s.Uint64(), s.Uint64())
		if before, known := seen[start]; known {
			t.Errorf("%s starts as %s", name, before)
		}
		seen[start] = name
	}
	for seed := range uint64(10) {
		for _, cell := range []string{"", "a", "ab", "b"} {
			for replicate := range 50 {
				for _, purpose := range []string{"", "a", "b", "bc", forTrainX, forTrainE, forHeldX, forHeldE} {
					add(seed, cell, replicate, purpose)
				}
			}
		}
	}
	add(1<<63, "a", 0, "a")
	add(1, "a", 1<<40, "a")
}

// Means of 200 normals of neighbouring streams: were they correlated by more than
// 0.03 over 40,000 pairs, this would see it; limit of 5 standard errors, false alarm
// 6e-7 for each of three kinds of neighbour.
func TestNeighbouringStreamsAreIndependent(t *testing.T) {
	const pairs, n = 40_000, 200
	var a, b Stream
	mean := func(s *Stream, e []float64) float64 { s.normals(e); return stat.Mean(e, nil) }
	e := make([]float64, n)
	for name, set := range map[string]func(k int){
		"replicate": func(k int) { a.set(1, "cell", k, forTrainE); b.set(1, "cell", k+1, forTrainE) },
		"seed":      func(k int) { a.set(uint64(k), "cell", 0, forTrainE); b.set(uint64(k+1), "cell", 0, forTrainE) },
		"purpose":   func(k int) { a.set(1, "cell", k, forTrainE); b.set(1, "cell", k, forHeldE) },
	} {
		x, y := make([]float64, pairs), make([]float64, pairs)
		for k := range pairs {
			set(k)
			x[k], y[k] = mean(&a, e), mean(&b, e)
		}
		if r := stat.Correlation(x, y, nil); math.Abs(r) > 5/math.Sqrt(pairs) {
			t.Errorf("%s: correlation %.4f", name, r)
		}
	}
}

// The layers of a ziggurat must end at the density's top: then all have the same
// area, and what is drawn has the density exactly.
func TestZigguratsClose(t *testing.T) {
	for name, z := range map[string]*ziggurat{"normal": normalLayers, "exponential": exponentialLayers} {
		const steps = 1 << 53
		area := z.width[0] * steps * z.height[layers-1]
		for i := 1; i < layers; i++ {
			inner := 0.0
			if i > 1 {
				inner = z.width[i-1] * steps
			}
			x := z.width[i] * steps
			if rise := z.height[i-1] - z.height[i]; math.Abs(x*rise-area) > 1e-12*area {
				t.Errorf("%s: layer %d has area %v, the base %v", name, i, x*rise, area)
			}
			if got := float64(z.inside[i]) / steps * x; math.Abs(got-inner) > 1e-15 {
				t.Errorf("%s: layer %d takes all below %v, the next ends at %v", name, i, got, inner)
			}
		}
	}
}

// Two million draws in 1,000 cells of equal probability, and in cells of 1e-3 to 1e-6
// in the tails, by χ² at a false alarm of 1e-6 each.
func TestZigguratsHaveTheirDensity(t *testing.T) {
	const m, cells = 2_000_000, 1000
	var s Stream
	e := make([]float64, m)
	tails := []float64{1e-6, 1e-5, 1e-4, 1e-3}
	for name, c := range map[string]struct {
		draw func([]float64)
		cdf  func(float64) float64
	}{
		"normal":  {s.normals, distuv.UnitNormal.CDF},
		"laplace": {s.laplaces, distuv.Laplace{Scale: 1}.CDF},
	} {
		s.set(5, name, 0, "test")
		c.draw(e)
		even, expected := make([]float64, cells), make([]float64, cells)
		low, high, far := make([]float64, len(tails)+1), make([]float64, len(tails)+1), make([]float64, len(tails)+1)
		cell := func(p float64) int {
			k := 0
			for k < len(tails) && p > tails[k] {
				k++
			}
			return k
		}
		for _, v := range e {
			even[min(int(c.cdf(v)*cells), cells-1)]++
			low[cell(c.cdf(v))]++
			high[cell(c.cdf(-v))]++
		}
		for k := range expected {
			expected[k] = m / cells
		}
		below := 0.0
		for k, p := range append(tails, 1) {
			far[k] = m * (p - below)
			below = p
		}
		for part, counts := range map[string][2][]float64{"all": {even, expected}, "lower tail": {low, far}, "upper tail": {high, far}} {
			x2, df := stat.ChiSquare(counts[0], counts[1]), float64(len(counts[0])-1)
			if x2 > (distuv.ChiSquared{K: df}).Quantile(1-1e-6) {
				t.Errorf("%s, %s: χ² = %.1f on %g", name, part, x2, df)
			}
		}
	}
}

// Draws of the tails alone, which are too rare to be seen in all draws, against the
// tails' own distributions; limits as for designs.
func TestTailsOfZigguratsHaveTheirDistribution(t *testing.T) {
	const m = 100_000
	var s Stream
	s.set(8, "tail", 0, "test")
	upper := func(x float64) float64 { return math.Erfc(x / math.Sqrt2) }
	for name, c := range map[string]struct {
		z     *ziggurat
		start float64
		cdf   func(x float64) float64
	}{
		"normal":      {normalLayers, normalTail, func(x float64) float64 { return 1 - upper(x)/upper(normalTail) }},
		"exponential": {exponentialLayers, exponentialTail, func(x float64) float64 { return 1 - math.Exp(exponentialTail-x) }},
	} {
		e := make([]float64, m)
		for i := range e {
			e[i], s.source = c.z.tail(c.start, s.source)
		}
		slices.Sort(e)
		if d := distance(e, c.cdf); d > 2.9/math.Sqrt(m) {
			t.Errorf("%s: distance %.4f, limit %.4f", name, d, 2.9/math.Sqrt(m))
		}
	}
}

// Order statistics of uniforms: the k-th of n is beta(k, n+1−k). Means within 5
// standard errors, and spacings independent of their place.
func TestAscendingUniformsAreOrderStatistics(t *testing.T) {
	const n, replicates = 9, 40_000
	var s Stream
	var sum [n]float64
	var square [n]float64
	u := make([]float64, n)
	s.set(6, "order", 0, "test")
	for range replicates {
		s.ascending(u, 0, 1)
		for k, v := range u {
			sum[k] += v / replicates
			square[k] += v * v / replicates
		}
	}
	for k := range n {
		a, b := float64(k+1), float64(n-k)
		law := distuv.Beta{Alpha: a, Beta: b}
		se := math.Sqrt(law.Variance() / replicates)
		if math.Abs(sum[k]-law.Mean()) > 5*se {
			t.Errorf("mean of %d: %.5f, want %.5f", k+1, sum[k], law.Mean())
		}
		second := law.Variance() + law.Mean()*law.Mean()
		fourth := a * (a + 1) * (a + 2) * (a + 3) / ((n + 1) * (n + 2) * (n + 3) * (n + 4))
		if se := math.Sqrt((fourth - second*second) / replicates); math.Abs(square[k]-second) > 5*se {
			t.Errorf("mean square of %d: %.5f, want %.5f", k+1, square[k], second)
		}
	}
}

// below must be even, for n that divide nothing too.
func TestBelowIsEven(t *testing.T) {
	var s Stream
	s.set(7, "below", 0, "test")
	for _, n := range []int{1, 2, 3, 7, 10, 1000} {
		counts, expected := make([]float64, n), make([]float64, n)
		for range 100 * n {
			counts[s.below(n)]++
		}
		for k := range expected {
			expected[k] = 100
		}
		if n > 1 && stat.ChiSquare(counts, expected) > (distuv.ChiSquared{K: float64(n - 1)}).Quantile(1-1e-6) {
			t.Errorf("of %d: %v", n, counts[:min(n, 10)])
		}
	}
	// Of 2⁶⁴ numbers, 8/3 fall on each of 3·2⁶¹: without rejection, on every third 2 and
	// on the others 3.
	thirds := make([]float64, 3)
	for range 30_000 {
		thirds[s.below(3<<61)%3]++
	}
	if stat.ChiSquare(thirds, []float64{10_000, 10_000, 10_000}) > (distuv.ChiSquared{K: 2}).Quantile(1-1e-6) {
		t.Errorf("of 3·2⁶¹, by remainder: %v", thirds)
	}
}

func BenchmarkStream(b *testing.B) {
	var s Stream
	e := make([]float64, 10_000)
	for name, draw := range map[string]func([]float64){"uniforms": s.uniforms, "normals": s.normals, "laplaces": s.laplaces, "ascending": func(x []float64) { s.ascending(x, 0, 1) }} {
		b.Run(name, func(b *testing.B) {
			for b.Loop() {
				draw(e)
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(len(e)), "ns/point")
		})
	}
}
