package model

import (
	"errors"
	"math"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

func TestParameterTableIsComplete(t *testing.T) {
	seen := map[string]bool{}
	for _, p := range Params() {
		if p.Key == "" || p.Symbol == "" || p.ASCII == "" || p.Doc == "" || seen[p.Key] {
			t.Errorf("%q lacks a name or a sentence, or is there twice", p.Key)
		}
		seen[p.Key] = true
		if strings.ContainsFunc(p.ASCII, func(r rune) bool { return r > 126 }) {
			t.Errorf("%s: %q is not ASCII", p.Key, p.ASCII)
		}
		if (p.Kind == Word) != (len(p.Words) > 1) {
			t.Errorf("%s has the words %q", p.Key, p.Words)
		}
		if strings.ContainsAny(p.Doc, "\n") || strings.HasSuffix(p.Doc, ".") {
			t.Errorf("%s: %q is not a phrase on one line", p.Key, p.Doc)
		}
	}
	if words := mustFind(t, "chain.boundary").Words; words[Ring] != "ring" || words[Open] != "open" {
		t.Errorf("boundaries are numbered %q", words)
	}
	if words := mustFind(t, "energy").Words; words[UnitHopping] != "t" || words[UnitEV] != "eV" {
		t.Errorf("energy units are numbered %q", words)
	}
}

func mustFind(t *testing.T, key string) Param {
	t.Helper()
	p, err := FindParam(key)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func TestParametersAreFoundByTheirKeyOrItsLastPart(t *testing.T) {
	for _, tt := range []struct{ key, want, err string }{
		{"electrons.hopping", "electrons.hopping", ""},
		{"hopping", "electrons.hopping", ""},
		{"temperature", "conditions.temperature", ""},
		{"electrons", "electrons.electrons", ""},
		{"title", "title", ""},
		{"coupling", "", `"coupling" may mean bond_phonon.coupling or site_phonon.coupling; write which`},
		{"temprature", "", `there is no parameter "temprature"; the nearest is conditions.temperature`},
		{"Temperature", "", `there is no parameter "Temperature"; the nearest is conditions.temperature`},
		{"electrons.temperature", "", `there is no parameter "electrons.temperature"; the nearest is conditions.temperature`},
		{"bond.coupling", "", `there is no parameter "bond.coupling"; the nearest is bond_phonon.coupling`},
		{"chian.sites", "", `there is no parameter "chian.sites"; the nearest is chain.sites`},
		{"boundry", "", `there is no parameter "boundry"; the nearest is chain.boundary`},
	} {
		p, err := FindParam(tt.key)
		if p.Key != tt.want || (err == nil) != (tt.err == "") || (err != nil && err.Error() != tt.err) {
			t.Errorf("FindParam(%q) = %q, %v\nwant %q, %s", tt.key, p.Key, err, tt.want, tt.err)
		}
	}
	var ambiguous *KeyError
	_, err := FindParam("stiffness")
	if !errors.As(err, &ambiguous) || !slices.Equal(ambiguous.Candidates, []string{"bond_phonon.stiffness", "site_phonon.stiffness"}) {
		t.Errorf("stiffness gives %#v", err)
	}
}

func TestUnitsFollowTheChain(t *testing.T) {
	inHopping := polyacetylene
	inHopping.Energy = UnitHopping
	for _, tt := range []struct{ key, inEV, inHopping string }{
		{"hopping", "eV", "t"},
		{"temperature", "eV", "t"},
		{"bond_phonon.coupling", "eV/Å", "t"},
		{"bond_phonon.stiffness", "eV/Å²", "t"},
		{"bond_phonon.frequency", "eV", "t"},
		{"site_phonon.coupling", "eV", "t"},
		{"site_phonon.stiffness", "eV", "t"},
		{"spacing", "Å", "Å"},
		{"filling", "", ""},
		{"sites", "", ""},
		{"boundary", "", ""},
		{"title", "", ""},
	} {
		p := mustFind(t, tt.key)
		if ev, hop := p.Unit(polyacetylene), p.Unit(inHopping); ev != tt.inEV || hop != tt.inHopping {
			t.Errorf("%s is in %q and %q, want %q and %q", p.Key, ev, hop, tt.inEV, tt.inHopping)
		}
	}
}

// Whatever a chain says about a parameter, saying it again changes nothing.
func TestSettingWhatIsGivenChangesNothing(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := anyChain(t)
		for _, p := range Params() {
			if !p.Given(c) {
				continue
			}
			if back, err := p.Parse(c, p.Format(c)); err != nil || back != c {
				t.Fatalf("%s = %q gives %+v, %v\nfrom %+v", p.Key, p.Format(c), back, err, c)
			}
			if p.Kind == Text {
				continue
			}
			if back, err := p.With(c, p.Get(c)); err != nil || back != c {
				t.Fatalf("%s = %v gives %+v, %v\nfrom %+v", p.Key, p.Get(c), back, err, c)
			}
		}
	})
}

