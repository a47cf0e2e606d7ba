package tui

import (
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
	inkMark                     // kF, 2kF, E_F
	inkChosen                   // the knob that is turned
	inkRaised                   // doubts that are raised, errors
	inkCount
)

// look is how one ink is written on one terminal: an opening sequence, empty
// where the terminal has no colour.
type look [inkCount]string

const resetStyle = "\x1b[0m"

func newLook(profile termenv.Profile) look {
	var l look
	if profile == termenv.Ascii {
		return l
	}
	colour := func(hex string) string { return "\x1b[" + profile.Color(hex).Sequence(false) + "m" }
	l[inkAxis] = colour("#808080")
	l[inkHeading] = "\x1b[1m"
	l[inkBare] = colour("#0072B2")
	l[inkFinite] = colour("#D55E00")
	l[inkDensity] = colour("#009E73")
	l[inkMark] = colour("#CC79A7")
	l[inkChosen] = "\x1b[1m" + colour("#009E73")
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
