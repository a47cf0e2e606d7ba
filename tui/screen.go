package tui

import (
	"fmt"
	"strings"

	"github.com/charmbracelet/x/ansi"

	"example.org/twokf/model/report"
	"example.org/twokf/tui/plot"
)

const (
	leastColumns, leastRows = 60, 20
	gap                     = 2 // columns between plots side by side
)

// screen is what was drawn last, kept so that the same picture is not drawn
// twice and the mouse knows what it points at.
type screen struct {
	dirty bool
	text  string

	panels []panel // plots on the screen
	spots  []spot  // knobs on the screen
	canvas []*plot.Canvas
	drawn  []drawing
}

// panel is a plot's place on the screen.
type panel struct {
	view           int
	col, row, w, h int
}

// spot is a knob's place on the screen.
type spot struct{ knob, row, from, to int }

// drawing is a plot as it was drawn, and what it depends on.
type drawing struct {
	key  drawingKey
	rows []string
}

type drawingKey struct {
	panel     panel
	parts     [6]any // pointers to the picture's parts
	stale     bool
	ascii     bool
	large     bool
	staggered bool
	from, to  int
	reading   reading
	chain     phononNames
}

// phononNames is what headings take from the chain.
type phononNames struct {
	energy     int
	bond, site bool
	fb, fs     bool
}

// View draws the bench.
func (b *Bench) View() string {
	if b.w == 0 || b.h == 0 {
		return ""
	}
	if b.screen.dirty || b.screen.text == "" {
		b.screen.text = strings.Join(b.rows(), "\n")
		b.screen.dirty = false
	}
	return b.screen.text
}

// rows returns exactly h rows, none wider than w.
func (b *Bench) rows() []string {
	b.screen.panels, b.screen.spots = b.screen.panels[:0], b.screen.spots[:0]
	var rows []string
	switch {
	case b.w < leastColumns || b.h < leastRows:
		rows = wrap(fmt.Sprintf("twokf needs %d columns and %d rows; this window has %d and %d. q quits.",
			leastColumns, leastRows, b.w, b.h), b.w)
	case b.page != nil:
		rows = b.page.rows(b, b.w, b.h-2)
		for len(rows) < b.h-2 {
			rows = append(rows, "")
		}
		rows = append(rows[:b.h-2], b.footer()...)
	default:
		rows = b.benchRows()
	}
	for len(rows) < b.h {
		rows = append(rows, "")
	}
	rows = rows[:b.h]
	for i, r := range rows {
		if ansi.StringWidth(r) > b.w {
			rows[i] = ansi.Truncate(r, b.w, "")
		}
	}
	return rows
}

// benchRows is the bench itself: the chain's name, the plots, knobs, readout,
// doubts, and a line for the user.
func (b *Bench) benchRows() []string {
	pic := b.inquiry.picture()
	knobRows := b.knobRows(b.w)
	room := max(1, b.h/12) // rows for the readout, and again for the doubts
	readout := b.readoutRows(&pic, b.w, room+1)
	doubts := b.doubtRows(&pic, b.w, room)
	footer := b.footer()
	below := len(knobRows) + len(readout) + len(doubts) + len(footer)
	plots := b.plotRows(&pic, 1, b.h-1-below)
	for i := range b.screen.spots {
		b.screen.spots[i].row += 1 + len(plots)
	}

	rows := append([]string{b.headline()}, plots...)
	rows = append(rows, knobRows...)
	rows = append(rows, readout...)
	rows = append(rows, doubts...)
	return append(rows, footer...)
}

// headline names the chain and says how far the study is.
func (b *Bench) headline() string {
	right := ""
	if b.inquiry.slow {
		right = "working"
		if s := b.inquiry.stage; s.Stage != "" {
			right = fmt.Sprintf("%s %2.0f %%, %s", s.Stage, 100*s.Done, s.Detail)
		}
	}
	right = b.spell(right)
	left := ansi.Truncate(b.spell(b.title()), max(0, b.w-ansi.StringWidth(right)-2), b.spell("…"))
	fill := max(1, b.w-ansi.StringWidth(left)-ansi.StringWidth(right))
	return b.look.paint(inkHeading, left) + strings.Repeat(" ", fill) + b.look.paint(inkMark, right)
}

