// Package background settles, before anything else is initialised, that the
// terminal's background is not to be asked for. The terminal library asks at
// start-up and waits up to five seconds for terminals that do not answer; our
// colours read on light and dark alike, so there is nothing to learn. It works
// because packages that are ready are initialised in the order of their paths,
// and this one sorts before the library.
package background

import "github.com/charmbracelet/lipgloss"

func init() { lipgloss.SetHasDarkBackground(true) }
