// Package doubt says how far an answer can be trusted, and why. Each doubt is a
// small independent function of the evidence with its number, its limit, one
// plain sentence and a source. Doubts never block an answer.
package doubt

import (
	"sort"

	"example.org/twokf/model"
	"example.org/twokf/model/relax"
)

// Verdict of one check.
type Verdict int

const (
	Clear  Verdict = iota // nothing to hold against the answer
	Raised                // the answer should be read with this in mind
)

// String returns the verdict as the JSON report writes it.
func (v Verdict) String() string {
	if v == Raised {
		return "raised"
	}
	return "clear"
}

// Doubt is one reason to hesitate, with its number and its limit.
type Doubt struct {
	Name    string // snake_case, as in the JSON report
	Verdict Verdict
	Value   float64 // may be ±Inf
	Limit   float64 // finite
	Why     string  // one plain sentence
	Source  string  // publication, or "common practice"
}

// Evidence is what is known about a chain when its doubts are weighed. Parts
// that are not known are nil or zero, and the doubts about them are left out.
type Evidence struct {
	Chain model.Chain

	Velocity float64 // v_F of the undistorted infinite chain

	HasPhonon         bool
	Softest, SoftestQ float64 // lowest Ω²/ω² and where

	Lattice *relax.Lattice
	Gap     float64 // of the finite relaxed chain; NaN where there is none

	Counted              bool // whether kinks are defined
	Kinks, KinksDemanded int

	CouplingBond, CouplingSite float64 // λ
	WeakGap                    float64 // predicted gap of the infinite chain, weak coupling
	TransitionTemperature      float64 // where any q first goes unstable on cooling; 0: nowhere
}

// check weighs one doubt; ok is false where it does not apply.
type check func(Evidence) (d Doubt, ok bool)

// checks in order of weight: what makes an answer wrong first, what makes it
// another model's answer last.
var checks = []check{
	notConverged,
	notMinimum,
	openShell,
	electronNumber,
	tooShortToDistort,
	levelSpacing,
	kinksLeft,
	unstableRegion,
	linearCoupling,
	strongCoupling,
	fastLattice,
	quantumLattice,
	firstOrder,
	oneDimension,
}

// Weigh returns every doubt that applies, the raised ones first, each group in
// order of weight.
func Weigh(e Evidence) []Doubt {
	var out []Doubt
	for _, weigh := range checks {
		if d, ok := weigh(e); ok {
			out = append(out, d)
		}
	}
	sort.SliceStable(out, func(i, j int) bool { return out[i].Verdict > out[j].Verdict })
	return out
}

// verdict raises a doubt on a condition.
func verdict(raised bool) Verdict {
	if raised {
		return Raised
	}
	return Clear
}
