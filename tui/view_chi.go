package tui

import (
	"fmt"
	"math"

	"example.org/twokf/model/report"
	"example.org/twokf/model/response"
	"example.org/twokf/model/study"
	"example.org/twokf/tui/plot"
)

// chiView shows the static susceptibility of the infinite uniform chain, of the
// ring at its own wave vectors, and its peak.
type chiView struct{}

func (chiView) name() string { return "χ(q)" }

func (chiView) title(s *scene) string {
	return fmt.Sprintf("χ(q, T) (1/%s) against q", s.Chain.Energy)
}

func (chiView) stale(s *scene) bool { return s.stale.response || s.shownRing() != nil && s.stale.ring }

func (chiView) parts(s *scene) [3]any { return [3]any{s.Band, s.Response, s.shownRing()} }

func (chiView) begin(s *scene) float64 {
	if s.Band == nil {
		return math.Pi / 2
	}
	return s.Band.Ordering
}

func (chiView) place(s *scene, x float64, by int) (float64, bool) {
	if s.Response == nil {
		return 0, false
	}
	return among(s.Response.Q, x, by)
}

// manyWavevectors of a ring would hide the curve in a plot that is not enlarged.
const manyWavevectors = 60

// shownRing returns χ of the ring if it is to be drawn.
func (s *scene) shownRing() *study.Ring {
	if s.large || s.Chain.Sites < 2*manyWavevectors {
		return s.Ring
	}
	return nil
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
	if ring := s.shownRing(); ring != nil {
		c.Points(ring.Q, values(ring.Chi, func(x response.Static) float64 { return x.Site }), inkFinite, plot.Heavy)
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
