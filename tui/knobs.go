package tui

import (
	"fmt"
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

// branchOf names the phonon branch that a parameter belongs to, "" for none.
func branchOf(p model.Param) string {
	switch table, _, _ := strings.Cut(p.Key, "."); table {
	case "bond_phonon":
		return "bond phonon"
	case "site_phonon":
		return "site phonon"
	}
	return ""
}

// symbol is the knob's label.
func (b *Bench) symbol(p model.Param) string {
	if b.ascii {
		return p.ASCII
	}
	return p.Symbol
}

// knobLine returns the knob's name and value, the chosen one marked.
func (b *Bench) knobText(i int) string {
	p := knobs[i]
	value, unit := "–", ""
	if p.Given(b.chain) || branchOf(p) == "" {
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

// shownKnobs returns the knobs that the chain has, and one for each branch that
// it lacks.
func (b *Bench) shownKnobs() []int {
	var out []int
	for i, p := range knobs {
		absent := branchOf(p) != "" && !p.Given(b.chain)
		if !absent || strings.HasSuffix(p.Key, ".coupling") {
			out = append(out, i)
		}
	}
	return out
}

// typeValue asks for the chosen knob's value.
func (b *Bench) typeValue() tea.Cmd {
	p := knobs[b.knob]
	label := p.Key
	if u := p.Unit(b.chain); u != "" {
		label += " (" + u + ")"
	}
	b.prompt = newPrompt(label, p.Format(b.chain), "Enter takes it, Esc leaves it; "+p.Doc)
	b.prompt.enter = func(b *Bench, text string) (tea.Cmd, error) {
		c, err := p.Parse(b.chain, text)
		if err != nil {
			return nil, err
		}
		return b.change(c), nil
	}
	return nil
}

// turnAt turns a knob by the wheel.
func (b *Bench) turnAt(i, turns int) tea.Cmd {
	b.knob = i
	return b.turn(turns, false)
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
	from := b.from
	if b.file != "" {
		from = b.file
	}
	return strings.Join(strings.Fields(fmt.Sprintf("%s%s  [%s]", t, mark, from)), " ")
}
