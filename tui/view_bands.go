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

func (bandView) stale(s *scene) bool { return s.stale.band || s.stale.levels }

func (bandView) parts(s *scene) [3]any { return [3]any{s.Band, s.Levels, s.Lattice} }

func (bandView) begin(s *scene) float64 {
	if s.Band == nil {
		return math.Pi / 2
	}
	return s.Band.KF
}

func (bandView) place(s *scene, x float64, by int) (float64, bool) {
	if s.Band == nil {
		return 0, false
	}
	return among(s.Band.K, x, by)
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

// bandGrain, times the hopping, is what counts as no energy at all.
const bandGrain = 1e-8

// sameK is the difference up to which two wave vectors are one.
const sameK = 1e-6

// edgeGrain, likewise, is how near to a gap edge a level is the edge itself.
const edgeGrain = 1e-7

func (bandView) read(s *scene, x float64) string {
	if s.Band == nil {
		return ""
	}
	i := plot.Nearest(s.Band.K, x)
	digits := func(e float64) string { return report.Digits(e, bandGrain*s.Chain.Hopping, 4) }
	text := fmt.Sprintf("k %s  ε %s", inPi(s.Band.K[i]), digits(s.Band.Energy[i]))
	if s.Levels != nil && s.Lattice != nil {
		// the two levels nearest to this k on either side of the Fermi level; of
		// two at one k (±k) that nearer to the Fermi level
		fermi := s.Lattice.Electrons.ChemicalPotential
		nearer := func(j, than int) bool {
			if than < 0 {
				return true
			}
			d := math.Abs(s.Levels.K[j]-x) - math.Abs(s.Levels.K[than]-x)
			return d < -sameK || d < sameK && math.Abs(s.Levels.Energy[j]-fermi) < math.Abs(s.Levels.Energy[than]-fermi)
		}
		below, above := -1, -1
		for j, e := range s.Levels.Energy {
			if e <= fermi {
				if nearer(j, below) {
					below = j
				}
			} else if nearer(j, above) {
				above = j
			}
		}
		level := func(e float64) string { // the gap edges are known better than a sample
			if off := min(math.Abs(e-s.Lattice.Electrons.Highest), math.Abs(e-s.Lattice.Electrons.Lowest)); off < edgeGrain*s.Chain.Hopping {
				return digits(e)
			}
			return report.Digits(e, max(s.Levels.Tolerance, bandGrain*s.Chain.Hopping), 4)
		}
		if below >= 0 {
			text += fmt.Sprintf("  level below EF %s", level(s.Levels.Energy[below]))
		}
		if above >= 0 {
			text += fmt.Sprintf(", above %s", level(s.Levels.Energy[above]))
		}
	}
	return text + " " + s.Chain.Energy.String()
}

// inPi writes a wave vector as a multiple of π.
func inPi(q float64) string {
	switch text := report.Digits(q/math.Pi, 1e-9, 4); text {
	case "0":
		return "0"
	case "1":
		return "π"
	default:
		return text + "π"
	}
}
