package fermi

import (
	"context"
	"testing"
)

func BenchmarkCross(b *testing.B) {
	for _, n := range []int{6, 8, 10, 12, 16, 20, 24, 30} {
		for _, T := range []float64{0, .05} {
			for _, m := range []Method{Dense, Poles} {
				h := gapped(n)
				s := Solver{Method: m, RoughEdges: true}
				occ := Occupation{Electrons: float64(n), Spin: 2, Temperature: T}
				var st State
				k := 0
				b.Run(m.String(), func(b *testing.B) {
					for b.Loop() {
						k++
						h.Bond[k%n] *= 1 + 1e-4*float64(k%3-1)
						s.Solve(context.Background(), h, occ, &st)
					}
					b.ReportMetric(float64(n), "sites")
					b.ReportMetric(T, "T")
				})
			}
		}
	}
}
