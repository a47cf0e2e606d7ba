package relax

import (
	"context"
	"math"
	"math/rand/v2"
	"slices"

	"example.org/twokf/model"
)

// Seed is a lattice to start from. A nil pattern is an undistorted branch.
type Seed struct {
	Name     string
	Stretch  []float64 // b_i, as Lattice.Stretch
	SiteMode []float64 // q_i, as Lattice.SiteMode
}

// atRandom is the name of the random start.
const atRandom = "random"

const (
	// seedGap is the half gap that a seed opens, in units of the hopping: large
	// enough to be past the flat top of the energy, small enough that no hopping
	// changes sign. The end does not depend on it.
	seedGap = 0.3
	// dentWidth, in units of the coherence length 2t/Δ of the seed's gap, is the
	// width of a dent that an extra electron may settle into.
	dentWidth = 1.0
	// longestRandom is the longest chain that is also started at random: in longer
	// ones kinks freeze in and take hundreds of steps to end in a higher state.
	longestRandom = 256
	// largestPeriod of the commensurate patterns that are tried beside 2kF.
	largestPeriod = 4
)

// Seeds returns the starts of a chain: 2kF patterns of two phases, a
// neighbouring commensurate pattern with a dent (where an extra electron makes
// a polaron or a kink), one branch at a time where both are coupled, and, for
// chains that are not long, a random pattern. The wave vector is that of the
// electrons on the chain.
func Seeds(c model.Chain) []Seed {
	n, _ := c.Count()
	if c.Sites < 2 || n == 0 || n == c.Spin*c.Sites {
		return nil // nothing to modulate
	}
	q := 2 * math.Pi * float64(n) / float64(c.Spin*c.Sites)
	s := sower{chain: c, middle: float64(c.Sites / 2)}

	seeds := []Seed{s.wave("2kF", q, 0, 1, 1)}
	if math.Abs(math.Sin(q)) > 1e-9 { // at Q = π the shifted wave is zero or the same
		seeds = append(seeds, s.wave("2kF shifted", q, q/2, 1, 1))
	}
	if c.Bond.Active() && c.Site.Active() {
		seeds = append(seeds, s.wave("2kF bonds", q, 0, 1, 0.02), s.wave("2kF sites", q, 0, 0.02, 1))
	}
	if near := commensurate(q); near != q && math.Abs(near-q)*float64(c.Sites) < 4*2*math.Pi {
		seeds = append(seeds, s.dented("commensurate", near))
	}
	if c.Sites <= longestRandom {
		seeds = append(seeds, s.random(atRandom))
	}
	return seeds
}

const (
	// longestUnscouted is the longest chain on which every seed is relaxed; of
	// longer ones the seeds are first compared on a chain of about scoutSites.
	longestUnscouted = 16_000
	scoutSites       = 1000
)

// likelySeeds returns the starts that are worth the while. On a long chain that is
// the one that wins on a shorter chain of the same filling: what a chain of a
// thousand sites prefers, by some energy per site, so does a longer one.
//
// The second result is the free energy per site that it ended with, +Inf where
// nothing was scouted.
func likelySeeds(ctx context.Context, c model.Chain, set Settings) ([]Seed, float64, error) {
	if c.Sites <= longestUnscouted {
		return Seeds(c), math.Inf(1), nil
	}
	all := Seeds(c)
	short := shorter(c)
	candidates := slices.DeleteFunc(Seeds(short), func(s Seed) bool { return !slices.ContainsFunc(all, s.like) })
	l, err := Run(ctx, short, Settings{Starts: candidates, Tolerance: set.Tolerance, MaxIterations: set.MaxIterations, Jobs: set.Jobs})
	if ctx.Err() != nil {
		return nil, 0, err
	}
	if err != nil { // the short chain tells nothing
		return all, math.Inf(1), nil
	}
	energy := l.FreeEnergy / float64(short.Sites)
	for i, s := range all {
		if s.Name == l.Start {
			return []Seed{all[i]}, energy, nil
		}
	}
	return all, energy, nil // it stayed undistorted, or left a saddle: no seed is better than another
}

