package fermi

import (
	"math"
	"slices"
)

// waves solves a ring on which all sites and all bonds are alike: its states
// are plane waves,
//
//	ε(k) = Site − 2 Bond cos k − 2 Next cos 2k,   k = 2πm/N,
//
// and nothing has to be diagonalised, however degenerate the levels are.
type waves struct {
	dense             // levels and weights; no matrix
	cosines []float64 // cos k, in the order of the levels
	order   []int
}

// alike tells whether a chain is such a ring.
func (h *Hamiltonian) alike() bool {
	if !h.Ring {
		return false
	}
	for _, e := range h.Site {
		if e != h.Site[0] {
			return false
		}
	}
	for _, b := range h.Bond {
		if b != h.Bond[0] {
			return false
		}
	}
	return true
}

// solve fills st.
func (w *waves) solve(h *Hamiltonian, occ Occupation, st *State) {
	n := len(h.Site)
	size, spin := float64(n), float64(occ.Spin)
	w.fill(h)
	perSpin := occ.Electrons / spin
	same := sameLevel(h.Bounds())
	s := shellOf(w.levels, perSpin, same)
	entropy, mu := w.occupy(s, perSpin, occ.Temperature, same)

	var energy, bond float64
	for m, f := range w.weights {
		energy += f * w.levels[m]
		bond += 2 * f * w.cosines[m]
	}
	st.ChemicalPotential = mu
	st.Highest, st.Lowest, st.OpenShell = s.highest, s.lowest, s.open
	st.Entropy = spin * entropy
	st.Energy = spin * energy
	st.FreeEnergy = st.Energy - occ.Temperature*st.Entropy
	for i := range st.Density {
		st.Density[i] = occ.Electrons / size
	}
	for i := range st.BondOrder {
		st.BondOrder[i] = spin * bond / size
	}
}

// fill stores the levels, ascending, and their cos k.
func (w *waves) fill(h *Hamiltonian) {
	n := len(h.Site)
	w.levels, w.cosines, w.order = resize(w.levels, n), resize(w.cosines, n), resize(w.order, n)
	energy := func(m int) (level, cosine float64) {
		c := math.Cos(2 * math.Pi * float64(min(m, n-m)) / float64(n)) // ±k to the last bit alike
		return h.Site[0] - 2*h.Bond[0]*c - 2*h.Next*(2*c*c-1), c
	}
	for m := range n {
		w.order[m] = m
		w.levels[m], _ = energy(m)
	}
	byNumber := w.cosines
	copy(byNumber, w.levels)
	slices.SortFunc(w.order, func(a, b int) int {
		switch {
		case byNumber[a] < byNumber[b]:
			return -1
		case byNumber[a] > byNumber[b]:
			return 1
		}
		return a - b
	})
	for i, m := range w.order {
		w.levels[i], w.cosines[i] = energy(m)
	}
}