// footer is the prompt, or what there is to say.
func (b *Bench) footer() []string {
	if b.prompt != nil {
		return b.prompt.rows(b)
	}
	ink := inkAxis
	text := b.message
	if b.isError {
		ink = inkRaised
	}
	if text == "" && b.page != nil {
		text = b.page.hint()
	}
	if text == "" && b.reading.on {
		v := views[b.reading.view]
		text = v.name() + ": " + v.read(b.scene(b.reading.view), b.reading.x)
	}
	if text == "" {
		text = "? keys · p ready-made chains · s save · u undo · d doubts · q quit"
	}
	lines := wrap(strings.ReplaceAll(b.spell(text), "\n", " "), b.w)
	if len(lines) > 2 {
		lines = append(lines[:1], ansi.Truncate(lines[1], b.w-1, "")+b.spell("…"))
	}
	for i := range lines {
		lines[i] = b.look.paint(ink, lines[i])
	}
	return lines
}

// knobRows is one wrapped line of names and values; it notes where they stand.
func (b *Bench) knobRows(width int) []string {
	var rows []string
	line, used := "", 0
	for _, i := range b.shownKnobs() {
		text := b.spell(b.knobText(i))
		w := ansi.StringWidth(text)
		if used > 0 && used+2+w > width {
			rows = append(rows, line)
			line, used = "", 0
		}
		if used > 0 {
			line, used = line+"  ", used+2
		}
		b.screen.spots = append(b.screen.spots, spot{i, len(rows), used, used + w})
		ink := inkPlain
		if i == b.knob {
			ink = inkChosen
		}
		line, used = line+b.look.paint(ink, text), used+w
	}
	return append(rows, line)
}

// plotRows draws the plots into the given rows of the screen: all four, two by
// two, or the one that has the whole screen.
func (b *Bench) plotRows(pic *picture, top, h int) []string {
	if h < 1 {
		return nil
	}
	if b.large >= 0 {
		b.screen.panels = append(b.screen.panels, panel{b.large, 0, top, b.w, h})
		return b.draw(pic, 0)
	}
	left := (b.w - gap) / 2
	right := b.w - gap - left
	upper := (h + 1) / 2
	lower := h - upper
	b.screen.panels = append(b.screen.panels,
		panel{0, 0, top, left, upper}, panel{1, left + gap, top, right, upper},
		panel{2, 0, top + upper, left, lower}, panel{3, left + gap, top + upper, right, lower})
	rows := beside(b.draw(pic, 0), b.draw(pic, 1))
	return append(rows, beside(b.draw(pic, 2), b.draw(pic, 3))...)
}

// beside sets two blocks of equal height side by side; the rows of the left one
// are as wide as its panel.
func beside(left, right []string) []string {
	rows := make([]string, len(left))
	for i := range left {
		rows[i] = left[i] + strings.Repeat(" ", gap)
		if i < len(right) {
			rows[i] += right[i]
		}
	}
	return rows
}

// scene gathers what a view may look at.
func (b *Bench) scene(view int) *scene {
	s := &scene{picture: b.inquiry.picture(), large: b.large >= 0, staggered: b.isStaggered(), from: b.sites.from, to: b.sites.to}
	s.reads = b.reading.on && b.reading.view == view
	s.reading = b.reading.x
	return s
}

// draw returns the rows of the i-th panel, drawn anew only if what it depends
// on has changed.
func (b *Bench) draw(pic *picture, i int) []string {
	for len(b.screen.drawn) <= i {
		b.screen.drawn = append(b.screen.drawn, drawing{})
		b.screen.canvas = append(b.screen.canvas, new(plot.Canvas))
	}
	p := b.screen.panels[i]
	v := views[p.view]
	c := pic.Chain
	key := drawingKey{
		panel: p, stale: b.inquiry.slow && v.stale(pic), ascii: b.ascii, large: b.large >= 0,
		staggered: b.isStaggered(), from: b.sites.from, to: b.sites.to,
		parts: [6]any{pic.Band, pic.Response, pic.Phonon, pic.Lattice, pic.Levels, pic.Transition},
		chain: phononNames{int(c.Energy), c.Bond.Present, c.Site.Present, c.Bond.Frequency > 0, c.Site.Frequency > 0},
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
	canvas.Stale = key.stale
	canvas.Reset(p.w, p.h, charset)
	s := b.scene(p.view)
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

// spell writes a text with the signs that the terminal has.
func (b *Bench) spell(s string) string {
	if !b.ascii {
		return s
	}
	return report.ASCII(strings.NewReplacer("▸", ">", "▏", "|", "ⁱ", "^i").Replace(s))
}

// wrap breaks a text at spaces into lines of at most width columns; a word that
// is longer is cut.
func wrap(s string, width int) []string {
	return strings.Split(ansi.Wrap(s, max(1, width), ""), "\n")
}
