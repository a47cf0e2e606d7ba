package tui

import tea "github.com/charmbracelet/bubbletea"

// reading is where a plot is read.
type reading struct {
	on   bool
	view int
	x    float64
}

// readNext reads the next plot, in its middle or at the wave vector that
// matters; after the last one, or on one that has the whole screen, it stops.
func (b *Bench) readNext() tea.Cmd {
	view := b.large
	switch {
	case view >= 0 && b.reading.on && b.reading.view == view:
		b.reading.on = false
		return nil
	case view < 0:
		view = 0
		if b.reading.on {
			view = b.reading.view + 1
		}
		if view == len(views) {
			b.reading.on = false
			return nil
		}
	}
	v, s := views[view], b.scene(view)
	x, ok := v.place(s, v.begin(s), 0)
	if !ok {
		b.say("there is nothing to read yet")
		return nil
	}
	b.reading = reading{on: true, view: view, x: x}
	return nil
}

// readMove reads so many places further.
func (b *Bench) readMove(by int) tea.Cmd {
	if !b.reading.on || b.large >= 0 && b.reading.view != b.large {
		return b.readNext()
	}
	if x, ok := views[b.reading.view].place(b.scene(b.reading.view), b.reading.x, by); ok {
		b.reading.x = x
	}
	return nil
}
