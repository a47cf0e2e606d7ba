package presets

import (
	"fmt"
	"io/fs"
	"math"
	"regexp"
	"strings"
	"testing"
	"unicode/utf8"

	"example.org/twokf/model"
)

func TestEveryFileIsListedOnce(t *testing.T) {
	found, err := fs.Glob(files, "*.toml")
	if err != nil {
		t.Fatal(err)
	}
	listed := map[string]bool{}
	for _, p := range List() {
		if listed[p.Name] {
			t.Errorf("%s is listed twice", p.Name)
		}
		listed[p.Name] = true
	}
	for _, file := range found {
		if !listed[strings.TrimSuffix(file, ".toml")] {
			t.Errorf("%s is not listed", file)
		}
	}
	if len(found) != len(listed) {
		t.Errorf("%d files, %d presets", len(found), len(listed))
	}
}

func TestPresetsAreCompleteAndOfBenchSize(t *testing.T) {
	word := regexp.MustCompile(`^[a-z]{3,12}$`)
	for _, p := range List() {
		switch {
		case !word.MatchString(p.Name):
			t.Errorf("%q is not a short lower-case word", p.Name)
		case p.Title == "" || p.Title != p.Chain.Title:
			t.Errorf("%s: title %q", p.Name, p.Title)
		case !strings.HasSuffix(p.About, ".") || strings.ContainsAny(p.About, "\n#") || utf8.RuneCountInString(p.About) > 100:
			t.Errorf("%s: %q is not one short sentence", p.Name, p.About)
		case p.Chain.Sites < 60 || p.Chain.Sites > 400:
			t.Errorf("%s has %d sites", p.Name, p.Chain.Sites)
		case !p.Chain.Bond.Active() && !p.Chain.Site.Active():
			t.Errorf("%s has no coupling", p.Name)
		}
		if published := strings.Contains(p.Chain.Source, "Phys. Rev."); !published && p.Chain.Source != "invented" {
			t.Errorf("%s: source %q", p.Name, p.Chain.Source)
		}
		raw, err := Raw(p.Name)
		if err != nil {
			t.Fatal(err)
		}
		for _, word := range []string{"# Couplings: ", "\n# Doubts to expect: "} {
			if !strings.Contains(string(raw), word) {
				t.Errorf("%s: no %q", p.Name, word)
			}
		}
		for _, line := range strings.Split(string(raw), "\n") {
			if n := utf8.RuneCountInString(line); n > 100 {
				t.Errorf("%s: a line of %d characters", p.Name, n)
			}
		}
	}
}

// A preset as the program would write it is the same chain.
func TestPresetsSurviveRewriting(t *testing.T) {
	for _, p := range List() {
		if back, err := model.Decode(model.Encode(p.Chain), p.Name); err != nil || back != p.Chain {
			t.Errorf("%s came back as %+v, %v", p.Name, back, err)
		}
	}
}

func TestPresetsHoldWholeClosedShells(t *testing.T) {
	for _, p := range List() {
		n, rounding := p.Chain.Count()
		if rounding != 0 {
			t.Errorf("%s asks for part of an electron: off by %g", p.Name, rounding)
		}
		if p.Chain.Boundary == model.Open {
			continue
		}
		if perSpin := n / p.Chain.Spin; n%p.Chain.Spin != 0 || perSpin%2 == 0 {
			t.Errorf("%s: %d electrons on a ring, %d spin states: an open shell", p.Name, n, p.Chain.Spin)
		}
	}
}

// Dimensionless couplings by their definition, with v_F = 2t sin(π f):
//
//	site: g_s g²/(2π v_F K_s),   bond: 4 g_s α²/(2π v_F K),   both doubled at half filling
//
// (closed form: the coefficient of the logarithm in the static response).
func couplings(c model.Chain, f float64) (bond, site float64) {
	per := float64(c.Spin) / (2 * math.Pi * 2 * c.Hopping * math.Sin(math.Pi*f))
	if f == 0.5 {
		per *= 2
	}
	if c.Bond.Present {
		bond = 4 * per * c.Bond.Coupling * c.Bond.Coupling / c.Bond.Stiffness
	}
	if c.Site.Present {
		site = per * c.Site.Coupling * c.Site.Coupling / c.Site.Stiffness
	}
	return bond, site
}

