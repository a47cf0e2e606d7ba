package study_test

import (
	"context"
	"math"
	"reflect"
	"regexp"
	"testing"
	"time"

	"pgregory.net/rapid"

	"example.org/twokf/model"
	"example.org/twokf/model/study"
)

// What may be infinite, or not a number, by the portrait's own documentation.
var (
	mayBeInfinite = regexp.MustCompile(`^\.(Band\.DensityOfStates|Response\.Peak|(Response|Ring)\.Chi\[\]\.\w+|Phonon\.Softest|` +
		`Phonon\.Branch\[\]\.(Ratio|BondRatio|SiteRatio|Lower|Upper)|Lattice\.Lattice\.Electrons\.(Highest|Lowest)|Doubts\[\]\.Value)$`)
	mayBeNaN = regexp.MustCompile(`^\.Lattice\.Gap$`)
)

// nothingOdd fails if a number of the portrait is not finite that should be.
func nothingOdd(t rapid.TB, p *study.Portrait) {
	t.Helper()
	var walk func(path string, v reflect.Value)
	walk = func(path string, v reflect.Value) {
		switch v.Kind() {
		case reflect.Float64:
			if x := v.Float(); math.IsNaN(x) && !mayBeNaN.MatchString(path) || math.IsInf(x, 0) && !mayBeInfinite.MatchString(path) {
				t.Errorf("%s is %v: %+v", path, x, p.Chain)
			}
		case reflect.Pointer:
			if !v.IsNil() {
				walk(path, v.Elem())
			}
		case reflect.Struct:
			for i := range v.NumField() {
				if f := v.Type().Field(i); f.IsExported() {
					walk(path+"."+f.Name, v.Field(i))
				}
			}
		case reflect.Slice, reflect.Array:
			for i := range v.Len() {
				walk(path+"[]", v.Index(i))
			}
		}
	}
	walk("", reflect.ValueOf(p))
}

// expectation is what an extreme chain must come to; a NaN stands for a number
// that does not exist.
type expectation struct {
	energy     float64 // free energy per site
	gap        float64
	transition float64
	undistort  bool // the lattice does not move
	open       bool // partly filled level
}

