package study_test

import (
	"context"
	"math"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"example.org/twokf/model"
	"example.org/twokf/model/relax"
	"example.org/twokf/model/study"
	"example.org/twokf/presets"
)

// What a stage declares as its inputs is all that it depends on: a chain that
// differs from another in one parameter and in none of a stage's inputs has, to
// the last bit, the same part of the portrait.
func TestInputsCoverDependences(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a := anyChain(10).Draw(t, "chain")
		b := changed(t, a)
		p, q := portraitOf(t, a), portraitOf(t, b)
		for _, stage := range study.Stages() {
			if !study.SameInputs(stage, a, b) {
				continue
			}
			if d := difference(study.PartOf(stage, p), study.PartOf(stage, q)); d != "" {
				t.Errorf("%s: equal inputs, different answers: %s\n%+v\n%+v", stage, d, a, b)
			}
		}
	})
}

// A study that builds on an earlier one takes over a part exactly when the
// stage's inputs are equal, and its numbers are those of a study from nothing.
// Just the relaxed chain may end elsewhere: the earlier lattice is one more start.
func TestReuseGivesTheSameNumbers(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a := anyChain(10).Draw(t, "chain")
		b := changed(t, a)
		before := portraitOf(t, a)
		after, err := study.Run(context.Background(), b, study.Settings{Previous: before})
		if err != nil {
			t.Fatal(err)
		}
		fresh := portraitOf(t, b)
		for _, stage := range study.Stages() {
			if stage == "doubts" {
				continue // always weighed anew
			}
			kept := onlyPart(before, stage) == onlyPart(after, stage)
			if same := study.SameInputs(stage, a, b); kept != same && onlyPart(fresh, stage) != nil {
				t.Errorf("%s: inputs equal: %v, part taken over: %v", stage, same, kept)
			}
			if stage == "lattice" || stage == "levels" {
				continue
			}
			if d := difference(study.PartOf(stage, fresh), study.PartOf(stage, after)); d != "" {
				t.Errorf("%s: %s", stage, d)
			}
		}
	})
}

// onlyPart returns the part that a stage contributes, nil where there is none.
func onlyPart(p *study.Portrait, stage string) any {
	switch {
	case stage == "band" && p.Band != nil:
		return p.Band
	case stage == "response" && p.Response != nil:
		return p.Response
	case stage == "ring" && p.Ring != nil:
		return p.Ring
	case stage == "phonon" && p.Phonon != nil:
		return p.Phonon
	case stage == "lattice" && p.Lattice != nil:
		return p.Lattice
	case stage == "levels" && p.Levels != nil:
		return p.Levels
	case stage == "transition" && p.Transition != nil:
		return p.Transition
	}
	return nil
}

// Turning one knob redoes what hangs on it and nothing else.
func TestWhatAKnobRedoes(t *testing.T) {
	openChain, err := model.SetAll(mixed(t), []string{"chain.boundary=open"})
	if err != nil {
		t.Fatal(err)
	}
	byNumber, err := model.SetAll(mixed(t), []string{"electrons.electrons=114"})
	if err != nil {
		t.Fatal(err)
	}
	for _, turn := range []struct {
		chain       model.Chain
		assignments string // separated by blanks
		redone      string
	}{
		{mixed(t), "title=other", ""},
		{mixed(t), "source=invented_again", ""},
		{mixed(t), "energy=t", ""},
		{mixed(t), "chain.spacing=4", ""},
		{mixed(t), "conditions.temperature=0.01", "response phonon lattice levels ring"},
		{mixed(t), "chain.sites=200", "lattice levels ring"},
		{openChain, "chain.sites=200", "lattice levels"},
		{mixed(t), "chain.boundary=open", "lattice levels ring"},
		{byNumber, "chain.sites=200", "band response phonon lattice levels transition ring"},
		{mixed(t), "electrons.electrons=114", ""}, // what the filling asks for
		{mixed(t), "electrons.electrons=118", "band response phonon lattice levels transition ring"},
		{mixed(t), "electrons.filling=0.601", "band response phonon transition ring"}, // 114.19 electrons: still 114
		{mixed(t), "electrons.hopping=0.3", "band response phonon lattice levels transition ring"},
		{mixed(t), "electrons.next_hopping=0.01", "band response phonon lattice levels transition ring"},
		{mixed(t), "electrons.spin=1", "band response phonon lattice levels transition ring"},
		{mixed(t), "bond_phonon.coupling=0.7", "phonon lattice levels transition"},
		{mixed(t), "site_phonon.stiffness=1.1", "phonon lattice levels transition"},
		{mixed(t), "bond_phonon.frequency=0.02", "phonon"},
		{mixed(t), "site_phonon.frequency=0", "phonon"},
		{mixed(t), "bond_phonon=off", "phonon lattice levels transition"},
	} {
		t.Run(turn.assignments, func(t *testing.T) {
			after, err := model.SetAll(turn.chain, strings.Fields(turn.assignments))
			if err != nil {
				t.Fatal(err)
			}
			var redone []string
			for _, stage := range study.Stages() {
				if stage != "doubts" && !study.SameInputs(stage, turn.chain, after) {
					redone = append(redone, stage)
				}
			}
			if !slices.Equal(redone, strings.Fields(turn.redone)) {
				t.Errorf("redone: %v, expected %s", redone, turn.redone)
			}
		})
	}
}

