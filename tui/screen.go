package tui

import (
	"fmt"
	"strings"
	"time"

	"github.com/charmbracelet/x/ansi"

	"example.org/twokf/tui/plot"
)

// leastColumns and leastRows are what the bench needs.
const leastColumns, leastRows = 60, 20

// screen is what was drawn last, kept so that the same picture is not drawn
// twice and the mouse knows what it points at.
type screen struct {
	dirty bool
	text  string

	panels []panel // plots on the screen
	spots  []spot  // knobs on the screen
	canvas []*plot.Canvas
	drawn  []drawing
	sketch sketch

	width         int      // of the rows below
	raw, finished []string // the rows of the latest frame, as composed and as shown
}

// spot is a knob's place on the screen.
type spot struct{ knob, row, from, to int }

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

// tooSmall reports whether the window is known and has no room for the bench.
func (b *Bench) tooSmall() bool {
	return (b.w < leastColumns || b.h < leastRows) && (b.w > 0 || b.h > 0)
}

// rows returns exactly h rows, none wider than w.
func (b *Bench) rows() []string {
	b.screen.panels, b.screen.spots = b.screen.panels[:0], b.screen.spots[:0]
	var rows []string
	switch {
	case b.tooSmall():
		rows = wrap(fmt.Sprintf("twokf needs %d columns and %d rows; this window has %d and %d. q quits.",
			leastColumns, leastRows, b.w, b.h), b.w)
	case b.page != nil:
		rows = append(padded(b.page.rows(b, b.w, b.h-2), b.h-2), b.footer()...)
	default:
		rows = b.benchRows()
	}
	return b.finish(padded(rows, b.h)[:b.h])
}

// finish cuts rows to the window and makes them lean; most are those of the
// frame before, which need no second look.
func (b *Bench) finish(rows []string) []string {
	s := &b.screen
	if s.width != b.w {
		s.width, s.raw = b.w, nil
	}
	finished := make([]string, len(rows))
	for i, r := range rows {
		if i < len(s.raw) && s.raw[i] == r {
			finished[i] = s.finished[i]
			continue
		}
		if ansi.StringWidth(r) > b.w {
			r = ansi.Truncate(r, b.w, "")
		}
		finished[i] = lean(r)
	}
	s.raw, s.finished = rows, finished
	return finished
}

// textRows returns the rows of the readout and of the doubts: as many as the
// height affords, and no more than they ever fill. They are always taken, so that
// the plots stay where they are whatever there is to say.
func (b *Bench) textRows() (readout, doubts int) {
	const most, fill = 4, 480 // rows; columns that all answers take
	room := min(max(1, b.h/12), most)
	return min(room+1, (fill+b.w-1)/b.w), room
}

// benchRows is the bench itself: the chain's name, the plots, knobs, readout,
// doubts, and a line for the user; when that takes more lines, they cover what
// is above.
func (b *Bench) benchRows() []string {
	pic := b.picture()
	knobRows := b.knobRows(b.w)
	readout, doubts := b.textRows()
	plots := b.plotRows(1, b.h-2-len(knobRows)-readout-doubts)
	for i := range b.screen.spots {
		b.screen.spots[i].row += 1 + len(plots)
	}
	rows := append([]string{b.headline()}, plots...)
	rows = append(rows, knobRows...)
	rows = append(rows, padded(b.readoutRows(b.w, readout), readout)...)
	rows = append(rows, padded(b.doubtRows(&pic, b.w, doubts), doubts)...)
	footer := b.footer()
	return append(rows[:max(0, min(len(rows), b.h-len(footer)))], footer...)
}

// padded adds empty rows up to n.
func padded(rows []string, n int) []string {
	for len(rows) < n {
		rows = append(rows, "")
	}
	return rows
}

// headline names the chain and says how far the study is.
func (b *Bench) headline() string {
	right := ""
	switch q := &b.inquiry; {
	case q.err != nil:
		right = "not computed"
	case q.slow && q.stage.Stage != "":
		right = fmt.Sprintf("%s %2.0f %%, %s%s", q.stage.Stage, 100*q.stage.Done, timeLeft(q.stage.Left), q.stage.Detail)
	case q.slow:
		right = "working"
	}
	right = ansi.Truncate(b.spell(right), b.w/2, b.spell("…"))
	left := ansi.Truncate(b.spell(b.title()), max(0, b.w-ansi.StringWidth(right)-2), b.spell("…"))
	fill := max(1, b.w-ansi.StringWidth(left)-ansi.StringWidth(right))
	return b.look.paint(inkHeading, left) + strings.Repeat(" ", fill) + b.look.paint(inkMark, right)
}

// worthSaying is how long a wait must be for its end to be foretold.
const worthSaying = 2 * time.Second

// timeLeft says about how long something will take; nothing if that is not
// known or soon over.
func timeLeft(d time.Duration) string {
	switch {
	case d < worthSaying:
		return ""
	case d < 90*time.Second:
		return fmt.Sprintf("about %.0f s left, ", d.Seconds())
	case d < 90*time.Minute:
		return fmt.Sprintf("about %.0f min left, ", d.Minutes())
	}
	return fmt.Sprintf("about %.0f h left, ", d.Hours())
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
	if v := b.reading.view; text == "" && b.reading.on && (b.large < 0 || b.large == v) {
		v := views[v]
		text = v.name() + ": " + v.read(b.scene(b.reading.view), b.reading.x)
	}
	if text == "" {
		text = "? keys · p ready-made chains · s save · u undo · d doubts · q quit"
	}
	lines := wrap(b.spell(text), b.w)
	if len(lines) > 2 {
		lines = append(lines[:1], b.cutOff(lines[1], b.w))
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
	for _, i := range b.shown() {
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
