package study

import (
	"cmp"
	"context"
	"math"
	"slices"

	"example.org/twokf/model"
	"example.org/twokf/model/band"
	"example.org/twokf/model/fermi"
	"example.org/twokf/model/relax"
)

// mostLevels is the longest chain whose levels are all computed (the cost grows
// as N²); of longer ones only the gap edges, or a sample, are known.
const mostLevels = 4096

var latticeStage = stage{
	name:   "lattice",
	inputs: finiteOf,
	keep:   func(to, from *Portrait) { to.Lattice = from.Lattice },
	run: func(ctx context.Context, in *inquiry) error {
		set := relax.Settings{Jobs: in.settings.Jobs, Progress: in.relaxing}
		if prev := in.settings.Previous; prev != nil && prev.Lattice != nil && prev.Chain.Sites == in.chain.Sites {
			set.Previous = prev.Lattice.Lattice
		}
		l, err := relax.Run(ctx, in.chain, set)
		if err != nil {
			return err
		}
		in.portrait.Lattice = in.measure(l)
		return nil
	},
}

// finiteOf keeps what the finite chain depends on: everything but its name, how
// its electron number was given, its lattice constant and its masses.
func finiteOf(c model.Chain) model.Chain {
	n, _ := c.Count()
	c.Title, c.Source, c.Spacing, c.Energy = "", "", 0, 0
	c.ByNumber, c.Electrons, c.Filling = true, n, 0
	c.Bond.Frequency, c.Site.Frequency = 0, 0
	return c
}

// relaxing turns the progress of the starts into that of the stage. A start counts
// by the decades that its residual has fallen; starts that run side by side tell
// of themselves alone, so the furthest that was told counts.
func (in *inquiry) relaxing(p relax.Progress) {
	part := 0.0
	if p.Residual > 0 && p.Residual < 1 {
		part = min(1, math.Log(p.Residual)/math.Log(p.Tolerance))
	}
	in.furthest = max(in.furthest, min(1, (float64(p.Finished)+part)/float64(p.Starts)))
	in.progress("lattice", in.furthest, "start %q: residual %.0e of %.0e", p.Start, p.Residual, p.Tolerance)
}

// measure takes the order parameters off a relaxed lattice.
func (in *inquiry) measure(l *relax.Lattice) *Lattice {
	c := in.chain
	n, _ := c.Count()
	q := math.Mod(2*math.Pi*float64(n)/float64(c.Spin*c.Sites), 2*math.Pi)
	q = min(q, 2*math.Pi-q)
	out := &Lattice{
		Lattice:               l,
		Ordering:              q,
		DisplacementAmplitude: amplitude(l.Displacement, q, c.Sites),
		SiteModeAmplitude:     amplitude(l.SiteMode, q, c.Sites),
		DensityAmplitude:      amplitude(l.Electrons.Density, q, c.Sites),
		BondOrderAmplitude:    amplitude(l.Electrons.BondOrder, q, c.Sites),
		Gap:                   math.NaN(),
	}
	if gap := l.Electrons.Lowest - l.Electrons.Highest; !math.IsInf(gap, 0) {
		out.Gap = gap
	}
	out.Kinks, out.KinksDemanded, out.Counted = relax.Kinks(c, l)
	return out
}

// amplitude returns A_Q[x] = (2/N)·|Σ_j x_j e^(−iQj)|, with (1/N) at Q = π and
// at Q = 0, where the wave is its own mirror image.
func amplitude(x []float64, q float64, sites int) float64 {
	a := 2 * relax.Amplitude(x, q) / float64(sites)
	if math.Abs(math.Sin(q)) < 1e-9 {
		a /= 2
	}
	return a
}

// On very long chains each level costs so much that fewer are sampled: levels
// times sites stay below manyCounts, down to fewest levels.
const (
	manyCounts = 1_000_000
	fewest     = 32
)

