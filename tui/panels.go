package tui

import (
	"strings"

	"example.org/twokf/model"
	"example.org/twokf/tui/plot"
)

// gap is the number of columns between plots side by side.
const gap = 2

// panel is a plot's place on the screen.
type panel struct {
	view           int
	col, row, w, h int
}

// drawing is a plot as it was drawn, and what it depends on.
type drawing struct {
	key  drawingKey
	rows []string
}

type drawingKey struct {
	panel     panel
	parts     [3]any // pointers to the picture's parts that the view shows
	stale     bool
	ascii     bool
	large     bool
	staggered bool
	sites     window
	reading   reading
	chain     chainKind
}

// chainKind is what views take from the chain itself.
type chainKind struct {
	energy     int
	ring       bool
	bond, site bool
	fb, fs     bool
}

// plotRows draws the plots into the given rows of the screen: all four, two by
// two, or the one that has the whole screen.
func (b *Bench) plotRows(top, h int) []string {
	if h < 1 {
		return nil
	}
	if b.large >= 0 {
		b.screen.panels = append(b.screen.panels, panel{b.large, 0, top, b.w, h})
		return b.draw(0)
	}
	left := (b.w - gap) / 2
	right := b.w - gap - left
	upper := (h + 1) / 2
	lower := h - upper
	b.screen.panels = append(b.screen.panels,
		panel{0, 0, top, left, upper}, panel{1, left + gap, top, right, upper},
		panel{2, 0, top + upper, left, lower}, panel{3, left + gap, top + upper, right, lower})
	rows := beside(b.draw(0), b.draw(1))
	return append(rows, beside(b.draw(2), b.draw(3))...)
}

// beside sets two blocks of equal height side by side; the rows of the left one
// are as wide as its panel.
func beside(left, right []string) []string {
	rows := make([]string, len(left))
	for i := range left {
		rows[i] = left[i] + strings.Repeat(" ", gap) + right[i]
	}
	return rows
}

// picture is what is known; before anything is, it is about the present chain.
func (b *Bench) picture() picture {
	p := b.inquiry.picture()
	if b.inquiry.fresh == nil && b.inquiry.last == nil {
		p.Chain = b.chain
	}
	return p
}

// scene gathers what a view may look at.
func (b *Bench) scene(view int) *scene {
	s := &scene{picture: b.picture(), large: b.large >= 0, staggered: b.isStaggered(), sites: b.sites, sketch: &b.screen.sketch}
	for i, p := range b.screen.panels {
		if p.view == view && i < len(b.screen.canvas) {
			s.columns, _ = b.screen.canvas[i].Dots()
		}
	}
	s.reads = b.reading.on && b.reading.view == view
	s.reading = b.reading.x
	return s
}

// draw returns the rows of the i-th panel, drawn anew only if what it depends
// on has changed.
func (b *Bench) draw(i int) []string {
	for len(b.screen.drawn) <= i {
		b.screen.drawn = append(b.screen.drawn, drawing{})
		b.screen.canvas = append(b.screen.canvas, new(plot.Canvas))
	}
	p := b.screen.panels[i]
	v, s := views[p.view], b.scene(p.view)
	c := &s.Chain
	key := drawingKey{
		panel: p, stale: b.inquiry.lags() && v.stale(s), ascii: b.ascii, large: s.large,
		staggered: s.staggered, sites: s.sites,
		parts: v.parts(s),
		chain: chainKind{int(c.Energy), c.Boundary == model.Ring, c.Bond.Present, c.Site.Present, c.Bond.Frequency > 0, c.Site.Frequency > 0},
	}
	if b.reading.on && b.reading.view == p.view {
		key.reading = b.reading
	}
	d := &b.screen.drawn[i]
	if d.rows != nil && d.key == key {
		return d.rows
	}
	charset := plot.Braille
	if b.ascii {
		charset = plot.ASCII
	}
	canvas := b.screen.canvas[i]
	canvas.Stale, canvas.Trim = key.stale, p.col+p.w == b.w
	canvas.Reset(p.w, p.h, charset)
	s.spell = b.spell
	s.plot(canvas, v)
	d.key, d.rows = key, make([]string, p.h)
	var buf []byte
	for row := range d.rows {
		buf = canvas.AppendRow(buf[:0], row, b.look.append)
		d.rows[row] = string(buf)
	}
	return d.rows
}
