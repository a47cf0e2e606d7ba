package report

import (
	"bytes"
	"encoding/json"
	"io"
	"math"

	"example.org/twokf/model"
	"example.org/twokf/model/doubt"
	"example.org/twokf/model/response"
	"example.org/twokf/model/study"
)

// number is a float64 that JSON can hold: NaN and ±Inf become null.
type number float64

// MarshalJSON writes the shortest text that reads back as the same number.
func (n number) MarshalJSON() ([]byte, error) {
	if math.IsNaN(float64(n)) || math.IsInf(float64(n), 0) {
		return []byte("null"), nil
	}
	return json.Marshal(float64(n))
}

type numbers []float64

// MarshalJSON writes an array of numbers, with null for what is not finite.
func (ns numbers) MarshalJSON() ([]byte, error) {
	var b bytes.Buffer
	b.WriteByte('[')
	for i, v := range ns {
		if i > 0 {
			b.WriteByte(',')
		}
		one, err := number(v).MarshalJSON()
		if err != nil {
			return nil, err
		}
		b.Write(one)
	}
	b.WriteByte(']')
	return b.Bytes(), nil
}

type jsonReport struct {
	Chain   jsonChain             `json:"chain"`
	Answers map[string]jsonAnswer `json:"answers"`
	Curves  jsonCurves            `json:"curves"`
	Sites   map[string]numbers    `json:"sites"`
	Doubts  []jsonDoubt           `json:"doubts"`
	Solver  jsonSolver            `json:"solver"`
	Trouble []jsonTrouble         `json:"troubles,omitempty"`
}

type jsonAnswer struct {
	Value number `json:"value"`
	Unit  string `json:"unit"`
}

// jsonChain mirrors the chain file: the same tables and keys, with the electron
// number that the finite chain holds.
type jsonChain struct {
	Title      string            `json:"title"`
	Source     string            `json:"source"`
	Energy     string            `json:"energy"`
	Chain      map[string]any    `json:"chain"`
	Electrons  map[string]number `json:"electrons"`
	Bond       map[string]number `json:"bond_phonon,omitempty"`
	Site       map[string]number `json:"site_phonon,omitempty"`
	Conditions map[string]number `json:"conditions"`
}

type jsonCurves struct {
	Bands          map[string]numbers `json:"bands"`
	Susceptibility map[string]numbers `json:"susceptibility"`
	Softening      map[string]numbers `json:"softening"`
}

type jsonDoubt struct {
	Name    string `json:"name"`
	Verdict string `json:"verdict"`
	Value   number `json:"value"`
	Limit   number `json:"limit"`
	Why     string `json:"why"`
	Source  string `json:"source"`
}

type jsonSolver struct {
	Method     string        `json:"method,omitempty"`
	Start      string        `json:"start,omitempty"`
	Iterations int           `json:"iterations"`
	Residual   number        `json:"residual"`
	Tolerance  number        `json:"tolerance"`
	Converged  bool          `json:"converged"`
	Seconds    number        `json:"seconds"`
	Starts     []jsonAttempt `json:"starts,omitempty"`
}

type jsonAttempt struct {
	Name       string `json:"name"`
	FreeEnergy number `json:"free_energy"`
	Residual   number `json:"residual"`
	Converged  bool   `json:"converged"`
	Iterations int    `json:"iterations"`
}

type jsonTrouble struct {
	Stage string `json:"stage"`
	Why   string `json:"why"`
}

// JSON writes the portrait as one object: chain, answers, curves, sites,
// doubts, solver, on one line. Answers that do not exist for the chain are absent; a curve's
// points that are not finite are null.
func JSON(w io.Writer, p *study.Portrait) error {
	r := jsonReport{
		Chain:   chainOf(p.Chain),
		Answers: map[string]jsonAnswer{},
		Curves:  curvesOf(p),
		Sites:   columns(siteColumns(p)),
		Doubts:  doubtsOf(p.Doubts),
		Solver:  solverOf(p),
	}
	for _, a := range Answers(p) {
		r.Answers[a.Name] = jsonAnswer{number(a.Value), a.Unit}
	}
	for _, t := range p.Troubles {
		r.Trouble = append(r.Trouble, jsonTrouble{t.Stage, t.Err.Error()})
	}
	enc := json.NewEncoder(w)
	enc.SetEscapeHTML(false)
	return enc.Encode(r)
}

func chainOf(c model.Chain) jsonChain {
	n, _ := c.Count()
	out := jsonChain{
		Title:  c.Title,
		Source: c.Source,
		Energy: c.Energy.String(),
		Chain:  map[string]any{"sites": c.Sites, "boundary": c.Boundary.String()},
		Electrons: map[string]number{
			"hopping": number(c.Hopping), "next_hopping": number(c.NextHopping), "spin": number(c.Spin),
			"filling": number(c.ElectronsPerSite()), "electrons": number(n),
		},
		Bond:       phononOf(c.Bond),
		Site:       phononOf(c.Site),
		Conditions: map[string]number{"temperature": number(c.Temperature)},
	}
	if c.Spacing > 0 {
		out.Chain["spacing"] = number(c.Spacing)
	}
	return out
}

