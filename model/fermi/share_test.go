package fermi

import (
	"context"
	"math/rand/v2"
	"testing"
)

// TestCoresShareASum: two cores give to the last bit what one gives, rings and
// open chains, balanced or not, with t2, cold and warm.
func TestCoresShareASum(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	const n = shareable + 1000
	for _, ring := range []bool{true, false} {
		for _, kind := range []string{"balanced", "uneven", "t2"} {
			h := &Hamiltonian{Ring: ring, Site: make([]float64, n), Bond: make([]float64, n)}
			if !ring {
				h.Bond = h.Bond[:n-1]
			}
			for i := range h.Bond {
				h.Bond[i] = 1 + 0.2*float64(1-2*(i%2)) + 0.05*rng.Float64()
			}
			if kind != "balanced" {
				for i := range h.Site {
					h.Site[i] = 0.1 * rng.Float64()
				}
			}
			if kind == "t2" {
				h.Next = 0.05
			}
			for _, temperature := range []float64{0, 0.02} {
				var one, two State
				single, double := Solver{}, Solver{Jobs: 2}
				occ := Occupation{Electrons: n, Spin: 2, Temperature: temperature}
				if err := single.Solve(context.Background(), h, occ, &one); err != nil {
					t.Fatal(err)
				}
				if err := double.Solve(context.Background(), h, occ, &two); err != nil {
					t.Fatal(err)
				}
				if one.FreeEnergy != two.FreeEnergy || one.Energy != two.Energy ||
					farthest(one.Density, two.Density) != 0 || farthest(one.BondOrder, two.BondOrder) != 0 {
					t.Errorf("ring %v, %s, T = %g: one core and two differ", ring, kind, temperature)
				}
			}
		}
	}
}
