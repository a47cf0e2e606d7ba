package tui

import (
	"errors"
	"strings"
	"testing"

	"example.org/twokf/model"
	"example.org/twokf/model/study"
)

// evil would retitle the window, clear the screen, colour what follows, ring,
// turn the writing direction and break the line.
const evil = "\x1b]0;owned\x07\x1b[2J\x1b[31mA\u202eB\u009b7mC\u2028D\u200bE\nF\rG\tH\x00\x7f\xff"

func TestNothingReachesTheTerminalRaw(t *testing.T) {
	c := chainOf(t, "half")
	c.Title, c.Source = strings.ToValidUTF8(evil, ""), "invented"
	for _, ascii := range []bool{false, true} {
		b := openedWith(t, Settings{Chain: c, From: evil, File: evil, ASCII: ascii}, 120, 36)
		clean := func(what string) {
			t.Helper()
			if wrong := checkBench(b); wrong != "" {
				t.Errorf("%s: %s", what, wrong)
			}
		}
		clean("title and file name")
		demand(t, b.View(), "owned")
		answer(t, b)
		b.complain(errors.New(evil))
		clean("an error")
		press(t, b, "s")
		clean("a proposed path")
		b.onSaved(savedMsg{evil, c, b.origin, errors.New(evil)})
		press(t, b, "esc")
		b.onSaved(savedMsg{evil, c, b.origin, nil})
		clean("a path saved to")
		b.prompt = newPrompt(evil, evil, evil)
		b.prompt.err = evil
		clean("a prompt")
		b.prompt = nil
		p := *b.inquiry.last
		p.Lattice, p.Levels, p.Troubles = nil, nil, []study.Trouble{{Stage: evil, Err: errors.New(evil)}}
		b.Update(answeredMsg{b.inquiry.gen, &p, nil})
		clean("a trouble")
		press(t, b, "up")
		b.Update(updateMsg{gen: b.inquiry.gen, news: update{progress: &study.Progress{Stage: evil, Detail: evil}}})
		b.Update(slowMsg{b.inquiry.lag})
		clean("progress")
	}
}

func TestWordsKeepTheirMeaningWhenCleaned(t *testing.T) {
	b := new(Bench)
	for _, tt := range []struct{ in, want, ascii string }{
		{"Polyacetylene", "Polyacetylene", "Polyacetylene"},
		{"Fröhlich's chain, 2Δ", "Fröhlich's chain, 2Δ", "Froehlich's chain, 2Delta"},
		{"一次元", "一次元", "???"},
		{"a\tb\nc", "a b c", "a b c"},
		{"▸T ▏…", "▸T ▏…", ">T |..."},
		{"\x1b[31mred\x1b[0m", " [31mred [0m", " [31mred [0m"},
	} {
		if got := b.spell(tt.in); got != tt.want {
			t.Errorf("%q becomes %q, want %q", tt.in, got, tt.want)
		}
		b.ascii = true
		if got := b.spell(tt.in); got != tt.ascii {
			t.Errorf("%q becomes %q in ASCII, want %q", tt.in, got, tt.ascii)
		}
		b.ascii = false
	}
}

func TestATitleOfAnyLengthFits(t *testing.T) {
	for _, title := range []string{"", strings.Repeat("long ", 800), strings.Repeat("漢", 200), strings.Repeat("e\u0301", 100)} {
		b := openedWith(t, Settings{Chain: model.Chain{Title: title, Sites: 4, Hopping: 1, Spin: 2, Filling: 1}, From: "a file"}, 80, 24)
		answer(t, b)
		if wrong := checkBench(b); wrong != "" {
			t.Errorf("%.20q: %s", title, wrong)
		}
	}
}
