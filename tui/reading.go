package tui

import (
	tea "github.com/charmbracelet/bubbletea"

	"example.org/twokf/tui/plot"
)

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
	x := views[view].abscissae(b.scene(view))
	if len(x) == 0 {
		b.say("there is nothing to read yet")
		return nil
	}
	at := len(x) / 2
	if band := b.picture().Band; band != nil {
		switch view {
		case bandIndex:
			at = plot.Nearest(x, band.KF)
		case chiIndex, phononIndex:
			at = plot.Nearest(x, band.Ordering)
		}
	}
	b.reading = reading{on: true, view: view, x: x[at]}
	return nil
}

// readMove reads so many points further.
func (b *Bench) readMove(by int) tea.Cmd {
	if !b.reading.on || b.large >= 0 && b.reading.view != b.large {
		return b.readNext()
	}
	x := views[b.reading.view].abscissae(b.scene(b.reading.view))
	if len(x) > 0 {
		b.reading.x = x[min(max(plot.Nearest(x, b.reading.x)+by, 0), len(x)-1)]
	}
	return nil
}
