package tui

import (
	"fmt"
	"math"

	"example.org/twokf/model/report"
	"example.org/twokf/model/response"
	"example.org/twokf/tui/plot"
)

// chiView shows the static susceptibility of the infinite uniform chain, of the
// ring at its own wave vectors, and its peak.
type chiView struct{}

func (chiView) name() string { return "χ(q)" }

func (chiView) title(s *scene) string {
	return fmt.Sprintf("χ(q, T) (1/%s) against q", s.Chain.Energy)
}

func (chiView) stale(p *picture) bool { return p.stale.response }

func (chiView) abscissae(s *scene) []float64 {
	if s.Response == nil {
		return nil
	}
	return s.Response.Q
}

func (chiView) draw(c *plot.Canvas, s *scene) {
	if s.Response == nil {
		return
	}
	r := s.Response
	site := values(r.Chi, func(x response.Static) float64 { return x.Site })
	bond := values(r.Chi, func(x response.Static) float64 { return x.Bond })
	showBond := s.Chain.Bond.Present
	_, high, _ := span(0.05, site)
	if showBond {
		_, b, _ := span(0.05, bond)
		high = max(high, b)
	}
	c.Frame(plot.Axis{Min: 0, Max: math.Pi, Pi: true, Name: "q"}, plot.Axis{Min: 0, Max: high}, inkAxis)
	if s.Band != nil {
		c.VMark(s.Band.Ordering, "2kF", inkMark)
		if !math.IsInf(r.Peak, 0) && math.Abs(r.PeakQ-s.Band.Ordering) > 0.02 {
			c.VMark(r.PeakQ, "max", inkMark)
		}
	}
	s.markReading(c)
	if s.Ring != nil && (s.large || len(s.Ring.Q) < 60) {
		ring := values(s.Ring.Chi, func(x response.Static) float64 { return x.Site })
		c.Points(s.Ring.Q, ring, inkFinite, plot.Heavy)
		s.label(c, "χ0 ring")
	}
	if showBond {
		c.Line(r.Q, bond, inkDensity, plot.Dashed)
		s.label(c, "χ bond")
	}
	c.Line(r.Q, site, inkBare, plot.Solid)
	s.label(c, "χ0")
}

func (chiView) read(s *scene, x float64) string {
	if s.Response == nil || len(s.Response.Q) == 0 {
		return ""
	}
	r := s.Response
	i := plot.Nearest(r.Q, x)
	text := fmt.Sprintf("q %s  χ0 %s", inPi(r.Q[i]), report.Digits(r.Chi[i].Site, 0, 4))
	if s.Chain.Bond.Present {
		text += "  χ bond " + report.Digits(r.Chi[i].Bond, 0, 4)
	}
	if s.Ring != nil && len(s.Ring.Q) > 0 {
		j := plot.Nearest(s.Ring.Q, x)
		text += fmt.Sprintf("  ring at %s: %s", inPi(s.Ring.Q[j]), report.Digits(s.Ring.Chi[j].Site, 0, 4))
	}
	return text + "  (1/" + s.Chain.Energy.String() + ")"
}

func values[T any](xs []T, get func(T) float64) []float64 {
	out := make([]float64, len(xs))
	for i, x := range xs {
		out[i] = get(x)
	}
	return out
}
