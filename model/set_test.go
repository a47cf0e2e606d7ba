package model

import "testing"

func TestAssignments(t *testing.T) {
	with := func(change func(*Chain)) Chain {
		c := polyacetylene
		change(&c)
		return c
	}
	tests := []struct {
		set  []string
		want Chain
	}{
		{nil, polyacetylene},
		{[]string{"temperature=0.1"}, with(func(c *Chain) { c.Temperature = 0.1 })},
		{[]string{" conditions.temperature = 0.1 t "}, with(func(c *Chain) { c.Temperature = 0.25 })},
		{[]string{"title=a = b"}, with(func(c *Chain) { c.Title = "a = b" })},
		{[]string{"boundary=open", "sites=101"}, with(func(c *Chain) { c.Boundary, c.Sites = Open, 101 })},
		{[]string{"electrons=206"}, with(func(c *Chain) { c.ByNumber, c.Filling, c.Electrons = true, 0, 206 })},
		{[]string{"hopping=2", "temperature=0.1 t"}, with(func(c *Chain) { c.Hopping, c.Temperature = 2, 0.2 })},
		{[]string{"temperature=0.1 t", "hopping=2"}, with(func(c *Chain) { c.Hopping, c.Temperature = 2, 0.25 })},
		{[]string{"energy=t", "hopping=1"}, with(func(c *Chain) { c.Energy, c.Hopping = UnitHopping, 1 })},
		{[]string{"filling=1/2", "spin=1"}, with(func(c *Chain) { c.Filling, c.Spin = 0.5, 1 })},
		{[]string{"filling=2/3", "filling=1/2"}, with(func(c *Chain) { c.Filling = 0.5 })},
		{[]string{"bond_phonon=off"}, with(func(c *Chain) { c.Bond = Phonon{} })},
		{[]string{"bond_phonon=on"}, polyacetylene},
		{[]string{"site_phonon=on"}, with(func(c *Chain) { c.Site = Phonon{Present: true, Stiffness: 1} })},
		{[]string{"site_phonon.coupling=0.9", "site_phonon.stiffness=2"}, with(func(c *Chain) { c.Site = Phonon{Present: true, Coupling: 0.9, Stiffness: 2} })},
		{[]string{"bond_phonon=off", "bond_phonon.stiffness=5"}, with(func(c *Chain) { c.Bond = Phonon{Present: true, Stiffness: 5} })},
	}
	for _, tt := range tests {
		if got, err := SetAll(polyacetylene, tt.set); err != nil || got != tt.want {
			t.Errorf("SetAll(%q) = %+v, %v\nwant %+v", tt.set, got, err, tt.want)
		}
	}
}

func TestBadAssignments(t *testing.T) {
	tests := []struct {
		set  []string
		want string
	}{
		{[]string{"temperature"}, `"temperature" is not an assignment; write key=value, such as temperature=0.1`},
		{[]string{""}, `"" is not an assignment; write key=value, such as temperature=0.1`},
		{[]string{"temprature=1"}, `there is no parameter "temprature"; the nearest is conditions.temperature`},
		{[]string{"coupling=1"}, `"coupling" may mean bond_phonon.coupling or site_phonon.coupling; write which`},
		{[]string{"temperature="}, `conditions.temperature must be a number in eV, meV, t, K, THz or cm-1, not "": there is no number`},
		{[]string{"spin=3"}, `electrons.spin must be 1 or 2, not 3`},
		{[]string{"filling=3"}, `electrons.filling must be a number from 0 to 2, not 3`},
		{[]string{"filling=1.5", "spin=1"}, `electrons.filling must be a number from 0 to 1, not 1.5`},
		{[]string{"filling=1", "electrons=202"}, `electrons.filling and electrons.electrons exclude each other; give one of them`},
		{[]string{"site_phonon.coupling=1"}, `site_phonon.stiffness must be a number from 1e-12 to 1e9 eV, not 0 eV`},
		{[]string{"bond_phonon=yes"}, `bond_phonon must be "on" or "off", not "yes": its numbers are bond_phonon.coupling, .stiffness and .frequency`},
		{[]string{"energy=t", "temperature=300 K"}, `conditions.temperature must be a number in t, not "300 K": laboratory units need a chain in eV, and this one counts energies in t`},
		{[]string{"title=\xff"}, `title must be text in UTF-8 of at most 4096 bytes, not "\xff"`},
	}
	for _, tt := range tests {
		got, err := SetAll(polyacetylene, tt.set)
		if err == nil || err.Error() != tt.want {
			t.Errorf("SetAll(%q) says\n%v\nwant\n%s", tt.set, err, tt.want)
		}
		if got != polyacetylene {
			t.Errorf("SetAll(%q) changed the chain", tt.set)
		}
	}
}
