package tui

import (
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/x/ansi"
)

func TestTypingReplacesTheOldValue(t *testing.T) {
	for _, tt := range []struct {
		what string
		keys []string
		want string
	}{
		{"a first character takes the old value's place", []string{"7"}, "7"},
		{"so does what follows it", []string{"7", "0"}, "70"},
		{"a cursor key keeps it", []string{"left", "1"}, "1612"},
		{"Home keeps it", []string{"home", "1"}, "1162"},
		{"Backspace keeps it", []string{"backspace"}, "16"},
		{"Ctrl-U empties it", []string{"ctrl+u", "5"}, "5"},
		{"Delete works in the middle", []string{"home", "delete"}, "62"},
		{"words may be deleted backwards", []string{"end", " ", "K", "ctrl+w"}, "162 "},
		{"Alt with a letter is no text", []string{" ", " ", "left", "alt+d"}, "162  "},
	} {
		b := opened(t, "half", 80, 24)
		choose(t, b, "chain.sites")
		press(t, b, "enter")
		for _, k := range tt.keys {
			if k == "alt+d" {
				b.Update(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune{'d'}, Alt: true})
				continue
			}
			press(t, b, k)
		}
		if got := b.prompt.input.Value(); got != tt.want {
			t.Errorf("%s: %q after %q, want %q", tt.what, got, tt.keys, tt.want)
		}
	}
}

func TestAPromptTakesALabUnit(t *testing.T) {
	b := opened(t, "polyene", 80, 24)
	choose(t, b, "conditions.temperature")
	press(t, b, "enter")
	enter(t, b, "300 K")
	if b.prompt != nil {
		t.Fatal("the prompt stays open: ", b.prompt.err)
	}
	demand(t, b.View(), "T 0.02585 eV (300 K)")
	press(t, b, "u")
	if b.chain != chainOf(t, "polyene") {
		t.Error("undo does not bring the old temperature back")
	}
}

func TestAWrongValueKeepsThePromptOpen(t *testing.T) {
	b := opened(t, "spinless", 80, 24)
	before := b.work
	choose(t, b, "conditions.temperature")
	press(t, b, "enter")
	enter(t, b, "300 K")
	if b.prompt == nil || b.work != before {
		t.Fatal("a laboratory unit is accepted on a chain in units of t")
	}
	demand(t, b.View(), "300 K▏", "laboratory units need")
	press(t, b, "backspace")
	if b.prompt.err != "" || b.prompt.input.Value() != "300 " {
		t.Errorf("the next key leaves %q and the error %q", b.prompt.input.Value(), b.prompt.err)
	}
	press(t, b, "esc")
	if b.prompt != nil || b.work != before {
		t.Error("Esc does not leave everything as it was")
	}
}

func TestPastedTextIsOneLine(t *testing.T) {
	b := opened(t, "polyene", 80, 24)
	press(t, b, "enter")
	b.Update(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune(" 0.1\teV\r\n\x1b[31m"), Paste: true})
	if got := b.prompt.input.Value(); got != "0.1 eV   [31m" {
		t.Errorf("the line is %q", got)
	}
	b = opened(t, "polyene", 80, 24)
	press(t, b, "enter")
	b.Update(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune("\n"), Paste: true})
	if got := b.prompt.input.Value(); got != "0" {
		t.Errorf("an empty paste leaves %q in place of the old value", got)
	}
}

func TestLongLinesKeepTheCursorInSight(t *testing.T) {
	b := opened(t, "polyene", 60, 20)
	press(t, b, "o")
	long := strings.Repeat("a", 100) + "/" + strings.Repeat("z", 100)
	b.Update(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune(long), Paste: true})
	for _, at := range []string{"end", "left", "home", "right", "right"} {
		press(t, b, at)
		if row := footing(b, 2); !strings.Contains(row, "▏") {
			t.Errorf("after %s the cursor is out of sight:\n%s", at, row)
		}
		for _, row := range strings.Split(b.View(), "\n") {
			if ansi.StringWidth(row) > 60 {
				t.Errorf("%q is too wide", row)
			}
		}
	}
	press(t, b, "home")
	demand(t, footing(b, 2), "▏aaa", "…")
	press(t, b, "end")
	demand(t, footing(b, 2), "…zzz", "zzz▏")
}

// A prompt and its hint may cover the lines above, but not the plots.
func TestAPromptDoesNotMoveThePlots(t *testing.T) {
	for _, size := range [][2]int{{60, 20}, {80, 24}, {120, 36}} {
		b := opened(t, "polyene", size[0], size[1])
		answer(t, b)
		before := strings.Split(b.View(), "\n")
		plots := 1
		for _, p := range b.screen.panels {
			plots = max(plots, p.row+p.h)
		}
		press(t, b, "enter")
		b.prompt.hint = strings.Repeat("a long hint ", 50)
		after := strings.Split(b.View(), "\n")
		for i := range plots {
			if before[i] != after[i] {
				t.Errorf("%v: row %d moves from\n%s\nto\n%s", size, i, before[i], after[i])
			}
		}
		demand(t, b.View(), "conditions.temperature (eV) = 0▏")
	}
}

func TestAPhononJoinsAChainThatHasNone(t *testing.T) {
	b := opened(t, "polyene", 80, 24)
	before := b.work
	choose(t, b, "site_phonon.coupling")
	press(t, b, "up")
	if b.work != before {
		t.Error("turning the knob of a phonon that is not there brings it")
	}
	demand(t, b.View(), "this chain has no site phonon", "g –")
	press(t, b, "enter")
	enter(t, b, "0.4 eV")
	if b.prompt != nil {
		t.Fatal(b.prompt.err)
	}
	if p := b.chain.Site; !p.Present || p.Coupling != 0.4 || p.Stiffness != 1 || p.Frequency != 0 {
		t.Errorf("the site phonon is %+v", p)
	}
	demand(t, b.View(), "▸g 0.4 eV", "K_s 1 eV", "ħω_s –")
	choose(t, b, "site_phonon.frequency")
	press(t, b, "x")
	if b.work != before {
		t.Error("x does not take the branch away")
	}
	if key := knobs[b.knob].Key; key != "site_phonon.coupling" {
		t.Errorf("the knob chosen now is %s, which is not on the screen", key)
	}
	press(t, b, "u")
	if !b.chain.Site.Present {
		t.Error("undo does not bring it back")
	}
}

func TestChoosingGoesRoundTheKnobsThatAreShown(t *testing.T) {
	b := opened(t, "polyene", 80, 24)
	start, seen := b.knob, 0
	for range knobs {
		press(t, b, "right")
		demand(t, b.View(), "▸"+b.symbol(knobs[b.knob])+" ")
		if seen++; b.knob == start {
			break
		}
	}
	if seen != len(b.shown()) {
		t.Errorf("%d steps lead round %d knobs", seen, len(b.shown()))
	}
	press(t, b, "right", "left")
	if b.knob != start {
		t.Error("left is not right's inverse")
	}
}
