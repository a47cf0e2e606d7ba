package fermi

import (
	"context"
	"fmt"
	"testing"
)

// BenchmarkSolve solves slightly changing rings with a gap, as inside a
// self-consistent loop.
func BenchmarkSolve(b *testing.B) {
	for _, bb := range []struct {
		name        string
		temperature float64
		next, site  float64
		extra       float64 // electrons besides half filling
		sharp       bool
		sites       []int
	}{
		{"balanced", 0, 0, 0, 0, false, []int{200, 1000, 10_000, 100_000}},
		{"uneven", 0, 0, 1, 0, false, []int{200, 1000, 10_000, 100_000}},
		{"sharp edges", 0, 0, 1, 0, true, []int{200, 1000}},
		{"one electron more", 0, 0, 1, 1, false, []int{200, 1000}},
		{"warm", 0.05, 0, 1, 0, false, []int{200, 1000}},
		{"second neighbours", 0, 0.1, 1, 0, false, []int{200, 1000}},
	} {
		for _, n := range bb.sites {
			b.Run(fmt.Sprintf("%s/%d", bb.name, n), func(b *testing.B) {
				h := uneven(n)
				h.Next = bb.next
				for i := range h.Site {
					h.Site[i] *= bb.site
				}
				s := Solver{RoughEdges: !bb.sharp}
				occ := Occupation{Electrons: float64(n) + bb.extra, Spin: 2, Temperature: bb.temperature}
				var st State
				b.ReportAllocs()
				k := 0
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

func BenchmarkLevels(b *testing.B) {
	for _, n := range []int{200, 1000} {
		b.Run(fmt.Sprint(n), func(b *testing.B) {
			h := uneven(n)
			var s Solver
			var levels []float64
			b.ReportAllocs()
			for b.Loop() {
				var err error
				if levels, err = s.Levels(context.Background(), levels, h); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
