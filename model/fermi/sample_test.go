package fermi

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"
)

// TestSampledLevels: levels found by counting are those of the band reduction
// followed by gonum's Dsterf (v0.17.0), rings, open chains and t2.
func TestSampledLevels(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	var s Solver
	for _, n := range []int{1, 2, 3, 7, 64, 301} {
		for _, ring := range []bool{true, false} {
			for _, next := range []float64{0, 0.3} {
				h := &Hamiltonian{Ring: ring, Next: next, Site: make([]float64, n), Bond: make([]float64, n)}
				if !ring {
					h.Bond = h.Bond[:n-1]
				}
				for i := range h.Site {
					h.Site[i] = rng.Float64() - 0.5
				}
				for i := range h.Bond {
					h.Bond[i] = 0.5 + rng.Float64()
				}
				all, err := s.Levels(context.Background(), nil, h)
				if err != nil {
					t.Fatal(err)
				}
				numbers := []int{0, n / 3, n / 2, n / 2, n - 1}
				for _, tol := range []float64{1e-3, 1e-10} {
					got, err := s.SampleLevels(context.Background(), nil, h, numbers, tol)
					if err != nil {
						t.Fatal(err)
					}
					for i, m := range numbers {
						if d := math.Abs(got[i] - all[m]); d > tol+1e-11 {
							t.Errorf("%d sites, ring %v, t2 %g: level %d is off by %g, more than %g", n, ring, next, m, d, tol)
						}
					}
				}
			}
		}
	}
}

func BenchmarkSampleLevels(b *testing.B) {
	const n = 2000
	h := &Hamiltonian{Ring: true, Site: make([]float64, n), Bond: make([]float64, n)}
	for i := range h.Bond {
		h.Bond[i] = 1 + 0.1*float64(1-2*(i%2))
	}
	numbers := make([]int, 96)
	for i := range numbers {
		numbers[i] = i * (n - 1) / 95
	}
	var s Solver
	var dst []float64
	b.ReportAllocs()
	for b.Loop() {
		var err error
		if dst, err = s.SampleLevels(context.Background(), dst, h, numbers, 1e-3); err != nil {
			b.Fatal(err)
		}
	}
}
