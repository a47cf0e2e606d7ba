// Package model holds the thing that is modelled: a finite one-dimensional
// electron–phonon chain, its parameters with their units, what makes them
// valid, and the file they live in.
//
//	H = Σ_i −(t − α b_i)(c†_{i+1}c_i + h.c.) − t2 Σ_i (c†_{i+2}c_i + h.c.)
//	    + g Σ_i q_i n_i + (K/2) Σ b_i² + (K_s/2) Σ q_i²,     b_i = u_{i+1} − u_i
//
// Energies are in the chain's own unit (eV, or the hopping t), k_B = ħ = a = 1:
// a temperature is k_B T, a frequency is ħω, a wave vector is in 1/a. The
// uniform part of q is left out of every energy, so patterns have zero mean.
package model

import "math"

// EnergyUnit says what the numbers of a chain are counted in.
type EnergyUnit int

const (
	UnitHopping EnergyUnit = iota // "t": everything in units of a hopping
	UnitEV                        // "eV"; lengths then are in Å
)

// String returns the unit as a chain file writes it.
func (u EnergyUnit) String() string {
	if u == UnitEV {
		return "eV"
	}
	return "t"
}

// Boundary says how the chain ends.
type Boundary int

const (
	Ring Boundary = iota // site N−1 is bonded to site 0
	Open                 // two ends
)

// String returns the boundary as a chain file writes it.
func (b Boundary) String() string {
	if b == Open {
		return "open"
	}
	return "ring"
}

// Phonon is one branch of lattice motion. The zero value is a branch that is
// not there.
type Phonon struct {
	Present   bool
	Coupling  float64 // bond: α, energy per length; site: g, energy per unit of q
	Stiffness float64 // bond: K, energy per length²; site: K_s, energy per unit of q²
	Frequency float64 // ħω of the bare mode (bond: at the zone boundary, 2√(K/M)); 0: masses not given
}

// Active reports whether electrons feel this branch.
func (p Phonon) Active() bool { return p.Present && p.Coupling != 0 }

// Chain is a complete description of one chain at one temperature. It is a
// plain comparable value: copy it, change the copy, compare with ==.
type Chain struct {
	Title  string
	Source string // "invented", or where the values are published
	Energy EnergyUnit

	Sites    int
	Boundary Boundary
	Spacing  float64 // lattice constant in Å; 0: not given

	Hopping     float64 // t
	NextHopping float64 // t2
	Spin        int     // spin states per level: 1 or 2

	// The electron count is given either as a filling (electrons per site) or
	// as a whole number.
	ByNumber  bool
	Filling   float64 // electrons per site, 0..Spin; used when !ByNumber
	Electrons int     // whole number; used when ByNumber

	Bond Phonon // lattice motion that changes the hopping
	Site Phonon // a local mode that shifts the site energy

	Temperature float64 // k_B T
}

// Count returns the whole number of electrons that the finite chain holds, and
// by how much it differs from what the filling asks for, |νN − n|.
func (c Chain) Count() (n int, rounding float64) {
	if c.ByNumber {
		return c.Electrons, 0
	}
	want := c.Filling * float64(c.Sites)
	n = int(math.Round(want))
	d := math.Abs(want - float64(n))
	if d < 1e-9*math.Max(1, want) { // decimal fillings such as 0.37 are not exact in binary
		d = 0
	}
	return n, d
}

// ElectronsPerSite returns ν: the filling asked for, or electrons/sites.
func (c Chain) ElectronsPerSite() float64 {
	if c.ByNumber {
		return float64(c.Electrons) / float64(c.Sites)
	}
	return c.Filling
}

// BandFilling returns f = ν/g_s, the occupied part of the band, 0..1.
func (c Chain) BandFilling() float64 { return c.ElectronsPerSite() / float64(c.Spin) }
