// Package fermi answers for the electrons of a finite chain: chemical
// potential, site densities, bond orders, energies, levels. It is the only
// room that knows how H is solved.
//
// Small chains are diagonalised. Longer ones are never: the occupied states
// enter only through the diagonal and the first off-diagonal of the density
// matrix ρ = f(H), and those follow at a cost linear in the length from a
// handful of inverses (μ + i s − H)⁻¹. Levels next to the Fermi energy are
// found by counting how many levels lie below an energy.
package fermi

// Hamiltonian is the one-electron matrix of a finite chain,
//
//	H_{i,i} = Site[i],  H_{i,i+1} = −Bond[i],  H_{i,i+2} = −Next.
//
// A ring has len(Bond) == len(Site) and every index is taken modulo N, with
// elements that fall on the same place added up (a ring of 2 sites has
// H_01 = −Bond[0]−Bond[1], a ring of one site H_00 = Site[0]−2·Bond[0]−2·Next).
// An open chain has len(Bond) == len(Site)−1.
type Hamiltonian struct {
	Site []float64
	Bond []float64
	Next float64
	Ring bool
}

// Occupation says how many electrons there are and how they are spread.
type Occupation struct {
	Electrons   float64 // on the whole chain, all spins, 0..Spin·N
	Spin        int     // g_s, spin states per level
	Temperature float64 // k_B T; 0: levels filled from below, a degenerate level in equal fractions
}

// State is what the electrons do. All sums include the spin states.
type State struct {
	ChemicalPotential float64 // at T = 0 the middle of the gap or the partly filled level; the band edge of an empty or full band
	Highest, Lowest   float64 // highest occupied and lowest unoccupied level (by counting, at any T); ±Inf where there is none
	OpenShell         bool    // the level at E_F is only partly filled (then Highest == Lowest)

	Density   []float64 // ⟨n_i⟩, length N
	BondOrder []float64 // ⟨c†_{i+1}c_i + h.c.⟩, length len(Bond)

	Energy     float64 // Σ f ε
	Entropy    float64 // k_B = 1; at T = 0 it is 0
	FreeEnergy float64 // Energy − T·Entropy, at fixed electron number
	Method     string  // "dense", "poles", or "waves" for a uniform ring
}
