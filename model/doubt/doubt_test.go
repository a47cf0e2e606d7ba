package doubt

import (
	"math"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"example.org/twokf/model"
	"example.org/twokf/model/fermi"
	"example.org/twokf/model/relax"
)

// sound is the evidence of a chain that nothing can be said against but that it
// is one-dimensional: a ring of 200 sites, half filled, t = 1, λ = 0.4 in the
// bonds, whose hoppings alternate by |αb| = 0.2 t.
func sound() Evidence {
	l := &relax.Lattice{
		Residual: 1e-10, Tolerance: 1e-9, Converged: true, Curvature: 0.4,
		Stretch: alternating(200, 0.2), Displacement: alternating(200, 0.1),
		Electrons: fermi.State{Highest: -0.4, Lowest: 0.4},
	}
	return Evidence{
		Chain: model.Chain{Sites: 200, Hopping: 1, Spin: 2, Filling: 1, Bond: model.Phonon{Present: true, Coupling: 1, Stiffness: 10 / math.Pi, Frequency: 0.02}},

		Velocity: 2, HasPhonon: true, Softest: 0.1, SoftestQ: math.Pi,
		Lattice: l, Gap: 0.8, Counted: true,
		CouplingBond: 0.4, WeakGap: 0.48, TransitionTemperature: 0.14,
	}
}

func alternating(n int, height float64) []float64 {
	x := make([]float64, n)
	for i := range x {
		x[i] = height
		if i%2 == 1 {
			x[i] = -height
		}
	}
	return x
}

// siteChain is the like with the pattern in a local mode.
func siteChain() Evidence {
	e := sound()
	e.Chain.Bond, e.Chain.Site = model.Phonon{}, model.Phonon{Present: true, Coupling: 1, Stiffness: 0.8, Frequency: 0.02}
	e.CouplingBond, e.CouplingSite = 0, 0.4
	e.Lattice.Stretch, e.Lattice.Displacement, e.Lattice.SiteMode = nil, nil, alternating(200, 0.4)
	return e
}

// undistorted is a ring that stays uniform.
func undistorted() Evidence {
	e := sound()
	e.Lattice.Stretch, e.Lattice.Displacement = alternating(200, 0), alternating(200, 0)
	e.Gap, e.Counted = 4*math.Sin(math.Pi/200), false
	return e
}