// Extreme but legal chains come to their limits. The expectations are closed
// forms, derived by hand, but for some T_P, which is that of a longer chain: it
// belongs to the infinite one.
func TestExtremeChains(t *testing.T) {
	none := math.NaN()
	set := func(c model.Chain, assignments ...string) model.Chain {
		t.Helper()
		c, err := model.SetAll(c, assignments)
		if err != nil {
			t.Fatal(err)
		}
		return c
	}
	const (
		open = "boundary=open"
		site = "site_phonon.coupling=1" // stiffness 1 with "on"
		bond = "bond_phonon.coupling=1"
		soft = "site_phonon.stiffness=0.1" // g²/K_s = 10 t
	)
	one := ring(1, 1, 2)
	two := ring(2, 2, 2)
	dimer := set(two, open, "site_phonon=on", site, "site_phonon.stiffness=0.25") // g²/K_s = 4t
	hot := set(ring(30, 30, 2), "temperature=1e6")
	flat := set(ring(20, 20, 2), "hopping=0")
	strong := set(ring(20, 20, 2), "site_phonon=on", "site_phonon.coupling=1000")
	secondNeighbours := set(ring(60, 60, 2), "hopping=0", "next_hopping=1") // two rings of 30 sites, 15 electrons per spin each
	nearestNeighbours := ring(30, 30, 2)
	undistorted := func(c model.Chain) float64 { // closed shell, E = −2t sin(πn/N)/sin(π/N) per spin
		n, _ := c.Count()
		N, g := float64(c.Sites), float64(c.Spin)
		return -2 * g * math.Sin(math.Pi*float64(n)/g/N) / math.Sin(math.Pi/N) / N
	}
	for _, x := range []struct {
		name  string
		chain model.Chain
		want  expectation
	}{
		{"one site on a ring is its own neighbour", one, expectation{energy: -2, transition: none, open: true, undistort: true}},
		{"one site on a ring, with t2", set(one, "next_hopping=0.3"), expectation{energy: -2.6, transition: none, open: true, undistort: true}},
		{"one open site", set(one, open), expectation{energy: 0, transition: none, open: true, undistort: true}},
		{"one full site", set(one, open, "electrons=2"), expectation{energy: 0, gap: none, transition: none, undistort: true}},
		{"one site with both phonons has nothing to modulate", set(one, "bond_phonon=on", bond, "site_phonon=on", site),
			expectation{energy: -2, transition: portraitOf(t, set(one, "bond_phonon=on", bond, "site_phonon=on", site, "sites=402", "filling=1")).Transition.Temperature, open: true, undistort: true}},
		{"two open sites", set(two, open), expectation{energy: -1, gap: 2, transition: none, undistort: true}},
		{"two sites on a ring have two bonds", two, expectation{energy: -2, gap: 4, transition: none, undistort: true}},
		{"two sites on a ring, whose stretches cancel", set(two, "bond_phonon=on", bond),
			expectation{energy: -2, gap: 4, transition: portraitOf(t, halfFilledRing(false, 10, 4/math.Pi)).Transition.Temperature, undistort: true}},
		{"two open sites, held at their length", set(two, open, "bond_phonon=on", bond),
			expectation{energy: -1, gap: 2, transition: portraitOf(t, halfFilledRing(false, 10, 4/math.Pi)).Transition.Temperature, undistort: true}},
		// E = −2√(t² + g²q²) + K_s q² over both sites, √ = g²/K_s
		{"two open sites that share unequally", dimer, expectation{energy: (-8 + 0.25*15) / 2, gap: 8, transition: portraitOf(t, set(dimer, "sites=10", "electrons=10")).Transition.Temperature}},
		{"an empty band", set(strong, "electrons=0"), expectation{energy: 0, gap: none, transition: none, undistort: true}},
		{"a full band", set(strong, "electrons=40"), expectation{energy: 0, gap: none, transition: none, undistort: true}},
		{"a full band, warm", set(strong, "electrons=40", "temperature=0.5"), expectation{energy: 0, gap: none, transition: none, undistort: true}},
		{"no hopping and no coupling", flat, expectation{energy: 0, transition: none, open: true, undistort: true}},
		{"no hopping, warm", set(flat, "temperature=0.5"), expectation{energy: -0.5 * 2 * math.Ln2, transition: none, undistort: true, open: true}},
		// every other site takes both electrons: E/N = −g²/2K_s, levels ±g²/K_s, T_P = g²/2K_s
		{"no hopping, local mode", set(flat, "site_phonon=on", site, soft), expectation{energy: -5, gap: 20, transition: 5}},
		{"a phonon without coupling", set(nearestNeighbours, "site_phonon=on", "bond_phonon=on"),
			expectation{energy: undistorted(nearestNeighbours), gap: 4 * math.Sin(math.Pi/30), transition: none, undistort: true}},
		{"huge coupling: as without hopping", strong, expectation{energy: -5e5, gap: 2e6, transition: 5e5}},
		{"huge temperature: only entropy", hot, expectation{energy: -1e6 * 2 * math.Ln2, gap: 4 * math.Sin(math.Pi/30) /* of the levels, whatever fills them */, transition: none, undistort: true}},
		{"t2 only: two chains", secondNeighbours, expectation{energy: undistorted(nearestNeighbours), gap: 4 * math.Sin(math.Pi/30), transition: none, undistort: true}},
	} {
		t.Run(x.name, func(t *testing.T) {
			p := portraitOf(t, x.chain)
			nothingOdd(t, p)
			near := func(what string, got, want float64) {
				t.Helper()
				if math.IsNaN(got) != math.IsNaN(want) || math.Abs(got-want) > 1e-9*math.Max(1, math.Abs(want)) {
					t.Errorf("%s is %.12g, expected %.12g", what, got, want)
				}
			}
			l := p.Lattice
			near("free energy per site", l.FreeEnergy/float64(x.chain.Sites), x.want.energy)
			near("gap", l.Gap, x.want.gap)
			temperature := math.NaN()
			if p.Transition != nil && p.Transition.Temperature > 0 {
				temperature = p.Transition.Temperature
			}
			near("transition temperature", temperature, x.want.transition)
			most := 0.0
			for _, v := range append(append([]float64{}, l.Stretch...), l.SiteMode...) {
				most = math.Max(most, math.Abs(v))
			}
			if undistorted := most < 1e-9; undistorted != x.want.undistort {
				t.Errorf("the largest distortion is %g", most)
			}
			if l.Electrons.OpenShell != x.want.open {
				t.Errorf("open shell: %v", l.Electrons.OpenShell)
			}
			if !l.Converged {
				t.Errorf("not converged: residual %g", l.Residual)
			}
		})
	}
}

