package tui

import (
	"fmt"
	"os"
	"strings"
	"testing"
	"unicode/utf8"

	tea "github.com/charmbracelet/bubbletea"
)

func TestKeyTableIsSound(t *testing.T) {
	owner := map[string]string{}
	for _, a := range keyTable() {
		help := a.binding.Help()
		if help.Key == "" || help.Desc == "" {
			t.Errorf("%q has no help", a.binding.Keys())
		}
		for _, name := range a.binding.Keys() {
			if other, taken := owner[name]; taken {
				t.Errorf("%q is bound to %q and to %q", name, other, help.Desc)
			}
			owner[name] = help.Desc
			if _, named := keyNames[name]; !named && utf8.RuneCountInString(name) != 1 {
				t.Errorf("Bubble Tea never names a key %q", name)
				continue
			}
			if got := keyOf(t, name).String(); got != name {
				t.Errorf("the message for %q is called %q", name, got)
			}
		}
	}
}

func TestEveryKeyDoesSomethingOfItsOwn(t *testing.T) {
	for _, a := range keyTable() {
		for _, name := range a.binding.Keys() {
			b := opened(t, "half", 80, 24)
			answer(t, b)
			b.message = ""
			press(t, b, "right", "w", "v") // undo, pan and read have something to work on
			before, cmd := summary(b), press(t, b, name)
			if summary(b) == before && cmd == nil {
				t.Errorf("%q (%s) does nothing", name, a.binding.Help().Desc)
			}
		}
	}
}

// summary holds what a key may change.
func summary(b *Bench) string {
	return fmt.Sprint(b.work, b.knob, b.ascii, b.large, b.reading, b.sites, b.staggered, b.page != nil, b.prompt != nil, b.message)
}

func TestKeyListShowsEveryKey(t *testing.T) {
	for _, ascii := range []bool{false, true} {
		b := opened(t, "half", 200, 60)
		b.ascii = ascii
		press(t, b, "?")
		list := b.View()
		for _, a := range keyTable() {
			demand(t, list, b.spell(a.binding.Help().Key), b.spell(a.binding.Help().Desc))
		}
	}
}

func TestABurstOfKeysIsNotOneKey(t *testing.T) {
	one, burst := opened(t, "half", 80, 24), opened(t, "half", 80, 24)
	press(t, one, "+", "+", "-", "+")
	burst.Update(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune("++-+")})
	if one.chain != burst.chain {
		t.Errorf("four keys in one read turn the knob to %g, one by one to %g", burst.chain.Temperature, one.chain.Temperature)
	}
	paste := opened(t, "half", 80, 24)
	before := paste.chain
	paste.Update(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune("++-+"), Paste: true})
	if paste.chain != before {
		t.Error("pasted text turns a knob")
	}
}

// markdownKeys is the key list as rows of a table.
func markdownKeys() string {
	rows := []string{"| keys | what |", "| --- | --- |"}
	for _, a := range keyTable() {
		help := a.binding.Help()
		names := strings.Fields(help.Key)
		for i, n := range names {
			names[i] = "`" + n + "`"
		}
		rows = append(rows, "| "+strings.Join(names, " ")+" | "+help.Desc+" |")
	}
	return strings.Join(rows, "\n") + "\n"
}

func TestReadmeHasTheKeyTable(t *testing.T) {
	readme, err := os.ReadFile("../README.md")
	if err != nil || !strings.Contains(string(readme), markdownKeys()) {
		t.Errorf("README.md does not hold the key table as it is; paste this into its section on keys (%v):\n\n%s", err, markdownKeys())
	}
}
