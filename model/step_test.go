package model

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

func TestTurnsOfAKnob(t *testing.T) {
	ring := polyacetylene
	ring.Site = Phonon{Present: true, Coupling: 0.95, Stiffness: 1}
	quarter := ring
	quarter.Sites, quarter.Filling = 164, 0.5
	open := ring
	open.Boundary, open.Sites = Open, 101
	byNumber := ring
	byNumber.ByNumber, byNumber.Filling, byNumber.Electrons = true, 0, 206
	oddFilling := ring
	oddFilling.Filling = 0.37 // 74.74 electrons
	meV := ring
	meV.Hopping = 0.02
	warm := ring
	warm.Temperature = 0.001

	tests := []struct {
		what  string
		chain Chain
		key   string
		turns int
		fine  bool
		want  float64
	}{
		{"the second digit", ring, "bond_phonon.coupling", 1, false, 4.2},
		{"several at once", ring, "bond_phonon.coupling", 10, false, 5.1},
		{"the third digit", ring, "bond_phonon.coupling", 1, true, 4.11},
		{"downwards", ring, "hopping", -1, false, 2.4},
		{"tens", ring, "bond_phonon.stiffness", 1, false, 22},
		{"into the next decade", ring, "site_phonon.coupling", 10, false, 1.5},
		{"a spring stays above zero", ring, "site_phonon.stiffness", -1, false, 0.99},
		{"temperature from zero", ring, "temperature", 1, false, 0.001},
		{"temperature from zero, finely", ring, "temperature", 1, true, 0.0001},
		{"temperature from zero of a narrow band", meV, "temperature", 1, false, 0.00001},
		{"temperature stops at zero", warm, "temperature", -3, false, 0},
		{"second hopping goes through zero", ring, "next_hopping", -2, false, -0.002},
		{"sites by closed shells of a half-filled ring", ring, "sites", 1, false, 206},
		{"sites by closed shells of a quarter-filled ring", quarter, "sites", -1, false, 156},
		{"sites of an open chain stay odd", open, "sites", 1, false, 103},
		{"sites one by one", ring, "sites", 1, true, 203},
		{"sites of a ring by number", byNumber, "sites", -1, false, 200},
		{"sites hold the electrons", byNumber, "sites", -1000, false, 104},
		{"sites stop at one", open, "sites", -1000, false, 1},
		{"sites stop at the largest", ring, "sites", 1 << 30, true, MaxSites},
		{"filling to the next closed shell of a ring", ring, "filling", 1, false, 206. / 202},
		{"filling of an open chain", open, "filling", -1, false, 99. / 101},
		{"filling by one electron", ring, "filling", 1, true, 203. / 202},
		{"filling becomes whole", oddFilling, "filling", 1, true, 76. / 202},
		{"filling stops when full", ring, "filling", 1000, true, 2},
		{"electrons to the next closed shell", byNumber, "electrons", -1, false, 202},
		{"electrons from a filling", ring, "electrons", 1, true, 203},
		{"the other boundary", ring, "boundary", 1, false, float64(Open)},
		{"twice the other boundary", ring, "boundary", -2, false, float64(Ring)},
		{"the other spin", ring, "spin", 1, false, 1},
		{"no spin holds more electrons than states", byNumber, "spin", 1, false, 2},
		{"the energy unit does not turn", ring, "energy", 1, false, float64(UnitEV)},
		{"no turn", ring, "hopping", 0, false, 2.5},
	}
	for _, tt := range tests {
		p := mustFind(t, tt.key)
		got := p.Step(tt.chain, tt.turns, tt.fine)
		if v := p.Get(got); v != tt.want {
			t.Errorf("%s: %s goes from %v to %v, want %v", tt.what, p.Key, p.Get(tt.chain), v, tt.want)
		}
	}
	if spinless := mustFind(t, "spin").Step(ring, 1, false); spinless.BandFilling() != ring.BandFilling() {
		t.Errorf("turning spin moves the band filling from %v to %v", ring.BandFilling(), spinless.BandFilling())
	}
	bare := polyacetylene
	if got := mustFind(t, "site_phonon.coupling").Step(bare, 1, false); got != bare {
		t.Errorf("a phonon that is not there was turned: %+v", got)
	}
}

// onKnob draws a chain as people make it: numbers of a few digits.
func onKnob(t *rapid.T) Chain {
	digits := func(name string) float64 {
		m := rapid.IntRange(1, 99999).Draw(t, name)
		return twelveDigits(float64(m)*math.Pow(10, float64(rapid.IntRange(-7, -1).Draw(t, name+" exponent"))), MinMagnitude)
	}
	c := anyChain(t)
	c.Spacing, c.Hopping, c.NextHopping, c.Temperature = digits("a"), digits("t"), -digits("t2"), digits("T")
	c.Bond = Phonon{Present: true, Coupling: digits("alpha"), Stiffness: digits("K"), Frequency: digits("hw")}
	c.Site = Phonon{Present: true, Coupling: digits("g"), Stiffness: digits("K_s"), Frequency: digits("hw_s")}
	c.Sites = rapid.IntRange(1, 2000).Draw(t, "N")
	n := rapid.IntRange(0, c.Spin*c.Sites).Draw(t, "n")
	if c.ByNumber {
		c.Electrons = n
	} else {
		c.Filling = float64(n) / float64(c.Sites)
	}
	return c
}

func TestTurningUpAndDownGivesTheSameChain(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := onKnob(t)
		turns := rapid.IntRange(-30, 30).Draw(t, "turns")
		fine := rapid.Bool().Draw(t, "fine")
		for _, p := range Params() {
			if !p.Turns() || !p.Given(c) {
				continue
			}
			there := p.Step(c, turns, fine)
			if err := there.Validate(); err != nil {
				t.Fatalf("%s turned to %s: %v", p.Key, p.Format(there), err)
			}
			if atLimit(p, there) {
				continue
			}
			if back := p.Step(there, -turns, fine); there != c && back != c {
				t.Fatalf("%s goes %s → %s → %s", p.Key, p.Format(c), p.Format(there), p.Format(back))
			}
		}
	})
}

// atLimit reports whether a turn may have been cut short.
func atLimit(p Param, c Chain) bool {
	v := p.Get(c)
	switch p.name() {
	case "sites", "filling", "electrons": // steps are left out whole, up to a shell from the limit
		n, _ := c.Count()
		return n < 4 || n > c.Spin*c.Sites-4 || c.Sites <= 24
	}
	return math.Abs(v) == MaxMagnitude || v == 0 || v == MinMagnitude
}

// Turning up never lowers a number, turning down never raises it.
func TestKnobsTurnTheRightWay(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := anyChain(t)
		turns := rapid.IntRange(1, 300).Draw(t, "turns")
		fine := rapid.Bool().Draw(t, "fine")
		for _, p := range Params() {
			if p.Kind == Word || p.Kind == Text || p.name() == "spin" {
				continue
			}
			before := p.Get(c)
			slack := math.Abs(before) * 1e-11 // twelve digits
			if p.name() == "filling" {
				slack = 1 / float64(c.Sites) // part of an electron
			}
			if up := p.Get(p.Step(c, turns, fine)); up < before-slack {
				t.Fatalf("%s turned up from %v to %v", p.Key, before, up)
			}
			if down := p.Get(p.Step(c, -turns, fine)); down > before+slack {
				t.Fatalf("%s turned down from %v to %v", p.Key, before, down)
			}
		}
	})
}
