package tui

import (
	"math"

	tea "github.com/charmbracelet/bubbletea"
)

// window is the part of the chain that its view shows, from ≤ i < to; the zero
// window is all of it.
type window struct{ from, to int }

// width is the number of sites that are shown, 0 for all.
func (w window) width() int { return w.to - w.from }

const (
	// fewestSites is the narrowest window onto the chain.
	fewestSites = 8
	// manySites are more than anybody looks at one by one: beyond them a window
	// is made narrower and wider in great steps.
	manySites = 2000
	greatStep = 8
)

// narrow shows fewer sites, about the one that is read or the middle.
func (b *Bench) narrow() tea.Cmd {
	width := b.shownSites().width()
	if width > manySites {
		return b.zoom(width / greatStep)
	}
	return b.zoom((width + 1) / 2)
}

// widen shows more sites; it goes the way back that narrow came.
func (b *Bench) widen() tea.Cmd {
	width := b.shownSites().width()
	if 2*width > manySites {
		return b.zoom(width * greatStep)
	}
	return b.zoom(width * 2)
}

// shownSites is the window, that of the whole chain spelled out.
func (b *Bench) shownSites() window {
	if b.sites.width() == 0 {
		return window{0, b.chain.Sites}
	}
	return b.sites
}

// zoom shows so many sites, about the one that is read or the middle.
func (b *Bench) zoom(width int) tea.Cmd {
	w := b.shownSites()
	middle := (w.from + w.to) / 2
	if at := int(b.reading.x); b.reading.on && b.reading.view == chainIndex && at >= w.from && at < w.to {
		middle = at
	}
	width = max(width, min(fewestSites, b.chain.Sites))
	b.setWindow(middle-width/2, width)
	return nil
}

// pan moves the window by a quarter of its width.
func (b *Bench) pan(direction int) tea.Cmd {
	width := b.sites.width()
	if width == 0 {
		b.say("w shows fewer sites first")
		return nil
	}
	b.setWindow(b.sites.from+direction*max(1, width/4), width)
	return nil
}

// setWindow shows so many sites of the present chain, as near to from as they are.
func (b *Bench) setWindow(from, width int) {
	n := b.chain.Sites
	if width >= n {
		b.sites = window{}
		return
	}
	from = min(max(from, 0), n-width)
	b.sites = window{from, from + width}
}

// enlarge gives one view the whole screen, or takes it away.
func (b *Bench) enlarge(view int) tea.Cmd {
	if b.large == view {
		view = -1
	}
	b.large = view
	return nil
}

// back stops reading, or else goes back to all four plots.
func (b *Bench) back() tea.Cmd {
	if b.reading.on {
		b.reading.on = false
	} else {
		b.large = -1
	}
	return nil
}

func (b *Bench) toggleASCII() tea.Cmd {
	b.ascii = !b.ascii
	return tea.ClearScreen
}

// staggering says how the lattice pattern is shown.
type staggering int

const (
	staggerAuto staggering = iota // the period-2 amplitude close to half filling
	staggerOff
	staggerOn
)

// nearHalf is how far a band filling may be from 1/2 for its pattern to be read
// best as a slowly varying period-2 amplitude.
const nearHalf = 0.08

func (b *Bench) isStaggered() bool {
	if b.staggered == staggerAuto {
		n, _ := b.chain.Count()
		return math.Abs(float64(n)/float64(b.chain.Spin*b.chain.Sites)-0.5) < nearHalf
	}
	return b.staggered == staggerOn
}

func (b *Bench) stagger() tea.Cmd {
	if b.isStaggered() {
		b.staggered = staggerOff
	} else {
		b.staggered = staggerOn
	}
	return nil
}
