package tui

import (
	"fmt"
	"math"
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/x/ansi"
)

// mouse sends one event at a cell of the screen.
func mouse(b *Bench, x, y int, button tea.MouseButton, action tea.MouseAction) {
	b.View()
	b.Update(tea.MouseMsg{X: x, Y: y, Button: button, Action: action})
}

func click(b *Bench, x, y int) { mouse(b, x, y, tea.MouseButtonLeft, tea.MouseActionPress) }

// where finds a text on the screen.
func where(t *testing.T, b *Bench, text string) (x, y int) {
	t.Helper()
	for y, row := range strings.Split(b.View(), "\n") {
		if before, _, found := strings.Cut(row, text); found {
			return ansi.StringWidth(before), y
		}
	}
	t.Fatalf("no %q in\n%s", text, b.View())
	return 0, 0
}

func TestAClickChoosesTheKnobUnderIt(t *testing.T) {
	for _, size := range [][2]int{{60, 20}, {80, 24}, {120, 36}, {200, 60}} {
		b := opened(t, "mixed", size[0], size[1])
		answer(t, b)
		for _, i := range b.shown() {
			text := strings.TrimLeft(b.spell(b.knobText(i)), " ▸")
			x, y := where(t, b, text)
			for _, at := range []int{x, x + ansi.StringWidth(text) - 1} {
				b.knob = (i + 1) % len(knobs)
				click(b, at, y)
				if b.knob != i {
					t.Errorf("%v: a click on %q at %d,%d chooses %s", size, text, at, y, knobs[b.knob].Key)
				}
			}
		}
	}
}

func TestTheWheelTurnsTheKnobUnderIt(t *testing.T) {
	b := opened(t, "mixed", 120, 36)
	before := b.chain
	x, y := where(t, b, "t 0.25 eV")
	mouse(b, x, y, tea.MouseButtonWheelUp, tea.MouseActionPress)
	if b.chain.Hopping <= before.Hopping || knobs[b.knob].Key != "electrons.hopping" {
		t.Errorf("the wheel leaves t at %g and chooses %s", b.chain.Hopping, knobs[b.knob].Key)
	}
	mouse(b, 3, 3, tea.MouseButtonWheelDown, tea.MouseActionPress) // over a plot: the chosen one
	if b.chain != before {
		t.Errorf("turned up and down again, t is %g", b.chain.Hopping)
	}
}

func TestPointingAtAPlotReadsIt(t *testing.T) {
	b := opened(t, "quarter", 120, 36)
	answer(t, b)
	b.View()
	for i, want := range []string{"bands: k ", "density and lattice: site ", "χ(q): q ", "phonon: q "} {
		p := b.screen.panels[i]
		b.say("something else") // gives way to the reading
		click(b, p.col+p.w/2, p.row+p.h/2)
		demand(t, footing(b, 1), want)
		first := footing(b, 1)
		mouse(b, p.col+p.w*3/4, p.row+p.h/2, tea.MouseButtonLeft, tea.MouseActionMotion)
		if second := footing(b, 1); second == first {
			t.Errorf("dragging along %s reads nothing else than %q", views[i].name(), first)
		}
	}
	press(t, b, "4")
	x, y := where(t, b, "2kF") // stands beside its mark at π/2
	click(b, x-1, y)
	var q float64
	if _, err := fmt.Sscanf(footing(b, 1), "phonon: q %gπ", &q); err != nil || math.Abs(q-0.5) > 1./100 {
		t.Errorf("a click on the mark of 2kF reads %q", footing(b, 1))
	}
}

func TestClicksElsewhereDoNothing(t *testing.T) {
	b := opened(t, "quarter", 120, 36)
	answer(t, b)
	b.message = ""
	b.View()
	before, p := summary(b), b.screen.panels[0]
	for _, at := range [][2]int{{-1, -1}, {0, 0}, {119, 35}, {500, 500}, {p.col, p.row}, {p.w, p.row + 3}, {p.col + 3, p.row + p.h - 1}} {
		click(b, at[0], at[1])
		if after := summary(b); after != before {
			t.Errorf("a click at %v changes\n%s\nto\n%s", at, before, after)
		}
	}
	for _, button := range []tea.MouseButton{tea.MouseButtonNone, tea.MouseButtonRight, tea.MouseButtonMiddle, tea.MouseButtonBackward} {
		mouse(b, p.col+p.w/2, p.row+p.h/2, button, tea.MouseActionPress)
	}
	mouse(b, p.col+p.w/2, p.row+p.h/2, tea.MouseButtonLeft, tea.MouseActionRelease)
	x, y := where(t, b, "t 0.25 eV")
	mouse(b, x, y, tea.MouseButtonLeft, tea.MouseActionMotion) // a drag that began elsewhere
	if b.reading.on || b.chain != chainOf(t, "quarter") || knobs[b.knob].Key != "conditions.temperature" {
		t.Error("a click that means nothing does something")
	}
}

func TestTheWheelScrollsAPage(t *testing.T) {
	b := opened(t, "quarter", 80, 24)
	answer(t, b)
	press(t, b, "?")
	top := b.View()
	mouse(b, 10, 10, tea.MouseButtonWheelDown, tea.MouseActionPress)
	if b.View() == top || b.chain != chainOf(t, "quarter") {
		t.Error("the wheel does not scroll the key list")
	}
	mouse(b, 10, 10, tea.MouseButtonWheelUp, tea.MouseActionPress)
	if b.View() != top {
		t.Error("the wheel does not scroll back")
	}
	click(b, 10, 10)
	press(t, b, "esc", "p")
	mouse(b, 10, 10, tea.MouseButtonWheelDown, tea.MouseActionPress)
	if at := b.page.(*presetPage).at; at != 1 {
		t.Errorf("one notch of the wheel goes to preset %d", at)
	}
}

func TestTheMouseIsDeafToWhatIsNotSeen(t *testing.T) {
	b := opened(t, "quarter", 120, 36)
	answer(t, b)
	x, y := where(t, b, "t 0.25 eV")
	b.Update(tea.WindowSizeMsg{Width: 50, Height: 10})
	before := summary(b)
	mouse(b, x, y, tea.MouseButtonWheelUp, tea.MouseActionPress)
	press(t, b, "up", "enter", "?")
	if summary(b) != before {
		t.Error("a window that is too small to show the bench works it all the same")
	}
	if cmd := press(t, b, "q"); cmd == nil || cmd() != tea.Quit() {
		t.Error("q does not quit, as that window says")
	}
}
