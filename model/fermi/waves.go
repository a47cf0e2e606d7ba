package fermi

import (
	"cmp"
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
}

// longestHot is the longest uniform ring that is solved by plane waves at T > 0,
// where finding μ takes a sum of exponentials over all levels for each step and
// cannot be interrupted; beyond it the sum over poles costs no more.
const longestHot = 10_000

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
	if n > longestHot {
		*w = waves{} // a third of what a sweep takes, for one use
	}
}

// fill stores the levels, ascending, and their cos k.
func (w *waves) fill(h *Hamiltonian) {
	n := len(h.Site)
	w.levels, w.cosines = resize(w.levels, n), resize(w.cosines, n)
	level := func(c float64) float64 { return h.Site[0] - 2*h.Bond[0]*c - 2*h.Next*(2*c*c-1) }
	for i := range n { // k = 0, ±1, ±2 …: a band that rises from 0 to π is in order
		w.cosines[i] = math.Cos(2 * math.Pi * float64((i+1)/2) / float64(n))
		w.levels[i] = level(w.cosines[i])
	}
	if h.Bond[0] >= 4*math.Abs(h.Next) {
		return
	}
	slices.SortFunc(w.cosines, func(a, b float64) int { return cmp.Compare(level(a), level(b)) })
	for i, c := range w.cosines {
		w.levels[i] = level(c)
	}
}
