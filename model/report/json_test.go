package report_test

import (
	"bytes"
	"encoding/json"
	"io"
	"maps"
	"math"
	"slices"
	"strings"
	"testing"

	"example.org/twokf/model"
	"example.org/twokf/model/report"
	"example.org/twokf/model/study"
)

type document struct {
	Chain   map[string]any
	Answers map[string]struct {
		Value *float64
		Unit  *string
	}
	Curves map[string]map[string][]*float64
	Sites  map[string][]*float64
	Doubts []map[string]any
	Solver map[string]any
	Top    map[string]json.RawMessage `json:"-"`
}

// decoded writes the JSON report and reads it back as any program would.
func decoded(t *testing.T, p *study.Portrait) document {
	t.Helper()
	var out bytes.Buffer
	if err := report.JSON(&out, p); err != nil {
		t.Fatal(err)
	}
	if text := out.String(); strings.Count(text, "\n") != 1 || !strings.HasSuffix(text, "\n") {
		t.Error("expected one line")
	}
	var d document
	dec := json.NewDecoder(bytes.NewReader(out.Bytes()))
	if err := dec.Decode(&d); err != nil {
		t.Fatal(err)
	}
	if _, err := dec.Token(); err != io.EOF {
		t.Errorf("expected one object and nothing behind it: %v", err)
	}
	if err := json.Unmarshal(out.Bytes(), &d.Top); err != nil {
		t.Fatal(err)
	}
	return d
}

func keys[V any](m map[string]V) string { return strings.Join(slices.Sorted(maps.Keys(m)), " ") }

// Answers of every chain, of every relaxed one, and those that come and go.
const (
	everywhere = "bond_order_amplitude chemical_potential condensation_energy_per_site density_amplitude electron_energy_per_site " +
		"energy_per_site fermi_wavevector lattice_energy_per_site ordering_wavevector susceptibility_peak_wavevector"
	metal   = " density_of_states fermi_velocity gap"
	bond    = " coupling_bond displacement_amplitude"
	site    = " coupling_site site_mode_amplitude"
	coupled = " coupling softest_wavevector transition_temperature"
	warm    = " softest_ratio susceptibility_peak" // finite
	shifted = " first_unstable_temperature first_unstable_wavevector"
)

// An answer is in the report exactly where it exists for the chain.
func TestWhichAnswersThereAre(t *testing.T) {
	for _, x := range []struct{ name, why, want string }{
		{"polyene", "χ(2kF) diverges at T = 0", everywhere + metal + bond + coupled + " kinks"},
		{"half", "warm: χ is finite", everywhere + metal + site + coupled + warm + " kinks"},
		{"trimer", "third filling: T_P is not the highest instability", everywhere + metal + site + coupled + warm + shifted},
		{"mixed", "all but kinks", everywhere + metal + bond + site + coupled + warm + shifted},
		{"spinless", "", everywhere + metal + site + coupled + " kinks"},
		{"soliton", "open", everywhere + metal + bond + coupled + " kinks"},
		{"no phonon", "no coupling, no displacement, no T_P", everywhere + metal + " susceptibility_peak"},
		{"phonon not coupled", "likewise, cold", everywhere + metal},
		{"empty", "no level below, no velocity, nothing diverges", everywhere + " site_mode_amplitude softest_ratio softest_wavevector susceptibility_peak"},
		{"two pairs", "2kF joins no Fermi points: no v_F, λ and T_P at 2kF", everywhere + " density_of_states displacement_amplitude gap softest_wavevector" + shifted},
		{"one open site", "no gap in a full band", everywhere + " susceptibility_peak"},
	} {
		t.Run(x.name, func(t *testing.T) {
			want := strings.Fields(x.want)
			slices.Sort(want)
			if got := keys(decoded(t, studied(t, x.name)).Answers); got != strings.Join(want, " ") {
				t.Errorf("%s\n got %s\nwant %s", x.why, got, strings.Join(want, " "))
			}
		})
	}
}

// Every name that is promised to users exists, and each answer has its unit.
func TestNamesAndUnits(t *testing.T) {
	units := map[string]string{ // of a chain in eV; "eV" stands for t on one in t
		"fermi_wavevector": "1/a", "ordering_wavevector": "1/a", "fermi_velocity": "eV·a", "density_of_states": "1/eV",
		"coupling_bond": "", "coupling_site": "", "coupling": "",
		"chemical_potential": "eV", "gap": "eV",
		"energy_per_site": "eV", "electron_energy_per_site": "eV", "lattice_energy_per_site": "eV", "condensation_energy_per_site": "eV",
		"displacement_amplitude": "Å", "site_mode_amplitude": "", "density_amplitude": "", "bond_order_amplitude": "",
		"susceptibility_peak_wavevector": "1/a", "susceptibility_peak": "1/eV",
		"softest_wavevector": "1/a", "softest_ratio": "", "transition_temperature": "eV",
		"first_unstable_temperature": "eV", "first_unstable_wavevector": "1/a", "kinks": "",
	}
	seen := map[string]bool{}
	for _, name := range allNames() {
		p := studied(t, name)
		for answer, a := range decoded(t, p).Answers {
			seen[answer] = true
			want, known := units[answer]
			if p.Chain.Energy == model.UnitHopping {
				want = strings.ReplaceAll(want, "eV", "t")
				if want == "Å" {
					want = "" // lengths have no unit either
				}
			}
			if !known || a.Unit == nil || *a.Unit != want {
				t.Errorf("%s of %s: known %v, unit %v, expected %q", answer, name, known, a.Unit, want)
			}
			if a.Value == nil {
				t.Errorf("%s of %s has no value", answer, name)
			}
		}
	}
	for name := range units {
		if !seen[name] {
			t.Errorf("no chain has %s", name)
		}
	}
}

