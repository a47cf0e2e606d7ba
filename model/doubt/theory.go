package doubt

import (
	"fmt"
	"math"
)

func unstableRegion(e Evidence) (Doubt, bool) {
	if !e.HasPhonon {
		return Doubt{}, false
	}
	why := fmt.Sprintf("lowest Ω²/ω² of the undistorted chain, at q = %.3f π", e.SoftestQ/math.Pi)
	if math.IsInf(e.Softest, -1) {
		why += " (χ diverges there at T = 0)"
	}
	return Doubt{
		Name:    "unstable_region",
		Verdict: verdict(e.Softest < 0),
		Value:   e.Softest,
		Limit:   0,
		Why:     why + "; below zero the uniform chain's response is carried past its own instability",
		Source:  "M. J. Rice, S. Strässler, Solid State Commun. 13, 125 (1973)",
	}, true
}

const strongLimit = 0.6

func strongCoupling(e Evidence) (Doubt, bool) {
	lambda := e.CouplingBond + e.CouplingSite
	if lambda == 0 {
		return Doubt{}, false
	}
	return Doubt{
		Name:    "strong_coupling",
		Verdict: verdict(lambda > strongLimit),
		Value:   lambda,
		Limit:   strongLimit,
		Why:     "λ; at strong coupling scales no longer separate, and local pairs or polarons compete with the 2kF state",
		Source:  "common practice",
	}, true
}

const fastLimit = 0.3

func fastLattice(e Evidence) (Doubt, bool) {
	frequency := 0.0
	if b := e.Chain.Bond; b.Active() {
		frequency = b.Frequency * math.Sin(math.Pi*e.Chain.BandFilling()) // ω(q) = ω(π) sin(q/2), q = 2kF
	}
	if s := e.Chain.Site; s.Active() {
		frequency = max(frequency, s.Frequency)
	}
	if frequency == 0 || e.Lattice == nil || math.IsNaN(e.Gap) || e.Gap <= 0 || !e.distorted() {
		return Doubt{}, false
	}
	return Doubt{
		Name:    "fast_lattice",
		Verdict: verdict(frequency/e.Gap > fastLimit),
		Value:   frequency / e.Gap,
		Limit:   fastLimit,
		Why:     "ħω(2kF)/2Δ: the static lattice is slow beside the electrons only while this is small",
		Source:  "common practice",
	}, true
}

const zeroPointLimit = 0.5

// quantumLattice compares one mode's zero-point amplitude with the largest
// static one: √(ħω/8K) of a bond-phonon mode at the zone boundary, √(ħω/2K_s)
// of a local mode. A branch that carries no pattern has nothing to compare.
func quantumLattice(e Evidence) (Doubt, bool) {
	c := e.Chain
	if e.Lattice == nil {
		return Doubt{}, false
	}
	ratio := 0.0
	if e.carries(c.Bond, e.Lattice.Stretch) {
		ratio = math.Sqrt(c.Bond.Frequency/(8*c.Bond.Stiffness)) / largest(e.Lattice.Displacement)
	}
	if e.carries(c.Site, e.Lattice.SiteMode) {
		ratio = max(ratio, math.Sqrt(c.Site.Frequency/(2*c.Site.Stiffness))/largest(e.Lattice.SiteMode))
	}
	return Doubt{
		Name:    "quantum_lattice",
		Verdict: verdict(ratio > zeroPointLimit),
		Value:   ratio,
		Limit:   zeroPointLimit,
		Why:     "zero-point amplitude of one mode against the static distortion",
		Source:  "common practice",
	}, ratio > 0
}

func firstOrder(e Evidence) (Doubt, bool) {
	if e.TransitionTemperature == 0 {
		return Doubt{}, false
	}
	f := e.Chain.BandFilling()
	off := min(math.Abs(f-1./3), math.Abs(f-2./3))
	return Doubt{
		Name:    "first_order",
		Verdict: verdict(off < 1e-6),
		Value:   off,
		Limit:   1e-6,
		Why:     "distance of the band filling from 1/3 or 2/3, where a cubic term makes the transition first order, above T_P",
		Source:  "Landau theory, a cubic invariant of the period-3 pattern; common practice",
	}, true
}

func oneDimension(e Evidence) (Doubt, bool) {
	if e.TransitionTemperature == 0 {
		return Doubt{}, false
	}
	return Doubt{
		Name:    "one_dimension",
		Verdict: Raised,
		Value:   e.Chain.Temperature,
		Limit:   0,
		Why:     "mean-field T_P is a scale: fluctuations leave a single chain ordered only at T = 0; coupled chains usually order near T_P/4",
		Source:  "P. A. Lee, T. M. Rice, P. W. Anderson, Phys. Rev. Lett. 31, 462 (1973)",
	}, true
}
