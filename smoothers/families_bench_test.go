package smoothers

import (
	"fmt"
	"runtime"
	"testing"
)

// BenchmarkFamilies lays every family out on n random x, solves 12 df, and fits: the cost
// of one curve through new data. Sys-MB is all memory taken from the system, which only
// the first benchmark of a process tells of.
func BenchmarkFamilies(b *testing.B) {
	for _, family := range Families() {
		for _, n := range []int{100, 10_000, 100_000, 1_000_000} {
			b.Run(fmt.Sprintf("family=%s/n=%d", family.Name, n), func(b *testing.B) {
				x, y := noisyWave(n)
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
