package smoothers

import (
	"fmt"
	"math"
	"testing"
)

func BenchmarkPenalisedSpline(b *testing.B) {
	dfs := []float64{3, 4, 5, 6, 7, 8, 9, 10}
	for _, n := range []int{30, 300, 3000, 100000} {
		x, y := make([]float64, n), make([]float64, n)
		for i := range x {
			x[i] = (float64(i) + 0.5*math.Sin(float64(i))) / float64(n)
			y[i] = math.Cos(float64(7 * i))
		}
		b.Run(fmt.Sprintf("design/n=%d", n), func(b *testing.B) {
			var mem Arena
			s := NewPenalisedSpline()
			b.ReportAllocs()
			for b.Loop() {
				mem.Reset()
				s.On(x, &mem)
			}
		})
		b.Run(fmt.Sprintf("rungs/n=%d", n), func(b *testing.B) {
			var mem Arena
			s := NewPenalisedSpline()
			b.ReportAllocs()
			for b.Loop() {
				mem.Reset()
				s.On(x, &mem).AtDF(dfs)
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/8, "ns/rung")
		})
		b.Run(fmt.Sprintf("fit/n=%d", n), func(b *testing.B) {
			r := NewPenalisedSpline().On(x, nil).AtDF(dfs[:1])
			var f Fit
			b.ReportAllocs()
			for b.Loop() {
				r[0].Fit(y, &f)
			}
		})
	}
}