// shorter returns a chain of about scoutSites that comes closest to c's number
// of electrons for each site and spin.
func shorter(c model.Chain) model.Chain {
	n, _ := c.Count()
	filling := float64(n) / float64(c.Spin*c.Sites)
	best, least := scoutSites, math.Inf(1)
	for sites := scoutSites; sites < 2*scoutSites; sites++ {
		want := filling * float64(sites)
		if off := math.Abs(want - math.Round(want)); sites%2 == c.Sites%2 && off < least-1e-9 {
			best, least = sites, off
		}
	}
	c.ByNumber, c.Filling = true, 0
	c.Sites, c.Electrons = best, int(math.Round(filling*float64(c.Spin*best)))
	return c
}

// like reports whether two seeds are the same idea.
func (s Seed) like(other Seed) bool { return s.Name == other.Name }

// commensurate returns the wave vector 2πp/m, m ≤ largestPeriod, nearest to q.
func commensurate(q float64) float64 {
	best := math.Inf(1)
	for m := 2; m <= largestPeriod; m++ {
		for p := 1; p < m; p++ {
			if near := 2 * math.Pi * float64(p) / float64(m); math.Abs(near-q) < math.Abs(best-q)-1e-12 {
				best = near
			}
		}
	}
	if math.Abs(best-q) < 1e-9 {
		return q
	}
	return best
}

// sower makes patterns for one chain, in phase at the middle of the chain so
// that the seam of a ring falls on its ends.
type sower struct {
	chain  model.Chain
	middle float64
}

func (s sower) wave(name string, q, phase, bonds, sites float64) Seed {
	return s.pattern(name, bonds, sites, func(dst []float64, amplitude float64) {
		cosines(dst, amplitude, q, phase-q*s.middle)
	})
}

// dented is a wave whose amplitude changes sign twice in the middle.
func (s sower) dented(name string, q float64) Seed {
	width := dentWidth / seedGap
	return s.pattern(name, 1, 1, func(dst []float64, amplitude float64) {
		cosines(dst, amplitude, q, -q*s.middle)
		far := int(20 * width) // beyond it the dent is nothing
		for i := max(0, int(s.middle)-far); i < min(len(dst), int(s.middle)+far); i++ {
			sech := 1 / math.Cosh((float64(i)-s.middle)/width)
			dst[i] *= 1 - 1.2*sech*sech
		}
	})
}

func (s sower) random(name string) Seed {
	r := rand.New(rand.NewPCG(2, uint64(s.chain.Sites))) // the same chain has the same starts
	return s.pattern(name, 1, 1, func(dst []float64, amplitude float64) {
		for i := range dst {
			dst[i] = amplitude * (2*r.Float64() - 1)
		}
	})
}

func (s sower) pattern(name string, bonds, sites float64, fill func(dst []float64, amplitude float64)) Seed {
	c, seed := s.chain, Seed{Name: name}
	if c.Bond.Active() {
		count := c.Sites
		if c.Boundary == model.Open {
			count--
		}
		seed.Stretch = make([]float64, count)
		fill(seed.Stretch, bonds*seedAmplitude(c, c.Bond)/2)
	}
	if c.Site.Active() {
		seed.SiteMode = make([]float64, c.Sites)
		fill(seed.SiteMode, sites*seedAmplitude(c, c.Site))
	}
	return seed
}

// seedAmplitude returns the amplitude of a branch that changes matrix elements
// by seedGap of the hopping, or of the branch's own energy g²/K where nothing
// hops; but no more than electrons can hold, (g/K)·g_s.
func seedAmplitude(c model.Chain, p model.Phonon) float64 {
	own := p.Coupling / p.Stiffness
	return min(seedGap*max(c.Hopping/p.Coupling, own), float64(c.Spin)*own)
}
