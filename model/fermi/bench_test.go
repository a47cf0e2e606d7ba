package fermi

import (
	"context"
	"testing"
)

func BenchmarkWarm(b *testing.B) {
	for _, n := range []int{200, 1000} {
		for _, T := range []float64{0.1, 0.01, 0.001} {
			for _, shift := range []float64{0, -.7} {
				h := gapped(n)
				s := Solver{RoughEdges: true}
				var st State
				occ := Occupation{Electrons: float64(n) * (1 + shift), Spin: 2, Temperature: T}
				k := 0
				b.Run("", func(b *testing.B) {
					for b.Loop() {
						k++
						h.Bond[k%n] *= 1 + 1e-4*float64(k%3-1)
						if err := s.Solve(context.Background(), h, occ, &st); err != nil {
							b.Fatal(err)
						}
					}
				})
			}
		}
	}
}
