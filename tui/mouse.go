package tui

import tea "github.com/charmbracelet/bubbletea"

// mouseHelp stands below the key list.
const mouseHelp = "mouse: a click on a knob chooses it, on a plot reads it there; the wheel turns the knob under it, or the chosen one"

// scrollLines is how far one notch of the wheel moves a page of text.
const scrollLines = 3

// onMouse: a click on a knob chooses it, the wheel turns the knob under it (or
// the chosen one), a click or drag on a plot reads it there. On a page the wheel
// scrolls.
func (b *Bench) onMouse(m tea.MouseMsg) tea.Cmd {
	notches := map[tea.MouseButton]int{tea.MouseButtonWheelUp: 1, tea.MouseButtonWheelDown: -1}[m.Button]
	press := m.Button == tea.MouseButtonLeft && m.Action == tea.MouseActionPress
	drag := m.Button == tea.MouseButtonLeft && m.Action == tea.MouseActionMotion
	switch {
	case b.prompt != nil || b.tooSmall() || notches == 0 && !press && !drag:
		return nil
	case b.page != nil:
		b.scroll(-notches)
		return nil
	}
	b.message = ""
	knob := b.knobAt(m.X, m.Y)
	switch {
	case notches != 0:
		if knob >= 0 {
			b.knob = knob
		}
		return b.turn(notches, false)
	case press && knob >= 0:
		b.knob = knob
	default:
		b.point(m.X, m.Y)
	}
	return nil
}

// scroll moves the page by notches of the wheel.
func (b *Bench) scroll(notches int) {
	key := tea.KeyMsg{Type: tea.KeyDown}
	if notches < 0 {
		key.Type, notches = tea.KeyUp, -notches
	}
	if _, text := b.page.(*textPage); text {
		notches *= scrollLines
	}
	for range notches {
		b.page.key(b, key) // moves, and asks for nothing
	}
}

// knobAt returns the knob at a cell of the screen, −1 for none.
func (b *Bench) knobAt(col, row int) int {
	for _, s := range b.screen.spots {
		if s.row == row && col >= s.from && col < s.to {
			return s.knob
		}
	}
	return -1
}

// point reads the plot at a cell of the screen.
func (b *Bench) point(col, row int) {
	for i, p := range b.screen.panels {
		if col < p.col || col >= p.col+p.w || row < p.row || row >= p.row+p.h {
			continue
		}
		x, _, ok := b.screen.canvas[i].At(col-p.col, row-p.row)
		if !ok {
			b.reading.on = false
			return
		}
		if x, ok = views[p.view].place(b.scene(p.view), x, 0); ok {
			b.reading = reading{on: true, view: p.view, x: x}
		}
	}
}