// plotted is how finely sampled levels are found, as a part of the range of all:
// half a dot of the tallest plot. On chains short enough for it they are found
// four times finer, for the reader of a value.
const plotted = 2e-3

var levelStage = stage{
	name:   "levels",
	inputs: finiteOf,
	holds:  func(prev *Portrait, set Settings) bool { return prev.levels == set.Levels },
	keep:   func(to, from *Portrait) { to.Levels = from.Levels },
	run: func(ctx context.Context, in *inquiry) (err error) {
		c := in.chain
		if in.portrait.Lattice == nil {
			return nil
		}
		h := relax.Hamiltonian(c, in.portrait.Lattice.Lattice)
		in.solver.Jobs = in.settings.Jobs
		out := &Levels{}
		switch few := in.settings.Levels; {
		case few > 0 && c.Sites > few:
			few = min(few, max(fewest, manyCounts/c.Sites))
			numbers := levelSample(c, few)
			lo, hi := h.Bounds()
			out.Tolerance = plotted * (hi - lo)
			if few*c.Sites <= manyCounts {
				out.Tolerance /= 4
			}
			out.Energy, err = in.solver.SampleLevels(ctx, nil, h, numbers, out.Tolerance)
			if err == nil {
				putEdges(out.Energy, numbers, c, &in.portrait.Lattice.Electrons)
			}
			out.K = places(c, numbers)
		case c.Sites <= mostLevels:
			out.Energy, err = in.solver.Levels(ctx, nil, h)
			out.K = places(c, nil)
		default:
			return nil
		}
		if err == nil {
			in.portrait.Levels = out
		}
		return err
	},
}

// putEdges puts the edges of the gap, which are known exactly, into a sample.
func putEdges(energy []float64, numbers []int, c model.Chain, e *fermi.State) {
	n, _ := c.Count()
	if e.OpenShell || n%c.Spin != 0 {
		return
	}
	for i, m := range numbers {
		switch m {
		case n/c.Spin - 1:
			energy[i] = e.Highest
		case n / c.Spin:
			energy[i] = e.Lowest
		}
	}
}

// levelSample returns the numbers of levels that show the bands of a long chain:
// most of them evenly over all, some next to each other about the Fermi level.
func levelSample(c model.Chain, few int) []int {
	n, _ := c.Count()
	fermi, near := n/c.Spin, few/8
	var numbers []int
	for i := range few - 2*near {
		numbers = append(numbers, i*(c.Sites-1)/max(1, few-2*near-1))
	}
	for m := max(0, fermi-near); m < min(c.Sites, fermi+near); m++ {
		numbers = append(numbers, m)
	}
	slices.Sort(numbers)
	return slices.Compact(numbers)
}

// places returns, for the levels of the given numbers (nil: all) of a chain in
// ascending order, the wave vectors |k| of the undistorted chain's levels of the
// same numbers: a level is drawn where the undistorted level of its number
// stands, so that a gap at E_F opens at kF.
func places(c model.Chain, numbers []int) []float64 {
	at := func(m int) float64 {
		if c.Boundary == model.Ring {
			return 2 * math.Pi * float64((m+1)/2) / float64(c.Sites)
		}
		return math.Pi * float64(m+1) / float64(c.Sites+1)
	}
	b := band.Of(c)
	order := func(m int) int { return m } // the band rises from 0 to π …
	if 4*math.Abs(c.NextHopping) > c.Hopping {
		sorted := make([]int, c.Sites) // … unless t2 bends it
		for m := range sorted {
			sorted[m] = m
		}
		slices.SortStableFunc(sorted, func(i, j int) int { return cmp.Compare(b.Energy(at(i)), b.Energy(at(j))) })
		order = func(m int) int { return sorted[m] }
	}
	if numbers == nil {
		k := make([]float64, c.Sites)
		for m := range k {
			k[m] = at(order(m))
		}
		return k
	}
	k := make([]float64, len(numbers))
	for i, m := range numbers {
		k[i] = at(order(m))
	}
	return k
}