// cases are, for each doubt, evidence on either side of its limit.
var cases = []struct {
	doubt string
	where string
	make  func() Evidence
	// change moves the evidence to a part of the doubt's limit; raised is beyond it
	clear, raised func(*Evidence)
}{
	{"not_converged", "at the tolerance", sound,
		func(e *Evidence) { e.Lattice.Residual = 1e-9 },
		func(e *Evidence) { e.Lattice.Residual, e.Lattice.Converged = 1.001e-9, false }},
	{"not_a_minimum", "a saddle", sound,
		func(e *Evidence) { e.Lattice.Curvature = -1e-5 },
		func(e *Evidence) { e.Lattice.Curvature = -1.001e-5 }},
	{"open_shell", "a partly filled level", sound,
		func(*Evidence) {},
		func(e *Evidence) { e.Lattice.Electrons.OpenShell = true }},
	{"electron_number", "part of an electron", sound,
		func(e *Evidence) { e.Chain.Filling = 1 + 1e-13 }, // decimal fillings are not exact in binary
		func(e *Evidence) { e.Chain.Filling = 1 + 1e-6 }},
	{"electron_number", "given as a number", sound,
		func(e *Evidence) { e.Chain.ByNumber, e.Chain.Electrons, e.Chain.Filling = true, 199, 0 },
		func(e *Evidence) { e.Chain.Filling = 1.0 / 3 }},
	// spacing 2πv_F/N = 0.0628 on the ring of 200
	{"too_short_to_distort", "the infinite chain's gap against the spacing", undistorted,
		func(e *Evidence) { e.WeakGap = 0.063 },
		func(e *Evidence) { e.WeakGap = 0.062 }},
	{"too_short_to_distort", "half the spacing on an open chain", undistorted,
		func(e *Evidence) { e.WeakGap, e.Chain.Boundary = 0.032, model.Open },
		func(e *Evidence) { e.WeakGap, e.Chain.Boundary = 0.031, model.Open }},
	{"too_short_to_distort", "a pattern, however short", undistorted,
		func(e *Evidence) { e.WeakGap, e.Lattice.Stretch = 0.01, alternating(200, 1e-5) },
		func(e *Evidence) { e.WeakGap, e.Lattice.Stretch = 0.01, alternating(200, 1e-7) }}, // left over by the relaxation
	// N = 8ξ, ξ = v_F/Δ, on the ring and on the open chain
	{"level_spacing", "against the gap", sound,
		func(e *Evidence) { e.Gap = 2 * 0.0801 },
		func(e *Evidence) { e.Gap = 2 * 0.0799 }},
	{"level_spacing", "against the length", sound,
		func(e *Evidence) { e.Chain.Sites = 41 },
		func(e *Evidence) { e.Chain.Sites = 39 }},
	{"level_spacing", "against the length of an open chain", sound,
		func(e *Evidence) { e.Chain.Sites, e.Chain.Boundary = 41, model.Open },
		func(e *Evidence) { e.Chain.Sites, e.Chain.Boundary = 39, model.Open }},
	{"kinks_left", "one more than asked for", sound,
		func(e *Evidence) { e.Kinks, e.KinksDemanded = 2, 2 },
		func(e *Evidence) { e.Kinks, e.KinksDemanded = 3, 2 }},
	{"unstable_region", "Ω² = 0", sound,
		func(e *Evidence) { e.Softest = 0 },
		func(e *Evidence) { e.Softest = -1e-9 }},
	{"unstable_region", "χ diverges", sound,
		func(*Evidence) {},
		func(e *Evidence) { e.Softest = math.Inf(-1) }},
	{"linear_coupling", "0.3 of the hopping", sound,
		func(e *Evidence) { e.Lattice.Stretch = alternating(200, 0.3) },
		func(e *Evidence) { e.Lattice.Stretch = alternating(200, 0.3001) }},
	{"linear_coupling", "one bond is enough", sound,
		func(e *Evidence) { e.Lattice.Stretch[7] = 0.3 },
		func(e *Evidence) { e.Lattice.Stretch[7] = -0.3001 }},
	{"strong_coupling", "λ of both branches", sound,
		func(e *Evidence) { e.CouplingBond, e.CouplingSite = 0.35, 0.25 },
		func(e *Evidence) { e.CouplingBond, e.CouplingSite = 0.35, 0.2501 }},
	{"fast_lattice", "ħω/2Δ = 0.3 of the bond phonon", sound,
		func(e *Evidence) { e.Chain.Bond.Frequency = 0.3 * 0.8 },
		func(e *Evidence) { e.Chain.Bond.Frequency = 0.3001 * 0.8 }},
	{"fast_lattice", "ω(2kF) = ω(π) sin kF at quarter filling", sound,
		func(e *Evidence) { e.Chain.Filling, e.Chain.Bond.Frequency = 0.5, 0.2999*0.8*math.Sqrt2 },
		func(e *Evidence) { e.Chain.Filling, e.Chain.Bond.Frequency = 0.5, 0.3001*0.8*math.Sqrt2 }},
	{"fast_lattice", "ħω/2Δ = 0.3 of the site phonon", siteChain,
		func(e *Evidence) { e.Chain.Site.Frequency = 0.2999 * 0.8 },
		func(e *Evidence) { e.Chain.Site.Frequency = 0.3001 * 0.8 }},
	{"fast_lattice", "a phonon that electrons do not feel may be fast", siteChain,
		func(e *Evidence) { e.Chain.Bond = model.Phonon{Present: true, Stiffness: 1, Frequency: 5} },
		func(e *Evidence) {
			e.Chain.Bond = model.Phonon{Present: true, Coupling: 0.01, Stiffness: 1, Frequency: 5}
		}},
	// √(ħω/8K) = 0.05 = half of u = 0.1
	{"quantum_lattice", "zero-point motion of the bond phonon", sound,
		func(e *Evidence) { e.Chain.Bond.Frequency = 8 * e.Chain.Bond.Stiffness * 0.0499 * 0.0499 },
		func(e *Evidence) { e.Chain.Bond.Frequency = 8 * e.Chain.Bond.Stiffness * 0.0501 * 0.0501 }},
	// √(ħω/2K_s) = 0.2 = half of q = 0.4
	{"quantum_lattice", "zero-point motion of the site phonon", siteChain,
		func(e *Evidence) { e.Chain.Site.Frequency = 2 * 0.8 * 0.1999 * 0.1999 },
		func(e *Evidence) { e.Chain.Site.Frequency = 2 * 0.8 * 0.2001 * 0.2001 }},
	{"quantum_lattice", "a branch without a pattern has nothing to compare", siteChain,
		func(e *Evidence) {
			e.Chain.Bond = model.Phonon{Present: true, Coupling: 1, Stiffness: 4, Frequency: 0.1}
			e.Lattice.Stretch, e.Lattice.Displacement = alternating(200, 1e-10), alternating(200, 1e-10)
		},
		func(e *Evidence) {
			e.Chain.Bond = model.Phonon{Present: true, Coupling: 1, Stiffness: 4, Frequency: 0.1}
			e.Lattice.Stretch, e.Lattice.Displacement = alternating(200, 1e-4), alternating(200, 1e-4)
		}},
	{"first_order", "third filling", sound,
		func(e *Evidence) { e.Chain.Filling = 2.0/3 + 4e-6 },
		func(e *Evidence) { e.Chain.Filling = 2.0 / 3 }},
	{"first_order", "two thirds", sound,
		func(e *Evidence) { e.Chain.Filling = 4.0/3 - 4e-6 },
		func(e *Evidence) { e.Chain.Filling = 4.0/3 + 1e-9 }},
}

