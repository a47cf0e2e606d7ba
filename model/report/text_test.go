package report_test

import (
	"bytes"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
	"unicode/utf8"

	"pgregory.net/rapid"

	"example.org/twokf/model"
	"example.org/twokf/model/report"
)

func textOf(t *testing.T, name string) string {
	t.Helper()
	var out bytes.Buffer
	if err := report.Text(&out, studied(t, name)); err != nil {
		t.Fatal(err)
	}
	return out.String()
}

// What depends on the machine and on the path of the relaxation, not on the chain.
var (
	path    = regexp.MustCompile(`in \d+ iterations, residual \S+`)
	seconds = regexp.MustCompile(`\d+\.\d+ s\n`)
)

// The text report as a person sees it. A regression: the numbers are checked
// elsewhere.
func TestTextGolden(t *testing.T) {
	got := path.ReplaceAllString(textOf(t, "half"), "in # iterations, residual #")
	got = seconds.ReplaceAllString(got, "# s\n")
	file := filepath.Join("testdata", "half.txt")
	if *renew {
		if err := os.WriteFile(file, []byte(got), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	if got != string(want) {
		t.Errorf("the text has changed (renew it with -renew if that is right):\n%s", got)
	}
}

// Every answer and every doubt of a chain is in its text.
func TestTextIsComplete(t *testing.T) {
	for _, name := range allNames() {
		p, text := studied(t, name), textOf(t, name)
		lines := strings.Split(text, "\n")
		for _, a := range report.Answers(p) {
			want := regexp.MustCompile(`^` + regexp.QuoteMeta(a.Name) + ` +` + regexp.QuoteMeta(a.Symbol) + ` +` + regexp.QuoteMeta(strings.TrimSpace(report.Digits(a.Value, a.Grain, 6)+" "+a.Unit)) + `$`)
			found := 0
			for _, line := range lines {
				if want.MatchString(line) {
					found++
				}
			}
			if found != 1 {
				t.Errorf("%s: %d lines with %s", name, found, a.Name)
			}
		}
		for _, d := range p.Doubts {
			raised, clear := strings.Contains(text, "doubt: "+report.Sentence(d)+"\n"), regexp.MustCompile(`(?m)^no doubt about: .*\b`+d.Name+`\b`).MatchString(text)
			if raised == clear || raised != (d.Verdict.String() == "raised") {
				t.Errorf("%s: doubt %s: raised %v, clear %v in the text", name, d.Name, raised, clear)
			}
		}
		if strings.Contains(text, "NaN") || strings.Contains(text, "Inf") || strings.Contains(text, "%!") {
			t.Errorf("%s:\n%s", name, text)
		}
	}
}

// A chain's own words cannot steer the terminal.
func TestTitlesCannotSteerTheTerminal(t *testing.T) {
	p := *studied(t, "no phonon")
	p.Chain.Title, p.Chain.Source = "a\x1b[31mb\x07\nc\u009b2J", "\r\x00d\x7fe"
	var out bytes.Buffer
	if err := report.Text(&out, &p); err != nil {
		t.Fatal(err)
	}
	for _, r := range out.String() {
		if r != '\n' && (r < ' ' || r == 0x7f || 0x80 <= r && r < 0xa0) {
			t.Errorf("%q is in the text", r)
		}
	}
	if !strings.HasPrefix(out.String(), "a [31mb  c 2J\nsource:   d e\n") {
		t.Errorf("%q", strings.SplitN(out.String(), "\n", 3)[:2])
	}
}

func TestSummary(t *testing.T) {
	for _, x := range []struct {
		chain model.Chain
		want  string
	}{
		{chains["no phonon"], "10 sites, ring · 6 electrons (0.6 per site, 2 spin states) · t 1 t · T 0.1 t"},
		{chains["two pairs"], "12 sites, open · 6 electrons (0.5 per site, 2 spin states) · t 1 t · t2 −2 t · bond phonon α 1, K 3 · T 0 t"},
		{studied(t, "spinless").Chain, "122 sites, ring · 61 electrons (0.5 per site, 1 spin states) · t 1 t · site phonon g 1.6, Ks 1, ħω 0.04 t · T 0 t"},
	} {
		if got := report.Summary(x.chain); got != x.want {
			t.Errorf("\n got %s\nwant %s", got, x.want)
		}
	}
}

// All that reports say of the presets can be said in ASCII without a loss: no
// sign is left over, and no two answers get the same symbol.
func TestASCIISaysItAll(t *testing.T) {
	for _, name := range allNames() {
		p := studied(t, name)
		said := []string{textOf(t, name), report.Summary(p.Chain), report.Method(p)}
		for _, d := range p.Doubts {
			said = append(said, report.Sentence(d), d.Source)
		}
		symbols := map[string]string{}
		for _, a := range report.Answers(p) {
			said = append(said, a.Symbol, a.Unit, a.About)
			symbol := report.ASCII(a.Symbol)
			if other := symbols[symbol]; other != "" {
				t.Errorf("%s and %s are both %s", other, a.Name, symbol)
			}
			symbols[symbol] = a.Name
		}
		for _, s := range said {
			ascii := report.ASCII(s)
			if odd := notASCII(ascii); odd != "" {
				t.Errorf("%s: %q is left in %q", name, odd, ascii)
			}
			if strings.Count(ascii, "?") != strings.Count(s, "?") {
				t.Errorf("%s: no spelling for a sign in %q: %q", name, s, ascii)
			}
			if strings.Count(ascii, "\n") != strings.Count(s, "\n") {
				t.Errorf("%s: the lines of %q have changed", name, s)
			}
		}
	}
}

func notASCII(s string) string {
	return strings.Map(func(r rune) rune {
		if r == '\n' || ' ' <= r && r <= '~' {
			return -1
		}
		return r
	}, s)
}

func TestASCII(t *testing.T) {
	for text, want := range map[string]string{
		"":                         "",
		"2kF":                      "2kF",
		"−0.5 eV/Å²":               "-0.5 eV/A^2",
		"χ(2kF) → ∞":               "chi(2kF) -> inf",
		"λ ≥ 0.4":                  "lambda >= 0.4",
		"2Δ = 1.3 eV, μ = 0":       "2Delta = 1.3 eV, mu = 0",
		"Ω²/ω² ≈ −1e−3":            "W^2/w^2 ~ -1e-3",
		"⟨c†_{i+1}c_i + h.c.⟩":     "<c+_{i+1}c_i + h.c.>",
		"k/π · 2":                  "k/pi . 2",
		"Grüner’s “Röntgen” – 3×2": "Gruener's \"Roentgen\" - 3x2",
		"日本":                       "??",
	} {
		if got := report.ASCII(text); got != want {
			t.Errorf("%q becomes %q, expected %q", text, got, want)
		}
	}
}

func TestASCIIIsASCII(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := rapid.String().Draw(t, "text")
		for _, r := range report.ASCII(s) {
			if r >= 0x7f || r == utf8.RuneError {
				t.Errorf("%q leaves %q", s, r)
			}
		}
	})
}
