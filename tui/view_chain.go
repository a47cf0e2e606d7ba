package tui

import (
	"fmt"
	"math"

	"example.org/twokf/model"
	"example.org/twokf/model/report"
	"example.org/twokf/model/study"
	"example.org/twokf/tui/plot"
)

// chainView shows the lattice pattern of the relaxed chain site by site and,
// behind it, the density (or, where that is flat, the bond order), scaled to
// the same height with its range in the legend. Where many sites share a column
// of dots it shows the lowest and the highest of them.
type chainView struct{}

func (chainView) name() string { return "density and lattice" }

func (chainView) stale(s *scene) bool { return s.stale.lattice }

func (chainView) parts(s *scene) [3]any { return [3]any{s.Lattice} }

// flatDensity is the modulation below which the density is not worth a curve.
const flatDensity = 1e-6

// sketch is what the chain's view keeps between drawings: memory, and what only
// a walk along the whole chain can tell.
type sketch struct {
	lattice   *study.Lattice
	staggered bool
	flat      bool       // the density is not worth a curve
	density   [2]float64 // its range
	most      float64    // largest lattice coordinate, either way

	x, y     []float64
	envelope envelope
}

// survey walks along the chain once for each lattice.
func (s *scene) survey() *sketch {
	k := s.sketch
	if k.lattice == s.Lattice && k.staggered == s.staggered {
		return k
	}
	k.lattice, k.staggered, k.most = s.Lattice, s.staggered, 0
	n := strand{values: s.Lattice.Electrons.Density}
	lo, hi := n.extent(0, len(n.values))
	k.density, k.flat = [2]float64{lo, hi}, hi-lo < flatDensity
	for _, p := range s.patterns() {
		lo, hi := p.extent(0, len(p.values))
		k.most = max(k.most, hi, -lo)
	}
	return k
}

// window returns the sites that are shown, and how they share the plot.
func (s *scene) window() columns {
	n := len(s.Lattice.Electrons.Density)
	w := s.sites
	if w.width() == 0 || w.to > n {
		w = window{0, n}
	}
	return columns{w, s.columns}
}

// patterns returns the lattice coordinates.
func (s *scene) patterns() []strand {
	var out []strand
	unit := ""
	if s.Chain.Energy == model.UnitEV {
		unit = "Å"
	}
	pattern := strand{ring: s.Chain.Boundary == model.Ring}
	sign := ""
	if s.staggered {
		pattern.filter, sign = amplitude, "(−1)ⁱ"
	}
	if pattern.values = s.Lattice.Displacement; pattern.values != nil {
		pattern.name, pattern.unit = sign+"u", unit
		out = append(out, pattern)
	}
	if pattern.values = s.Lattice.SiteMode; pattern.values != nil {
		pattern.name, pattern.unit = sign+"q", ""
		out = append(out, pattern)
	}
	return out
}

// density returns the electrons' pattern that is worth showing: without its fast
// oscillation where the lattice is shown without it.
func (s *scene) density() strand {
	e := &s.Lattice.Electrons
	switch {
	case s.staggered && (s.Lattice.Displacement != nil || s.Lattice.SiteMode != nil):
		return strand{name: "n", values: e.Density, ring: s.Chain.Boundary == model.Ring, filter: smooth}
	case s.survey().flat && s.Lattice.Displacement != nil:
		return strand{name: "p", values: e.BondOrder}
	}
	return strand{name: "n", values: e.Density}
}