// With accepts a value exactly where the chain is valid with it, and gets it back.
func TestWithAcceptsWhatIsInRange(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := anyChain(t)
		p := rapid.SampledFrom(Params()).Draw(t, "parameter")
		v := rapid.OneOf(rapid.Float64(), rapid.Float64Range(-3, 3), rapid.Map(rapid.IntRange(-3, 500), func(n int) float64 { return float64(n) }),
			rapid.SampledFrom([]float64{math.NaN(), math.Inf(1), math.Inf(-1)})).Draw(t, "value")
		next, err := p.With(c, v)
		if err != nil {
			var bad *ParamError
			if !errors.As(err, &bad) || bad.Key == "" || bad.Value == "" || bad.Want == "" {
				t.Fatalf("With(%v) of %s fails with %#v", v, p.Key, err)
			}
			if next != c {
				t.Fatalf("With(%v) of %s changed the chain although %v", v, p.Key, err)
			}
			return
		}
		if got := p.Get(next); got != v {
			t.Fatalf("%s was set to %v and is %v", p.Key, v, got)
		}
		if err := next.Validate(); err != nil {
			t.Fatal(err)
		}
	})
}

func TestFillingAndElectronsReplaceEachOther(t *testing.T) {
	byNumber, err := mustFind(t, "electrons").With(polyacetylene, 206)
	if err != nil || !byNumber.ByNumber || byNumber.Electrons != 206 || byNumber.Filling != 0 {
		t.Fatalf("electrons = 206 gives %+v, %v", byNumber, err)
	}
	if got, want := mustFind(t, "filling").Get(byNumber), 206./202; got != want {
		t.Errorf("206 electrons on 202 sites are a filling of %v, want %v", got, want)
	}
	if got := mustFind(t, "electrons").Format(polyacetylene); got != "202" {
		t.Errorf("a filling of 1 on 202 sites is %s electrons", got)
	}
	back, err := mustFind(t, "filling").Parse(byNumber, "1")
	if err != nil || back != polyacetylene {
		t.Errorf("filling = 1 gives %+v, %v", back, err)
	}
}

func TestNumbersOfAPhononThatIsNotThere(t *testing.T) {
	g, k := mustFind(t, "site_phonon.coupling"), mustFind(t, "site_phonon.stiffness")
	if g.Given(polyacetylene) || g.Format(polyacetylene) != "" || g.Get(polyacetylene) != 0 {
		t.Errorf("a chain without site phonons has g = %q", g.Format(polyacetylene))
	}
	if _, err := g.With(polyacetylene, 1); err == nil || err.Error() != "site_phonon.stiffness must be a number from 1e-12 to 1e9 eV, not 0 eV" {
		t.Errorf("a coupling without a spring gives %v", err)
	}
	c, err := k.With(polyacetylene, 2)
	if err != nil || c.Site != (Phonon{Present: true, Stiffness: 2}) {
		t.Errorf("a spring alone gives %+v, %v", c.Site, err)
	}
}
