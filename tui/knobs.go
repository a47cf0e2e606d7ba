package tui

import (
	"fmt"
	"slices"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"example.org/twokf/model"
	"example.org/twokf/model/report"
)

// knobs are the parameters that can be turned, in the order of the chain file.
var knobs = func() []model.Param {
	var out []model.Param
	for _, p := range model.Params() {
		if p.Turns() {
			out = append(out, p)
		}
	}
	return out
}()

// tableOf is the table of a chain file that a parameter stands in.
func tableOf(p model.Param) string {
	table, _, _ := strings.Cut(p.Key, ".")
	return table
}

// branchOf names the phonon branch that a parameter belongs to, "" for none.
func branchOf(p model.Param) string {
	switch tableOf(p) {
	case "bond_phonon":
		return "bond phonon"
	case "site_phonon":
		return "site phonon"
	}
	return ""
}

// absent reports whether a parameter is of a branch that the chain lacks.
func absent(p model.Param, c model.Chain) bool { return branchOf(p) != "" && !p.Given(c) }

// shown returns the knobs that the chain has, and one for each branch that it
// lacks.
func (b *Bench) shown() []int {
	var out []int
	for i, p := range knobs {
		if !absent(p, b.chain) || strings.HasSuffix(p.Key, ".coupling") {
			out = append(out, i)
		}
	}
	return out
}

// choose goes so many knobs on; from one that is not shown any more it first
// goes back to the last one that is.
func (b *Bench) choose(by int) tea.Cmd {
	shown := b.shown()
	at, found := slices.BinarySearch(shown, b.knob)
	if !found {
		at--
	}
	n := len(shown)
	b.knob = shown[(at+by%n+n)%n]
	return nil
}

// zeroIsNone reports whether a parameter that is 0 is one that is not given.
func zeroIsNone(p model.Param) bool {
	return strings.HasSuffix(p.Key, ".spacing") || strings.HasSuffix(p.Key, ".frequency")
}

// symbol is the knob's label.
func (b *Bench) symbol(p model.Param) string {
	if b.ascii {
		return p.ASCII
	}
	return p.Symbol
}

// knobText is a knob's name and value, the chosen one marked.
func (b *Bench) knobText(i int) string {
	p := knobs[i]
	value, unit := "–", ""
	if !absent(p, b.chain) && !(zeroIsNone(p) && p.Get(b.chain) == 0) {
		value, unit = p.Format(b.chain), p.Unit(b.chain)
		if p.Kind == model.Number {
			value = report.Digits(p.Get(b.chain), 0, 7)
		}
	}
	if p.Key == "conditions.temperature" && b.chain.Energy == model.UnitEV && b.chain.Temperature > 0 {
		value = report.Digits(b.chain.Temperature, 0, 4)
		unit += fmt.Sprintf(" (%s K)", report.Digits(b.chain.Temperature*kelvinPerEV, 0, 4))
	}
	mark := " "
	if i == b.knob {
		mark = "▸"
	}
	return strings.TrimRight(mark+b.symbol(p)+" "+value+" "+unit, " ")
}

// title is the bench's first line: which chain this is.
func (b *Bench) title() string {
	t := b.chain.Title
	if t == "" {
		t = "chain without a title"
	}
	mark := ""
	if b.edited() {
		mark = " *"
	}
	from := b.origin.from
	if b.origin.file != "" {
		from = b.origin.file
	}
	return strings.Join(strings.Fields(fmt.Sprintf("%s%s  [%s]", t, mark, from)), " ")
}