func mixed(t *testing.T) model.Chain {
	t.Helper()
	c, err := presets.Get("mixed")
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// The doubts are weighed in every study, also where nothing else is done.
func TestDoubtsAreAlwaysWeighed(t *testing.T) {
	c := mixed(t)
	before := portraitOf(t, c)
	c.Title = "under another name"
	after, err := study.Run(context.Background(), c, study.Settings{Previous: before})
	if err != nil {
		t.Fatal(err)
	}
	if after.Chain != c || !after.Complete || len(after.Doubts) == 0 || &after.Doubts[0] == &before.Doubts[0] {
		t.Error("the doubts are those of the earlier portrait")
	}
	if d := difference(before.Doubts, after.Doubts); d != "" {
		t.Error(d)
	}
}

// Levels that were found for a plot only are not taken for all of them, nor the
// other way round.
func TestSampledLevelsAreNotTakenForAll(t *testing.T) {
	c := mixed(t)
	const few = 40
	sampled, err := study.Run(context.Background(), c, study.Settings{Levels: few})
	if err != nil {
		t.Fatal(err)
	}
	all, err := study.Run(context.Background(), c, study.Settings{Previous: sampled})
	if err != nil {
		t.Fatal(err)
	}
	if n := len(sampled.Levels.Energy); n > few || n < few/2 {
		t.Errorf("%d levels instead of about %d", n, few)
	}
	if d := difference(portraitOf(t, c).Levels, all.Levels); d != "" {
		t.Errorf("all levels, after some: %s", d)
	}
	again, err := study.Run(context.Background(), c, study.Settings{Previous: all, Levels: few})
	if err != nil {
		t.Fatal(err)
	}
	if d := difference(sampled.Levels, again.Levels); d != "" {
		t.Errorf("some levels, after all: %s", d)
	}
	for i, k := range sampled.Levels.K { // to half a dot of a plot
		j := slices.Index(all.Levels.K, k)
		if j < 0 {
			t.Fatalf("no level stands at %g", k)
		}
		width := all.Levels.Energy[c.Sites-1] - all.Levels.Energy[0]
		near := min(math.Abs(all.Levels.Energy[j]-sampled.Levels.Energy[i]), math.Abs(all.Levels.Energy[min(j+1, c.Sites-1)]-sampled.Levels.Energy[i])) // ±k stand at one place
		if near > 1e-3*width {
			t.Errorf("level at %g is %g, expected %g", k, sampled.Levels.Energy[i], all.Levels.Energy[j])
		}
	}
}

// The number of cores changes no number.
func TestCoresChangeNothing(t *testing.T) {
	c := mixed(t)
	c.Sites = 50
	one := portraitOf(t, c)
	four, err := study.Run(context.Background(), c, study.Settings{Jobs: 4})
	if err != nil {
		t.Fatal(err)
	}
	four.Seconds = one.Seconds
	if d := difference(one, four); d != "" {
		t.Error(d)
	}
}

// From an earlier lattice a turned knob leads to the state that a study from
// nothing finds, or to a lower one.
func TestTurnedKnobEndsAsLow(t *testing.T) {
	for _, name := range []string{"polyene", "quarter", "tetramer", "mixed", "doped", "soliton"} {
		c, err := presets.Get(name)
		if err != nil {
			t.Fatal(err)
		}
		before := portraitOf(t, c)
		for _, assignments := range [][]string{{"temperature=0.3 meV"}, {"hopping=" + param(t, "hopping").Format(c) + "1"}} {
			turned, err := model.SetAll(c, assignments)
			if err != nil {
				t.Fatal(err)
			}
			after, err := study.Run(context.Background(), turned, study.Settings{Previous: before})
			if err != nil {
				t.Fatal(err)
			}
			higher := (after.Lattice.FreeEnergy - portraitOf(t, turned).Lattice.FreeEnergy) / float64(c.Sites)
			if !after.Lattice.Converged || higher > 1e-10 {
				t.Errorf("%s, %v: converged %v, %g per site higher", name, assignments, after.Lattice.Converged, higher)
			}
		}
	}
}

// An earlier lattice is a start for a chain of the same shape only.
func TestEarlierLatticeIsOneMoreStart(t *testing.T) {
	c := halfFilledRing(true, 60, 0.4)
	before := portraitOf(t, c)
	c.Temperature = 0.01
	after, err := study.Run(context.Background(), c, study.Settings{Previous: before})
	if err != nil {
		t.Fatal(err)
	}
	started := func(p *study.Portrait) bool {
		return slices.ContainsFunc(p.Lattice.Tried, func(a relax.Attempt) bool { return a.Name == "previous" })
	}
	if !started(after) || started(portraitOf(t, c)) {
		t.Error("the earlier lattice should be a start of the later study, and of that only")
	}
	c.Sites = 62
	longer, err := study.Run(context.Background(), c, study.Settings{Previous: before})
	if err != nil {
		t.Fatal(err)
	}
	if started(longer) {
		t.Error("a lattice of 60 sites should not be a start for 62")
	}
}