func (v chainView) title(s *scene) string {
	if s.Lattice == nil {
		return v.name()
	}
	density := s.density()
	name := map[string]string{"n": "density n", "p": "bond order p"}[density.name]
	patterns := s.patterns()
	if len(patterns) == 0 {
		return name + " along the chain"
	}
	if density.filter == smooth {
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

func (v chainView) draw(c *plot.Canvas, s *scene) {
	if s.Lattice == nil {
		return
	}
	w, k := s.window(), s.survey()
	sites := plot.Axis{Min: float64(w.from), Max: float64(max(w.to-1, w.from+1)), Whole: true, Name: "site"}
	patterns := s.patterns()
	if len(patterns) == 0 {
		pad := 0.06 * (k.density[1] - k.density[0])
		low := k.density[0] - pad
		c.Frame(sites, plot.Axis{Min: low, Max: k.density[1] + pad}, inkAxis)
		s.markReading(c)
		if w.count, _ = c.Dots(); w.count > 0 {
			v.drawDensity(c, s, w, low, 0)
		}
		return
	}
	most := 1.1 * k.most
	if most < 1e-9 { // an undistorted chain: do not blow up the rounding
		most = 1
	}
	c.Frame(sites, plot.Axis{Min: -most, Max: most}, inkAxis)
	s.markReading(c)
	if w.count, _ = c.Dots(); w.count == 0 {
		return
	}
	v.drawDensity(c, s, w, 0, 0.9*most)
	for i := range patterns {
		v.drawPattern(c, s, w, &patterns[i], i)
	}
}

// siteBySite returns the strand at the sites of the window.
func (k *sketch) siteBySite(t *strand, w columns) (x, y []float64) {
	to := min(w.to, len(t.values)) // an open chain has a bond less than sites
	k.x = k.x[:0]
	for i := w.from; i < to; i++ {
		k.x = append(k.x, float64(i))
	}
	k.y = t.append(k.y[:0], w.from, to)
	return k.x, k.y
}

// crowded reports whether lines between the sites would fill the plot.
func crowded(c *plot.Canvas, w columns) bool {
	cells, _ := c.Size()
	return w.width() > cells
}

// drawDensity draws the density, or what stands for it: behind the lattice,
// scaled to ±height, or by itself (height 0) above the base.
func (chainView) drawDensity(c *plot.Canvas, s *scene, w columns, base, height float64) {
	t, k := s.density(), s.sketch
	if w.wide() {
		e := &k.envelope
		e.of(&t, w)
		label := fit(height, e.lo, e.hi)
		c.Line(e.x, e.lo, inkDensity, plot.Dotted)
		c.Line(e.x, e.hi, inkDensity, plot.Dotted)
		s.labelDensity(c, &t, height, label)
		return
	}
	x, y := k.siteBySite(&t, w)
	label := fit(height, y)
	switch {
	case t.filter == smooth:
		c.Line(x, y, inkDensity, plot.Dotted)
	case height > 0 && crowded(c, w):
		c.Points(x, y, inkDensity, plot.Dotted)
	default:
		c.Stems(x, y, base, inkDensity, plot.Dotted)
	}
	s.labelDensity(c, &t, height, label)
}

func (s *scene) labelDensity(c *plot.Canvas, t *strand, height float64, label string) {
	if height > 0 {
		s.label(c, t.name+" "+label)
	}
}

func (chainView) drawPattern(c *plot.Canvas, s *scene, w columns, t *strand, i int) {
	ink, line := []plot.Ink{inkFinite, inkBare}[i], []plot.Pattern{plot.Solid, plot.Dashed}[i]
	if w.wide() {
		e := &s.sketch.envelope
		e.of(t, w)
		c.Line(e.x, e.lo, ink, line)
		c.Line(e.x, e.hi, ink, line)
		s.label(c, t.name)
		return
	}
	x, y := s.sketch.siteBySite(t, w)
	switch {
	case t.filter == amplitude: // varies slowly and needs no points
		c.Line(x, y, ink, line)
	case crowded(c, w):
		c.Points(x, y, ink, []plot.Pattern{plot.Heavy, plot.Dashed}[i])
	default:
		c.Points(x, y, ink, plot.Heavy)
		c.Line(x, y, ink, line)
	}
	s.label(c, t.name)
}

// fit scales values in place about the middle of their range to ±height, unless
// that is 0, and says what that range is; a flat line lies at 0.
func fit(height float64, values ...[]float64) (label string) {
	lo, hi, _ := span(0, values...)
	middle, half := (lo+hi)/2, (hi-lo)/2
	flat := hi-lo < flatDensity
	for _, x := range values {
		for i := range x {
			switch {
			case height == 0:
			case flat:
				x[i] = 0
			default:
				x[i] = (x[i] - middle) / half * height
			}
		}
	}
	if flat {
		return report.Digits(middle, 1e-6, 4)
	}
	return report.Digits(lo, 1e-4, 3) + "…" + report.Digits(hi, 1e-4, 3)
}

func (chainView) begin(s *scene) float64 {
	if s.Lattice == nil {
		return 0
	}
	w := s.window()
	return float64(w.from + w.width()/2)
}

// place goes from site to site, or from one column of dots to the next where
// many sites share it.
func (chainView) place(s *scene, x float64, by int) (float64, bool) {
	if s.Lattice == nil {
		return 0, false
	}
	w := s.window()
	if w.wide() {
		column := min(max(w.of(x)+by, 0), w.count-1)
		return math.Round(float64(w.from) + float64(column)*w.step()), true
	}
	return float64(min(max(int(math.Round(x))+by, w.from), w.to-1)), true
}

// read tells the values at one site, or their range where many sites share a
// column of dots.
func (chainView) read(s *scene, x float64) string {
	if s.Lattice == nil {
		return ""
	}
	e := &s.Lattice.Electrons
	from := min(max(int(math.Round(x)), 0), len(e.Density)-1)
	to, text := from+1, fmt.Sprintf("site %d", from)
	if w := s.window(); w.wide() && from >= w.from && from < w.to {
		from, to = w.sites(w.of(float64(from)))
		text = fmt.Sprintf("sites %d–%d", from, to-1)
	}
	values := func(t *strand, grain float64, digits int) {
		lo, hi := t.extent(from, to)
		if lo > hi {
			return
		}
		low, high := report.Digits(lo, grain, digits), report.Digits(hi, grain, digits)
		if text += "  " + t.name + " " + low; high != low {
			text += "…" + high
		}
		if t.unit != "" {
			text += " " + t.unit
		}
	}
	values(&strand{name: "n", values: e.Density}, 1e-8, 5)
	values(&strand{name: "p", values: e.BondOrder}, 1e-8, 5)
	patterns := s.patterns()
	for i := range patterns {
		values(&patterns[i], 1e-9, 4)
	}
	return text
}