func TestEachDoubtAtItsLimit(t *testing.T) {
	for _, c := range cases {
		t.Run(c.doubt+"/"+c.where, func(t *testing.T) {
			inside, outside := c.make(), c.make()
			c.clear(&inside)
			c.raised(&outside)
			for _, x := range []struct {
				evidence Evidence
				want     Verdict
			}{{inside, Clear}, {outside, Raised}} {
				d, there := find(Weigh(x.evidence), c.doubt)
				if !there || d.Verdict != x.want {
					t.Errorf("weighed: %v, %v with %g against %g; expected %v", there, d.Verdict, d.Value, d.Limit, x.want)
				}
				plausible(t, d)
			}
		})
	}
}

// Every doubt has its cases, but for one dimension, which holds of every chain
// with a transition temperature.
func TestEveryDoubtHasCases(t *testing.T) {
	tested := map[string]bool{"one_dimension": true}
	for _, c := range cases {
		tested[c.doubt] = true
	}
	for _, name := range names(t) {
		if !tested[name] {
			t.Errorf("no case for %s", name)
		}
	}
}

// names returns the doubts in order of weight.
func names(t rapid.TB) []string {
	t.Helper()
	var out []string
	for _, e := range []Evidence{sound(), undistorted()} { // no evidence fits all
		for _, weigh := range checks {
			if d, ok := weigh(e); ok && !slices.Contains(out, d.Name) {
				out = append(out, d.Name)
			}
		}
	}
	if len(out) != len(checks) {
		t.Fatalf("%d checks, but names %v", len(checks), out)
	}
	return out
}

func find(ds []Doubt, name string) (Doubt, bool) {
	i := slices.IndexFunc(ds, func(d Doubt) bool { return d.Name == name })
	if i < 0 {
		return Doubt{}, false
	}
	return ds[i], true
}

// plausible holds a doubt against what is promised of each.
func plausible(t rapid.TB, d Doubt) {
	t.Helper()
	if math.IsNaN(d.Value) || math.IsNaN(d.Limit) || math.IsInf(d.Limit, 0) {
		t.Errorf("%s: %v against %v", d.Name, d.Value, d.Limit)
	}
	if d.Why == "" || strings.ContainsAny(d.Why, "\n%") || d.Source == "" {
		t.Errorf("%s: %q, source %q", d.Name, d.Why, d.Source)
	}
}

// A sound chain leaves just the doubt that it is one-dimensional, and without a
// transition temperature not even that.
func TestSoundChain(t *testing.T) {
	for _, e := range []Evidence{sound(), siteChain()} {
		for i, d := range Weigh(e) {
			if (d.Verdict == Raised) != (d.Name == "one_dimension") || (d.Verdict == Raised) != (i == 0) {
				t.Errorf("%s is %v, place %d", d.Name, d.Verdict, i)
			}
		}
		e.TransitionTemperature = 0
		if _, there := find(Weigh(e), "one_dimension"); there {
			t.Error("one dimension is no doubt about a chain without T_P")
		}
	}
}

// What is not known is not doubted: of a chain alone there is just its electron
// number.
func TestUnknownIsNotDoubted(t *testing.T) {
	got := Weigh(Evidence{Chain: sound().Chain, Gap: math.NaN()})
	if len(got) != 1 || got[0].Name != "electron_number" {
		t.Errorf("%v", got)
	}
	e := sound()
	e.Gap, e.Lattice.Curvature = math.NaN(), math.NaN() // no level above, curvature not found
	for _, name := range []string{"not_a_minimum", "level_spacing", "fast_lattice"} {
		if _, there := find(Weigh(e), name); there {
			t.Errorf("%s is weighed without its number", name)
		}
	}
	e = sound()
	e.Lattice.Electrons.OpenShell = true
	if _, there := find(Weigh(e), "level_spacing"); there {
		t.Error("a level inside the gap says nothing about the length")
	}
	e = undistorted()
	e.Chain.Temperature = 2 * e.TransitionTemperature
	if _, there := find(Weigh(e), "too_short_to_distort"); there {
		t.Error("above T_P no chain distorts")
	}
}

