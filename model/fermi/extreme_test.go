package fermi

import (
	"context"
	"math"
	"testing"
)

// Whatever the scale, filling and temperature: finite numbers that add up.
func TestExtremeChains(t *testing.T) {
	for _, c := range []struct {
		name            string
		hop, next, site float64
	}{
		{"nothing at all", 0, 0, 0},
		{"levels all at 1", 0, 0, 1},
		{"plain", 1, 0, 0},
		{"band narrower than rounding allows", 1e-13, 0, 1},
		{"huge", 1e20, 0.3e20, 0},
		{"tiny", 1e-200, 0, 0},
		{"negative hopping far from zero", -1, 0.3, 1e8},
	} {
		for _, temperature := range []float64{0, 1e-300, 1e-3, 1e6} {
			for _, m := range []Method{Dense, Poles} {
				s := Solver{Method: m}
				for _, n := range []int{1, 2, 3, 6, 20} {
					for _, ring := range []bool{false, true} {
						for _, electrons := range []float64{0, 0.5, 1, float64(n), float64(n + 1), float64(2*n - 1), float64(2 * n)} {
							h := uniform(n, ring, c.hop)
							h.Next = c.next
							for i := range h.Site {
								h.Site[i] = c.site
							}
							occ := Occupation{Electrons: electrons, Spin: 2, Temperature: temperature}
							st := solve(t, &s, h, occ)
							check := st.Energy + st.Entropy + st.FreeEnergy + st.ChemicalPotential
							var sum float64
							for _, x := range st.Density {
								sum += x
							}
							for _, p := range st.BondOrder {
								check += p
							}
							if math.IsNaN(check) || math.IsInf(check, 0) || math.IsNaN(st.Highest) || math.IsNaN(st.Lowest) {
								t.Errorf("%s, %d sites, ring %t, %+v: %+v", c.name, n, ring, occ, st)
							}
							if !(math.Abs(sum-electrons) <= 1e-10*electrons) {
								t.Errorf("%s, %d sites, ring %t, %+v: densities add up to %.15g", c.name, n, ring, occ, sum)
							}
						}
					}
				}
			}
		}
	}
}

// gonum v0.17.0 finds levels of 1e122 for elements below 1e-122, which are
// therefore dropped.
func TestTinyHoppingIsNoHopping(t *testing.T) {
	h := uniform(6, true, 1)
	h.Bond[2], h.Bond[3], h.Bond[4] = 0, 6e-123, 0
	for _, m := range []Method{Dense, Poles} {
		s := Solver{Method: m}
		st := solve(t, &s, h, Occupation{Electrons: 2, Spin: 2})
		if want := -2 * 2 * math.Cos(math.Pi/5); math.Abs(st.Energy-want) > 1e-11 { // four sites in a row
			t.Errorf("%v: energy %.15g, want %.15g", m, st.Energy, want)
		}
		levels, err := s.Levels(context.Background(), nil, h)
		if want := -2 * math.Cos(math.Pi/5); err != nil || math.Abs(levels[0]-want) > 1e-13 {
			t.Errorf("lowest level %.15g, want %.15g (%v)", levels[0], want, err)
		}
	}
}

// Pairs of levels of a ring, split by little or by nothing, close to μ: the
// sum over poles must not lose what diagonalisation keeps.
func TestPairsOfLevelsCloseToTheFermiEnergy(t *testing.T) {
	dense, poles := Solver{Method: Dense}, Solver{Method: Poles}
	same := func(h *Hamiltonian, occ Occupation) {
		t.Helper()
		a, b := solve(t, &dense, h, occ), solve(t, &poles, h, occ)
		if b.Method != "poles" {
			t.Errorf("%d sites, %+v: solved by %s", len(h.Site), occ, b.Method)
		}
		if d := max(farthest(a.Density, b.Density), farthest(a.BondOrder, b.BondOrder)); !(d <= 1e-9) {
			t.Errorf("%d sites, next %g, %+v: densities or bond orders differ by %g", len(h.Site), h.Next, occ, d)
		}
	}
	for _, next := range []float64{0, 0.1} {
		for _, n := range []int{12, 36} {
			for _, temperature := range []float64{1e-5, 1e-6} {
				h := uniform(n, true, 1)
				h.Next = next
				for _, electrons := range []float64{0.75, 1} {
					same(h, Occupation{Electrons: electrons * float64(n), Spin: 2, Temperature: temperature})
				}
			}
			h := dimerised(n, true, 1e-6)
			h.Next = next
			same(h, Occupation{Electrons: float64(n), Spin: 2})
			h.Site[3] = 1e-9
			same(h, Occupation{Electrons: float64(n), Spin: 2})
		}
	}
}
