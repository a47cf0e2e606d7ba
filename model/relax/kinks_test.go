package relax

import (
	"fmt"
	"testing"

	"example.org/twokf/model"
)

// TestKinks: every electron that a spin ½ ring is away from half filling makes a
// kink, an odd ring has one, and the lowest state has no more than are asked for
// (W. P. Su, J. R. Schrieffer, A. J. Heeger, Phys. Rev. B 22, 2099 (1980)).
func TestKinks(t *testing.T) {
	for _, r := range []struct{ sites, electrons, found, demanded int }{
		{202, 202, 0, 0},
		{201, 201, 1, 1},
		{202, 204, 2, 2},
		{202, 206, 4, 4},
		{202, 198, 4, 4},
		{100, 101, 0, 2}, // a polaron: a dent, no kink; two would be no surprise
	} {
		c := polyacetylene(r.sites, r.electrons)
		found, demanded, ok := Kinks(c, relaxed(t, c, Settings{}))
		if !ok || found != r.found || demanded != r.demanded {
			t.Errorf("%d electrons on %d sites: %d kinks, %d demanded, %v; want %d, %d", r.electrons, r.sites, found, demanded, ok, r.found, r.demanded)
		}
	}
}

// TestOpenChainOfOddLength: both ends want a strong bond, so one kink is asked
// for.
func TestOpenChainOfOddLength(t *testing.T) {
	c := polyacetylene(81, 81)
	c.Boundary = model.Open
	if found, demanded, ok := Kinks(c, relaxed(t, c, Settings{})); !ok || found != 1 || demanded != 1 {
		t.Errorf("%d kinks, %d demanded, %v; want 1, 1, true", found, demanded, ok)
	}
}

// TestKinksLeftByAPoorStart: a start with two kinks too many ends with two
// kinks too many, and they are counted.
func TestKinksLeftByAPoorStart(t *testing.T) {
	c := polyacetylene(300, 300)
	start := Seed{Name: "two kinks", Stretch: make([]float64, 300)}
	for i := range start.Stretch {
		start.Stretch[i] = 0.08
		if (i%2 == 1) != (i > 75 && i < 225) {
			start.Stretch[i] = -0.08
		}
	}
	// far apart the kinks attract by e^(−d/ξ), less than the tolerance
	l := relaxed(t, c, Settings{Starts: []Seed{start}})
	if found, demanded, ok := Kinks(c, l); !ok || found != 2 || demanded != 0 {
		t.Errorf("%d kinks, %d demanded, %v; want 2, 0, true", found, demanded, ok)
	}
}

func TestNoKinksToCount(t *testing.T) {
	quarter := chain(true, 2, 64, 32, 0.8)
	uniform := chain(false, 2, 62, 62, 60)
	empty := chain(true, 1, 30, 0, 1)
	for name, c := range map[string]model.Chain{"quarter filled": quarter, "undistorted": uniform, "empty": empty} {
		t.Run(name, func(t *testing.T) {
			if found, demanded, ok := Kinks(c, relaxed(t, c, Settings{})); ok {
				t.Error(fmt.Sprint(found, " of ", demanded, " kinks counted"))
			}
		})
	}
}
