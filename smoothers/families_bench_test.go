package smoothers

import (
	"fmt"
	"math"
	"math/rand/v2"
	"runtime"
	"slices"
	"testing"
)

// BenchmarkFamilies lays every family out on n random x, solves 12 df, and fits: the cost
// of one curve through new data. Sys-MB is all memory taken from the system, which only
// the first benchmark of a process tells of.
func BenchmarkFamilies(b *testing.B) {
	for _, family := range Families() {
		for _, n := range []int{100, 10_000, 100_000, 1_000_000} {
			b.Run(fmt.Sprintf("family=%s/n=%d", family.Name, n), func(b *testing.B) {
				rng := rand.New(rand.NewPCG(1, 6))
				x, y := make([]float64, n), make([]float64, n)
				for i := range x {
					x[i] = rng.Float64()
				}
				slices.Sort(x)
				for i := range x {
					y[i] = math.Sin(9*x[i]) + rng.NormFloat64()
				}
				var f Fit
				mem := &Arena{}
				b.ReportAllocs()
				for b.Loop() {
					mem.Reset()
					r := family.New().On(x, mem).AtDF([]float64{12})[0]
					if r.Status != OK {
						b.Fatal(r.Status)
					}
					r.Fit(y, &f)
				}
				b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(n), "ns/point")
				var m runtime.MemStats
				runtime.ReadMemStats(&m)
				b.ReportMetric(float64(m.Sys)/1e6, "Sys-MB")
			})
		}
	}
}
