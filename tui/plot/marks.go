package plot

// note is a text that is waiting for its place.
type note struct {
	text string
	ink  Ink
	x, y int // dots of a vertical (y < 0) or horizontal (x < 0) mark
}

// entry is one line of the legend.
type entry struct {
	name string
	sample
}

// VMark draws a thin dotted vertical at x with a short label beside it, which
// keeps clear of other labels and, where it can, of the curves. Nothing is
// drawn outside the frame.
func (c *Canvas) VMark(x float64, name string, ink Ink) {
	at := c.x.dot(x)
	if c.area.empty() || !c.area.contains(at, float64(c.area.top)) {
		return
	}
	col := round(at)
	for y := c.area.top; y <= c.area.bottom; y++ {
		if c.charset == ASCII || y&1 == 0 {
			c.dot(col, y, ink, ruler, formMark)
		}
	}
	c.notes = append(c.notes, note{name, ink, col, -1})
}

// HMark is VMark for a horizontal at y; its label stands in the line.
func (c *Canvas) HMark(y float64, name string, ink Ink) {
	at := c.y.dot(y)
	if c.area.empty() || !c.area.contains(float64(c.area.left), at) {
		return
	}
	row := round(at)
	for x := c.area.left; x <= c.area.right; x++ {
		if x&1 == 0 {
			c.dot(x, row, ink, ruler, formSolid)
		}
	}
	c.notes = append(c.notes, note{name, ink, -1, row})
}

// Name gives the series that was drawn last an entry in the legend.
func (c *Canvas) Name(name string) {
	if c.last.kind != nothing && !c.area.empty() {
		c.legend = append(c.legend, entry{name, c.last})
	}
}

// settle finds places for what is still without one.
func (c *Canvas) settle() {
	for i := range c.notes {
		n := &c.notes[i]
		if n.text == "" {
			continue
		}
		if n.y < 0 {
			c.noteVertical(n)
		} else {
			c.noteHorizontal(n)
		}
	}
	c.placeXName()
	c.placeLegend()
	c.notes, c.xName, c.legend = c.notes[:0], "", c.legend[:0]
}

// What it costs to cover a cell: any number of rulers rather than one cell of
// a series, and never a text.
const (
	overRuler  = 1
	overSeries = 1 << 10
	never      = 1 << 20
)

// cost adds up what a text of n cells would cover. Next to it there must be
// no other text, or the two would read as one.
func (c *Canvas) cost(col, row, n int) int {
	if col < 0 || col+n > c.w || row < c.head || row >= c.h {
		return never
	}
	line := c.cells[row*c.w : (row+1)*c.w]
	if col > 0 && line[col-1].layer == label || col+n < c.w && line[col+n].layer == label {
		return never
	}
	sum := 0
	for i := col; i < col+n; i++ {
		switch line[i].layer {
		case shade, ruler:
			sum += overRuler
		case series:
			sum += overSeries
		case label:
			return never
		}
	}
	return sum
}

// inside tells the first column of the frame and the rows that labels may use:
// not the one that holds the ruler.
func (c *Canvas) inside() (left, top, bottom int) {
	return (c.area.left + c.cw - 1) / c.cw, c.area.top / c.ch, (c.area.bottom+1)/c.ch - 1
}

// noteVertical labels a vertical: right or left of it, as high as there is room.
func (c *Canvas) noteVertical(n *note) {
	left, top, bottom := c.inside()
	width, col := c.width(n.text), n.x/c.cw
	best, bc, br := never, 0, 0
	for row := top; row <= bottom && best > 0; row++ {
		for _, at := range [...]int{col + 1, col - width} {
			if at < left {
				continue
			}
			if k := c.cost(at, row, width); k < best {
				best, bc, br = k, at, row
			}
		}
	}
	if best < never {
		c.Text(bc, br, n.text, n.ink)
	}
}

// noteHorizontal labels a horizontal: in the line as far right as there is
// room, or in the row above or below.
func (c *Canvas) noteHorizontal(n *note) {
	left, top, bottom := c.inside()
	width, row := c.width(n.text), n.y/c.ch
	best, bc, br := never, 0, 0
	for _, r := range [...]int{row, row - 1, row + 1} {
		if r < top || r > bottom {
			continue
		}
		for at := c.w - width; at >= left && best > width*overRuler; at-- {
			if k := c.cost(at, r, width); k < best {
				best, bc, br = k, at, r
			}
		}
	}
	if best < never {
		c.Text(bc, br, n.text, n.ink)
	}
}

// placeXName writes the name of the x axis into its row of labels: behind the
// last one, or else midway in the rightmost gap that is wide enough.
func (c *Canvas) placeXName() {
	if c.xName == "" || c.labelRow < 0 {
		return
	}
	width, next := c.width(c.xName), c.w
	for i := len(c.xt.list) - 1; i >= 0; i-- {
		at := c.xLabel(i)
		end := at + c.xt.list[i].width
		switch room := next - end; {
		case next == c.w && room >= width+labelGap:
			c.Text(c.w-width, c.labelRow, c.xName, c.axisInk)
			return
		case room >= width+2*labelGap:
			c.Text(end+(room-width)/2, c.labelRow, c.xName, c.axisInk)
			return
		}
		next = at
	}
}
