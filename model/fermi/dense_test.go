package fermi

import (
	"context"
	"math"
	"testing"
)

func TestUniformRingEnergyClosedForm(t *testing.T) {
	for _, n := range []int{1, 2, 3, 4, 5, 6, 10, 49, 50} {
		h := &Hamiltonian{Site: make([]float64, n), Bond: make([]float64, n), Ring: true}
		for i := range h.Bond {
			h.Bond[i] = 1
		}
		for k := 0; k <= n; k++ {
			var s Solver
			var st State
			if err := s.Solve(context.Background(), h, Occupation{Electrons: float64(k), Spin: 1}, &st); err != nil {
				t.Fatal(err)
			}
			want := -2 * math.Sin(math.Pi*float64(k)/float64(n)) / math.Sin(math.Pi/float64(n))
			if k%2 == 0 {
				want = -2 * math.Sin(math.Pi*float64(k)/float64(n)) / math.Tan(math.Pi/float64(n))
			}
			if n == 1 {
				want = -2 * float64(k)
			}
			if math.Abs(st.Energy-want) > 1e-12*math.Max(1, math.Abs(want)) {
				t.Errorf("n=%d k=%d: %v want %v", n, k, st.Energy, want)
			}
		}
	}
}
