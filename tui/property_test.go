package tui

import (
	"context"
	"errors"
	"fmt"
	"math/rand/v2"
	"strings"
	"sync"
	"testing"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/x/ansi"
	"github.com/muesli/termenv"
	"pgregory.net/rapid"

	"example.org/twokf/model"
	"example.org/twokf/model/study"
	"example.org/twokf/presets"
)

// oddChains are as small, as full and as bare as chains can be.
var oddChains = []model.Chain{
	{Sites: 1, Hopping: 1, Spin: 2, Filling: 1},
	{Sites: 1, Boundary: model.Open, Hopping: 1, Spin: 1, ByNumber: true, Electrons: 1, Bond: model.Phonon{Present: true, Stiffness: 1}},
	{Sites: 2, Hopping: 1, Spin: 2, Filling: 1, Bond: model.Phonon{Present: true, Coupling: 1, Stiffness: 2, Frequency: 0.1}},
	{Sites: 3, Boundary: model.Open, Hopping: 1, Spin: 2, Filling: 2, Site: model.Phonon{Present: true, Coupling: 1, Stiffness: 1}},
	{Sites: 6, Hopping: 1, NextHopping: -0.6, Spin: 1, Site: model.Phonon{Present: true, Coupling: 0.1, Stiffness: 3, Frequency: 1}},
	{Sites: 8, Spin: 2, Filling: 1, Hopping: 1e-12, Site: model.Phonon{Present: true, Coupling: 1, Stiffness: 1}},
	{Sites: 10, Hopping: 1e9, Spin: 2, Filling: 1, Temperature: 1e9, Bond: model.Phonon{Present: true, Coupling: 1e-12, Stiffness: 1e9}},
	{Sites: 12, Hopping: 1, Spin: 2, Filling: 0.37, Temperature: 0.1, Title: "\x1b[31mред\x07\u202e 測試\n"},
}

// pool holds chains with their answers.
var pool = sync.OnceValue(func() (out []*study.Portrait) {
	chains := oddChains
	for _, p := range presets.List() {
		switch p.Name {
		case "spinless", "soliton", "weak", "polyene":
			chains = append(chains, p.Chain)
		}
	}
	for _, c := range chains {
		p, err := study.Run(context.Background(), c, study.Settings{})
		if err != nil {
			panic(fmt.Sprint(err, c))
		}
		out = append(out, p)
	}
	return out
})

// stranger draws what somebody may type or paste, or a file be called.
func stranger() *rapid.Generator[string] {
	return rapid.OneOf(
		rapid.SampledFrom([]string{"300 K", "25 meV", "0.3 t", "-1", "1e400", "nan", "inf", "open", "7", "2097152", "1/3", "pi/2", "0", "1e-12", "~/", "../", "/", "/dev/tty", "*", "[", "\\"}),
		rapid.StringOfN(rapid.RuneFrom([]rune("0123456789.eE+-/ KmtVπ")), 0, 12, -1),
		rapid.String(),
		rapid.Map(rapid.SliceOfN(rapid.Byte(), 0, 20), func(b []byte) string { return string(b) }),
	)
}

// pick draws one of n evenly, which rapid's own ranges do not; it shrinks to 0.
func pick(t *rapid.T, n int, label string) int {
	v := rapid.Uint64().Draw(t, label)
	v = (v ^ v>>31) * 0x9e3779b97f4a7c15
	v = (v ^ v>>29) * 0xbf58476d1ce4e5b9
	return int((v ^ v>>32) % uint64(n))
}

// anyKey draws a key, the bench's own more often than others.
func anyKey(t *rapid.T) tea.KeyMsg {
	if pick(t, 10, "kind") < 7 {
		var names []string
		for _, a := range keyTable() {
			names = append(names, a.binding.Keys()...)
		}
		names = append(names, "enter", "enter", "esc", "backspace", "delete", "home", "end", "tab")
		name := names[pick(t, len(names), "name")]
		if k, ok := keyNames[name]; ok {
			return k
		}
		return tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune(name)}
	}
	if rapid.Bool().Draw(t, "runes") {
		return tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune(stranger().Draw(t, "text")), Paste: rapid.Bool().Draw(t, "paste"), Alt: rapid.Bool().Draw(t, "alt")}
	}
	return tea.KeyMsg{Type: tea.KeyType(rapid.IntRange(-80, 127).Draw(t, "type")), Alt: rapid.Bool().Draw(t, "alt")}
}

