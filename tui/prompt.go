package tui

import (
	"github.com/charmbracelet/bubbles/key"
	"github.com/charmbracelet/bubbles/textinput"
	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/x/ansi"
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
	// complete proposes a longer line for Tab, and says which ways there are on;
	// may be nil.
	complete func(string) (longer, ways string)
}

// editing are the keys that edit the line. Forward deletion of words is not
// among them: it runs off the end of a line that ends in blanks.
var editing = textinput.KeyMap{
	CharacterForward:        key.NewBinding(key.WithKeys("right", "ctrl+f")),
	CharacterBackward:       key.NewBinding(key.WithKeys("left", "ctrl+b")),
	WordForward:             key.NewBinding(key.WithKeys("alt+right", "ctrl+right", "alt+f")),
	WordBackward:            key.NewBinding(key.WithKeys("alt+left", "ctrl+left", "alt+b")),
	DeleteWordBackward:      key.NewBinding(key.WithKeys("alt+backspace", "ctrl+w")),
	DeleteAfterCursor:       key.NewBinding(key.WithKeys("ctrl+k")),
	DeleteBeforeCursor:      key.NewBinding(key.WithKeys("ctrl+u")),
	DeleteCharacterBackward: key.NewBinding(key.WithKeys("backspace", "ctrl+h")),
	DeleteCharacterForward:  key.NewBinding(key.WithKeys("delete", "ctrl+d")),
	LineStart:               key.NewBinding(key.WithKeys("home", "ctrl+a")),
	LineEnd:                 key.NewBinding(key.WithKeys("end", "ctrl+e")),
}

func newPrompt(label, value, hint string) *prompt {
	in := textinput.New()
	in.Prompt = ""
	in.CharLimit = 4096
	in.KeyMap = editing
	in.SetValue(value)
	in.CursorEnd()
	in.Focus()
	return &prompt{label: label, hint: hint, input: in, fresh: value != ""}
}

func (p *prompt) key(b *Bench, k tea.KeyMsg) tea.Cmd {
	p.err = ""
	switch k.String() {
	case "esc":
		b.prompt = nil
		return nil
	case "enter":
		cmd, err := p.enter(b, p.input.Value())
		switch {
		case err != nil:
			p.err = err.Error()
		case b.prompt == p:
			b.prompt = nil
		}
		return cmd
	case "tab":
		if p.complete != nil {
			longer, ways := p.complete(p.input.Value())
			p.input.SetValue(longer)
			p.input.CursorEnd()
			p.fresh, p.hint = false, ways
		}
		return nil
	}
	if k.Paste {
		k = tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune(pasted(k))}
	}
	if k.Type == tea.KeyRunes && (len(k.Runes) == 0 || k.Alt && !key.Matches(k, editing.WordForward, editing.WordBackward)) {
		return nil
	}
	if p.fresh && k.Type == tea.KeyRunes {
		p.input.SetValue("") // a new value takes the place of the old one; other keys edit that
	}
	p.fresh = false
	p.input, _ = p.input.Update(k) // its only command is a cursor blink
	return nil
}

// mostHint is how many lines below the prompt may say what it wants.
const mostHint = 3

// rows returns the prompt's line and its hint, or what was wrong.
func (p *prompt) rows(b *Bench) []string {
	hint, ink := p.hint, inkAxis
	if p.err != "" {
		hint, ink = p.err, inkRaised
	}
	label := ansi.Truncate(b.spell(p.label), b.w/2, b.spell("… "))
	valueInk := inkPlain
	if p.fresh {
		valueInk = inkAxis
	}
	value := p.visible(b, b.w-ansi.StringWidth(label))
	rows := []string{b.look.paint(inkHeading, label) + b.look.paint(valueInk, value)}
	lines := wrap(b.spell(hint), b.w)
	if len(lines) > mostHint {
		lines = append(lines[:mostHint-1], b.cutOff(lines[mostHint-1], b.w))
	}
	for _, l := range lines {
		rows = append(rows, b.look.paint(ink, l))
	}
	return rows
}

// visible is the part of the line around the cursor that has room.
func (p *prompt) visible(b *Bench, width int) string {
	value := []rune(p.input.Value())
	at := min(p.input.Position(), len(value))
	before, after := b.spell(string(value[:at])+"▏"), b.spell(string(value[at:]))
	if most := max(1, width*3/4); ansi.StringWidth(before+after) > width && ansi.StringWidth(before) > most {
		more := b.spell("…")
		before = ansi.TruncateLeft(before, ansi.StringWidth(before)-most+ansi.StringWidth(more), more)
	}
	return ansi.Truncate(before+after, width, b.spell("…"))
}
