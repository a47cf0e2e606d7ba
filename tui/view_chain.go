package tui

import (
	"fmt"
	"math"

	"example.org/twokf/model"
	"example.org/twokf/model/report"
	"example.org/twokf/tui/plot"
)

// chainView shows the lattice pattern of the relaxed chain site by site and,
// behind it, the density (or, where that is flat, the bond order), scaled to
// the same height with its range in the legend.
type chainView struct{}

func (chainView) name() string { return "density and lattice" }

func (chainView) stale(p *picture) bool { return p.stale.lattice }

// flatDensity is the modulation below which the density is not worth a curve.
const flatDensity = 1e-6

func (chainView) abscissae(s *scene) []float64 {
	if s.Lattice == nil {
		return nil
	}
	return places(s.window())
}

// window returns the sites that are shown.
func (s *scene) window() (from, to int) {
	n := len(s.Lattice.Electrons.Density)
	if s.sites.width() == 0 || s.sites.to > n {
		return 0, n
	}
	return s.sites.from, s.sites.to
}

func places(from, to int) []float64 {
	x := make([]float64, to-from)
	for i := range x {
		x[i] = float64(from + i)
	}
	return x
}

// pattern is one lattice coordinate along the chain.
type pattern struct {
	name, unit string
	values     []float64
}

func (s *scene) patterns() []pattern {
	var out []pattern
	unit := ""
	if s.Chain.Energy == model.UnitEV {
		unit = "Å"
	}
	if s.Lattice.Displacement != nil {
		out = append(out, pattern{"u", unit, s.Lattice.Displacement})
	}
	if s.Lattice.SiteMode != nil {
		out = append(out, pattern{"q", "", s.Lattice.SiteMode})
	}
	if s.staggered {
		for i, p := range out {
			out[i].values = stagger(p.values, s.Chain.Boundary == model.Ring)
			out[i].name = "(−1)ⁱ" + p.name
		}
	}
	return out
}

// stagger returns (−1)^i (2x_i − x_{i−1} − x_{i+1})/4, the amplitude of a
// period-2 pattern with its sign: a kink is where it changes.
func stagger(x []float64, ring bool) []float64 {
	out := make([]float64, len(x))
	for i, v := range x {
		l, r := neighbours(x, i, ring)
		out[i] = (2*v - l - r) / 4
		if i%2 == 1 {
			out[i] = -out[i]
		}
	}
	return out
}

// smooth returns (x_{i−1} + 2x_i + x_{i+1})/4: a period-2 pattern averages out.
func smooth(x []float64, ring bool) []float64 {
	out := make([]float64, len(x))
	for i, v := range x {
		l, r := neighbours(x, i, ring)
		out[i] = (l + 2*v + r) / 4
	}
	return out
}

// neighbours of site i; at an open end the missing one is its mirror image.
func neighbours(x []float64, i int, ring bool) (left, right float64) {
	n := len(x)
	l, r := i-1, i+1
	if ring {
		l, r = (l+n)%n, r%n
	} else if l < 0 {
		l = min(1, n-1)
	} else if r == n {
		r = max(n-2, 0)
	}
	return x[l], x[r]
}

func (v chainView) title(s *scene) string {
	if s.Lattice == nil {
		return v.name()
	}
	_, name := s.density()
	patterns := s.patterns()
	if len(patterns) == 0 {
		return name + " along the chain"
	}
	if s.staggered {
		name = "smooth n"
	}
	what := "lattice "
	for _, p := range patterns {
		what += p.name
		if p.unit != "" {
			what += " (" + p.unit + ")"
		}
		what += ", "
	}
	return what + name
}

// density returns the electrons' pattern that is worth showing, and its name.
func (s *scene) density() (values []float64, name string) {
	e := &s.Lattice.Electrons
	if lo, hi, _ := span(0, e.Density); hi-lo < flatDensity && s.Lattice.Displacement != nil {
		return e.BondOrder, "bond order p"
	}
	return e.Density, "density n"
}

