package tui

import (
	"strings"
	"unicode"

	"github.com/charmbracelet/x/ansi"

	"example.org/twokf/model/report"
)

// plainSigns spells the bench's own signs, which reports do not use.
var plainSigns = strings.NewReplacer("▸", ">", "▏", "|", "ⁱ", "^i")

// spell writes a text with the signs that the terminal has. Everything that
// enters the screen passes through here: titles, file names and errors may hold
// anything.
func (b *Bench) spell(s string) string {
	s = strings.Map(harmless, s)
	if !b.ascii {
		return s
	}
	return report.ASCII(plainSigns.Replace(s))
}

// harmless blanks the characters that a terminal would obey, and drops those
// that change how their neighbours are shown or how wide they are.
func harmless(r rune) rune {
	switch {
	case r >= ' ' && r <= '~': // most are, and need no table
	case unicode.IsControl(r), unicode.In(r, unicode.Zl, unicode.Zp):
		return ' '
	case unicode.In(r, unicode.Cf, unicode.Variation_Selector):
		return -1
	}
	return r
}

// wrap breaks a text at spaces into lines of at most width columns; a word that
// is longer is cut.
func wrap(s string, width int) []string {
	return strings.Split(ansi.Wrap(s, max(1, width), ""), "\n")
}

// cutOff ends a line with the sign for more, within width columns.
func (b *Bench) cutOff(s string, width int) string {
	more := b.spell("…")
	return ansi.Truncate(s, max(0, width-ansi.StringWidth(more)), "") + more
}
