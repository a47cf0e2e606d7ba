package model

import (
	"errors"
	"math"
	"strings"
	"testing"
)

func TestValidateNamesTheParameter(t *testing.T) {
	tests := []struct {
		what   string
		change func(*Chain)
		key    string // "" if the chain stays valid
	}{
		{"the published chain", func(*Chain) {}, ""},
		{"one site", func(c *Chain) { c.Sites = 1 }, ""},
		{"no site", func(c *Chain) { c.Sites = 0 }, "chain.sites"},
		{"the longest chain", func(c *Chain) { c.Sites = MaxSites }, ""},
		{"one site more", func(c *Chain) { c.Sites = MaxSites + 1 }, "chain.sites"},
		{"an unknown boundary", func(c *Chain) { c.Boundary = 2 }, "chain.boundary"},
		{"an unknown energy unit", func(c *Chain) { c.Energy = -1 }, "energy"},
		{"spin not given", func(c *Chain) { c.Spin = 0 }, "electrons.spin"},
		{"an empty band", func(c *Chain) { c.Filling = 0 }, ""},
		{"a full band", func(c *Chain) { c.Filling = 2 }, ""},
		{"more than full", func(c *Chain) { c.Filling = math.Nextafter(2, 3) }, "electrons.filling"},
		{"less than empty", func(c *Chain) { c.Filling = -1e-300 }, "electrons.filling"},
		{"full by number", func(c *Chain) { c.ByNumber, c.Filling, c.Electrons = true, 0, 404 }, ""},
		{"more than full by number", func(c *Chain) { c.ByNumber, c.Filling, c.Electrons = true, 0, 405 }, "electrons.electrons"},
		{"a filling beside a number", func(c *Chain) { c.ByNumber, c.Electrons = true, 202 }, "electrons.filling"},
		{"a number beside a filling", func(c *Chain) { c.Electrons = 202 }, "electrons.electrons"},
		{"no hopping", func(c *Chain) { c.Hopping = 0 }, ""},
		{"the smallest hopping", func(c *Chain) { c.Hopping = MinMagnitude }, ""},
		{"less than that", func(c *Chain) { c.Hopping = MinMagnitude / 2 }, "electrons.hopping"},
		{"the smallest float", func(c *Chain) { c.Hopping = math.SmallestNonzeroFloat64 }, "electrons.hopping"},
		{"the largest hopping", func(c *Chain) { c.Hopping = MaxMagnitude }, ""},
		{"more than that", func(c *Chain) { c.Hopping = 2 * MaxMagnitude }, "electrons.hopping"},
		{"a negative hopping", func(c *Chain) { c.Hopping = -1 }, "electrons.hopping"},
		{"an infinite hopping", func(c *Chain) { c.Hopping = math.Inf(1) }, "electrons.hopping"},
		{"a hopping that is no number", func(c *Chain) { c.Hopping = math.NaN() }, "electrons.hopping"},
		{"a negative second hopping", func(c *Chain) { c.NextHopping = -0.3 }, ""},
		{"an infinite second hopping", func(c *Chain) { c.NextHopping = math.Inf(-1) }, "electrons.next_hopping"},
		{"no temperature", func(c *Chain) { c.Temperature = 0 }, ""},
		{"below absolute zero", func(c *Chain) { c.Temperature = -0.1 }, "conditions.temperature"},
		{"no number for a temperature", func(c *Chain) { c.Temperature = math.NaN() }, "conditions.temperature"},
		{"a bond phonon without coupling", func(c *Chain) { c.Bond.Coupling = 0 }, ""},
		{"a bond phonon without a spring", func(c *Chain) { c.Bond.Stiffness = 0 }, "bond_phonon.stiffness"},
		{"numbers of an absent branch", func(c *Chain) { c.Bond.Present = false }, "bond_phonon.coupling"},
		{"a negative frequency", func(c *Chain) { c.Bond.Frequency = -0.1 }, "bond_phonon.frequency"},
		{"a site phonon without a spring", func(c *Chain) { c.Site.Present = true }, "site_phonon.stiffness"},
		{"a negative spacing", func(c *Chain) { c.Spacing = -1 }, "chain.spacing"},
		{"a title that is not text", func(c *Chain) { c.Title = "\xc3" }, "title"},
		{"the longest title", func(c *Chain) { c.Title = strings.Repeat("x", MaxText) }, ""},
		{"an endless source", func(c *Chain) { c.Source = strings.Repeat("x", MaxText+1) }, "source"},
	}
	for _, tt := range tests {
		c := polyacetylene
		tt.change(&c)
		err := c.Validate()
		var bad *ParamError
		switch {
		case tt.key == "" && err != nil:
			t.Errorf("%s: %v", tt.what, err)
		case tt.key != "" && (!errors.As(err, &bad) || bad.Key != tt.key || bad.Value == "" || bad.Want == ""):
			t.Errorf("%s: %v, want an error for %s", tt.what, err, tt.key)
		}
	}
}

func TestNoChainIsTheZeroChain(t *testing.T) {
	if err := (Chain{}).Validate(); err == nil {
		t.Error("the zero Chain is valid")
	}
}
