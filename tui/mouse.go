package tui

import tea "github.com/charmbracelet/bubbletea"

// onMouse: a click on a knob chooses it, the wheel turns the knob under it (or
// the chosen one), a click or drag on a plot reads it there.
func (b *Bench) onMouse(m tea.MouseMsg) tea.Cmd {
	if b.page != nil || b.prompt != nil {
		return nil
	}
	knob := b.knobAt(m.X, m.Y)
	switch {
	case m.Button == tea.MouseButtonWheelUp || m.Button == tea.MouseButtonWheelDown:
		turns := 1
		if m.Button == tea.MouseButtonWheelDown {
			turns = -1
		}
		if knob < 0 {
			knob = b.knob
		}
		return b.turnAt(knob, turns)
	case m.Button == tea.MouseButtonLeft && m.Action != tea.MouseActionRelease:
		if knob >= 0 {
			b.knob = knob
			return nil
		}
		b.point(m.X, m.Y)
	}
	return nil
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
		if col < p.col || col >= p.col+p.w || row < p.row || row >= p.row+p.h || i >= len(b.screen.canvas) {
			continue
		}
		x, _, ok := b.screen.canvas[i].At(col-p.col, row-p.row)
		if !ok {
			b.reading.on = false
			return
		}
		if xs := views[p.view].abscissae(b.scene(p.view)); len(xs) > 0 {
			b.reading = reading{on: true, view: p.view, x: xs[nearest(xs, x)]}
		}
	}
}
