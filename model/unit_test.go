package model

import (
	"errors"
	"math"
	"strings"
	"testing"
)

// The reader works with the defining constants; the products it needs are listed
// in the CODATA 2018 table as exact decimals that do not end: Boltzmann constant
// in eV/K, Planck constant in eV/Hz, inverse metre–electron volt relationship
// (E. Tiesinga, P. J. Mohr, D. B. Newell, B. N. Taylor, Rev. Mod. Phys. 93,
// 025010 (2021); digits from memory).
func TestUnitConversionsAgreeWithCODATA(t *testing.T) {
	tests := []struct {
		what      string
		got, want float64
	}{
		{"k_B in eV/K", kelvinInEV, 8.617333262e-5},
		{"h in eV/THz", terahertzInEV, 4.135667696e-3},
		{"hc in eV cm", wavenumberInEV, 1.239841984e-4},
	}
	for _, tt := range tests {
		if math.Abs(tt.got/tt.want-1) > 3e-10 { // the table's tenth digit, cut
			t.Errorf("%s = %.12g, want %.10g", tt.what, tt.got, tt.want)
		}
	}
}

func TestNumbersWithUnits(t *testing.T) {
	inEV, inHopping := polyacetylene, polyacetylene
	inHopping.Energy = UnitHopping
	const k, thz, cm = 8.617333262e-5, 4.135667696e-3, 1.239841984e-4 // CODATA 2018, as above
	tests := []struct {
		chain Chain
		key   string
		text  string
		want  float64
	}{
		{inEV, "temperature", "300 K", 300 * k},
		{inEV, "temperature", "300K", 300 * k},
		{inEV, "temperature", "25 meV", 0.025},
		{inEV, "temperature", "4.1meV", 0.0041},
		{inEV, "temperature", "0.1 eV", 0.1},
		{inEV, "temperature", "0.3 t", 0.75},
		{inEV, "temperature", "1e-3", 1e-3},
		{inEV, "temperature", "1E-3 eV", 1e-3},
		{inEV, "temperature", " .5 ", 0.5},
		{inEV, "temperature", "5. eV", 5},
		{inEV, "temperature", "+1/4 t", 0.625},
		{inEV, "next_hopping", "-0.3 t", -0.75},
		{inEV, "next_hopping", "−0.3 t", -0.75},
		{inEV, "bond_phonon.frequency", "12 THz", 12 * thz},
		{inEV, "bond_phonon.frequency", "40 cm-1", 40 * cm},
		{inEV, "bond_phonon.frequency", "40 cm^-1", 40 * cm},
		{inEV, "bond_phonon.frequency", "40\u00a0cm⁻¹", 40 * cm},
		{inEV, "bond_phonon.coupling", "4.1 eV/Å", 4.1},
		{inEV, "bond_phonon.coupling", "4.1 eV/\u212b", 4.1},
		{inEV, "bond_phonon.coupling", "4.1 eV/A\u030a", 4.1},
		{inEV, "bond_phonon.coupling", "4100 meV / Ang", 4.1},
		{inEV, "bond_phonon.coupling", "2 t/A", 5},
		{inEV, "bond_phonon.stiffness", "21 eV/Å²", 21},
		{inEV, "bond_phonon.stiffness", "21 eV/A^2", 21},
		{inEV, "bond_phonon.stiffness", "21 eV/Ang2", 21},
		{inEV, "site_phonon.stiffness", "0.4 t", 1},
		{inEV, "spacing", "0.04 Å", 0.04},
		{inEV, "spacing", "0.04 angstrom", 0.04},
		{inHopping, "spacing", "0.04 A", 0.04},
		{inHopping, "temperature", "0.3 t", 0.3},
		{inHopping, "hopping", "2 t", 2},
		{inHopping, "bond_phonon.coupling", "0.4 t", 0.4},
		{inEV, "filling", "1/3", 1. / 3},
		{inEV, "filling", "pi/2", math.Pi / 2},
		{inEV, "filling", "π/2", math.Pi / 2},
		{inEV, "filling", "2*pi/5", 2 * math.Pi / 5},
		{inEV, "filling", "2π / 5", 2 * math.Pi / 5},
		{inEV, "filling", "0.5 pi", math.Pi / 2},
		{inEV, "sites", "4e2", 400},
	}
	for _, tt := range tests {
		p, err := FindParam(tt.key)
		if err != nil {
			t.Fatal(err)
		}
		got, err := p.read(tt.chain, tt.text)
		if err != nil || math.Abs(got-tt.want) > 3e-10*math.Abs(tt.want) {
			t.Errorf("%s = %q is %.12g %s, want %.12g (%v)", p.Key, tt.text, got, p.Unit(tt.chain), tt.want, err)
		}
	}
}

