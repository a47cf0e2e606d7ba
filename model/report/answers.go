// Package report says what a Portrait holds: as text for a person, as JSON and
// CSV for a program. One table of answers serves them all, and the bench.
package report

import (
	"math"

	"example.org/twokf/model"
	"example.org/twokf/model/study"
)

// Answer is one number about a chain.
type Answer struct {
	Name   string // as in the JSON report
	Symbol string // of the trade, short
	Value  float64
	Unit   string  // in the chain's own energy unit, wave vectors in 1/a; "" for a pure number
	Grain  float64 // how finely the value is known; less than that is nothing
	About  string  // what it is, for someone who knows the field
}

// question is a row of the table: how an answer is got from a portrait. It is
// absent (ok false) where it does not exist for the chain or is not known yet.
type question struct {
	name, symbol, unit, about string
	value                     func(*study.Portrait) (v float64, ok bool)
}

// Units of the table that depend on the chain.
const (
	energy     = "E"
	velocity   = "E·a"
	perEnergy  = "1/E"
	wavevector = "1/a"
	length     = "L"
	pure       = ""
)

var questions = []question{
	{"fermi_wavevector", "kF", wavevector, "π f, f the occupied part of the band",
		fromBand(func(p *study.Portrait) float64 { return p.Band.KF })},
	{"ordering_wavevector", "2kF", wavevector, "2kF folded into [0, π]",
		fromBand(func(p *study.Portrait) float64 { return p.Band.Ordering })},
	{"fermi_velocity", "vF", velocity, "dε/dk at kF, where there is one pair of Fermi points",
		func(p *study.Portrait) (float64, bool) {
			if p.Band == nil || len(p.Band.FermiPoints) != 1 {
				return 0, false
			}
			return p.Band.Velocity, true
		}},
	{"density_of_states", "N(EF)", perEnergy, "states per site and energy at the Fermi level, all spins",
		fromBand(func(p *study.Portrait) float64 { return p.Band.DensityOfStates })},
	{"coupling_bond", "λ(bond)", pure, "dimensionless coupling of the bond phonon",
		coupled(func(p *study.Portrait) (float64, bool) {
			return p.Transition.CouplingBond, p.Chain.Bond.Active() && p.Transition.CouplingBond > 0
		})},
	{"coupling_site", "λ(site)", pure, "dimensionless coupling of the site phonon",
		coupled(func(p *study.Portrait) (float64, bool) {
			return p.Transition.CouplingSite, p.Chain.Site.Active() && p.Transition.CouplingSite > 0
		})},
	{"coupling", "λ", pure, "sum of the couplings",
		coupled(func(p *study.Portrait) (float64, bool) {
			l := p.Transition.CouplingBond + p.Transition.CouplingSite
			return l, l > 0
		})},
	{"chemical_potential", "μ", energy, "of the finite relaxed chain",
		fromLattice(func(p *study.Portrait) float64 { return p.Lattice.Electrons.ChemicalPotential })},
	{"gap", "2Δ", energy, "lowest unoccupied minus highest occupied level of the finite relaxed chain",
		fromLattice(func(p *study.Portrait) float64 { return p.Lattice.Gap })},
	{"energy_per_site", "F/N", energy, "electrons and springs; the free energy where T > 0",
		perSite(func(p *study.Portrait) float64 { return p.Lattice.FreeEnergy })},
	{"electron_energy_per_site", "Fel/N", energy, "electrons alone; the free energy where T > 0",
		perSite(func(p *study.Portrait) float64 { return p.Lattice.Electrons.FreeEnergy })},
	{"lattice_energy_per_site", "Espr/N", energy, "springs alone",
		perSite(func(p *study.Portrait) float64 { return p.Lattice.LatticeEnergy })},
	{"condensation_energy_per_site", "Econd/N", energy, "undistorted chain of the same size minus relaxed chain",
		perSite(func(p *study.Portrait) float64 { return p.Lattice.Undistorted - p.Lattice.FreeEnergy })},
	{"displacement_amplitude", "A[u]", length, "(2/N)|Σ u_j e^(−iQj)|, (1/N) at Q = π, Q = 2kF of the electrons on the chain",
		ofLattice(func(p *study.Portrait) (float64, bool) {
			return p.Lattice.DisplacementAmplitude, p.Lattice.Displacement != nil
		})},
	{"site_mode_amplitude", "A[q]", pure, "the same of the local mode",
		ofLattice(func(p *study.Portrait) (float64, bool) {
			return p.Lattice.SiteModeAmplitude, p.Lattice.SiteMode != nil
		})},
	{"density_amplitude", "A[n]", pure, "the same of the density, spins summed",
		fromLattice(func(p *study.Portrait) float64 { return p.Lattice.DensityAmplitude })},
	{"bond_order_amplitude", "A[p]", pure, "the same of ⟨c†_{i+1}c_i + h.c.⟩, spins summed",
		fromLattice(func(p *study.Portrait) float64 { return p.Lattice.BondOrderAmplitude })},
	{"kinks", "kinks", pure, "sign changes of the period-2 order parameter, near half filling",
		ofLattice(func(p *study.Portrait) (float64, bool) {
			return float64(p.Lattice.Kinks), p.Lattice.Counted
		})},
	{"susceptibility_peak_wavevector", "q(χmax)", wavevector, "where the static χ0(q, T) of the infinite chain is highest",
		fromResponse(func(p *study.Portrait) float64 { return p.Response.PeakQ })},
	{"susceptibility_peak", "χmax", perEnergy, "highest value of the static χ0(q, T) of the infinite chain",
		fromResponse(func(p *study.Portrait) float64 { return p.Response.Peak })},
	{"softest_wavevector", "q(soft)", wavevector, "where Ω²/ω² of the renormalised phonon is lowest",
		fromPhonon(func(p *study.Portrait) float64 { return p.Phonon.SoftestQ })},
	{"softest_ratio", "Ω²/ω²", pure, "lowest Ω²/ω² of the renormalised phonon; negative: unstable",
		fromPhonon(func(p *study.Portrait) float64 { return p.Phonon.Softest })},
	{"transition_temperature", "TP", energy, "mean-field k_B T_P, where Ω²(2kF) reaches zero",
		coupled(func(p *study.Portrait) (float64, bool) {
			return p.Transition.Temperature, p.Transition.Temperature > 0
		})},
	{"first_unstable_temperature", "T(any q)", energy, "k_B T where any wave vector first goes unstable on cooling; given where that is not 2kF",
		coupled(firstUnstable(func(t *study.Transition) float64 { return t.First }))},
	{"first_unstable_wavevector", "q(any)", wavevector, "that wave vector",
		coupled(firstUnstable(func(t *study.Transition) float64 { return t.FirstQ }))},
}

