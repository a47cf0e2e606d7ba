package tui

import (
	"math"

	"example.org/twokf/tui/plot"
)

// view is one of the bench's plots. A view draws from the picture alone.
type view interface {
	name() string                                            // for the key list
	title(s *scene) string                                   // the heading: what is shown, and in which unit
	draw(c *plot.Canvas, s *scene)                           // everything below the heading
	begin(s *scene) float64                                  // where reading begins
	place(s *scene, x float64, by int) (at float64, ok bool) // so many places on from the one nearest to x; false if there is nothing to read
	read(s *scene, x float64) string                         // what the plot shows at abscissa x
	parts(s *scene) [3]any                                   // pointers to the parts of the picture that it shows
	stale(s *scene) bool                                     // whether one of them is older than the knobs
}

// views in the order of their keys.
var views = []view{bandIndex: bandView{}, chainIndex: chainView{}, chiIndex: chiView{}, phononIndex: phononView{}}

const (
	bandIndex = iota
	chainIndex
	chiIndex
	phononIndex
)

// scene is all that a view may look at.
type scene struct {
	picture
	large     bool // one plot has the whole screen
	staggered bool // the lattice pattern is shown with its 2kF oscillation taken out
	sites     window
	columns   int // of dots in this view, 0 before it is drawn
	sketch    *sketch
	reading   float64
	reads     bool // reading is the abscissa that is read in this view
	spell     func(string) string
}

// plot draws a whole view: its heading and what is below.
func (s *scene) plot(c *plot.Canvas, v view) {
	c.Heading(s.spell(v.title(s)), inkHeading)
	v.draw(c, s)
}

// label names the series drawn last.
func (s *scene) label(c *plot.Canvas, name string) { c.Name(s.spell(name)) }

// markReading draws where the plot is read.
func (s *scene) markReading(c *plot.Canvas) {
	if s.reads {
		c.VMark(s.reading, "", inkPlain)
	}
}

// among goes by places on from the one in xs, ascending, that is nearest to x.
func among(xs []float64, x float64, by int) (float64, bool) {
	if len(xs) == 0 {
		return 0, false
	}
	return xs[min(max(plot.Nearest(xs, x)+by, 0), len(xs)-1)], true
}

// span returns the range of the finite values, padded a little; ok is false
// where there are none.
func span(pad float64, xs ...[]float64) (lo, hi float64, ok bool) {
	lo, hi = math.Inf(1), math.Inf(-1)
	for _, x := range xs {
		for _, v := range x {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				continue
			}
			lo, hi = min(lo, v), max(hi, v)
		}
	}
	if hi < lo {
		return 0, 1, false
	}
	d := (hi - lo) * pad
	return lo - d, hi + d, true
}
