package fermi

import (
	"context"
	"math"
	"testing"

	"pgregory.net/rapid"
)

// TestPlaneWaves: a uniform ring solved by plane waves is what full
// diagonalisation (gonum v0.17.0) finds, open shells and t2 included.
func TestPlaneWaves(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 40).Draw(t, "sites")
		h := &Hamiltonian{Ring: true, Next: rapid.SampledFrom([]float64{0, 0.3, -0.7}).Draw(t, "t2"), Site: make([]float64, n), Bond: make([]float64, n)}
		bond, site := rapid.Float64Range(0, 2).Draw(t, "t"), rapid.Float64Range(-1, 1).Draw(t, "site")
		for i := range n {
			h.Bond[i], h.Site[i] = bond, site
		}
		occ := Occupation{Spin: rapid.IntRange(1, 2).Draw(t, "spin"), Temperature: rapid.SampledFrom([]float64{0, 0.01, 0.5}).Draw(t, "T")}
		occ.Electrons = float64(rapid.IntRange(0, occ.Spin*n).Draw(t, "electrons"))
		if occ.Temperature == 0 && bond > 0 && bond < 1e-6 {
			t.Skip("a band as narrow as rounding beside its place")
		}
		var waves, dense State
		fast, full := Solver{}, Solver{Method: Dense}
		if err := fast.Solve(context.Background(), h, occ, &waves); err != nil {
			t.Fatal(err)
		}
		if err := full.Solve(context.Background(), h, occ, &dense); err != nil {
			t.Fatal(err)
		}
		if waves.Method != "waves" || dense.Method != "dense" {
			t.Fatalf("solved by %s and %s", waves.Method, dense.Method)
		}
		tol := 1e-10 * float64(n) * (1 + bond)
		for what, d := range map[string]float64{
			"energy": waves.Energy - dense.Energy, "free energy": waves.FreeEnergy - dense.FreeEnergy,
			"highest": unlessInf(waves.Highest, dense.Highest), "lowest": unlessInf(waves.Lowest, dense.Lowest),
			"density": farthest(waves.Density, dense.Density), "bond order": farthest(waves.BondOrder, dense.BondOrder),
		} {
			if !(math.Abs(d) <= tol) {
				t.Fatalf("%s differs by %g", what, d)
			}
		}
		if waves.OpenShell != dense.OpenShell {
			t.Fatalf("open shell %v and %v", waves.OpenShell, dense.OpenShell)
		}
	})
}

// unlessInf returns a − b, or 0 where both are the same infinity.
func unlessInf(a, b float64) float64 {
	if a == b {
		return 0
	}
	return a - b
}

// TestForgetting: after Forget a solver returns to the last bit what a new one
// returns, whatever it has solved before.
func TestForgetting(t *testing.T) {
	for _, temperature := range []float64{0, 0.03} {
		rapid.Check(t, func(t *rapid.T) {
			n := rapid.IntRange(60, 120).Draw(t, "sites")
			draw := func() *Hamiltonian {
				h := &Hamiltonian{Ring: true, Site: make([]float64, n), Bond: make([]float64, n)}
				for i := range n {
					h.Bond[i] = 1 + 0.2*float64(1-2*(i%2)) + rapid.Float64Range(-0.1, 0.1).Draw(t, "δt")
				}
				return h
			}
			first, second := draw(), draw()
			occ := Occupation{Electrons: float64(n), Spin: 2, Temperature: temperature}
			var used, fresh Solver
			var a, b State
			ctx := context.Background()
			for _, h := range []*Hamiltonian{first, second} {
				used.Forget()
				if err := used.Solve(ctx, h, occ, &a); err != nil {
					t.Fatal(err)
				}
			}
			if err := fresh.Solve(ctx, second, occ, &b); err != nil {
				t.Fatal(err)
			}
			if a.FreeEnergy != b.FreeEnergy || farthest(a.BondOrder, b.BondOrder) != 0 {
				t.Fatalf("F = %v after another chain, %v fresh", a.FreeEnergy, b.FreeEnergy)
			}
		})
	}
}
