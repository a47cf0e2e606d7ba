package fermi

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

var symmetryTemperatures = []float64{0, 0.05}

// Turning a ring by some sites turns densities and bond orders with it and
// leaves the energy.
func TestTurningARing(t *testing.T) {
	solvers := [...]Solver{{Method: Dense}, {Method: Poles}}
	rapid.Check(t, func(t *rapid.T) {
		h := drawChain(t, 1, 40)
		occ := drawOccupation(t, len(h.Site), symmetryTemperatures...)
		if !h.Ring {
			h.Ring = true
			h.Bond = append(h.Bond, 1)
		}
		if _, _, apart := reference(t, h, occ); apart < 1e-4 {
			t.Skip("whether these levels are one is a convention, see degenerate")
		}
		n := len(h.Site)
		by := rapid.IntRange(1, n).Draw(t, "by")
		turn := func(x []float64) []float64 {
			return append(append([]float64(nil), x[by:]...), x[:by]...)
		}
		turned := &Hamiltonian{Site: turn(h.Site), Bond: turn(h.Bond), Next: h.Next, Ring: true}
		for k := range solvers {
			a, b := solve(t, &solvers[k], h, occ), solve(t, &solvers[k], turned, occ)
			if d := max(farthest(turn(a.Density), b.Density), farthest(turn(a.BondOrder), b.BondOrder)); !(d <= 1e-10) {
				t.Errorf("%s: turned by %d sites: densities or bond orders differ by %g", a.Method, by, d)
			}
			if !(math.Abs(a.Energy-b.Energy) <= 1e-11*float64(n)) {
				t.Errorf("%s: turned by %d sites: energy %.15g, before %.15g", a.Method, by, b.Energy, a.Energy)
			}
		}
	})
}

// Raising every site energy by c raises levels and μ by c, the energy by c N_e.
func TestUniformShift(t *testing.T) {
	solvers := [...]Solver{{Method: Dense}, {Method: Poles}}
	rapid.Check(t, func(t *rapid.T) {
		h := drawChain(t, 1, 40)
		occ := drawOccupation(t, len(h.Site), symmetryTemperatures...)
		if _, _, apart := reference(t, h, occ); apart < 1e-4 {
			t.Skip("whether these levels are one is a convention, see degenerate")
		}
		c := drawEnergy(t, "shift")
		raised := *h
		raised.Site = append([]float64(nil), h.Site...)
		for i := range raised.Site {
			raised.Site[i] += c
		}
		for k := range solvers {
			a, b := solve(t, &solvers[k], h, occ), solve(t, &solvers[k], &raised, occ)
			if d := max(farthest(a.Density, b.Density), farthest(a.BondOrder, b.BondOrder)); !(d <= 1e-10) {
				t.Errorf("%s: raised by %g: densities or bond orders differ by %g", a.Method, c, d)
			}
			if d := b.FreeEnergy - a.FreeEnergy - c*occ.Electrons; !(math.Abs(d) <= 1e-10*float64(len(h.Site))) {
				t.Errorf("%s: raised by %g: free energy off by %g", a.Method, c, d)
			}
			// Far inside a gap hardly anything depends on μ.
			if d := b.ChemicalPotential - a.ChemicalPotential - c; a.Lowest-a.Highest < 10*occ.Temperature && !(math.Abs(d) <= 1e-9) {
				t.Errorf("%s: raised by %g: chemical potential off by %g", a.Method, c, d)
			}
		}
	})
}

// On two sublattices (an even ring or an open chain, nearest neighbours) holes
// at −Site behave as electrons at Site: n → g_s − n, μ → −μ, the same bond
// orders, and E → E − Σ Site·g_s of the mirrored chain.
func TestParticlesAndHoles(t *testing.T) {
	solvers := [...]Solver{{Method: Dense}, {Method: Poles}}
	rapid.Check(t, func(t *rapid.T) {
		h := drawChain(t, 2, 40)
		h.Next = 0
		occ := drawOccupation(t, len(h.Site), symmetryTemperatures...)
		if h.Ring && len(h.Site)%2 == 1 {
			h.Ring, h.Bond = false, h.Bond[1:]
		}
		if _, _, apart := reference(t, h, occ); apart < 1e-4 {
			t.Skip("whether these levels are one is a convention, see degenerate")
		}
		spin := float64(occ.Spin)
		mirror := *h
		mirror.Site = make([]float64, len(h.Site))
		var trace float64
		for i, a := range h.Site {
			mirror.Site[i] = -a
			trace += a
		}
		holes := occ
		holes.Electrons = spin*float64(len(h.Site)) - occ.Electrons
		for k := range solvers {
			a, b := solve(t, &solvers[k], h, occ), solve(t, &solvers[k], &mirror, holes)
			for i := range b.Density {
				b.Density[i] = spin - b.Density[i]
			}
			if d := max(farthest(a.Density, b.Density), farthest(a.BondOrder, b.BondOrder)); !(d <= 1e-10) {
				t.Errorf("%s: densities or bond orders differ by %g", a.Method, d)
			}
			if d := a.Energy - spin*trace - b.Energy; !(math.Abs(d) <= 1e-10*float64(len(h.Site))) {
				t.Errorf("%s: energies differ by %g", a.Method, d)
			}
			if a.OpenShell != b.OpenShell || math.Abs(a.Highest+b.Lowest) > 1e-10 || math.Abs(a.Lowest+b.Highest) > 1e-10 {
				t.Errorf("%s: edges %.15g, %.15g; of holes %.15g, %.15g", a.Method, a.Highest, a.Lowest, b.Highest, b.Lowest)
			}
		}
	})
}

// Hellmann–Feynman: ∂F/∂Site[i] = n_i, ∂F/∂Bond[i] = −p_i, by central
// differences, at fixed number of electrons.
func TestForcesAreDerivativesOfTheFreeEnergy(t *testing.T) {
	for _, ring := range []bool{false, true} {
		for _, next := range []float64{0, 0.15} {
			for _, temperature := range []float64{0, 0.02, 0.5} {
				for _, electrons := range []float64{22, 18} {
					for _, m := range []Method{Dense, Poles} {
						s := Solver{Method: m}
						h := uneven(22)
						h.Next, h.Ring = next, ring
						if !ring {
							h.Bond = h.Bond[:21]
						}
						occ := Occupation{Electrons: electrons, Spin: 2, Temperature: temperature}
						st := solve(t, &s, h, occ)
						const step = 1e-4
						slope := func(x *float64) float64 {
							at := *x
							*x = at + step
							up := solve(t, &s, h, occ).FreeEnergy
							*x = at - step
							down := solve(t, &s, h, occ).FreeEnergy
							*x = at
							return (up - down) / (2 * step)
						}
						for _, i := range []int{0, 20} {
							if got := slope(&h.Site[i]); math.Abs(got-st.Density[i]) > 1e-6*st.Density[i] {
								t.Errorf("%v, ring %t, next %g, T = %g: ∂F/∂Site[%d] = %.9g, density %.9g", m, ring, next, temperature, i, got, st.Density[i])
							}
							if got := -slope(&h.Bond[i]); math.Abs(got-st.BondOrder[i]) > 1e-6*math.Abs(st.BondOrder[i]) {
								t.Errorf("%v, ring %t, next %g, T = %g: −∂F/∂Bond[%d] = %.9g, bond order %.9g", m, ring, next, temperature, i, got, st.BondOrder[i])
							}
						}
					}
				}
			}
		}
	}
}