func phononOf(p model.Phonon) map[string]number {
	if !p.Present {
		return nil
	}
	out := map[string]number{"coupling": number(p.Coupling), "stiffness": number(p.Stiffness)}
	if p.Frequency > 0 {
		out["frequency"] = number(p.Frequency)
	}
	return out
}

func doubtsOf(ds []doubt.Doubt) []jsonDoubt {
	out := make([]jsonDoubt, len(ds))
	for i, d := range ds {
		out[i] = jsonDoubt{d.Name, d.Verdict.String(), number(d.Value), number(d.Limit), d.Why, d.Source}
	}
	return out
}

func solverOf(p *study.Portrait) jsonSolver {
	s := jsonSolver{Seconds: number(p.Seconds)}
	if l := p.Lattice; l != nil {
		s.Method, s.Start = l.Electrons.Method, l.Start
		s.Iterations, s.Residual, s.Tolerance, s.Converged = l.Iterations, number(l.Residual), number(l.Tolerance), l.Converged
		for _, t := range l.Tried {
			s.Starts = append(s.Starts, jsonAttempt{t.Name, number(t.FreeEnergy), number(t.Residual), t.Converged, t.Iterations})
		}
	}
	return s
}

func curvesOf(p *study.Portrait) jsonCurves {
	return jsonCurves{
		Bands:          columns(append(bandColumns(p), levelColumns(p)...)),
		Susceptibility: columns(append(chiColumns(p), ringColumns(p)...)),
		Softening:      columns(phononColumns(p)),
	}
}

// column is one named array of the report.
type column struct {
	name   string
	values []float64
}

func columns(cs []column) map[string]numbers {
	out := make(map[string]numbers, len(cs))
	for _, c := range cs {
		out[c.name] = c.values
	}
	return out
}

func bandColumns(p *study.Portrait) []column {
	if p.Band == nil {
		return nil
	}
	return []column{{"wavevector", p.Band.K}, {"energy", p.Band.Energy}}
}

func levelColumns(p *study.Portrait) []column {
	if p.Levels == nil {
		return nil
	}
	return []column{{"level_wavevector", p.Levels.K}, {"level", p.Levels.Energy}}
}

func chiColumns(p *study.Portrait) []column {
	if p.Response == nil {
		return nil
	}
	return append([]column{{"wavevector", p.Response.Q}}, statics("", p.Response.Chi)...)
}

func ringColumns(p *study.Portrait) []column {
	if p.Ring == nil {
		return nil
	}
	return append([]column{{"ring_wavevector", p.Ring.Q}}, statics("ring_", p.Ring.Chi)...)
}

func statics(prefix string, chi []response.Static) []column {
	return []column{
		pick(prefix+"site", chi, func(s response.Static) float64 { return s.Site }),
		pick(prefix+"bond", chi, func(s response.Static) float64 { return s.Bond }),
		pick(prefix+"mixed", chi, func(s response.Static) float64 { return s.Mixed }),
	}
}

// phononColumns gives the ratios always and the frequencies where the chain
// gives masses; an unstable mode's frequency is −|Ω|.
func phononColumns(p *study.Portrait) []column {
	if p.Phonon == nil {
		return nil
	}
	b, c := p.Phonon.Branch, p.Chain
	out := []column{
		{"wavevector", p.Phonon.Q},
		pick("ratio", b, func(x response.Phonon) float64 { return x.Ratio }),
	}
	if c.Bond.Present && c.Bond.Frequency > 0 {
		out = append(out, pick("bare_bond", b, func(x response.Phonon) float64 { return x.BareBond }))
	}
	if c.Site.Present && c.Site.Frequency > 0 {
		out = append(out, pick("bare_site", b, func(x response.Phonon) float64 { return x.BareSite }))
	}
	if c.Bond.Frequency > 0 || c.Site.Frequency > 0 {
		out = append(out, pick("lower", b, func(x response.Phonon) float64 { return x.Lower }))
	}
	if c.Bond.Frequency > 0 && c.Site.Frequency > 0 {
		out = append(out, pick("upper", b, func(x response.Phonon) float64 { return x.Upper }))
	}
	return out
}

func siteColumns(p *study.Portrait) []column {
	if p.Lattice == nil {
		return nil
	}
	out := []column{{"density", p.Lattice.Electrons.Density}, {"bond_order", p.Lattice.Electrons.BondOrder}}
	if p.Lattice.Displacement != nil {
		out = append(out, column{"displacement", p.Lattice.Displacement}, column{"stretch", p.Lattice.Stretch})
	}
	if p.Lattice.SiteMode != nil {
		out = append(out, column{"site_mode", p.Lattice.SiteMode})
	}
	return out
}

func pick[T any](name string, xs []T, value func(T) float64) column {
	out := make([]float64, len(xs))
	for i, x := range xs {
		out[i] = value(x)
	}
	return column{name, out}
}
