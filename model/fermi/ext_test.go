package fermi

import (
	"context"
	"math"
	"testing"
)

func TestExtremeScratch(t *testing.T) {
	bad := func(st *State) bool {
		for _, v := range st.Density {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				return true
			}
		}
		for _, v := range st.BondOrder {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				return true
			}
		}
		for _, v := range []float64{st.ChemicalPotential, st.Energy, st.Entropy, st.FreeEnergy} {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				return true
			}
		}
		return math.IsNaN(st.Highest) || math.IsNaN(st.Lowest)
	}
	for _, m := range []Method{Dense, Poles} {
		for _, n := range []int{1, 2, 3, 4, 5, 6, 7, 8, 40, 41} {
			for _, ring := range []bool{false, true} {
				for _, hop := range []float64{0, 1, 1e-8, 1e-13, 1e20, 1e-20, -1} {
					for _, next := range []float64{0, .3} {
						for _, site := range []float64{0, 1, 1e8} {
							for _, el := range []float64{0, 1, 2, .5, float64(n), float64(n) + 1, 2*float64(n) - 1, 2 * float64(n)} {
								if el > 2*float64(n) {
									continue
								}
								for _, T := range []float64{0, 1e-300, 1e-12, 1e-3, 1, 1e6, 1e30} {
									h := &Hamiltonian{Site: make([]float64, n), Bond: make([]float64, n-1), Ring: ring, Next: next * hop}
									if ring {
										h.Bond = make([]float64, n)
									}
									for i := range h.Bond {
										h.Bond[i] = hop
									}
									for i := range h.Site {
										h.Site[i] = site
									}
									s := Solver{Method: m}
									var st State
									occ := Occupation{Electrons: el, Spin: 2, Temperature: T}
									err := s.Solve(context.Background(), h, occ, &st)
									if err != nil {
										t.Errorf("%v n=%d ring=%t hop=%g next=%g site=%g %+v: %v", m, n, ring, hop, next, site, occ, err)
									} else if bad(&st) {
										t.Errorf("%v n=%d ring=%t hop=%g next=%g site=%g %+v: bad %+v", m, n, ring, hop, next, site, occ, st)
									} else {
										var sum float64
										for _, v := range st.Density {
											sum += v
										}
										if math.Abs(sum-el) > 1e-10*max(el, 1e-3) {
											t.Errorf("%v n=%d ring=%t hop=%g next=%g site=%g %+v: sum %v", m, n, ring, hop, next, site, occ, sum-el)
										}
									}
								}
							}
						}
					}
				}
			}
		}
	}
}
