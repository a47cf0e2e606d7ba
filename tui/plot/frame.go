package plot

// Heading writes what is shown, and in which unit, into the first row. It
// takes that row from the plot, so call it before Frame. The legend goes to
// the end of this row if it fits there.
func (c *Canvas) Heading(s string, ink Ink) {
	c.head = min(1, c.h)
	c.headEnd = c.Text(0, 0, s, ink)
}

// Below these sizes, in cells, the labels and then the rulers are left out.
const (
	labelRows, rulerRows = 4, 3
	labelCols, rulerCols = 12, 6
)

// Frame draws the axes and maps their ranges to the dots that remain. The
// column of y labels is as wide as the widest of them; x labels take the last
// row. When there is little room the labels go first and then the rulers.
func (c *Canvas) Frame(x, y Axis, ink Ink) {
	xlo, xhi, xok := x.bounds()
	ylo, yhi, yok := y.bounds()
	if !xok || !yok {
		return
	}
	c.axisInk, c.xName = ink, x.Name

	top, bottom := c.head*c.ch, c.h*c.ch-1 // of the data, in dots
	xRuler := -1
	if rows := c.h - c.head; rows >= rulerRows {
		if rows >= labelRows {
			c.labelRow = c.h - 1
			bottom -= c.ch
		}
		xRuler = bottom
		bottom -= c.rulerDepth()
	}

	left, yRuler := 0, -1
	c.yt.list = c.yt.list[:0]
	if c.w >= rulerCols {
		gutter := 0
		if c.w >= labelCols {
			gutter = c.yTicks(y, ylo, yhi, (bottom-top+1)/c.ch)
		}
		left = (gutter + 1) * c.cw
		yRuler = left - 1
		if c.charset == Braille {
			left += tickDots
		}
	}

	c.area = rect{left, top, c.w*c.cw - 1, bottom}
	if c.area.empty() {
		return
	}
	c.x = newScale(xlo, xhi, c.area.left, c.area.right)
	c.y = newScale(ylo, yhi, c.area.bottom, c.area.top)
	if xRuler >= 0 {
		c.xTicks(x, xlo, xhi)
		c.drawXRuler(xRuler)
	}
	if yRuler >= 0 {
		c.drawYRuler(yRuler)
	}
}

// Dots returns the size in dots of the part inside the frame, 0 before Frame.
func (c *Canvas) Dots() (w, h int) {
	if c.area.empty() {
		return 0, 0
	}
	return c.area.right - c.area.left + 1, c.area.bottom - c.area.top + 1
}

// tickDots is the length of a tick in braille, and so the distance between a
// ruler and the data.
const tickDots = 2

// rulerDepth is the height in dots of the x ruler and the space above it.
func (c *Canvas) rulerDepth() int {
	if c.charset == ASCII {
		return c.ch
	}
	return 1 + tickDots
}

// yTicks chooses ticks for so many rows and returns the columns that their
// labels take; 0, and no ticks, if that were more than a third of the width.
func (c *Canvas) yTicks(y Axis, lo, hi float64, rows int) int {
	n := max(2, min(rows/2, 3+rows/6))
	c.yt.place(lo, hi, n, y.numbering(), c.charset == ASCII)
	gutter := c.yt.widest()
	if c.charset == ASCII && gutter > 0 {
		gutter++
	}
	if gutter > c.w/3 {
		c.yt.list, gutter = c.yt.list[:0], 0
	}
	return gutter
}

// Columns between x labels, and columns of axis for each of them.
const (
	labelGap   = 2
	labelEvery = 10
)

// xTicks chooses as many ticks as can be labelled without crowding.
func (c *Canvas) xTicks(x Axis, lo, hi float64) {
	cols := (c.area.right - c.area.left + 1) / c.cw
	for n := max(2, cols/labelEvery); n > 0; n = min(n, len(c.xt.list)) - 1 {
		c.xt.place(lo, hi, n, x.numbering(), c.charset == ASCII)
		if c.labelRow < 0 || c.xFit() {
			return
		}
	}
	c.xt.list = c.xt.list[:0]
}

// xFit tells whether all x labels have room.
func (c *Canvas) xFit() bool {
	end := -labelGap
	for i := range c.xt.list {
		col := c.xLabel(i)
		if col < end+labelGap || col < 0 {
			return false
		}
		end = col + c.xt.list[i].width
	}
	return end <= c.w
}

// xLabel is the column where label i begins: centred under its tick, but
// pushed in at the ends.
func (c *Canvas) xLabel(i int) int {
	k := &c.xt.list[i]
	col := round(c.x.dot(k.value))/c.cw - k.width/2
	return max(min(col, c.w-k.width), 0)
}

func (c *Canvas) drawXRuler(y int) {
	if c.charset == ASCII {
		for x := c.area.left; x <= c.area.right; x++ {
			c.glyph(x, y/c.ch, '-', c.axisInk, ruler)
		}
	} else {
		for x := c.area.left; x <= c.area.right; x++ {
			c.dot(x, y, c.axisInk, ruler, 0)
		}
	}
	for i := range c.xt.list {
		x := round(c.x.dot(c.xt.list[i].value))
		if c.charset == ASCII {
			c.glyph(x, y/c.ch, '+', c.axisInk, ruler)
		} else {
			for d := 1; d <= tickDots; d++ {
				c.dot(x, y-d, c.axisInk, ruler, 0)
			}
		}
		if c.labelRow >= 0 {
			c.Text(c.xLabel(i), c.labelRow, string(c.xt.label(i)), c.axisInk)
		}
	}
}

func (c *Canvas) drawYRuler(x int) {
	if c.charset == ASCII {
		for row := c.area.top / c.ch; row <= c.area.bottom/c.ch; row++ {
			c.glyph(x, row, '|', c.axisInk, ruler)
		}
	} else {
		for y := c.area.top; y <= c.area.bottom; y++ {
			c.dot(x, y, c.axisInk, ruler, 0)
		}
	}
	taken := -1 // the row of the last label
	for i := range c.yt.list {
		k := &c.yt.list[i]
		y := round(c.y.dot(k.value))
		if c.charset == ASCII {
			c.glyph(x, y/c.ch, '+', c.axisInk, ruler)
		} else {
			for d := 1; d <= tickDots; d++ {
				c.dot(x+d, y, c.axisInk, ruler, 0)
			}
		}
		if y/c.ch == taken {
			continue
		}
		taken = y / c.ch
		col := x/c.cw - k.width
		if c.charset == ASCII {
			col--
		}
		c.Text(col, taken, string(c.yt.label(i)), c.axisInk)
	}
}
