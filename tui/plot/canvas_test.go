package plot

import (
	"math"
	"strings"
	"testing"
	"unicode"

	"github.com/charmbracelet/x/ansi"
	"pgregory.net/rapid"
)

var charsets = map[string]Charset{"braille": Braille, "ascii": ASCII}

// anyDrawing draws a picture of any size with any content.
func anyDrawing(t *rapid.T) *Canvas {
	cs := Charset(rapid.IntRange(0, 1).Draw(t, "charset"))
	c := New(rapid.IntRange(0, 300).Draw(t, "w"), rapid.IntRange(0, 100).Draw(t, "h"), cs)
	c.Stale = rapid.Bool().Draw(t, "stale")
	if rapid.Bool().Draw(t, "heading?") {
		c.Heading(rapid.String().Draw(t, "heading"), 1)
	}
	axis := func(name string) Axis {
		return Axis{
			Min: anyFloat().Draw(t, name+" min"), Max: anyFloat().Draw(t, name+" max"),
			Pi: rapid.Bool().Draw(t, name+" pi"), Name: rapid.StringN(0, 8, -1).Draw(t, name),
		}
	}
	c.Frame(axis("x"), axis("y"), 2)
	text := rapid.OneOf(rapid.String(), rapid.SampledFrom([]string{"kF", "2kF", "χ0", "π/2", ""}))
	for range rapid.IntRange(0, 6).Draw(t, "layers") {
		n := rapid.IntRange(0, 40).Draw(t, "points")
		xs := rapid.SliceOfN(anyFloat(), n, n).Draw(t, "xs")
		ys := rapid.SliceOfN(anyFloat(), n, n).Draw(t, "ys")
		v := anyFloat().Draw(t, "value")
		ink, p := Ink(rapid.IntRange(0, 9).Draw(t, "ink")), Pattern(rapid.IntRange(0, 5).Draw(t, "pattern"))
		switch rapid.IntRange(0, 6).Draw(t, "kind") {
		case 0:
			c.Line(xs, ys, ink, p)
		case 1:
			c.Points(xs, ys, ink, p)
		case 2:
			c.Stems(xs, ys, v, ink, p)
		case 3:
			c.Area(xs, ys, v, ink)
		case 4:
			c.VMark(v, text.Draw(t, "label"), ink)
		case 5:
			c.HMark(v, text.Draw(t, "label"), ink)
		case 6:
			c.Text(rapid.IntRange(-5, 305).Draw(t, "col"), rapid.IntRange(-2, 102).Draw(t, "row"), text.Draw(t, "text"), ink)
		}
		if rapid.Bool().Draw(t, "named") {
			c.Name(text.Draw(t, "name"))
		}
	}
	return c
}

func TestAnyPictureFillsItsCellsExactly(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := anyDrawing(t)
		w, h := c.Size()
		keep := func(dst []byte, _ Ink, run []byte) []byte { return append(dst, run...) }
		for row := range h {
			got := string(c.AppendRow(nil, row, nil))
			if ansi.StringWidth(got) != w {
				t.Fatalf("row %d is %d columns wide, want %d: %q", row, ansi.StringWidth(got), w, got)
			}
			if c.charset == ASCII && strings.IndexFunc(got, func(r rune) bool { return r < ' ' || r > '~' }) >= 0 {
				t.Fatalf("row %d is not ASCII: %q", row, got)
			}
			if styled := string(c.AppendRow(nil, row, keep)); styled != got {
				t.Fatalf("row %d styled in runs: %q, plain: %q", row, styled, got)
			}
			c.Trim = true
			if trimmed := string(c.AppendRow(nil, row, nil)); trimmed != strings.TrimRight(got, " ") {
				t.Fatalf("row %d trimmed: %q, want %q", row, trimmed, strings.TrimRight(got, " "))
			}
			c.Trim = false
		}
		if len(c.AppendRow(nil, h, nil)) > 0 || len(c.AppendRow(nil, -1, nil)) > 0 {
			t.Fatal("a row outside the picture is not empty")
		}
	})
}

// Reset leaves nothing behind: a reused Canvas draws what a new one draws.
func TestResetForgetsThePicture(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := anyDrawing(t)
		_ = c.String()
		c.Stale = false
		for _, cs := range charsets {
			c.Reset(58, 12, cs)
			gappedBand(c)
			fresh := New(58, 12, cs)
			gappedBand(fresh)
			if c.String() != fresh.String() {
				t.Fatalf("reused:\n%s\nnew:\n%s", c, fresh)
			}
		}
	})
}

func TestCharactersOutsideASCIIAreOneCellWide(t *testing.T) {
	var all []rune
	for _, r16 := range narrow.R16 {
		for r := rune(r16.Lo); r <= rune(r16.Hi); r += rune(r16.Stride) {
			if w := ansi.StringWidth(string(r)); w != 1 {
				t.Errorf("%U %c is %d columns wide", r, r, w)
			}
			if unicode.In(r, unicode.M, unicode.C) {
				t.Errorf("%U is a mark or control character", r)
			}
			all = append(all, r)
		}
	}
	if w := ansi.StringWidth(string(all)); w != len(all) {
		t.Errorf("together %d columns for %d characters: some join", w, len(all))
	}
}

func TestTextIsMadeSafe(t *testing.T) {
	for _, tt := range []struct {
		set      Charset
		in, want string
	}{
		{Braille, "E − μ = ½π", "E − μ = ½π"},
		{Braille, "a\nb\x1b[1m\u200bk\u0302漢", "a?b?[1m?k??"},
		{ASCII, "−π/2 × 2·x…", "-pi/2 x 2.x~"},
		{ASCII, "μ", "?"},
	} {
		c := New(20, 1, tt.set)
		c.Trim = true
		c.Text(0, 0, tt.in, Plain)
		if got := string(c.AppendRow(nil, 0, nil)); got != tt.want {
			t.Errorf("Text(%q) shows %q, want %q", tt.in, got, tt.want)
		}
	}
}

func TestAnAxisWithoutRangeShowsNothing(t *testing.T) {
	for _, bad := range []Axis{{Min: math.NaN(), Max: 1}, {Min: 0, Max: math.Inf(1)}} {
		c := New(40, 10, Braille)
		c.Frame(bad, Axis{Max: 1}, 1)
		c.Line([]float64{0, 1}, []float64{0, 1}, 2, Solid)
		c.VMark(0.5, "k", 3)
		c.Name("line")
		if got := strings.TrimSpace(c.String()); got != "" {
			t.Errorf("axis %v: %q", bad, got)
		}
	}
}
