package tui

import (
	"strings"
	"unicode"

	"github.com/charmbracelet/bubbles/key"
	tea "github.com/charmbracelet/bubbletea"
)

// action is what a key does on the bench.
type action struct {
	binding key.Binding
	do      func(*Bench) tea.Cmd
}

// bind makes a binding whose help names its keys as a person would.
func bind(keys, help string) key.Binding {
	names := strings.Fields(keys)
	return key.NewBinding(key.WithKeys(names...), key.WithHelp(spellKeys(names), help))
}

// spellKeys names keys for the key list.
func spellKeys(keys []string) string {
	names := map[string]string{"up": "↑", "down": "↓", "left": "←", "right": "→", "pgup": "PgUp", "pgdown": "PgDn",
		"shift+up": "Shift-↑", "shift+down": "Shift-↓", "enter": "Enter", "esc": "Esc", "tab": "Tab", "shift+tab": "Shift-Tab", "ctrl+c": "Ctrl-C", "home": "Home", "end": "End"}
	out := make([]string, len(keys))
	for i, k := range keys {
		if out[i] = names[k]; out[i] == "" {
			out[i] = k
		}
	}
	return strings.Join(out, " ")
}

// keyTable dispatches the bench's keys and is what the key list shows.
func keyTable() []action {
	return []action{
		{bind("right tab", "next knob"), func(b *Bench) tea.Cmd { return b.choose(+1) }},
		{bind("left shift+tab", "knob before"), func(b *Bench) tea.Cmd { return b.choose(-1) }},
		{bind("up +", "turn the knob up"), func(b *Bench) tea.Cmd { return b.turn(+1, false) }},
		{bind("down -", "turn it down"), func(b *Bench) tea.Cmd { return b.turn(-1, false) }},
		{bind("shift+up )", "up a little"), func(b *Bench) tea.Cmd { return b.turn(+1, true) }},
		{bind("shift+down (", "down a little"), func(b *Bench) tea.Cmd { return b.turn(-1, true) }},
		{bind("pgup", "up a lot"), func(b *Bench) tea.Cmd { return b.turn(+10, false) }},
		{bind("pgdown", "down a lot"), func(b *Bench) tea.Cmd { return b.turn(-10, false) }},
		{bind("enter", "type the knob's value, with a unit if you like"), func(b *Bench) tea.Cmd { return b.typeValue() }},
		{bind("x", "take the knob's phonon branch away"), func(b *Bench) tea.Cmd { return b.dropBranch() }},
		{bind("u", "undo"), func(b *Bench) tea.Cmd { return b.undo() }},
		{bind("U", "redo"), func(b *Bench) tea.Cmd { return b.redo() }},
		{bind("1", "bands on the whole screen, and back"), func(b *Bench) tea.Cmd { return b.enlarge(0) }},
		{bind("2", "density and lattice on the whole screen, and back"), func(b *Bench) tea.Cmd { return b.enlarge(1) }},
		{bind("3", "χ(q) on the whole screen, and back"), func(b *Bench) tea.Cmd { return b.enlarge(2) }},
		{bind("4", "phonon on the whole screen, and back"), func(b *Bench) tea.Cmd { return b.enlarge(3) }},
		{bind("v", "read values off the next plot"), func(b *Bench) tea.Cmd { return b.readNext() }},
		{bind(".", "read further right"), func(b *Bench) tea.Cmd { return b.readMove(+1) }},
		{bind(",", "read further left"), func(b *Bench) tea.Cmd { return b.readMove(-1) }},
		{bind("m", "lattice pattern as it is, or its period-2 amplitude"), func(b *Bench) tea.Cmd { return b.stagger() }},
		{bind("w", "show fewer sites"), func(b *Bench) tea.Cmd { return b.narrow() }},
		{bind("W", "show more sites"), func(b *Bench) tea.Cmd { return b.widen() }},
		{bind("[", "move the sites shown to the left"), func(b *Bench) tea.Cmd { return b.pan(-1) }},
		{bind("]", "move the sites shown to the right"), func(b *Bench) tea.Cmd { return b.pan(+1) }},
		{bind("d", "doubts in full"), func(b *Bench) tea.Cmd { return b.open(doubtPage(b)) }},
		{bind("a", "all answers"), func(b *Bench) tea.Cmd { return b.open(answerPage(b)) }},
		{bind("p", "ready-made chains"), func(b *Bench) tea.Cmd { return b.open(newPresetPage()) }},
		{bind("o", "open a chain file"), func(b *Bench) tea.Cmd { return b.askOpen() }},
		{bind("s", "save the chain"), func(b *Bench) tea.Cmd { return b.save() }},
		{bind("S", "save it under another name"), func(b *Bench) tea.Cmd { return b.askSave() }},
		{bind("D", "pick up the unsaved chain of an earlier session"), func(b *Bench) tea.Cmd { return b.pickUp() }},
		{bind("f", "fine dots or plain ASCII"), func(b *Bench) tea.Cmd { return b.toggleASCII() }},
		{bind("?", "this list"), func(b *Bench) tea.Cmd { return b.open(keyPage(b)) }},
		{bind("esc", "back to all four plots"), func(b *Bench) tea.Cmd { return b.back() }},
		{bind("q ctrl+c", "quit"), func(b *Bench) tea.Cmd { return b.quit() }},
	}
}

// press does what a key is bound to; unbound keys do nothing.
func (b *Bench) press(k tea.KeyMsg) tea.Cmd {
	for _, a := range b.keys {
		if key.Matches(k, a.binding) {
			return a.do(b)
		}
	}
	return nil
}

// split turns the runes that arrived in one read into one message each, so that
// a burst of keys on a slow line is not taken for one unknown key. Pasted text
// stays whole.
func split(k tea.KeyMsg) []tea.KeyMsg {
	if k.Type != tea.KeyRunes || k.Paste || len(k.Runes) < 2 {
		return []tea.KeyMsg{k}
	}
	out := make([]tea.KeyMsg, len(k.Runes))
	for i, r := range k.Runes {
		out[i] = tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune{r}, Alt: k.Alt}
	}
	return out
}

// pasted returns what a paste holds that can stand on one line.
func pasted(k tea.KeyMsg) string {
	return strings.TrimSpace(strings.Map(func(r rune) rune {
		if unicode.IsControl(r) {
			return ' '
		}
		return r
	}, string(k.Runes)))
}
