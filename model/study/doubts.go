package study

import (
	"context"

	"example.org/twokf/model"
	"example.org/twokf/model/doubt"
)

// doubtStage weighs what the other stages found. It costs nothing and is done
// in every study.
var doubtStage = stage{
	name:   "doubts",
	inputs: func(c model.Chain) model.Chain { return c },
	keep:   func(to, from *Portrait) { to.Doubts = from.Doubts },
	run: func(_ context.Context, in *inquiry) error {
		in.portrait.Doubts = doubt.Weigh(in.portrait.evidence())
		return nil
	},
}

// evidence gathers what doubts are about.
func (p *Portrait) evidence() doubt.Evidence {
	e := doubt.Evidence{Chain: p.Chain}
	if p.Band != nil {
		e.Velocity = p.Band.Velocity
	}
	if p.Phonon != nil {
		e.Softest, e.SoftestQ, e.HasPhonon = p.Phonon.Softest, p.Phonon.SoftestQ, true
	}
	if p.Lattice != nil {
		e.Lattice, e.Gap = p.Lattice.Lattice, p.Lattice.Gap
		e.Counted, e.Kinks, e.KinksDemanded = p.Lattice.Counted, p.Lattice.Kinks, p.Lattice.KinksDemanded
	}
	if p.Transition != nil {
		e.CouplingBond, e.CouplingSite = p.Transition.CouplingBond, p.Transition.CouplingSite
		e.WeakGap, e.TransitionTemperature = p.Transition.WeakGap, p.Transition.First
	}
	return e
}