// anyPart draws a portrait of which some parts are not known yet.
func anyPart(t *rapid.T) *study.Portrait {
	p := *pool()[pick(t, len(pool()), "portrait")]
	known := pick(t, 10, "known")
	if known < 7 {
		p.Complete, p.Doubts = false, nil
	}
	if known < 6 {
		p.Transition = nil
	}
	if known < 5 {
		p.Levels = nil
	}
	if known < 4 {
		p.Lattice = nil
	}
	if known < 3 {
		p.Phonon = nil
	}
	if known < 2 {
		p.Response = nil
	}
	if known < 1 {
		p.Band = nil
	}
	if pick(t, 10, "troubles") == 1 {
		p.Troubles = []study.Trouble{{Stage: "lattice", Err: errors.New(stranger().Draw(t, "trouble"))}}
		p.Lattice, p.Levels = nil, nil
	}
	return &p
}

// anyMessage draws something that may happen to a bench.
func anyMessage(t *rapid.T, b *Bench) tea.Msg {
	gen := b.inquiry.gen
	if pick(t, 4, "old") == 1 {
		gen -= rapid.IntRange(0, gen).Draw(t, "age")
	}
	var err error
	if pick(t, 4, "fails") == 1 {
		err = errors.New(stranger().Draw(t, "error"))
	}
	switch pick(t, 20, "message") {
	case 0:
		return nil
	case 10:
		return tea.WindowSizeMsg{Width: rapid.IntRange(-1, 300).Draw(t, "w"), Height: rapid.IntRange(-1, 100).Draw(t, "h")}
	case 1:
		return tea.WindowSizeMsg{Width: 58 + pick(t, 80, "w"), Height: 19 + pick(t, 25, "h")}
	case 2, 3:
		return tea.MouseMsg{X: pick(t, b.w+2, "x") - 1, Y: pick(t, b.h+2, "y") - 1,
			Button: tea.MouseButton(pick(t, 8, "button")), Action: tea.MouseAction(pick(t, 3, "action"))}
	case 4:
		return startMsg{gen}
	case 5:
		return slowMsg{b.inquiry.lag - pick(t, 2, "lag")}
	case 6:
		p := rapid.SampledFrom([]*study.Progress{nil, {Stage: "lattice", Done: 0.3, Detail: "start \"2kF\": residual 1e-3 of 1e-9"}}).Draw(t, "progress")
		return updateMsg{gen: gen, news: update{anyPart(t), p}}
	case 7:
		if err != nil {
			return answeredMsg{gen, nil, err}
		}
		return answeredMsg{gen, anyPart(t), nil}
	case 8:
		return savedMsg{stranger().Draw(t, "path"), b.chain, b.origin, err}
	case 9:
		return draftMsg{rapid.IntRange(0, b.drafts.tick+1).Draw(t, "tick")}
	}
	return anyKey(t)
}

// checkBench tells what is wrong with a bench and its screen, "" for nothing.
func checkBench(b *Bench) string {
	if err := b.chain.Validate(); err != nil {
		return "the chain is not valid: " + err.Error()
	}
	if absent(knobs[b.knob], b.chain) && !strings.HasSuffix(knobs[b.knob].Key, ".coupling") {
		return "the chosen knob " + knobs[b.knob].Key + " is not shown"
	}
	view := b.View()
	if b.w == 0 || b.h == 0 {
		if view != "" {
			return "a window without cells shows something"
		}
		return ""
	}
	rows := strings.Split(view, "\n")
	if len(rows) != b.h {
		return fmt.Sprintf("%d rows in a window of %d", len(rows), b.h)
	}
	for i, r := range rows {
		if w := ansi.StringWidth(r); w > b.w {
			return fmt.Sprintf("row %d is %d columns wide in a window of %d: %q", i, w, b.w, r)
		}
		if bad := unwanted(ansi.Strip(r), b.ascii); bad != "" {
			return fmt.Sprintf("row %d holds %s: %q", i, bad, r)
		}
		if b.look == (look{}) && ansi.Strip(r) != r {
			return fmt.Sprintf("row %d has escape sequences without colours: %q", i, r)
		}
	}
	return ""
}

