package study_test

import (
	"testing"

	"example.org/twokf/model"
	"example.org/twokf/model/doubt"
	"example.org/twokf/presets"
)

// Each preset raises the doubts that its file announces, and not those that it
// was chosen to be free of.
func TestDoubtsOfPresets(t *testing.T) {
	for _, x := range []struct {
		preset, assignment string
		raised, clear      []string
	}{
		{"polyene", "", []string{"quantum_lattice", "one_dimension", "unstable_region"}, []string{"open_shell", "linear_coupling", "fast_lattice", "level_spacing"}},
		{"polyene", "sites=200", []string{"one_dimension"}, []string{"open_shell"}}, // the distortion splits the level at the Fermi energy
		{"polyene", "temperature=0.5", []string{"one_dimension"}, []string{"unstable_region"}},
		{"polyene", "filling=0.999", []string{"electron_number"}, nil},
		{"half", "", []string{"one_dimension"}, []string{"level_spacing", "quantum_lattice", "strong_coupling", "too_short_to_distort"}},
		{"half", "sites=46", []string{"level_spacing"}, nil},
		{"half", "site_phonon.coupling=0.7", []string{"strong_coupling"}, nil}, // λ = 0.62
		{"half", "site_phonon.frequency=50 meV", []string{"fast_lattice", "quantum_lattice"}, nil},
		{"trimer", "", []string{"first_order"}, []string{"open_shell"}},
		{"spinless", "", []string{"one_dimension"}, []string{"level_spacing", "quantum_lattice", "fast_lattice", "open_shell"}},
		{"soliton", "", []string{"open_shell"}, []string{"electron_number", "not_converged"}},
		{"weak", "", []string{"too_short_to_distort"}, []string{"open_shell"}},
		{"weak", "sites=60", nil, []string{"too_short_to_distort", "open_shell"}}, // 60 = 4·15: k_F is on the ring, and splits
		{"weak", "temperature=1 meV", nil, []string{"unstable_region"}},           // above T_P = 0.6 meV
		{"weak", "bond_phonon=off", nil, nil},
	} {
		c, err := presets.Get(x.preset)
		if err != nil {
			t.Fatal(err)
		}
		if x.assignment != "" {
			if c, err = model.Set(c, x.assignment); err != nil {
				t.Fatal(err)
			}
		}
		verdicts := map[string]doubt.Verdict{}
		for _, d := range portraitOf(t, c).Doubts {
			verdicts[d.Name] = d.Verdict
		}
		for _, name := range x.raised {
			if verdicts[name] != doubt.Raised {
				t.Errorf("%s %s: %s is not raised", x.preset, x.assignment, name)
			}
		}
		for _, name := range x.clear {
			if v, weighed := verdicts[name]; v != doubt.Clear || !weighed {
				t.Errorf("%s %s: %s is not cleared", x.preset, x.assignment, name)
			}
		}
		if x.assignment == "bond_phonon=off" {
			for name, v := range verdicts {
				if v == doubt.Raised {
					t.Errorf("without a phonon: %s", name)
				}
			}
		}
	}
}
