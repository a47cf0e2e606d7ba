package tui

import (
	"fmt"
	"strings"

	"github.com/charmbracelet/x/ansi"

	"example.org/twokf/model"
	"example.org/twokf/model/doubt"
	"example.org/twokf/model/report"
)

// readoutOrder lists the answers in the order in which the readout makes room
// for them.
var readoutOrder = []string{
	"gap", "transition_temperature", "coupling", "displacement_amplitude", "site_mode_amplitude", "condensation_energy_per_site",
	"kinks", "softest_ratio", "softest_wavevector", "ordering_wavevector", "susceptibility_peak", "susceptibility_peak_wavevector",
	"density_amplitude", "bond_order_amplitude", "energy_per_site", "fermi_velocity", "density_of_states", "chemical_potential",
	"first_unstable_temperature", "first_unstable_wavevector", "coupling_bond", "coupling_site", "electron_energy_per_site", "lattice_energy_per_site", "fermi_wavevector",
}

// kelvinPerEV is 1 eV/k_B in kelvin (CODATA 2018, exact constants).
const kelvinPerEV = 1.602176634e-19 / 1.380649e-23

// readoutDigits are the digits that a glance can take in.
const readoutDigits = 4

// known is an answer as far as it is known: of the present chain, or of the one
// before where that is older than the knobs.
type known struct {
	report.Answer
	chain model.Chain // that it is an answer about
	stale bool
}

// answers lists what is known, in the order of the report.
func (b *Bench) answers() []known {
	q := &b.inquiry
	var out []known
	at := map[string]int{}
	if q.last != nil && !(q.fresh != nil && q.fresh.Complete) {
		for _, a := range report.Answers(q.last) {
			at[a.Name] = len(out)
			out = append(out, known{a, q.last.Chain, true})
		}
	}
	if q.fresh == nil {
		return out
	}
	for _, a := range report.Answers(q.fresh) {
		k := known{a, q.fresh.Chain, false}
		if i, ok := at[a.Name]; ok {
			out[i] = k
		} else {
			out = append(out, k)
		}
	}
	return out
}

// aside sets what is visibly older than the knobs in parentheses.
func (b *Bench) aside(stale bool, text string) string {
	if stale && b.inquiry.lags() {
		return "(" + text + ")"
	}
	return text
}

// readoutRows says the answers as sentences of numbers, as many as fit.
func (b *Bench) readoutRows(width, most int) []string {
	answers := map[string]known{}
	for _, k := range b.answers() {
		answers[k.Name] = k
	}
	var rows []string
	line, used := "", 0
	for _, name := range readoutOrder {
		k, ok := answers[name]
		if !ok {
			continue
		}
		text := b.spell(b.aside(k.stale, k.Symbol+" "+answerText(k.Answer, k.chain)))
		w := ansi.StringWidth(text)
		if used > 0 && used+3+w > width {
			rows = append(rows, line)
			if len(rows) == most {
				return rows
			}
			line, used = "", 0
		}
		if used > 0 {
			line, used = line+b.spell(" · "), used+3 // in no ink of its own, which each would cost
		}
		line, used = line+text, used+w
	}
	return append(rows, line)
}

// answerText is an answer's number with its unit; wave vectors in multiples of
// π, temperatures of a chain in eV also in kelvin.
func answerText(a report.Answer, c model.Chain) string {
	if a.Unit == "1/a" {
		return inPi(a.Value)
	}
	text := report.Digits(a.Value, a.Grain, readoutDigits)
	if a.Unit != "" {
		text += " " + a.Unit
	}
	if strings.HasSuffix(a.Name, "temperature") && c.Energy == model.UnitEV {
		text += fmt.Sprintf(" (%.0f K)", a.Value*kelvinPerEV)
	}
	return text
}

// doubtRows counts the doubts that are raised and says the gravest of them.
func (b *Bench) doubtRows(pic *picture, width, most int) []string {
	var raised []doubt.Doubt
	for _, d := range pic.Doubts {
		if d.Verdict == doubt.Raised {
			raised = append(raised, d)
		}
	}
	trouble := ""
	for _, t := range pic.Troubles {
		trouble += fmt.Sprintf("%s could not be done: %v. ", t.Stage, t.Err)
	}
	if len(raised) == 0 && trouble == "" {
		text := "no doubts"
		if pic.Doubts == nil {
			text = ""
		}
		return []string{b.look.paint(inkAxis, b.aside(pic.stale.doubts, text))}
	}
	names := make([]string, len(raised))
	for i, d := range raised {
		names[i] = strings.ReplaceAll(d.Name, "_", " ")
	}
	plural := "s"
	if len(raised) == 1 {
		plural = ""
	}
	text := trouble + b.aside(pic.stale.doubts, fmt.Sprintf("%d doubt%s: %s", len(raised), plural, strings.Join(names, ", ")))
	rows := wrap(b.spell(text), width)
	for _, d := range raised {
		if len(rows) >= most {
			break
		}
		rows = append(rows, wrap(b.spell("- "+report.Sentence(d)), width)...)
	}
	if len(rows) > most {
		rows = rows[:most]
		rows[most-1] = b.cutOff(rows[most-1], width)
	}
	for i := range rows {
		rows[i] = b.look.paint(inkRaised, rows[i])
	}
	return rows
}
