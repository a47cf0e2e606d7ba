package study

import (
	"cmp"
	"context"
	"math"
	"slices"

	"example.org/twokf/model"
	"example.org/twokf/model/response"
)

const (
	// allRingWavevectors is the longest ring of which every wave vector is
	// computed; of longer ones those nearest to the grid of the infinite chain.
	allRingWavevectors = 4096
	// shownRingWavevectors is the same for a portrait that is only looked at, and
	// shownRingPairs bounds the work for it: of a very long ring, which is the
	// infinite chain to the eye, just the wave vectors nearest to 2kF are left.
	shownRingWavevectors = 600
	shownRingPairs       = 4_000_000
)

// ringStage computes χ of the finite uniform ring at its own wave vectors 2πm/N.
var ringStage = stage{
	name: "ring",
	inputs: func(c model.Chain) model.Chain {
		key := bulkOf(c)
		if c.Boundary == model.Open {
			return model.Chain{Boundary: model.Open}
		}
		key.Sites, key.Temperature = c.Sites, c.Temperature
		key.Electrons, _ = c.Count()
		return key
	},
	holds: func(p *Portrait, set Settings) bool { return set.Levels > 0 || p.Ring == nil || p.Ring.complete },
	keep:  func(to, from *Portrait) { to.Ring = from.Ring },
	run: func(ctx context.Context, in *inquiry) error {
		c := in.chain
		if c.Boundary == model.Open || in.portrait.Response == nil {
			return nil
		}
		n, _ := c.Count()
		ring, err := response.NewRing(c.Sites, float64(n), c.Spin, c.Hopping, c.NextHopping, c.Temperature)
		if err != nil {
			return err
		}
		ring.Jobs = in.settings.Jobs
		step := 2 * math.Pi / float64(c.Sites)
		shown := in.settings.Levels > 0
		out := &Ring{complete: !shown}
		if c.Sites <= shownRingWavevectors || !shown && c.Sites <= allRingWavevectors {
			out.complete = true
			out.Chi = make([]response.Static, c.Sites/2+1)
			for m := range out.Chi {
				out.Q = append(out.Q, step*float64(m))
			}
			if err := ring.Curve(ctx, out.Chi); err != nil {
				return err
			}
			in.portrait.Ring = out
			return nil
		}
		most := math.MaxInt
		if shown {
			most = max(1, shownRingPairs/c.Sites)
		}
		for i, m := range ringSample(in.portrait.Response.Q, in.portrait.Band.Ordering, step, most) {
			if err := ctx.Err(); err != nil {
				return err
			}
			if i%16 == 15 {
				in.progress("ring", float64(i)/float64(min(most, wavevectors)), "χ of the ring")
			}
			out.Q = append(out.Q, step*float64(m))
			out.Chi = append(out.Chi, ring.At(m))
		}
		in.portrait.Ring = out
		return nil
	},
}

// ringSample returns the numbers m of the wave vectors step·m that are nearest
// to the grid qs, at most so many of them, then those nearest to the ordering
// wave vector; ascending.
func ringSample(qs []float64, ordering, step float64, most int) []int {
	ms := make([]int, len(qs))
	for i, q := range qs {
		ms[i] = int(math.Round(q / step))
	}
	slices.Sort(ms)
	ms = slices.Compact(ms)
	if len(ms) > most {
		far := func(m int) float64 { return math.Abs(step*float64(m) - ordering) }
		slices.SortStableFunc(ms, func(i, j int) int { return cmp.Compare(far(i), far(j)) })
		ms = ms[:most]
		slices.Sort(ms)
	}
	return ms
}
