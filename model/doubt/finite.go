package doubt

import (
	"fmt"
	"math"

	"example.org/twokf/model"
)

func notConverged(e Evidence) (Doubt, bool) {
	if e.Lattice == nil {
		return Doubt{}, false
	}
	return Doubt{
		Name:    "not_converged",
		Verdict: verdict(!e.Lattice.Converged),
		Value:   e.Lattice.Residual,
		Limit:   e.Lattice.Tolerance,
		Why:     "largest mismatch left between the lattice and the electrons' own density or bond order",
		Source:  "common practice",
	}, true
}

// curvatureNoise is what the finite differences of the curvature test may
// leave: below it a soft (sliding) pattern is not told from an unstable one.
const curvatureNoise = -1e-5

func notMinimum(e Evidence) (Doubt, bool) {
	if e.Lattice == nil || math.IsNaN(e.Lattice.Curvature) {
		return Doubt{}, false
	}
	return Doubt{
		Name:    "not_a_minimum",
		Verdict: verdict(e.Lattice.Curvature < curvatureNoise),
		Value:   e.Lattice.Curvature,
		Limit:   curvatureNoise,
		Why:     "lowest second derivative of the free energy along the 2kF patterns, the bare spring being 1",
		Source:  "common practice",
	}, true
}

func openShell(e Evidence) (Doubt, bool) {
	if e.Lattice == nil {
		return Doubt{}, false
	}
	value, why := 0.0, "every level at the Fermi energy is full or empty"
	if e.Lattice.Electrons.OpenShell {
		value, why = 1, "a level at the Fermi energy is only partly filled; its states share the electrons equally (the T → 0 limit)"
	}
	return Doubt{
		Name:    "open_shell",
		Verdict: verdict(value > 0),
		Value:   value,
		Limit:   0,
		Why:     why,
		Source:  "common practice",
	}, true
}

func electronNumber(e Evidence) (Doubt, bool) {
	n, rounding := e.Chain.Count()
	why := "the filling gives a whole number of electrons on this chain"
	if rounding > 0 {
		why = fmt.Sprintf("the filling asks for %.6g electrons on %d sites; the finite chain holds %d (the infinite-chain answers keep the filling)",
			e.Chain.Filling*float64(e.Chain.Sites), e.Chain.Sites, n)
	}
	return Doubt{
		Name:    "electron_number",
		Verdict: verdict(rounding > 0),
		Value:   rounding,
		Limit:   0,
		Why:     why,
		Source:  "common practice",
	}, true
}

// spacing is the level spacing of the undistorted chain at E_F.
func (e Evidence) spacing() float64 {
	s := math.Pi * e.Velocity / float64(e.Chain.Sites)
	if e.Chain.Boundary == model.Ring {
		s *= 2 // ±k are degenerate
	}
	return s
}

// distorted reports whether the relaxed lattice carries any pattern worth the
// name.
func (e Evidence) distorted() bool {
	return e.carries(e.Chain.Bond, e.Lattice.Stretch) || e.carries(e.Chain.Site, e.Lattice.SiteMode)
}

// carries reports whether a branch moves a matrix element by a millionth of the
// largest energy of the chain; less is what a converged relaxation may leave.
func (e Evidence) carries(branch model.Phonon, pattern []float64) bool {
	scale := max(e.Chain.Hopping, math.Abs(e.Chain.NextHopping))
	for _, p := range []model.Phonon{e.Chain.Bond, e.Chain.Site} {
		if p.Active() {
			scale = max(scale, p.Coupling*p.Coupling/p.Stiffness)
		}
	}
	return branch.Coupling*largest(pattern) > 1e-6*scale
}

// largest returns the largest magnitude in x, 0 for none.
func largest(x []float64) float64 {
	most := 0.0
	for _, v := range x {
		most = max(most, math.Abs(v))
	}
	return most
}

// shortest is how many coherence lengths v_F/Δ a chain must have for its gap to be
// that of a long one. It is stricter than a level spacing below Δ, which a ring
// has from 2π lengths on.
const shortest = 8

func levelSpacing(e Evidence) (Doubt, bool) {
	if e.Lattice == nil || e.Velocity == 0 || math.IsNaN(e.Gap) || e.Lattice.Electrons.OpenShell || !e.distorted() {
		return Doubt{}, false
	}
	lengths := float64(e.Chain.Sites) * e.Gap / 2 / e.Velocity // N/ξ, ξ = v_F/Δ
	limit := e.spacing() * lengths / shortest
	return Doubt{
		Name:    "level_spacing",
		Verdict: verdict(e.spacing() > limit),
		Value:   e.spacing(),
		Limit:   limit,
		Why:     "level spacing of the undistorted chain at E_F against that of a chain of 8 coherence lengths v_F/Δ: above it the chain is too short for its gap",
		Source:  "common practice",
	}, true
}

func tooShortToDistort(e Evidence) (Doubt, bool) {
	if e.Lattice == nil || e.WeakGap == 0 || e.Velocity == 0 || e.Chain.Temperature > e.TransitionTemperature {
		return Doubt{}, false
	}
	return Doubt{
		Name:    "too_short_to_distort",
		Verdict: verdict(!e.distorted() && e.WeakGap < e.spacing()),
		Value:   e.WeakGap,
		Limit:   e.spacing(),
		Why:     "gap that the infinite chain would have (weak coupling) against this chain's level spacing: a chain below it stays undistorted whatever the model says",
		Source:  "common practice",
	}, true
}

// stretchLimit is the part of the hopping beyond which a hopping linear in the
// stretch is hard to defend.
const stretchLimit = 0.3

func linearCoupling(e Evidence) (Doubt, bool) {
	c := e.Chain
	if e.Lattice == nil || e.Lattice.Stretch == nil || c.Hopping == 0 {
		return Doubt{}, false
	}
	most, flipped := c.Bond.Coupling*largest(e.Lattice.Stretch)/c.Hopping, false
	for _, b := range e.Lattice.Stretch {
		flipped = flipped || c.Bond.Coupling*b > c.Hopping
	}
	why := "largest change of a hopping, |αb|/t: the coupling is linear in the stretch only while this is small"
	if flipped {
		why = "a hopping has changed its sign (αb > t): the linear coupling is stretched beyond its meaning"
	}
	return Doubt{
		Name:    "linear_coupling",
		Verdict: verdict(most > stretchLimit),
		Value:   most,
		Limit:   stretchLimit,
		Why:     why,
		Source:  "common practice",
	}, true
}

func kinksLeft(e Evidence) (Doubt, bool) {
	return Doubt{
		Name:    "kinks_left",
		Verdict: verdict(e.Kinks > e.KinksDemanded),
		Value:   float64(e.Kinks),
		Limit:   float64(e.KinksDemanded),
		Why:     "sign changes of the order parameter against what the electrons and the length ask for: more are left over from a poor start",
		Source:  "W. P. Su, J. R. Schrieffer, A. J. Heeger, Phys. Rev. B 22, 2099 (1980)",
	}, e.Counted
}