func TestCouplingsAreWhatTheCommentsClaim(t *testing.T) {
	for _, p := range List() {
		f := p.Chain.BandFilling()
		if p.Name == "doped" { // its comment speaks of the chain before doping
			f = 0.5
		}
		bond, site := couplings(p.Chain, f)
		var claims []string
		if bond != 0 {
			claims = append(claims, fmt.Sprintf("λ_b = %.2f", bond))
		}
		if site != 0 {
			claims = append(claims, fmt.Sprintf("λ_s = %.2f", site))
		}
		raw, err := Raw(p.Name)
		if err != nil {
			t.Fatal(err)
		}
		claim := "# Couplings: " + strings.Join(claims, ", ")
		if !strings.Contains(string(raw), claim) {
			t.Errorf("%s does not say %q", p.Name, claim)
		}
		if total := bond + site; p.Name != "weak" && (total < 0.24 || total > 0.5) {
			t.Errorf("%s has λ = %.3f", p.Name, total)
		}
	}
}

func TestPolyeneHasThePublishedValues(t *testing.T) {
	c, err := Get("polyene")
	if err != nil {
		t.Fatal(err)
	}
	// W. P. Su, J. R. Schrieffer, A. J. Heeger, Phys. Rev. B 22, 2099 (1980); from memory.
	if c.Hopping != 2.5 || c.Bond.Coupling != 4.1 || c.Bond.Stiffness != 21 || c.Spacing != 1.22 || c.Spin != 2 || c.Filling != 1 {
		t.Errorf("polyene is %+v", c)
	}
	// λ by an independent computation, numpy/mpmath.
	if bond, _ := couplings(c, 0.5); math.Abs(bond-0.407679176133) > 1e-12 {
		t.Errorf("λ = %.12f, want 0.407679176133", bond)
	}
	// 2ħ√(K/M) of a CH group: ħ, u and e from CODATA 2018, standard atomic weights
	// 12.011 and 1.008 (IUPAC), all from memory.
	const hbar, u, e = 6.582119569e-16, 1.66053906660e-27, 1.602176634e-19 // eV s, kg, C
	want := 2 * hbar * math.Sqrt(21*e/1e-20/((12.011+1.008)*u))
	if math.Abs(c.Bond.Frequency-want) > 0.0005 {
		t.Errorf("ħω = %g eV, want %.4f eV", c.Bond.Frequency, want)
	}
}

// In weak the gap of the infinite chain, 4·(4t/e)·e^(−1/λ) for weak coupling at
// half filling (closed form), is far below the level spacing v_F 2π/N.
func TestWeakIsTooShortToDistort(t *testing.T) {
	c, err := Get("weak")
	if err != nil {
		t.Fatal(err)
	}
	bond, _ := couplings(c, 0.5)
	gap := 16 * c.Hopping / math.E * math.Exp(-1/bond)
	spacing := 2 * c.Hopping * 2 * math.Pi / float64(c.Sites)
	if gap > spacing/20 {
		t.Errorf("a gap of %.4f eV against a level spacing of %.4f eV", gap, spacing)
	}
	if math.Abs(gap-0.002) > 0.0005 || math.Abs(spacing-0.061) > 0.0005 {
		t.Errorf("the comment says 2 and 61 meV; they are %.1f and %.1f meV", 1000*gap, 1000*spacing)
	}
}

func TestUnknownPresetsHaveAHint(t *testing.T) {
	const want = `there is no preset "polyen"; the nearest is polyene, and all are polyene, half, quarter, trimer, tetramer, sliding, spinless, mixed, doped, soliton, weak`
	if _, err := Get("polyen"); err == nil || err.Error() != want {
		t.Errorf("Get says\n%v\nwant\n%s", err, want)
	}
	for _, name := range []string{"", "polyene.toml", "../presets/polyene", "POLYENE"} {
		if _, err := Raw(name); err == nil {
			t.Errorf("there is a preset %q", name)
		}
	}
}

func ExampleList() {
	for _, p := range List()[:2] {
		n, _ := p.Chain.Count()
		fmt.Printf("%s: %d electrons on %d sites. %s\n", p.Name, n, p.Chain.Sites, p.About)
	}
	// Output:
	// polyene: 202 electrons on 202 sites. Half-filled bond chain: polyacetylene with the published values.
	// half: 162 electrons on 162 sites. Half-filled chain with a local mode on every site: a density wave of period two.
}
