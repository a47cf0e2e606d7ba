package tui

import (
	"fmt"
	"strings"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/x/ansi"

	"example.org/twokf/model/report"
	"example.org/twokf/presets"
)

// page covers the bench until Esc.
type page interface {
	key(b *Bench, k tea.KeyMsg) tea.Cmd
	rows(b *Bench, width, height int) []string
	hint() string
}

// open covers the bench with a page.
func (b *Bench) open(p page) tea.Cmd {
	b.page = p
	return nil
}

// textPage shows lines that can be scrolled.
type textPage struct {
	// lines are made anew for each width, so that they follow the picture.
	lines func(b *Bench, width int) []string
	top   int
}

func (p *textPage) hint() string { return "↑ ↓ PgUp PgDn scroll · Esc goes back" }

func (p *textPage) key(b *Bench, k tea.KeyMsg) tea.Cmd {
	height := max(1, b.h-3)
	switch k.String() {
	case "esc", "q", "?", "enter":
		b.page = nil
	case "up":
		p.top--
	case "down":
		p.top++
	case "pgup":
		p.top -= height
	case "pgdown", " ":
		p.top += height
	case "home":
		p.top = 0
	case "end":
		p.top = 1 << 30
	}
	return nil
}

func (p *textPage) rows(b *Bench, width, height int) []string {
	lines := p.lines(b, width)
	p.top = max(0, min(p.top, len(lines)-height))
	return lines[p.top:min(len(lines), p.top+height)]
}

// keyPage lists the keys, from the table that dispatches them, in two columns
// where there is room.
func keyPage(*Bench) page {
	const keyColumn, twoColumns = 16, 140
	return &textPage{lines: func(b *Bench, width int) []string {
		var entries []string
		for _, a := range b.keys {
			h := a.binding.Help()
			name := b.spell(h.Key)
			head := b.look.paint(inkChosen, name) + strings.Repeat(" ", max(1, keyColumn-ansi.StringWidth(name)))
			for _, l := range wrap(b.spell(h.Desc), width-keyColumn) {
				entries = append(entries, head+l)
				head = strings.Repeat(" ", keyColumn)
			}
		}
		if width >= twoColumns {
			half := (len(entries) + 1) / 2
			for i, right := range entries[half:] {
				entries[i] += strings.Repeat(" ", max(1, width/2-ansi.StringWidth(entries[i]))) + right
			}
			entries = entries[:half]
		}
		lines := append([]string{b.look.paint(inkHeading, "keys"), ""}, entries...)
		return append(append(lines, ""), wrap(b.spell(mouseHelp), width)...)
	}}
}

// doubtPage says every doubt in full, raised or not.
func doubtPage(*Bench) page {
	return &textPage{lines: func(b *Bench, width int) []string {
		pic := b.picture()
		heading := b.aside(pic.stale.doubts, "how far to trust this chain's answers")
		lines := []string{b.look.paint(inkHeading, heading), ""}
		if pic.Doubts == nil {
			lines = append(lines, "not weighed yet")
		}
		for _, d := range pic.Doubts {
			ink, mark := inkAxis, "  clear   "
			if d.Verdict > 0 {
				ink, mark = inkRaised, "! raised  "
			}
			for i, l := range wrap(b.spell(report.Sentence(d)+" ["+d.Source+"]"), width-10) {
				if i > 0 {
					mark = strings.Repeat(" ", 10)
				}
				lines = append(lines, b.look.paint(ink, mark+l))
			}
		}
		return lines
	}}
}

// answerPage lists every answer with what it is.
func answerPage(*Bench) page {
	return &textPage{lines: func(b *Bench, width int) []string {
		lines := []string{b.look.paint(inkHeading, "answers"), ""}
		for _, a := range b.answers() {
			symbol := b.spell(a.Symbol)
			value := b.spell(b.aside(a.stale, strings.TrimSpace(report.Digits(a.Value, a.Grain, 8)+" "+a.Unit)))
			head := b.look.paint(inkChosen, symbol) + strings.Repeat(" ", max(1, 11-ansi.StringWidth(symbol))) +
				value + strings.Repeat(" ", max(1, 20-ansi.StringWidth(value)))
			for _, l := range wrap(b.spell(a.About), width-31) {
				lines = append(lines, head+l)
				head = strings.Repeat(" ", 31)
			}
		}
		if p := b.inquiry.fresh; p != nil {
			lines = append(lines, "")
			lines = append(lines, wrap(b.spell(report.Method(p)), width)...)
		}
		return lines
	}}
}

// presetPage picks a ready-made chain.
type presetPage struct {
	list []presets.Preset
	at   int
}

func newPresetPage() page { return &presetPage{list: presets.List()} }

func (p *presetPage) hint() string { return "↑ ↓ choose · Enter opens it · Esc goes back" }

func (p *presetPage) key(b *Bench, k tea.KeyMsg) tea.Cmd {
	switch k.String() {
	case "esc", "q":
		b.page = nil
	case "up", "shift+tab":
		p.at = (p.at + len(p.list) - 1) % len(p.list)
	case "down", "tab":
		p.at = (p.at + 1) % len(p.list)
	case "home":
		p.at = 0
	case "end":
		p.at = len(p.list) - 1
	case "enter":
		b.page = nil
		one := p.list[p.at]
		return b.take(one.Chain, origin{from: one.Name, saved: one.Chain})
	}
	return nil
}

func (p *presetPage) rows(b *Bench, width, height int) []string {
	lines := []string{b.look.paint(inkHeading, "ready-made chains"), ""}
	for i, one := range p.list {
		mark, ink := "  ", inkPlain
		if i == p.at {
			mark, ink = "▸ ", inkChosen
		}
		lines = append(lines, b.look.paint(ink, b.spell(fmt.Sprintf("%s%-16s %s", mark, one.Name, one.Title))))
	}
	lines = append(lines, "")
	for _, l := range wrap(b.spell(p.list[p.at].About), width) {
		lines = append(lines, b.look.paint(inkAxis, l))
	}
	if len(lines) > height { // keep the chosen one in sight
		from := min(max(0, p.at+2-height/2), len(lines)-height)
		lines = lines[from : from+height]
	}
	return lines
}
