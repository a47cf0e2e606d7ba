package tui

import (
	"github.com/charmbracelet/bubbles/textinput"
	tea "github.com/charmbracelet/bubbletea"
)

// prompt asks for one line at the foot of the screen.
type prompt struct {
	label string
	hint  string
	err   string
	input textinput.Model
	fresh bool // nothing has been typed yet: the first character replaces the value
	// enter takes the line; an error keeps the prompt open and is shown.
	enter func(*Bench, string) (tea.Cmd, error)
	// complete proposes a longer line for Tab; may be nil.
	complete func(string) string
}

func newPrompt(label, value, hint string) *prompt {
	in := textinput.New()
	in.Prompt = ""
	in.CharLimit = 4096
	in.SetValue(value)
	in.CursorEnd()
	in.Focus()
	return &prompt{label: label, hint: hint, input: in, fresh: value != ""}
}

func (p *prompt) key(b *Bench, k tea.KeyMsg) tea.Cmd {
	switch k.String() {
	case "esc":
		b.prompt = nil
		return nil
	case "enter":
		cmd, err := p.enter(b, p.input.Value())
		if err != nil {
			p.err = err.Error()
			return nil
		}
		if b.prompt == p {
			b.prompt = nil
		}
		return cmd
	case "tab":
		if p.complete != nil {
			p.input.SetValue(p.complete(p.input.Value()))
			p.input.CursorEnd()
		}
		return nil
	}
	p.err = ""
	if k.Paste {
		k = tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune(pasted(k))}
	}
	if p.fresh && k.Type == tea.KeyRunes {
		p.input.SetValue("") // a new value takes the place of the old one; other keys edit that
	}
	p.fresh = false
	p.input, _ = p.input.Update(k) // its only command is a cursor blink
	return nil
}

// rows returns the prompt's line and its hint, or what was wrong.
func (p *prompt) rows(b *Bench) []string {
	hint, ink := p.hint, inkAxis
	if p.err != "" {
		hint, ink = p.err, inkRaised
	}
	value := []rune(p.input.Value())
	at := min(p.input.Position(), len(value))
	typed := string(value[:at]) + "▏" + string(value[at:])
	if p.fresh {
		typed = b.look.paint(inkAxis, b.spell(typed))
	}
	rows := []string{b.look.paint(inkHeading, b.spell(p.label)) + " = " + b.spell(typed)}
	for _, l := range wrap(b.spell(hint), b.w) {
		rows = append(rows, b.look.paint(ink, l))
	}
	return rows
}
