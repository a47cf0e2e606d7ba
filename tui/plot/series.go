package plot

import "math"

// Pattern tells series apart without colour. Values beyond the last one repeat
// from the first.
type Pattern uint8

const (
	Solid  Pattern = iota // line ⠒⠒, point a ring; in ASCII .-' and o
	Dashed                // line ⠒ ⠒, point a short dash; in ASCII =
	Dotted                // line ⠂⠂, point one dot; in ASCII *
	Heavy                 // line ⠶⠶, point a block; in ASCII #

	patterns = 4
)

// form is how the dots of a cell are spelled in ASCII.
type form uint8

const (
	formSolid form = iota // the patterns, in their order
	formDashed
	formDotted
	formHeavy
	formRing
	formShade
	formMark
)

// spelling[f][dots] is the character for a set of dots: bit 0 high, 1 middle, 2 low.
var spelling = [...]string{
	formSolid:  " '-'.|.|",
	formDashed: " =======",
	formDotted: " *******",
	formHeavy:  " #######",
	formRing:   " ooooooo",
	formShade:  " .......",
	formMark:   " :::::::",
}

// kind is what was drawn, for the legend.
type kind uint8

const (
	nothing kind = iota
	line
	points
	stems
	area
)

// sample is the look of a series.
type sample struct {
	kind    kind
	ink     Ink
	pattern Pattern
}

// round returns the nearest integer; v must fit.
func round(v float64) int { return int(math.Floor(v + 0.5)) }

// Line joins the points (xs[i], ys[i]). It panics if the lengths differ. A
// point with a NaN or ±Inf breaks the line. Where several points fall into one
// column of dots the line covers everything between the lowest and the
// highest, so that no spike is lost.
func (c *Canvas) Line(xs, ys []float64, ink Ink, p Pattern) {
	check(xs, ys)
	c.last = sample{line, ink, p % patterns}
	if c.area.empty() {
		return
	}
	c.trace(xs, ys, pen{c: c, ink: ink, pattern: c.last.pattern, area: c.area, stale: c.Stale})
}

// Area shades lightly what lies between the curve and y = base; everything
// else stands over it. It panics if the lengths differ.
func (c *Canvas) Area(xs, ys []float64, base float64, ink Ink) {
	check(xs, ys)
	c.last = sample{area, ink, Solid}
	if c.area.empty() || !finite(base) {
		return
	}
	c.trace(xs, ys, pen{c: c, ink: ink, area: c.area, stale: c.Stale, filled: true, base: c.y.dot(base)})
}

func (c *Canvas) trace(xs, ys []float64, p pen) {
	for i, x := range xs {
		p.to(c.x.dot(x), c.y.dot(ys[i]))
	}
	p.lift()
}

// Points marks each point by itself. It panics if the lengths differ.
func (c *Canvas) Points(xs, ys []float64, ink Ink, p Pattern) {
	check(xs, ys)
	c.last = sample{points, ink, p % patterns}
	for i, v := range xs {
		x, y := c.x.dot(v), c.y.dot(ys[i])
		if c.area.contains(x, y) {
			c.point(round(x), round(y), ink, c.last.pattern, c.Stale)
		}
	}
}

// shapes are the dots of a point by pattern, as steps from its place.
var shapes = [...][][2]int{
	Solid:  {{-1, 0}, {1, 0}, {0, -1}, {0, 1}},
	Dashed: {{-1, 0}, {0, 0}, {1, 0}},
	Dotted: {{0, 0}},
	Heavy:  {{0, 0}, {1, 0}, {0, 1}, {1, 1}},
}

func (c *Canvas) point(x, y int, ink Ink, p Pattern, stale bool) {
	if c.charset == ASCII {
		f := form(p)
		switch {
		case stale:
			f = formShade
		case p == Solid:
			f = formRing
		}
		c.dot(x, y, ink, series, f)
		return
	}
	if stale {
		p = Dotted
	}
	for _, d := range shapes[p] {
		c.mark(x+d[0], y+d[1], ink, 0)
	}
}

// mark sets a dot of a series if it lies in the frame.
func (c *Canvas) mark(x, y int, ink Ink, f form) {
	if x >= c.area.left && x <= c.area.right && y >= c.area.top && y <= c.area.bottom {
		c.dot(x, y, ink, series, f)
	}
}

// contains tells whether the dot nearest to (x, y) lies in r; NaN does not.
func (r rect) contains(x, y float64) bool {
	return x >= float64(r.left)-0.5 && x < float64(r.right)+0.5 &&
		y >= float64(r.top)-0.5 && y < float64(r.bottom)+0.5
}

func check(xs, ys []float64) {
	if len(xs) != len(ys) {
		panic("plot: xs and ys differ in length")
	}
}