// The answers in the file are the answers, to the last bit, in the order of the
// table where there is an order.
func TestAnswersRoundTrip(t *testing.T) {
	for _, name := range allNames() {
		p := studied(t, name)
		d := decoded(t, p)
		answers := report.Answers(p)
		if len(answers) != len(d.Answers) {
			t.Errorf("%s: %d answers, %d in the file", name, len(answers), len(d.Answers))
		}
		for _, a := range answers {
			if got := d.Answers[a.Name].Value; got == nil || *got != a.Value {
				t.Errorf("%s: %s = %v reads back as %v", name, a.Name, a.Value, got)
			}
			if math.IsNaN(a.Value) || math.IsInf(a.Value, 0) || a.About == "" || a.Symbol == "" || a.Grain < 0 {
				t.Errorf("%s: %+v", name, a)
			}
		}
	}
}

// The object has the promised parts with the promised keys.
func TestKeysOfTheReport(t *testing.T) {
	const (
		chi  = "bond mixed site wavevector"
		ring = "bond mixed ring_bond ring_mixed ring_site ring_wavevector site wavevector"
	)
	for _, x := range []struct{ name, chain, electrons, bond, site, chi, softening, sites, solver string }{
		{
			name: "polyene", chain: "boundary sites spacing", electrons: "electrons filling hopping next_hopping spin",
			bond: "coupling frequency stiffness", chi: ring, softening: "bare_bond lower ratio wavevector",
			sites: "bond_order density displacement stretch", solver: "converged iterations method residual seconds start starts tolerance",
		},
		{
			name: "mixed", chain: "boundary sites spacing", electrons: "electrons filling hopping next_hopping spin",
			bond: "coupling frequency stiffness", site: "coupling frequency stiffness", chi: ring, softening: "bare_bond bare_site lower ratio upper wavevector",
			sites: "bond_order density displacement site_mode stretch", solver: "converged iterations method residual seconds start starts tolerance",
		},
		{
			name: "two pairs", chain: "boundary sites", electrons: "electrons filling hopping next_hopping spin",
			bond: "coupling stiffness", chi: chi, softening: "ratio wavevector", // no masses
			sites: "bond_order density displacement stretch", solver: "converged iterations method residual seconds start starts tolerance",
		},
		{
			name: "no phonon", chain: "boundary sites", electrons: "electrons filling hopping next_hopping spin",
			chi: ring, sites: "bond_order density", solver: "converged iterations method residual seconds start tolerance",
		},
	} {
		t.Run(x.name, func(t *testing.T) {
			p := studied(t, x.name)
			d := decoded(t, p)
			same := func(what, got, want string) {
				t.Helper()
				if got != want {
					t.Errorf("%s: got %q, want %q", what, got, want)
				}
			}
			same("top", keys(d.Top), "answers chain curves doubts sites solver")
			part := func(name string) string { m, _ := d.Chain[name].(map[string]any); return keys(m) }
			same("chain.chain", part("chain"), x.chain)
			same("chain.electrons", part("electrons"), x.electrons)
			same("chain.bond_phonon", part("bond_phonon"), x.bond)
			same("chain.site_phonon", part("site_phonon"), x.site)
			same("chain.conditions", part("conditions"), "temperature")
			same("curves", keys(d.Curves), "bands softening susceptibility")
			same("bands", keys(d.Curves["bands"]), "energy level level_wavevector wavevector")
			same("susceptibility", keys(d.Curves["susceptibility"]), x.chi)
			same("softening", keys(d.Curves["softening"]), x.softening)
			same("sites", keys(d.Sites), x.sites)
			same("solver", keys(d.Solver), x.solver)
			for _, doubt := range d.Doubts {
				same("doubt", keys(doubt), "limit name source value verdict why")
				if v := doubt["verdict"]; v != "raised" && v != "clear" {
					t.Errorf("verdict %v", v)
				}
			}
		})
	}
}

