package tui

import (
	"fmt"
	"math"

	"example.org/twokf/model/report"
	"example.org/twokf/tui/plot"
)

// bandView shows the band of the infinite uniform chain, the levels of the
// finite relaxed one, each where the undistorted level of its number stands,
// and the Fermi level.
type bandView struct{}

func (bandView) name() string { return "bands" }

func (bandView) title(s *scene) string { return "energy (" + s.Chain.Energy.String() + ") against k" }

func (bandView) stale(p *picture) bool { return p.stale.band || p.stale.levels }

func (bandView) abscissae(s *scene) []float64 {
	if s.Band == nil {
		return nil
	}
	return s.Band.K
}

func (bandView) draw(c *plot.Canvas, s *scene) {
	if s.Band == nil {
		return
	}
	var levels []float64
	if s.Levels != nil {
		levels = s.Levels.Energy
	}
	lo, hi, _ := span(0.04, s.Band.Energy, levels)
	c.Frame(plot.Axis{Min: 0, Max: math.Pi, Pi: true, Name: "k"}, plot.Axis{Min: lo, Max: hi}, inkAxis)
	c.VMark(s.Band.KF, "kF", inkMark)
	fermi := s.Band.FermiEnergy
	if s.Lattice != nil {
		fermi = s.Lattice.Electrons.ChemicalPotential
	}
	c.HMark(fermi, "EF", inkMark)
	s.markReading(c)
	c.Line(s.Band.K, s.Band.Energy, inkBare, plot.Solid)
	s.label(c, "infinite, uniform")
	if levels != nil {
		c.Points(s.Levels.K, levels, inkFinite, plot.Heavy)
		s.label(c, "levels, relaxed")
	} else if s.Lattice != nil && !math.IsInf(s.Lattice.Electrons.Highest, 0) && !math.IsInf(s.Lattice.Electrons.Lowest, 0) {
		k := s.Band.KF
		c.Points([]float64{k, k}, []float64{s.Lattice.Electrons.Highest, s.Lattice.Electrons.Lowest}, inkFinite, plot.Heavy)
		s.label(c, "gap edges")
	}
}

func (bandView) read(s *scene, x float64) string {
	if s.Band == nil {
		return ""
	}
	i := nearest(s.Band.K, x)
	text := fmt.Sprintf("k %s  ε %s", inPi(s.Band.K[i]), report.Digits(s.Band.Energy[i], 0, 4))
	if s.Levels != nil && len(s.Levels.K) > 0 {
		// the two levels nearest to this k on either side of the Fermi level
		below, above := -1, -1
		for j, k := range s.Levels.K {
			d := math.Abs(k - x)
			if s.Levels.Energy[j] <= s.Lattice.Electrons.ChemicalPotential {
				if below < 0 || d < math.Abs(s.Levels.K[below]-x) {
					below = j
				}
			} else if above < 0 || d < math.Abs(s.Levels.K[above]-x) {
				above = j
			}
		}
		if below >= 0 {
			text += fmt.Sprintf("  level below EF %s", report.Digits(s.Levels.Energy[below], 0, 4))
		}
		if above >= 0 {
			text += fmt.Sprintf(", above %s", report.Digits(s.Levels.Energy[above], 0, 4))
		}
	}
	return text + " " + s.Chain.Energy.String()
}

// inPi writes a wave vector as a multiple of π.
func inPi(q float64) string {
	switch text := report.Digits(q/math.Pi, 0, 4); text {
	case "0":
		return "0"
	case "1":
		return "π"
	default:
		return text + "π"
	}
}
