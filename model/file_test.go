package model

import (
	"errors"
	"math"
	"strings"
	"testing"
	"testing/iotest"

	"github.com/pelletier/go-toml/v2"
	"pgregory.net/rapid"
)

func TestWritingAndReadingAFileLosesNothing(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := anyChain(t)
		file := Encode(c)
		back, err := Decode(file, "c.toml")
		if err != nil {
			t.Fatalf("%v in\n%s", err, file)
		}
		if back != c {
			t.Fatalf("wrote %+v\nread  %+v\n%s", c, back, file)
		}
		if math.Signbit(back.NextHopping) != math.Signbit(c.NextHopping) {
			t.Fatalf("the sign of next_hopping = %g was lost", c.NextHopping)
		}
	})
}

func TestLongestTitlesFitIntoAFile(t *testing.T) {
	c := polyacetylene
	c.Title, c.Source = strings.Repeat("\x00", MaxText), strings.Repeat("\u0001", MaxText)
	if back, err := Decode(Encode(c), "c.toml"); err != nil || back != c {
		t.Errorf("a title of %d escaped bytes: %v", MaxText, err)
	}
}

func TestFileAsPeopleWriteIt(t *testing.T) {
	const file = "\ufeff# a chain, saved on another system\r\n" + `
energy = "eV"
title = 'polyacetylene'
electrons = { filling = "3/3", hopping = "2500 meV" }   # in braces
chain.sites = 2_02
chain.spacing = "1.22 Å"
[bond_phonon]
stiffness = "8.4 t/Å^2"
coupling = "4.1 eV/Å"
`
	c, err := Decode([]byte(file), "c.toml")
	if err != nil {
		t.Fatal(err)
	}
	if c != polyacetylene {
		t.Errorf("read %+v\nwant %+v", c, polyacetylene)
	}
}

func TestWhatIsLeftOut(t *testing.T) {
	c, err := Decode([]byte("energy = \"t\"\nchain.sites = 8\nelectrons = { hopping = 1, electrons = 8 }\n"), "c.toml")
	if err != nil {
		t.Fatal(err)
	}
	want := Chain{Energy: UnitHopping, Sites: 8, Boundary: Ring, Hopping: 1, Spin: 2, ByNumber: true, Electrons: 8}
	if c != want {
		t.Errorf("read %+v\nwant %+v", c, want)
	}
}

func TestUnitsDoNotDependOnTheOrderOfTheFile(t *testing.T) {
	const file = `
conditions.temperature = "0.1 t"
electrons.next_hopping = "-100 meV"
electrons.filling = 1
electrons.hopping = "0.25 eV"
chain.sites = 10
energy = "eV"
`
	c, err := Decode([]byte(file), "c.toml")
	if err != nil {
		t.Fatal(err)
	}
	if c.Temperature != 0.025 || c.NextHopping != -0.1 {
		t.Errorf("T = %v eV, want 0.025; t2 = %v eV, want -0.1", c.Temperature, c.NextHopping)
	}
}

// Every line of a written file says what its number is in.
func TestWrittenFilesSayUnits(t *testing.T) {
	c := polyacetylene
	c.Bond.Frequency = 0.164
	file := string(Encode(c))
	for _, line := range []string{
		"spacing = 1.22 # Å; ", "hopping = 2.5 # eV; ", "coupling = 4.1 # eV/Å; ", "stiffness = 21.0 # eV/Å²; ",
		"frequency = 0.164 # eV; ", "temperature = 0.0 # eV; ", "sites = 202 # number of sites", "filling = 1.0 # electrons per site",
	} {
		if !strings.Contains(file, "\n"+line) {
			t.Errorf("no line %q in\n%s", line, file)
		}
	}
	c.Energy = UnitHopping
	if file := string(Encode(c)); !strings.Contains(file, "\nhopping = 2.5 # t; ") {
		t.Errorf("no unit t in\n%s", file)
	}
}

func TestReadReportsABrokenSource(t *testing.T) {
	_, err := Read(iotest.ErrReader(errors.New("the disk is gone")), "c.toml")
	if err == nil || err.Error() != "c.toml: the disk is gone" {
		t.Errorf("Read says %v", err)
	}
}

// The outline that finds the places of keys has the tables of the parameters.
func TestOutlineHasEveryTable(t *testing.T) {
	data, err := toml.Marshal(outline{})
	if err != nil {
		t.Fatal(err)
	}
	var outlined map[string]any
	if err := toml.Unmarshal(data, &outlined); err != nil {
		t.Fatal(err)
	}
	documented := map[string]bool{}
	for _, table := range tableDocs {
		documented[table.name] = true
	}
	if len(outlined) != len(documented) {
		t.Errorf("%d tables in the outline, %d documented", len(outlined), len(documented))
	}
	for _, p := range params {
		if table := p.table(); table != "" && (outlined[table] == nil || !documented[table]) {
			t.Errorf("no table %s", table)
		}
	}
}

func FuzzDecode(f *testing.F) {
	for _, tt := range badFiles {
		f.Add([]byte(tt.file))
	}
	f.Add(Encode(polyacetylene))
	f.Add([]byte(electronsHead + "[site_phonon]\ncoupling = \"0.2 t\"\nstiffness = 1\n"))
	f.Add([]byte("chain = []\nChain = 4\n"))
	f.Fuzz(func(t *testing.T, data []byte) {
		c, err := Decode(data, "c.toml")
		if err != nil {
			if msg := err.Error(); !strings.HasPrefix(msg, "c.toml") || strings.ContainsAny(msg, "\n\r\x00\x1b") {
				t.Fatalf("Decode(%q) says %q", data, msg)
			}
			return
		}
		if err := c.Validate(); err != nil {
			t.Fatalf("Decode(%q) gave an invalid chain: %v", data, err)
		}
		if back, err := Decode(Encode(c), "c.toml"); err != nil || back != c {
			t.Fatalf("%+v came back as %+v, %v", c, back, err)
		}
	})
}
