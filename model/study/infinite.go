package study

import (
	"context"
	"math"

	"example.org/twokf/model"
	"example.org/twokf/model/band"
	"example.org/twokf/model/response"
)

const (
	dispersionPoints = 240 // along 0..π, about what the widest screen can show
	wavevectors      = 300 // of χ and the phonon along 0..π, denser where χ bends
)

var bandStage = stage{
	name:   "band",
	inputs: bulkOf,
	keep:   func(to, from *Portrait) { to.Band = from.Band },
	run: func(_ context.Context, in *inquiry) error {
		b := band.Of(in.chain)
		out := &Band{
			FermiEnergy:     b.FermiEnergy(),
			KF:              b.KF(),
			Ordering:        b.Ordering(),
			FermiPoints:     b.FermiPoints(),
			DensityOfStates: b.DensityOfStates(),
		}
		if len(out.FermiPoints) == 1 {
			out.Velocity = math.Abs(b.Velocity(out.FermiPoints[0]))
		}
		for i := range dispersionPoints + 1 {
			k := math.Pi * float64(i) / dispersionPoints
			out.K = append(out.K, k)
			out.Energy = append(out.Energy, b.Energy(k))
		}
		in.portrait.Band = out
		return nil
	},
}

var responseStage = stage{
	name: "response",
	inputs: func(c model.Chain) model.Chain {
		key := bulkOf(c)
		key.Temperature = c.Temperature
		return key
	},
	keep: func(to, from *Portrait) { to.Response = from.Response },
	run: func(ctx context.Context, in *inquiry) error {
		bulk, err := response.NewBulk(band.Of(in.chain), in.chain.Temperature)
		if err != nil {
			return err
		}
		out := &Response{Q: bulk.Grid(wavevectors)}
		out.Chi = make([]response.Static, len(out.Q))
		if err := bulk.Curve(ctx, out.Q, out.Chi); err != nil {
			return err
		}
		out.PeakQ, out.Peak = bulk.Peak(ctx)
		in.portrait.Response = out
		return nil
	},
}

var phononStage = stage{
	name: "phonon",
	inputs: func(c model.Chain) model.Chain {
		key := bulkOf(c)
		key.Temperature, key.Bond, key.Site = c.Temperature, c.Bond, c.Site
		return key
	},
	keep: func(to, from *Portrait) { to.Phonon = from.Phonon },
	run: func(ctx context.Context, in *inquiry) error {
		c := in.chain
		if in.portrait.Response == nil || !c.Bond.Present && !c.Site.Present {
			return nil
		}
		bulk, err := response.NewBulk(band.Of(c), c.Temperature)
		if err != nil {
			return err
		}
		r := in.portrait.Response
		out := &Phonon{Q: r.Q, Branch: make([]response.Phonon, len(r.Q))}
		for i, q := range r.Q {
			out.Branch[i] = response.PhononAt(c, q, r.Chi[i])
		}
		if out.SoftestQ, out.Softest, err = response.Softest(ctx, c, bulk); err != nil {
			return err
		}
		out.Unstable = unstable(out)
		in.portrait.Phonon = out
		return nil
	},
}

// unstable returns the ranges of wave vectors where Ω² < 0.
func unstable(p *Phonon) (ranges [][2]float64) {
	inside := false
	for i, b := range p.Branch {
		switch negative := b.Ratio < 0; {
		case negative && !inside:
			ranges = append(ranges, [2]float64{p.Q[i], p.Q[i]})
			inside = true
		case negative:
			ranges[len(ranges)-1][1] = p.Q[i]
		default:
			inside = false
		}
	}
	return ranges
}

var transitionStage = stage{
	name: "transition",
	inputs: func(c model.Chain) model.Chain {
		key := bulkOf(c)
		key.Bond, key.Site = c.Bond, c.Site
		key.Bond.Frequency, key.Site.Frequency = 0, 0 // masses do not move T_P
		return key
	},
	keep: func(to, from *Portrait) { to.Transition = from.Transition },
	run: func(ctx context.Context, in *inquiry) (err error) {
		c := in.chain
		if !c.Bond.Active() && !c.Site.Active() {
			return nil
		}
		out := &Transition{WeakGap: response.WeakGap(c)}
		out.CouplingBond, out.CouplingSite = response.Couplings(c)
		if out.Temperature, out.First, out.FirstQ, err = response.Transition(ctx, c); err != nil {
			return err
		}
		in.portrait.Transition = out
		return nil
	},
}