// The reasons tell the cases apart.
func TestReasons(t *testing.T) {
	for _, x := range []struct {
		doubt  string
		change func(*Evidence)
		want   string
	}{
		{"electron_number", func(e *Evidence) { e.Chain.Sites, e.Chain.Filling = 100, 0.333 }, "asks for 33.3 electrons on 100 sites; the finite chain holds 33"},
		{"electron_number", func(*Evidence) {}, "whole number"},
		{"open_shell", func(*Evidence) {}, "every level at the Fermi energy is full or empty"},
		{"open_shell", func(e *Evidence) { e.Lattice.Electrons.OpenShell = true }, "only partly filled"},
		{"unstable_region", func(e *Evidence) { e.Softest, e.SoftestQ = -0.5, math.Pi/2 }, "at q = 0.500 π;"},
		{"unstable_region", func(e *Evidence) { e.Softest = math.Inf(-1) }, "at q = 1.000 π (χ diverges there at T = 0)"},
		{"linear_coupling", func(e *Evidence) { e.Lattice.Stretch[3] = -1.1 }, "only while this is small"},
		{"linear_coupling", func(e *Evidence) { e.Lattice.Stretch[3] = 1.1 }, "changed its sign"},
	} {
		e := sound()
		x.change(&e)
		if d, there := find(Weigh(e), x.doubt); !there || !strings.Contains(d.Why, x.want) {
			t.Errorf("%s says %q, expected %q", x.doubt, d.Why, x.want)
		}
	}
}

// Raised doubts come first, and in both groups those that weigh more come
// before those that weigh less.
func TestOrder(t *testing.T) {
	order := names(t)
	rapid.Check(t, func(t *rapid.T) {
		e := rapid.SampledFrom([]func() Evidence{sound, siteChain, undistorted}).Draw(t, "evidence")()
		for _, c := range rapid.SliceOfN(rapid.SampledFrom(cases), 0, 8).Draw(t, "changes") {
			if c.make().Lattice.Stretch != nil == (e.Lattice.Stretch != nil) {
				c.raised(&e)
			}
		}
		last, lastRaised := -1, true
		for _, d := range Weigh(e) {
			plausible(t, d)
			at, raised := slices.Index(order, d.Name), d.Verdict == Raised
			if raised && !lastRaised {
				t.Errorf("%s is raised behind a clear one", d.Name)
			}
			if raised == lastRaised && at <= last {
				t.Errorf("%s comes behind %s", d.Name, order[last])
			}
			last, lastRaised = at, raised
		}
	})
}

// Numbers at the ends of what a chain may have do not make a doubt's number
// meaningless.
func TestWildEvidence(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		number := rapid.OneOf(rapid.Just(0.0), rapid.SampledFrom([]float64{model.MinMagnitude, 1, model.MaxMagnitude, 1e-300}))
		stiffness := rapid.SampledFrom([]float64{model.MinMagnitude, 1, model.MaxMagnitude})
		e := rapid.SampledFrom([]func() Evidence{sound, siteChain, undistorted}).Draw(t, "evidence")()
		c := &e.Chain
		c.Sites, c.Hopping = rapid.IntRange(1, 5).Draw(t, "sites"), number.Draw(t, "hopping")
		for _, branch := range []*model.Phonon{&c.Bond, &c.Site} {
			if branch.Present {
				branch.Coupling, branch.Stiffness, branch.Frequency = number.Draw(t, "coupling"), stiffness.Draw(t, "stiffness"), number.Draw(t, "frequency")
			}
		}
		e.Velocity, e.WeakGap, e.TransitionTemperature = number.Draw(t, "velocity"), number.Draw(t, "weak gap"), number.Draw(t, "T_P")
		e.Gap = rapid.OneOf(number, rapid.Just(math.NaN())).Draw(t, "gap")
		e.Softest = rapid.OneOf(number, rapid.Just(math.Inf(-1))).Draw(t, "softest")
		for _, d := range Weigh(e) {
			plausible(t, d)
		}
	})
}

func TestVerdictInWords(t *testing.T) {
	if Raised.String() != "raised" || Clear.String() != "clear" {
		t.Errorf("%v, %v", Raised, Clear)
	}
}
