package tui

import (
	"math"
	"slices"
)

// columns divides the sites of a window evenly among columns of dots, the first
// site in the middle of the first column and the last in that of the last.
type columns struct {
	window
	count int
}

// wide is how many sites must share a column of dots before they are drawn as
// their extremes; fewer can be told apart.
const wide = 8

func (c columns) wide() bool { return c.count > 1 && c.width() >= wide*c.count }

// step is the number of sites from a column to the next.
func (c columns) step() float64 {
	if c.count < 2 {
		return 1
	}
	return float64(c.width()-1) / float64(c.count-1)
}

// tie, in columns, decides for what lies midway between two columns as the
// canvas does for dots.
const tie = 1e-5

// sites returns the sites from ≤ i < to of a column.
func (c columns) sites(column int) (from, to int) {
	edge := func(k float64) int { return c.from + int(math.Ceil((k-tie)*c.step())) }
	return max(c.from, edge(float64(column)-0.5)), min(c.to, edge(float64(column)+0.5))
}

// of returns the column in which a site is drawn.
func (c columns) of(site float64) int {
	return min(max(int(math.Floor((site-float64(c.from))/c.step()+0.5+tie)), 0), c.count-1)
}

// envelope is the lowest and the highest value about each column of dots.
type envelope struct{ x, lo, hi, halfLo, halfHi []float64 }

// of fills the envelope of a strand. A column takes in half of the next one on
// either side: whatever repeats within two columns looks the same everywhere and
// cannot beat with them, and what is wider than that is seen as it is.
func (e *envelope) of(t *strand, c columns) {
	e.x, e.lo, e.hi = e.x[:0], e.lo[:0], e.hi[:0]
	e.halfLo, e.halfHi = e.halfLo[:0], e.halfHi[:0]
	halves := 2 * (c.count - 1)
	next := c.from
	for h := 1; h <= halves; h++ {
		from := next
		if next = c.from + int(math.Ceil(float64(h)/2*c.step())); h == halves {
			next = c.to
		}
		lo, hi := t.extent(from, next)
		e.halfLo, e.halfHi = append(e.halfLo, lo), append(e.halfHi, hi)
	}
	for k := range c.count {
		about := func(x []float64) []float64 { return x[max(0, 2*k-2):min(halves, 2*k+2)] }
		e.x = append(e.x, float64(c.from)+float64(k)*c.step())
		e.lo, e.hi = append(e.lo, slices.Min(about(e.halfLo))), append(e.hi, slices.Max(about(e.halfHi)))
	}
}