// Curves are complete and those of one plot are equally long; only χ and what
// follows from it may be infinite, which JSON has no number for.
func TestCurves(t *testing.T) {
	for _, name := range allNames() {
		p := studied(t, name)
		d := decoded(t, p)
		for plot, curves := range d.Curves {
			for curve, values := range curves {
				of := "wavevector"
				for _, prefix := range []string{"level", "ring"} {
					if strings.HasPrefix(curve, prefix) {
						of = prefix + "_wavevector"
					}
				}
				if len(values) == 0 || len(values) != len(curves[of]) {
					t.Errorf("%s: %s.%s has %d values at %d wave vectors", name, plot, curve, len(values), len(curves[of]))
				}
				for i, v := range values {
					if v == nil && (plot == "bands" || strings.HasSuffix(curve, "wavevector") || strings.HasPrefix(curve, "bare")) {
						t.Errorf("%s: %s.%s[%d] is missing", name, plot, curve, i)
					}
				}
			}
		}
		for column, values := range d.Sites {
			want := p.Chain.Sites
			if p.Chain.Boundary == model.Open && (column == "bond_order" || column == "stretch") {
				want--
			}
			if len(values) != want || slices.Contains(values, nil) {
				t.Errorf("%s: %d values of %s on %d sites", name, len(values), column, p.Chain.Sites)
			}
		}
	}
	if v := decoded(t, studied(t, "polyene")).Curves["susceptibility"]["site"]; v[len(v)-1] != nil {
		t.Error("χ(π) of the half-filled chain is infinite at T = 0, so the file has null there")
	}
}

// The chain in the report is the one asked about, electrons counted.
func TestChainInTheReport(t *testing.T) {
	p := studied(t, "mixed")
	chain := decoded(t, p).Chain
	electrons := chain["electrons"].(map[string]any)
	if chain["title"] != p.Chain.Title || chain["energy"] != "eV" || electrons["filling"] != 0.6 || electrons["electrons"] != 114.0 ||
		chain["chain"].(map[string]any)["sites"] != 190.0 || chain["conditions"].(map[string]any)["temperature"] != p.Chain.Temperature {
		t.Errorf("%v", chain)
	}
}

// The solver's numbers are those of the relaxed lattice.
func TestSolverInTheReport(t *testing.T) {
	p := studied(t, "mixed")
	solver := decoded(t, p).Solver
	if solver["converged"] != true || solver["iterations"] != float64(p.Lattice.Iterations) || solver["residual"] != p.Lattice.Residual ||
		solver["seconds"] != p.Seconds || len(solver["starts"].([]any)) != len(p.Lattice.Tried) {
		t.Errorf("%v", solver)
	}
}

// A portrait under way has what it has: no part is invented, and nothing breaks.
func TestUnfinishedPortrait(t *testing.T) {
	whole := studied(t, "mixed")
	for name, p := range map[string]*study.Portrait{
		"nothing yet": {Chain: whole.Chain},
		"a band":      {Chain: whole.Chain, Band: whole.Band},
		"no lattice":  {Chain: whole.Chain, Band: whole.Band, Response: whole.Response, Phonon: whole.Phonon, Transition: whole.Transition},
		"trouble":     {Chain: whole.Chain, Troubles: []study.Trouble{{Stage: "lattice", Err: io.ErrUnexpectedEOF}}},
	} {
		d := decoded(t, p)
		if len(d.Answers) != len(report.Answers(p)) || len(d.Sites) != 0 || d.Solver["converged"] != false {
			t.Errorf("%s: answers %s, sites %s, solver %v", name, keys(d.Answers), keys(d.Sites), d.Solver)
		}
		var text bytes.Buffer
		if err := report.Text(&text, p); err != nil || text.Len() == 0 {
			t.Errorf("%s: %v", name, err)
		}
		if name == "trouble" && (!strings.Contains(string(d.Top["troubles"]), io.ErrUnexpectedEOF.Error()) || !strings.Contains(text.String(), "not done: lattice: "+io.ErrUnexpectedEOF.Error())) {
			t.Errorf("the trouble is not told: %s", text.String())
		}
	}
}

// A title with anything in it survives.
func TestTitlesSurviveJSON(t *testing.T) {
	p := *studied(t, "no phonon")
	p.Chain.Title = "a \"b\" <c> & \\ \x00\x1b\u2028 χ"
	if got := decoded(t, &p).Chain["title"]; got != p.Chain.Title {
		t.Errorf("%q", got)
	}
}

// An error of the writer is passed on.
func TestWriterErrors(t *testing.T) {
	p := studied(t, "no phonon")
	for name, write := range map[string]func(io.Writer, *study.Portrait) error{"JSON": report.JSON, "text": report.Text} {
		if err := write(full{}, p); err != io.ErrShortWrite {
			t.Errorf("%s: %v", name, err)
		}
	}
}

type full struct{}

func (full) Write([]byte) (int, error) { return 0, io.ErrShortWrite }
