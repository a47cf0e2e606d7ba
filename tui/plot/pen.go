package plot

import "math"

// pen draws a continuous curve column by column. In each column of dots it
// collects the interval of y that the curve passes there and sets the dots in
// it, so that the curve is one dot thin where it is single-valued and complete
// where it swings within a column. Its work for a segment is bounded by the
// width of the frame, however far outside the ends lie.
type pen struct {
	c       *Canvas
	ink     Ink
	pattern Pattern
	area    rect
	stale   bool    // sparse
	filled  bool    // fill to base instead of drawing the curve
	base    float64 // in dots

	down     bool
	x, y     float64 // where the pen is
	col      int     // its column, at most one outside the frame
	in       float64 // where the curve came into the column
	lo, hi   float64 // what it has passed there
	phase    int     // dots, in ASCII cells, since the pen was set down
	lastCell int     // ASCII: where the last dot was
}

// to draws on to (x, y), in dots; NaN lifts the pen.
func (p *pen) to(x, y float64) {
	if x != x || y != y {
		p.lift()
		return
	}
	col := p.column(x)
	if !p.down {
		p.down, p.phase, p.lastCell = true, 0, -1
		p.x, p.y, p.col = x, y, col
		p.enter(y)
		return
	}
	if col != p.col {
		p.cross(x, y, col)
	}
	p.pass(y)
	p.x, p.y = x, y
}

// pass extends the interval; comparing is faster than min and max, which look for NaN.
func (p *pen) pass(y float64) {
	if y < p.lo {
		p.lo = y
	}
	if y > p.hi {
		p.hi = y
	}
}

// cross draws the columns between the pen and (x, y) in another column.
func (p *pen) cross(x, y float64, col int) {
	step, edge := 1, 0.5
	if col < p.col {
		step, edge = -1, -0.5
	}
	perX, dy := 1/(x-p.x), y-p.y
	for p.col != col {
		t := (float64(p.col) + edge - p.x) * perX
		if t < 0 {
			t = 0
		} else if t > 1 {
			t = 1
		}
		at := p.y + t*dy
		p.pass(at)
		p.leave(at)
		p.col += step
		p.enter(at)
	}
}

// lift ends the curve.
func (p *pen) lift() {
	if p.down {
		p.leave(p.y)
		p.down = false
	}
}

func (p *pen) column(x float64) int {
	switch {
	case x < float64(p.area.left):
		x = max(x, float64(p.area.left-1))
	case x > float64(p.area.right):
		x = min(x, float64(p.area.right+1))
	}
	return round(x)
}

func (p *pen) enter(y float64) { p.in, p.lo, p.hi = y, y, y }

// leave draws the column that ends where the curve has come to out.
func (p *pen) leave(out float64) {
	if p.col < p.area.left || p.col > p.area.right {
		return
	}
	if p.filled {
		p.fill()
		return
	}
	// Dots inside the interval; a flat piece between two dots takes the nearer one.
	lo, hi := math.Ceil(p.lo), math.Floor(p.hi)
	if lo > hi {
		lo = math.Floor((p.lo+p.hi)/2 + 0.5)
		hi = lo
	}
	top, bottom := float64(p.area.top), float64(p.area.bottom)
	if hi < top || lo > bottom {
		return
	}
	first, last := int(max(lo, top)), int(min(hi, bottom))
	if out >= p.in {
		for y := first; y <= last; y++ {
			p.dot(y)
		}
	} else {
		for y := last; y >= first; y-- {
			p.dot(y)
		}
	}
}

// dashes[pattern] says which of twelve successive dots are drawn, bit 0 first.
var dashes = [patterns]uint16{
	Solid:  0b111111111111,
	Dashed: 0b001111001111,
	Dotted: 0b010101010101,
	Heavy:  0b111111111111,
}

// staleDashes are the same, sparser, and still all different.
var staleDashes = [patterns]uint16{
	Solid:  0b001001001001,
	Dashed: 0b000000001001,
	Dotted: 0b000001000001,
	Heavy:  0b000100010001,
}

func (p *pen) dot(y int) {
	if p.c.charset == ASCII {
		p.asciiDot(y)
		return
	}
	which := &dashes
	if p.stale {
		which = &staleDashes
	}
	if which[p.pattern]>>p.phase&1 != 0 {
		p.c.dot(p.col, y, p.ink, series, 0)
		if p.pattern == Heavy {
			p.c.mark(p.col+1, y, p.ink, 0)
			p.c.mark(p.col, y+1, p.ink, 0)
			p.c.mark(p.col+1, y+1, p.ink, 0)
		}
	}
	if p.phase++; p.phase == 12 {
		p.phase = 0
	}
}

// asciiDot is dot in ASCII, where whole cells are drawn or left out.
func (p *pen) asciiDot(y int) {
	c := p.c
	if at := (y/c.ch)*c.w + p.col; at != p.lastCell {
		p.lastCell = at
		p.phase++
	}
	every := 1
	if p.pattern == Dotted {
		every = 2
	}
	if p.stale {
		every *= 2
	}
	if (p.phase-1)&(every-1) == 0 {
		c.dot(p.col, y, p.ink, series, form(p.pattern))
	}
}

// fill shades the column between the curve and the base.
func (p *pen) fill() {
	lo, hi := min(p.lo, p.base), max(p.hi, p.base)
	top, bottom := float64(p.area.top), float64(p.area.bottom)
	if hi < top || lo > bottom {
		return
	}
	c := p.c
	for y := int(math.Ceil(max(lo, top))); y <= int(min(hi, bottom)); y++ {
		row := y / 2 // of the lattice of shading dots, staggered
		if c.charset == ASCII {
			row = y / c.ch
		} else if y&1 != 0 {
			continue
		}
		if (p.col+row)&1 == 0 && !(p.stale && p.col&2 != 0) {
			c.dot(p.col, y, p.ink, shade, formShade)
		}
	}
}
