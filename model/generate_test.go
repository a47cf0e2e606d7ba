package model

import (
	"math"

	"pgregory.net/rapid"
)

// anyText draws titles of all kinds: quotes, newlines, control characters, any script.
func anyText() *rapid.Generator[string] {
	return rapid.OneOf(
		rapid.String(),
		rapid.SampledFrom([]string{"", `"`, `'`, `"""`, `'''`, `\`, "a\nb", "\r\n", "\t", "\x00\x1f\x7f", "# = [x]", "日本語", "é̂ \u2028", "\U0010FFFF"}),
		rapid.StringMatching(`["'\\\n# =]{0,20}`),
	)
}

// magnitude draws a nonzero number that a parameter may have, round or not.
func magnitude() *rapid.Generator[float64] {
	return rapid.OneOf(
		rapid.Float64Range(MinMagnitude, MaxMagnitude),
		rapid.Float64Range(0.1, 10),
		rapid.Map(rapid.Float64Range(-12, 9), func(e float64) float64 {
			return min(max(math.Pow(10, e), MinMagnitude), MaxMagnitude)
		}),
		rapid.SampledFrom([]float64{MinMagnitude, MaxMagnitude, 1, 2.5, 21, 0.1}),
	)
}

func orZero(g *rapid.Generator[float64]) *rapid.Generator[float64] {
	return rapid.OneOf(g, rapid.Just(0.0))
}

func anyPhonon(t *rapid.T, name string) Phonon {
	if !rapid.Bool().Draw(t, name) {
		return Phonon{}
	}
	return Phonon{
		Present:   true,
		Coupling:  orZero(magnitude()).Draw(t, name+" coupling"),
		Stiffness: magnitude().Draw(t, name+" stiffness"),
		Frequency: orZero(magnitude()).Draw(t, name+" frequency"),
	}
}

// anyChain draws a valid chain.
func anyChain(t *rapid.T) Chain {
	c := Chain{
		Title:       anyText().Draw(t, "title"),
		Source:      anyText().Draw(t, "source"),
		Energy:      rapid.SampledFrom([]EnergyUnit{UnitHopping, UnitEV}).Draw(t, "energy"),
		Sites:       rapid.OneOf(rapid.IntRange(1, 400), rapid.IntRange(1, MaxSites)).Draw(t, "sites"),
		Boundary:    rapid.SampledFrom([]Boundary{Ring, Open}).Draw(t, "boundary"),
		Spacing:     orZero(magnitude()).Draw(t, "spacing"),
		Hopping:     orZero(magnitude()).Draw(t, "hopping"),
		NextHopping: orZero(magnitude()).Draw(t, "next_hopping") * rapid.SampledFrom([]float64{1, -1}).Draw(t, "sign"),
		Spin:        rapid.IntRange(1, 2).Draw(t, "spin"),
		ByNumber:    rapid.Bool().Draw(t, "by number"),
		Bond:        anyPhonon(t, "bond phonon"),
		Site:        anyPhonon(t, "site phonon"),
		Temperature: orZero(magnitude()).Draw(t, "temperature"),
	}
	n := rapid.IntRange(0, c.Spin*c.Sites).Draw(t, "electrons")
	switch {
	case c.ByNumber:
		c.Electrons = n
	case rapid.Bool().Draw(t, "whole"):
		c.Filling = float64(n) / float64(c.Sites)
	default:
		c.Filling = rapid.Float64Range(0, float64(c.Spin)).Draw(t, "filling")
	}
	if err := c.Validate(); err != nil {
		t.Fatalf("generated an invalid chain: %v", err)
	}
	return c
}

// polyacetylene is a chain in eV that tests start from.
// Values: W. P. Su, J. R. Schrieffer, A. J. Heeger, Phys. Rev. B 22, 2099 (1980).
var polyacetylene = Chain{
	Title: "polyacetylene", Energy: UnitEV,
	Sites: 202, Spacing: 1.22, Hopping: 2.5, Spin: 2, Filling: 1,
	Bond: Phonon{Present: true, Coupling: 4.1, Stiffness: 21},
}
