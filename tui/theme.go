package tui

import (
	"strings"

	"github.com/muesli/termenv"

	"example.org/twokf/tui/plot"
)

// Inks are roles. Colours come from the set of M. Okabe and K. Ito (2008),
// which colour-blind people can tell apart, and only from those of its members
// that read on light and on dark backgrounds.
const (
	inkPlain   = plot.Plain
	inkAxis    = plot.Ink(iota) // rulers, ticks, hints
	inkHeading                  // what a plot shows
	inkBare                     // the infinite chain, the bare lattice
	inkFinite                   // the finite relaxed chain
	inkDensity                  // density and bond order
	inkMark                     // kF, 2kF, E_F: the terminal's own
	inkChosen                   // the knob that is turned
	inkRaised                   // doubts that are raised, errors
	inkCount
)

// look is how one ink is written on one terminal: an opening sequence, empty
// where the terminal has no colour.
type look [inkCount]string

const (
	resetStyle = "\x1b[m"
	bold       = "\x1b[1m"
)

func newLook(profile termenv.Profile) look {
	var l look
	if profile == termenv.Ascii {
		return l
	}
	colour := func(hex string) string { return "\x1b[" + profile.Color(hex).Sequence(false) + "m" }
	l[inkAxis] = colour("#808080")
	l[inkHeading] = bold
	l[inkBare] = colour("#009E73")
	l[inkFinite] = colour("#D55E00")
	l[inkDensity] = colour("#CC79A7")
	l[inkChosen] = bold + colour("#D55E00")
	l[inkRaised] = colour("#D55E00")
	return l
}

// append writes a run of cells of one ink.
func (l *look) append(dst []byte, ink plot.Ink, run []byte) []byte {
	open := l[ink]
	if open == "" {
		return append(dst, run...)
	}
	dst = append(dst, open...)
	dst = append(dst, run...)
	return append(dst, resetStyle...)
}

// paint colours a text.
func (l *look) paint(ink plot.Ink, s string) string {
	if l[ink] == "" || s == "" {
		return s
	}
	return l[ink] + s + resetStyle
}

// lean drops the sequences of a row that have no effect: a reset that only
// blanks separate from the next colour, and a colour that is on already.
func lean(row string) string {
	var out strings.Builder
	on, isBold := "", false
	for {
		i := strings.IndexByte(row, '\x1b')
		if i < 0 {
			return out.String() + row
		}
		end := i + strings.IndexByte(row[i:], 'm') + 1
		text, sequence := row[:i], row[i:end]
		out.WriteString(text)
		row = row[end:]
		switch next := strings.TrimLeft(row, " "); {
		case sequence == resetStyle && !isBold && strings.HasPrefix(next, "\x1b") && !strings.HasPrefix(next, bold):
			continue
		case sequence == resetStyle:
			on, isBold = "", false
		case sequence == bold:
			isBold = true
		case sequence == on:
			continue
		default:
			on = sequence
		}
		out.WriteString(sequence)
	}
}