// What the finite chain's numbers are known to, in units of the hopping (or of
// the local mode's own energy where nothing hops).
const (
	energyGrain    = 1e-10 // electron solver and relaxation
	amplitudeGrain = 1e-8  // the relaxation stops at 1e-9 in a density or bond order
)

// grain returns how finely an answer is known; 0 where rounding is all.
func (q question) grain(c model.Chain) float64 {
	scale := c.Hopping
	if c.Site.Active() {
		scale = max(scale, c.Site.Coupling*c.Site.Coupling/c.Site.Stiffness)
	}
	switch q.name {
	case "gap", "energy_per_site", "electron_energy_per_site", "lattice_energy_per_site", "condensation_energy_per_site", "chemical_potential":
		return energyGrain * scale
	case "density_amplitude", "bond_order_amplitude":
		return amplitudeGrain
	case "displacement_amplitude":
		return amplitudeGrain * c.Bond.Coupling / c.Bond.Stiffness
	case "site_mode_amplitude":
		return amplitudeGrain * c.Site.Coupling / c.Site.Stiffness
	}
	return 0
}

// firstRelative is by how much the two transition temperatures must differ to
// be told apart.
const firstRelative = 1e-6

func firstUnstable(value func(*study.Transition) float64) func(*study.Portrait) (float64, bool) {
	return func(p *study.Portrait) (float64, bool) {
		t := p.Transition
		return value(t), t.First > t.Temperature*(1+firstRelative)
	}
}

func fromBand(value func(*study.Portrait) float64) func(*study.Portrait) (float64, bool) {
	return func(p *study.Portrait) (float64, bool) {
		if p.Band == nil {
			return 0, false
		}
		return value(p), true
	}
}

func coupled(value func(*study.Portrait) (float64, bool)) func(*study.Portrait) (float64, bool) {
	return func(p *study.Portrait) (float64, bool) {
		if p.Transition == nil {
			return 0, false
		}
		return value(p)
	}
}

func fromLattice(value func(*study.Portrait) float64) func(*study.Portrait) (float64, bool) {
	return func(p *study.Portrait) (float64, bool) {
		if p.Lattice == nil {
			return 0, false
		}
		return value(p), true
	}
}

func perSite(value func(*study.Portrait) float64) func(*study.Portrait) (float64, bool) {
	return fromLattice(func(p *study.Portrait) float64 { return value(p) / float64(p.Chain.Sites) })
}

func ofLattice(value func(*study.Portrait) (float64, bool)) func(*study.Portrait) (float64, bool) {
	return func(p *study.Portrait) (float64, bool) {
		if p.Lattice == nil {
			return 0, false
		}
		return value(p)
	}
}

func fromResponse(value func(*study.Portrait) float64) func(*study.Portrait) (float64, bool) {
	return func(p *study.Portrait) (float64, bool) {
		if p.Response == nil {
			return 0, false
		}
		return value(p), true
	}
}

func fromPhonon(value func(*study.Portrait) float64) func(*study.Portrait) (float64, bool) {
	return func(p *study.Portrait) (float64, bool) {
		if p.Phonon == nil || !p.Chain.Bond.Active() && !p.Chain.Site.Active() {
			return 0, false
		}
		return value(p), true
	}
}

// Answers returns what is known, in the order of the table. Numbers that are
// not finite (a χ that diverges, a gap without a level above) are absent.
func Answers(p *study.Portrait) []Answer {
	var out []Answer
	for _, q := range questions {
		v, ok := q.value(p)
		if !ok || math.IsNaN(v) || math.IsInf(v, 0) {
			continue
		}
		out = append(out, Answer{q.name, q.symbol, v, unit(q.unit, p.Chain), q.grain(p.Chain), q.about})
	}
	return out
}

// unit spells a unit of the table for a chain.
func unit(u string, c model.Chain) string {
	e := c.Energy.String()
	switch u {
	case energy:
		return e
	case velocity:
		return e + "·a"
	case perEnergy:
		return "1/" + e
	case length:
		if c.Energy == model.UnitEV {
			return "Å"
		}
		return ""
	}
	return u
}
