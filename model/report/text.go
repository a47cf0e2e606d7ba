package report

import (
	"bufio"
	"fmt"
	"io"
	"strings"
	"unicode/utf8"

	"example.org/twokf/model"
	"example.org/twokf/model/doubt"
	"example.org/twokf/model/study"
)

// significant digits of the text report and the bench.
const significant = 6

// Text writes the portrait for a person: the chain, the answers, the doubts and
// how the numbers were got.
func Text(w io.Writer, p *study.Portrait) error {
	out := bufio.NewWriter(w)
	if p.Chain.Title != "" {
		fmt.Fprintln(out, oneLine(p.Chain.Title))
	}
	if p.Chain.Source != "" {
		fmt.Fprintf(out, "source: %s\n", oneLine(p.Chain.Source))
	}
	fmt.Fprintln(out, Summary(p.Chain))
	fmt.Fprintln(out)

	for _, a := range Answers(p) {
		name := a.Name + strings.Repeat(" ", 31-len(a.Name))
		fmt.Fprintf(out, "%s %s %s\n", name, pad(a.Symbol, 9), strings.TrimSpace(Digits(a.Value, a.Grain, significant)+" "+a.Unit))
	}

	fmt.Fprintln(out)
	var clear []string
	for _, d := range p.Doubts {
		if d.Verdict == doubt.Clear {
			clear = append(clear, d.Name)
			continue
		}
		fmt.Fprintf(out, "doubt: %s\n", Sentence(d))
	}
	if len(clear) > 0 {
		fmt.Fprintf(out, "no doubt about: %s\n", strings.Join(clear, ", "))
	}
	for _, t := range p.Troubles {
		fmt.Fprintf(out, "not done: %s: %v\n", t.Stage, t.Err)
	}

	fmt.Fprintln(out)
	fmt.Fprintln(out, Method(p))
	return out.Flush()
}

// Sentence says a doubt with its number and its limit.
func Sentence(d doubt.Doubt) string {
	s := fmt.Sprintf("%s: %s", strings.ReplaceAll(d.Name, "_", " "), d.Why)
	if d.Name == "open_shell" || d.Name == "one_dimension" || d.Name == "electron_number" {
		return s // the sentence holds all there is
	}
	return fmt.Sprintf("%s (%s, limit %s)", s, Digits(d.Value, 0, 2), Digits(d.Limit, 0, 2))
}

// Summary says in one line what the chain is.
func Summary(c model.Chain) string {
	n, _ := c.Count()
	e := c.Energy.String()
	parts := []string{
		fmt.Sprintf("%d sites, %s", c.Sites, c.Boundary),
		fmt.Sprintf("%d electrons (%s per site, %d spin states)", n, Digits(c.ElectronsPerSite(), 0, significant), c.Spin),
		fmt.Sprintf("t %s %s", Digits(c.Hopping, 0, significant), e),
	}
	if c.NextHopping != 0 {
		parts = append(parts, fmt.Sprintf("t2 %s %s", Digits(c.NextHopping, 0, significant), e))
	}
	for _, b := range []struct {
		p             model.Phonon
		name, g, k, w string
	}{{c.Bond, "bond phonon", "α", "K", "ħω"}, {c.Site, "site phonon", "g", "Ks", "ħω"}} {
		if !b.p.Present {
			continue
		}
		s := fmt.Sprintf("%s %s %s, %s %s", b.name, b.g, Digits(b.p.Coupling, 0, significant), b.k, Digits(b.p.Stiffness, 0, significant))
		if b.p.Frequency > 0 {
			s += fmt.Sprintf(", %s %s %s", b.w, Digits(b.p.Frequency, 0, significant), e)
		}
		parts = append(parts, s)
	}
	parts = append(parts, fmt.Sprintf("T %s %s", Digits(c.Temperature, 0, significant), e))
	return strings.Join(parts, " · ")
}

// methods spells fermi.State.Method for a person.
var methods = map[string]string{
	"dense": "full diagonalisation",
	"poles": "a sum of resolvents",
	"waves": "plane waves",
}

// Method says how the relaxed lattice was found.
func Method(p *study.Portrait) string {
	if p.Lattice == nil {
		return fmt.Sprintf("%.3f s", p.Seconds)
	}
	l := p.Lattice
	state := "converged"
	if !l.Converged {
		state = "NOT converged"
	}
	return fmt.Sprintf("relaxed from %s: %s in %d iterations, residual %s (wanted %s); electrons by %s; %.3f s",
		l.Start, state, l.Iterations, Digits(l.Residual, 0, 2), Digits(l.Tolerance, 0, 2), methods[l.Electrons.Method], p.Seconds)
}

func pad(s string, width int) string {
	return s + strings.Repeat(" ", max(0, width-utf8.RuneCountInString(s)))
}

// oneLine keeps control characters of a chain's own words off the terminal.
func oneLine(s string) string {
	return strings.Map(func(r rune) rune {
		if r < ' ' || r == 0x7f || 0x80 <= r && r < 0xa0 {
			return ' '
		}
		return r
	}, s)
}
