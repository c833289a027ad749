package smoothers

import (
	"fmt"
	"testing"
)

// benchLocal are the settings whose cost is watched.
func benchLocal() map[string]Smoother {
	line, steady := NewLocal(), NewLocal()
	line.Width, line.Kernel = "bandwidth", "gaussian"
	steady.Width, steady.Kernel = "bandwidth", "epanechnikov"
	return map[string]Smoother{
		"kernel": NewKernel(), "local": NewLocal(), "local-gaussian": line, "local-bandwidth": steady,
	}
}

func BenchmarkLocal(b *testing.B) {
	dfs := []float64{3, 4, 5, 6, 7, 8, 9, 10, 11, 12, 13, 14}
	held := uniformDesign(10000, 2)
	dst := make([]float64, len(held))
	for name, s := range benchLocal() {
		for _, n := range []int{30, 300, 3000} {
			x := uniformDesign(n, 1)
			y := wiggle(x, 1)
			b.Run(fmt.Sprintf("ladder/%s/n=%d", name, n), func(b *testing.B) {
				var mem Arena
				b.ReportAllocs()
				for b.Loop() {
					mem.Reset()
					s.On(x, &mem).AtDF(dfs)
				}
				b.ReportMetric(float64(b.Elapsed().Microseconds())/float64(b.N*len(dfs)), "µs/rung")
			})
			for _, lasting := range []bool{false, true} {
				b.Run(fmt.Sprintf("curve/%s/n=%d/lasting=%t", name, n, lasting), func(b *testing.B) {
					rung, f := s.On(x, &Arena{Lasting: lasting}).AtDF([]float64{8})[0], Fit{}
					b.ReportAllocs()
					for b.Loop() {
						rung.Fit(y, &f)
						f.Curve.At(dst, held)
					}
				})
			}
		}
	}
}