func (v chainView) draw(c *plot.Canvas, s *scene) {
	if s.Lattice == nil {
		return
	}
	from, to := s.window()
	patterns := s.patterns()
	sites := plot.Axis{Min: float64(from), Max: float64(max(to-1, from+1)), Name: "site"}
	if len(patterns) == 0 {
		density, _ := s.density()
		lo, hi, _ := span(0.06, density)
		c.Frame(sites, plot.Axis{Min: lo, Max: hi}, inkAxis)
		s.markReading(c)
		c.Stems(places(from, to), density[from:to], lo, inkDensity, plot.Dotted)
		return
	}
	most := 0.0
	for _, p := range patterns {
		lo, hi, _ := span(0, p.values)
		most = max(most, 1.1*hi, -1.1*lo)
	}
	if most < 1e-9 { // an undistorted chain: do not blow up the rounding
		most = 1
	}
	c.Frame(sites, plot.Axis{Min: -most, Max: most}, inkAxis)
	s.markReading(c)
	columns, _ := c.Size()
	dense := to-from > columns // lines between the sites would fill the plot
	v.drawDensity(c, s, 0.9*most, dense)
	v.drawPatterns(c, s, patterns, dense)
}

// drawDensity draws the density, or what stands for it, behind the lattice.
func (chainView) drawDensity(c *plot.Canvas, s *scene, height float64, dense bool) {
	from, to := s.window()
	if s.staggered { // both without their fast oscillation
		scaled, label := fitInto(smooth(s.Lattice.Electrons.Density, s.Chain.Boundary == model.Ring)[from:to], height)
		c.Line(places(from, to), scaled, inkDensity, plot.Dotted)
		s.label(c, "n "+label)
		return
	}
	density, name := s.density()
	to = min(to, len(density)) // an open chain has a bond less than sites
	scaled, label := fitInto(density[from:to], height)
	if dense {
		c.Points(places(from, to), scaled, inkDensity, plot.Dotted)
	} else {
		c.Stems(places(from, to), scaled, 0, inkDensity, plot.Dotted)
	}
	s.label(c, name[len(name)-1:]+" "+label)
}

func (chainView) drawPatterns(c *plot.Canvas, s *scene, patterns []pattern, dense bool) {
	from, to := s.window()
	x := places(from, to)
	for i, p := range patterns {
		y, ink := p.values[from:to], []plot.Ink{inkFinite, inkBare}[i]
		switch {
		case dense && !s.staggered:
			c.Points(x, y, ink, []plot.Pattern{plot.Heavy, plot.Dashed}[i])
		case !s.staggered:
			c.Points(x, y, ink, plot.Heavy)
			fallthrough
		default: // an amplitude varies slowly and needs no points
			c.Line(x, y, ink, []plot.Pattern{plot.Solid, plot.Dashed}[i])
		}
		s.label(c, p.name)
	}
}

// fitInto scales values about the middle of their range to ±height and says
// what that range is; a flat line lies at 0.
func fitInto(values []float64, height float64) (scaled []float64, label string) {
	lo, hi, _ := span(0, values)
	scaled = make([]float64, len(values))
	if hi-lo < flatDensity {
		return scaled, report.Digits((lo+hi)/2, 1e-6, 4)
	}
	for i, v := range values {
		scaled[i] = (v - (lo+hi)/2) / ((hi - lo) / 2) * height
	}
	return scaled, report.Digits(lo, 1e-4, 3) + "…" + report.Digits(hi, 1e-4, 3)
}

func (chainView) read(s *scene, x float64) string {
	if s.Lattice == nil {
		return ""
	}
	density := s.Lattice.Electrons.Density
	i := min(max(int(math.Round(x)), 0), len(density)-1)
	text := fmt.Sprintf("site %d  n %s", i, report.Digits(density[i], 1e-8, 5))
	if p := s.Lattice.Electrons.BondOrder; i < len(p) {
		text += "  p " + report.Digits(p[i], 1e-8, 5)
	}
	for _, p := range s.patterns() {
		text += fmt.Sprintf("  %s %s %s", p.name, report.Digits(p.values[i], 1e-9, 4), p.unit)
	}
	return text
}