func TestNumbersThatAreRefused(t *testing.T) {
	inHopping := polyacetylene
	inHopping.Energy = UnitHopping
	tests := []struct {
		chain          Chain
		key, text, why string
	}{
		{inHopping, "temperature", "300 K", "laboratory units need a chain in eV, and this one counts energies in t"},
		{inHopping, "hopping", "2.5 eV", "laboratory units need a chain in eV, and this one counts energies in t"},
		{inHopping, "bond_phonon.stiffness", "21 eV/Å²", "laboratory units need a chain in eV, and this one counts energies in t"},
		{polyacetylene, "hopping", "0.3 t", "t is this very number"},
		{polyacetylene, "filling", "1 K", "this number has no unit"},
		{polyacetylene, "temperature", "300 k", "small and capital letters differ, write K"},
		{polyacetylene, "temperature", "300 furlong", `the unit "furlong" is not one of these`},
		{polyacetylene, "temperature", "1 2", `the unit "2" is not one of these`},
		{polyacetylene, "temperature", "0x10", `the unit "x10" is not one of these`},
		{polyacetylene, "temperature", "1_000 K", `the unit "_000 K" is not one of these`},
		{polyacetylene, "temperature", "", "there is no number"},
		{polyacetylene, "temperature", "-", "there is no number"},
		{polyacetylene, "temperature", "K", `"K" is not a number`},
		{polyacetylene, "temperature", "--3", `"-3" is not a number`},
		{polyacetylene, "temperature", "pint", `"pint" is not a number`},
		{polyacetylene, "temperature", "nan", "only finite numbers are accepted"},
		{polyacetylene, "temperature", "NaN eV", "only finite numbers are accepted"},
		{polyacetylene, "temperature", "-Infinity", "only finite numbers are accepted"},
		{polyacetylene, "temperature", "1e999", "the number is too large"},
		{polyacetylene, "temperature", "1e308*pi", "the number is too large"},
		{polyacetylene, "temperature", "1/1e-320", "the number is too large"},
		{polyacetylene, "temperature", "1e-999", "the number is too small to be told from zero"},
		{polyacetylene, "temperature", "1e-300/1e300", "the number is too small to be told from zero"},
		{polyacetylene, "temperature", "1/0", "nothing can be divided by zero"},
		{polyacetylene, "temperature", "2*3", "only pi may follow a *"},
		{polyacetylene, "temperature", "1/2/3", `the unit "/3" is not one of these`},
		{polyacetylene, "temperature", "0,3 eV", "decimals are written with a point"},
		{polyacetylene, "temperature", strings.Repeat("1", 201), "a number has at most 200 characters"},
	}
	for _, tt := range tests {
		p, err := FindParam(tt.key)
		if err != nil {
			t.Fatal(err)
		}
		got, err := p.Parse(tt.chain, tt.text)
		var bad *ParamError
		if !errors.As(err, &bad) || bad.Why != tt.why || bad.Key != p.Key {
			t.Errorf("%s = %q is refused with %v, want %q", p.Key, tt.text, err, tt.why)
		}
		if got != tt.chain {
			t.Errorf("%s = %q changed the chain", p.Key, tt.text)
		}
	}
}

func FuzzQuantity(f *testing.F) {
	for _, s := range []string{"300 K", "25 meV", "0.3 t", "12 THz", "40 cm-1", "0.04 Å", "pi/2", "π/2", "1/3", "2*pi/5", "1e-3", "4.1 eV/Å", "21 eV/A^2", "-1e308*pi", "nan", "inf", "1e999", "1/0", "−5", "2pi", "\u212b", "1/", "*"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		value, unit, err := readQuantity(text)
		if err != nil {
			return
		}
		if math.IsNaN(value) || math.IsInf(value, 0) {
			t.Fatalf("readQuantity(%q) = %v", text, value)
		}
		if unit != strings.TrimSpace(unit) {
			t.Fatalf("readQuantity(%q) has the unit %q", text, unit)
		}
		again, none, err := readQuantity(plain(value))
		if err != nil || none != "" || again != value {
			t.Fatalf("%q is %v, which is written as %q and read as %v %q, %v", text, value, plain(value), again, none, err)
		}
	})
}
