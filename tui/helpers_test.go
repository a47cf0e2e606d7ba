package tui

import (
	"context"
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/muesli/termenv"

	"example.org/twokf/model"
	"example.org/twokf/model/study"
	"example.org/twokf/presets"
)

// opened returns a bench without colour on a preset, in a window of that size.
// Nothing runs beside it: tests hand it the messages that a program would.
func opened(t testing.TB, preset string, w, h int) *Bench {
	t.Helper()
	return openedWith(t, Settings{Chain: chainOf(t, preset), From: preset}, w, h)
}

func openedWith(t testing.TB, set Settings, w, h int) *Bench {
	t.Helper()
	if set.State == "" {
		set.State = "-"
	}
	if set.Profile == nil {
		plain := termenv.Ascii
		set.Profile = &plain
	}
	b := newBench(context.Background(), set)
	b.Init()
	b.Update(tea.WindowSizeMsg{Width: w, Height: h})
	return b
}

func chainOf(t testing.TB, preset string) model.Chain {
	t.Helper()
	c, err := presets.Get(preset)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// answers are the studies that tests have done.
var answers = map[model.Chain]*study.Portrait{}

// answer does the study of the chain on the bench and hands it the end.
func answer(t testing.TB, b *Bench) {
	t.Helper()
	if answers[b.chain] == nil {
		p, err := study.Run(context.Background(), b.chain, study.Settings{Levels: shownLevels})
		if err != nil {
			t.Fatal(err)
		}
		answers[b.chain] = p
	}
	b.Update(answeredMsg{b.inquiry.gen, answers[b.chain], nil})
}

// keyNames are the keys that Bubble Tea has a name for.
var keyNames = func() map[string]tea.KeyMsg {
	names := map[string]tea.KeyMsg{}
	for i := -256; i < 256; i++ {
		if k := (tea.KeyMsg{Type: tea.KeyType(i)}); k.Type != tea.KeyRunes && k.String() != "" {
			names[k.String()] = k
		}
	}
	names[" "] = tea.KeyMsg{Type: tea.KeySpace, Runes: []rune{' '}}
	return names
}()

// keyOf is the message for a key of that name.
func keyOf(t testing.TB, name string) tea.KeyMsg {
	t.Helper()
	if k, ok := keyNames[name]; ok {
		return k
	}
	if r := []rune(name); len(r) == 1 {
		return tea.KeyMsg{Type: tea.KeyRunes, Runes: r}
	}
	t.Fatalf("Bubble Tea has no key %q", name)
	return tea.KeyMsg{}
}

// press presses keys one after the other and returns the last one's command.
func press(t testing.TB, b *Bench, keys ...string) tea.Cmd {
	t.Helper()
	var cmd tea.Cmd
	for _, k := range keys {
		_, cmd = b.Update(keyOf(t, k))
	}
	return cmd
}

// enter types a text into the prompt and presses Enter.
func enter(t testing.TB, b *Bench, text string) tea.Cmd {
	t.Helper()
	if b.prompt == nil {
		t.Fatal("nothing is asked for")
	}
	for _, r := range text {
		press(t, b, string(r))
	}
	return press(t, b, "enter")
}

// run runs a command and hands what comes of it to the bench.
func run(t testing.TB, b *Bench, cmd tea.Cmd) {
	t.Helper()
	if cmd != nil {
		b.Update(cmd())
	}
}

// choose chooses a knob by its key.
func choose(t testing.TB, b *Bench, key string) {
	t.Helper()
	for range knobs {
		if knobs[b.knob].Key == key {
			return
		}
		press(t, b, "right")
	}
	t.Fatalf("no knob %s", key)
}

// footing is the text of the lowest rows that are not empty.
func footing(b *Bench, rows int) string {
	all := strings.Split(b.View(), "\n")
	return strings.Join(all[max(0, len(all)-rows):], "\n")
}

// demand fails the test unless the text holds all parts.
func demand(t testing.TB, text string, parts ...string) {
	t.Helper()
	for _, p := range parts {
		if !strings.Contains(text, p) {
			t.Errorf("no %q in\n%s", p, text)
		}
	}
}