// The two spin states of an electron only double what one does: at the same band
// filling, with twice the stiffness, the pattern is the same and every energy is
// twice as large.
func TestSpinOnlyDoubles(t *testing.T) {
	one := ring(42, 21, 1)
	one.Site = model.Phonon{Present: true, Coupling: 1, Stiffness: 0.5}
	one.Bond = model.Phonon{Present: true, Coupling: 1, Stiffness: 3}
	one.Temperature = 0.02
	both := one
	both.Spin, both.Electrons, both.Site.Stiffness, both.Bond.Stiffness = 2, 42, 1, 6
	p, q := portraitOf(t, one), portraitOf(t, both)
	for what, pair := range map[string][2]float64{
		"free energy":            {2 * p.Lattice.FreeEnergy, q.Lattice.FreeEnergy},
		"local mode":             {p.Lattice.SiteModeAmplitude, q.Lattice.SiteModeAmplitude},
		"displacement":           {p.Lattice.DisplacementAmplitude, q.Lattice.DisplacementAmplitude},
		"density":                {2 * p.Lattice.DensityAmplitude, q.Lattice.DensityAmplitude},
		"gap":                    {p.Lattice.Gap, q.Lattice.Gap},
		"transition temperature": {p.Transition.Temperature, q.Transition.Temperature},
		"λ":                      {p.Transition.CouplingSite, q.Transition.CouplingSite},
	} {
		if math.Abs(pair[0]-pair[1]) > 1e-8*math.Max(1, math.Abs(pair[1])) {
			t.Errorf("%s: %.12g and %.12g", what, pair[0], pair[1])
		}
	}
	if p.Lattice.SiteModeAmplitude < 0.1 {
		t.Error("this chain should be distorted")
	}
}

// Whatever a valid chain of a few sites asks for, there is an answer in finite
// time without a panic, every number is finite where it can be, and the
// electrons are all there.
func TestWildChainsAreAnswered(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := wildChain(12).Draw(t, "chain")
		ctx, cancel := context.WithTimeout(context.Background(), time.Minute)
		defer cancel()
		p, err := study.Run(ctx, c, study.Settings{})
		if err != nil {
			t.Fatalf("%v: %+v", err, c)
		}
		for _, trouble := range p.Troubles {
			t.Errorf("%s: %v: %+v", trouble.Stage, trouble.Err, c)
		}
		nothingOdd(t, p)
		n, _ := c.Count()
		held := 0.0
		for _, d := range p.Lattice.Electrons.Density {
			held += d
			if d < -1e-8 || d > float64(c.Spin)+1e-8 {
				t.Errorf("density %g: %+v", d, c)
			}
		}
		if math.Abs(held-float64(n)) > 1e-8*float64(c.Sites) {
			t.Errorf("%.10g electrons instead of %d: %+v", held, n, c)
		}
	})
}
