package plot

import "math"

// Stems draws a bar from y = base to each value, for data that belong to
// places, such as the sites of a chain. The xs must ascend; Stems panics if
// the lengths differ. When there are more bars than columns of dots it draws
// instead, in each column, from the lowest to the highest value of its places
// and their two neighbours: an envelope, which cannot beat with the columns.
func (c *Canvas) Stems(xs, ys []float64, base float64, ink Ink, p Pattern) {
	check(xs, ys)
	c.last = sample{stems, ink, p % patterns}
	if c.area.empty() || !finite(base) {
		return
	}
	s := column{c: c, ink: ink, pattern: c.last.pattern, base: c.y.dot(base), stale: c.Stale, before: math.NaN()}
	visible := 0
	for i, x := range xs {
		if x >= c.x.lo && x <= c.x.hi && finite(ys[i]) {
			visible++
		}
	}
	s.envelope = visible > c.area.right-c.area.left+1
	for i, x := range xs {
		s.add(c.x.dot(x), c.y.dot(ys[i]))
	}
	s.flush()
}

// column collects the values that fall into one column of dots.
type column struct {
	c        *Canvas
	ink      Ink
	pattern  Pattern
	base     float64
	envelope bool
	stale    bool

	any    bool
	col    int
	lo, hi float64
	before float64 // the value before this one
}

func (s *column) add(x, y float64) {
	a := &s.c.area
	if x != x || y != y {
		s.before = math.NaN()
		return
	}
	col := round(min(max(x, float64(a.left-1)), float64(a.right+1)))
	if s.any && col != s.col {
		if s.envelope && s.before == s.before {
			s.include(y)
		}
		s.flush()
	}
	if !s.any {
		s.any, s.col, s.lo, s.hi = true, col, y, y
		if !s.envelope {
			s.include(s.base)
		} else if s.before == s.before {
			s.include(s.before)
		}
	}
	s.include(y)
	s.before = y
}

func (s *column) include(y float64) { s.lo, s.hi = min(s.lo, y), max(s.hi, y) }

func (s *column) flush() {
	any, a := s.any, &s.c.area
	s.any = false
	if !any || s.col < a.left || s.col > a.right {
		return
	}
	top, bottom := float64(a.top), float64(a.bottom)
	lo, hi := math.Floor(s.lo+0.5), math.Floor(s.hi+0.5)
	if hi < top || lo > bottom {
		return
	}
	p := pen{c: s.c, ink: s.ink, pattern: s.pattern, area: *a, col: s.col, stale: s.stale, lastCell: -1}
	for y := int(max(lo, top)); y <= int(min(hi, bottom)); y++ {
		p.dot(y)
	}
}