// unwanted finds characters that no screen may hold.
func unwanted(s string, ascii bool) string {
	for _, r := range s {
		switch {
		case r < ' ' || r >= 0x7f && r < 0xa0:
			return fmt.Sprintf("the control character %U", r)
		case r == 0x202e || r == 0x2028 || r == 0x200b:
			return fmt.Sprintf("the invisible %U", r)
		case ascii && r > '~':
			return fmt.Sprintf("%q, which is not ASCII", r)
		}
	}
	return ""
}

// anyBench draws a bench on one of the pool's chains.
func anyBench(t *rapid.T) *Bench {
	p := pool()[pick(t, len(pool()), "chain")]
	profile := []termenv.Profile{termenv.Ascii, termenv.ANSI256}[pick(t, 2, "colours")]
	b := newBench(context.Background(), Settings{
		Chain: p.Chain, From: stranger().Draw(t, "from"), File: stranger().Draw(t, "file"), ASCII: pick(t, 2, "ascii") == 1,
		Profile: &profile, State: "-",
	})
	b.Init()
	b.Update(tea.WindowSizeMsg{Width: 80, Height: 24})
	return b
}

func whateverHappens(t *rapid.T) {
	b := anyBench(t)
	for range 60 {
		msg := anyMessage(t, b)
		before, past := b.work, len(b.trail.past)
		b.Update(msg)
		if wrong := checkBench(b); wrong != "" {
			t.Fatalf("after %#v: %s", msg, wrong)
		}
		if after := b.work; len(b.trail.past) == past+1 {
			b.undo()
			if b.work != before && !isBurst(msg) {
				t.Fatalf("after %#v, undo gives %+v, not %+v", msg, b.work, before)
			}
			b.redo()
			if b.work != after {
				t.Fatalf("after %#v, undo and redo give %+v, not %+v", msg, b.work, after)
			}
		}
	}
}

func isBurst(msg tea.Msg) bool {
	k, ok := msg.(tea.KeyMsg)
	return ok && len(k.Runes) > 1 && !k.Paste
}

func TestWhateverHappensTheBenchStands(t *testing.T) { rapid.Check(t, whateverHappens) }

func FuzzBench(f *testing.F) {
	for seed := range uint64(4) {
		rng, draws := rand.New(rand.NewPCG(seed, 0)), make([]byte, 1<<14)
		for i := range draws {
			draws[i] = byte(rng.Uint32())
		}
		f.Add(draws)
	}
	f.Fuzz(rapid.MakeFuzz(whateverHappens))
}

// A value typed at a knob is taken whole or not at all.
func TestTypedTextNeverBreaksTheChain(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		b := anyBench(t)
		b.knob = rapid.SampledFrom(b.shown()).Draw(t, "knob")
		p, before := knobs[b.knob], b.work
		b.Update(keyNames["enter"])
		text := stranger().Draw(t, "text")
		b.Update(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune(text), Paste: true})
		b.Update(keyNames["enter"])
		if wrong := checkBench(b); wrong != "" {
			t.Fatalf("%s = %q: %s", p.Key, text, wrong)
		}
		if b.prompt != nil && b.work != before {
			t.Fatalf("%s = %q is refused (%s) and changes the chain", p.Key, text, b.prompt.err)
		}
		if b.work != before {
			b.undo()
		}
		if b.work != before {
			t.Fatalf("%s = %q cannot be undone", p.Key, text)
		}
	})
}
