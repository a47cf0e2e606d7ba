package tui

import (
	"fmt"
	"math"

	"example.org/twokf/model/report"
	"example.org/twokf/model/response"
	"example.org/twokf/tui/plot"
)

// phononView shows the phonon of the uniform chain before and after the
// electrons answer, with its softest point: as frequencies where the chain
// gives masses, as Ω²/ω² where it does not.
type phononView struct{}

func (phononView) name() string { return "phonon" }

func (phononView) stale(s *scene) bool { return s.stale.phonon }

func (phononView) parts(s *scene) [3]any { return [3]any{s.Band, s.Phonon} }

func (phononView) begin(s *scene) float64 {
	if s.Band == nil {
		return math.Pi / 2
	}
	return s.Band.Ordering
}

func (phononView) place(s *scene, x float64, by int) (float64, bool) {
	if s.Phonon == nil {
		return 0, false
	}
	return among(s.Phonon.Q, x, by)
}

// masses says which branches of the chain have a frequency.
func (s *scene) masses() (bond, site bool) {
	return s.Chain.Bond.Present && s.Chain.Bond.Frequency > 0, s.Chain.Site.Present && s.Chain.Site.Frequency > 0
}

func (phononView) title(s *scene) string {
	bond, site := s.masses()
	switch {
	case !s.Chain.Bond.Present && !s.Chain.Site.Present:
		return "phonon: this chain has none"
	case bond || site:
		return fmt.Sprintf("phonon ħω (%s) against q", s.Chain.Energy)
	}
	return "phonon Ω²/ω² against q"
}

func (phononView) draw(c *plot.Canvas, s *scene) {
	if s.Phonon == nil {
		return
	}
	bond, site := s.masses()
	b := s.Phonon.Branch
	ratio := !bond && !site
	lower := values(b, func(x response.Phonon) float64 { return x.Lower })
	top := 0.0
	if ratio {
		lower = values(b, func(x response.Phonon) float64 { return x.Ratio })
		top = 1
	}
	bareBond := values(b, func(x response.Phonon) float64 { return x.BareBond })
	bareSite := values(b, func(x response.Phonon) float64 { return x.BareSite })
	upper := values(b, func(x response.Phonon) float64 { return x.Upper })
	if bond {
		_, h, _ := span(0, bareBond)
		top = max(top, h)
	}
	if site {
		_, h, _ := span(0, bareSite)
		top = max(top, h)
	}
	low, _, _ := span(0, lower)
	low = max(low, -0.6*top) // the divergence at 2kF goes deeper than is worth drawing
	clip(lower, low)
	c.Frame(plot.Axis{Min: 0, Max: math.Pi, Pi: true, Name: "q"}, plot.Axis{Min: min(0, low*1.05), Max: top * 1.06}, inkAxis)
	if s.Band != nil {
		c.VMark(s.Band.Ordering, "2kF", inkMark)
		if math.Abs(s.Phonon.SoftestQ-s.Band.Ordering) > 0.02 && s.Phonon.Softest < 1-1e-9 {
			c.VMark(s.Phonon.SoftestQ, "soft", inkMark)
		}
	}
	if low < 0 {
		c.HMark(0, "", inkAxis)
	}
	s.markReading(c)
	if ratio {
		c.Line([]float64{0, math.Pi}, []float64{1, 1}, inkBare, plot.Dashed)
		s.label(c, "bare")
	}
	if bond {
		c.Line(s.Phonon.Q, bareBond, inkBare, plot.Dashed)
		s.label(c, "bare")
	}
	if site {
		c.Line(s.Phonon.Q, bareSite, inkBare, plot.Dashed)
		if !bond {
			s.label(c, "bare")
		}
	}
	if bond && site {
		c.Line(s.Phonon.Q, upper, inkDensity, plot.Dotted)
		s.label(c, "upper")
	}
	c.Line(s.Phonon.Q, lower, inkFinite, plot.Solid)
	s.label(c, "renormalised")
}

// clip raises values below low to it.
func clip(xs []float64, low float64) {
	for i, v := range xs {
		if v < low {
			xs[i] = low
		}
	}
}

func (phononView) read(s *scene, x float64) string {
	if s.Phonon == nil {
		return ""
	}
	i := plot.Nearest(s.Phonon.Q, x)
	b := s.Phonon.Branch[i]
	text := fmt.Sprintf("q %s  Ω²/ω² %s", inPi(s.Phonon.Q[i]), report.Digits(b.Ratio, 0, 4))
	unit := s.Chain.Energy.String()
	if s.Chain.Bond.Frequency > 0 {
		text += fmt.Sprintf("  bare bond %s", report.Digits(b.BareBond, 0, 4))
	}
	if s.Chain.Site.Frequency > 0 {
		text += fmt.Sprintf("  bare site %s", report.Digits(b.BareSite, 0, 4))
	}
	if s.Chain.Bond.Frequency > 0 || s.Chain.Site.Frequency > 0 {
		text += fmt.Sprintf("  Ω %s", report.Digits(b.Lower, 0, 4))
		if s.Chain.Bond.Frequency > 0 && s.Chain.Site.Frequency > 0 {
			text += ", " + report.Digits(b.Upper, 0, 4)
		}
		text += " " + unit
	}
	return text
}
