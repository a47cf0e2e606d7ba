// Package response holds the linear response of the uniform chain: the static
// susceptibility, the renormalised phonon, and where it goes soft.
package response

// Static is the static response at one wave vector q,
//
//	χ_w(q, T) = (g_s/N) Σ_k w(k+q/2) [f(k) − f(k+q)] / [ε(k+q) − ε(k)]
//
// with w = 1 (Site: χ0), 4cos² (Bond: χ_b) and 2cos (Mixed: χ_sb); per site and
// per energy, all spins, ≥ 0 for Site and Bond.
type Static struct {
	Site, Bond, Mixed float64
}

// Phonon is the lattice at one wave vector, before and after the electrons
// answer. Frequencies are signed: −|Ω| stands for an unstable mode, Ω² < 0.
type Phonon struct {
	// Ratio is the lowest eigenvalue of Φ(q) relative to the bare stiffness:
	// Ω²/ω² where one branch is coupled; with both, Φ0^{-1/2} Φ Φ0^{-1/2}.
	// It needs no masses. 1 without coupling.
	Ratio                float64
	BondRatio, SiteRatio float64 // each branch without the other: 1 − (α²/K)χ_b, 1 − (g²/K_s)χ0
	BareBond, BareSite   float64 // ħω(q); 0 where the branch or its frequency is not there
	Lower, Upper         float64 // renormalised, mixed; where just one branch has a frequency it is Lower and Upper is 0
}
