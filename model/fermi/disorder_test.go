package fermi

import (
	"context"
	"math"
	"math/rand/v2"
	"os"
	"testing"
)

// TestLongDisorderedChains: site energies at random on a very long chain leave
// gaps of a millionth of the band and less at the Fermi energy. The densities
// add up, the energy is that of the densities and bond orders, and the levels
// about the gap are where counting puts them (Sylvester's law of inertia).
func TestLongDisorderedChains(t *testing.T) {
	n := 20_000
	if os.Getenv("TWOKF_LONG") == "1" {
		n = 1_000_000
	}
	rng := rand.New(rand.NewPCG(3, 4))
	for _, ring := range []bool{false, true} {
		h := &Hamiltonian{Ring: ring, Site: make([]float64, n), Bond: make([]float64, n)}
		if !ring {
			h.Bond = h.Bond[:n-1]
		}
		for i := range h.Site {
			h.Site[i] = 2*rng.Float64() - 1
		}
		for i := range h.Bond {
			h.Bond[i] = 0.5 + rng.Float64()
		}
		for _, temperature := range []float64{0, 0.01} {
			occ := Occupation{Electrons: float64(n - n%4), Spin: 2, Temperature: temperature}
			var s Solver
			var st State
			if err := s.Solve(context.Background(), h, occ, &st); err != nil {
				t.Errorf("ring %v, T = %g: %v", ring, temperature, err)
				continue
			}
			var electrons, energy float64
			for i, d := range st.Density {
				electrons += d
				energy += h.Site[i] * d
			}
			for i, p := range st.BondOrder {
				energy -= h.Bond[i] * p
			}
			if d := math.Abs(electrons - occ.Electrons); !(d <= 1e-9*float64(n)) {
				t.Errorf("ring %v, T = %g: the densities miss %g electrons", ring, temperature, d)
			}
			if d := math.Abs(energy - st.Energy); !(d <= 1e-9*float64(n)) {
				t.Errorf("ring %v, T = %g: the energy of the densities is off by %g", ring, temperature, d)
			}
			numbers := []int{int(occ.Electrons)/2 - 1, int(occ.Electrons) / 2}
			levels, err := s.SampleLevels(context.Background(), nil, h, numbers, 1e-11)
			if err != nil {
				t.Fatal(err)
			}
			if !st.OpenShell && (math.Abs(levels[0]-st.Highest) > 1e-10 || math.Abs(levels[1]-st.Lowest) > 1e-10) {
				t.Errorf("ring %v, T = %g: edges %.12g, %.12g, counted %.12g", ring, temperature, st.Highest, st.Lowest, levels)
			}
		}
	}
}
