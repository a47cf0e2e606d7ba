package plot

// sampleCols is the width of a legend's sample, without the blank after it.
const sampleCols = 3

// placeLegend writes the legend at the end of the heading if it fits there, or
// else as a block that covers no data, or else each entry by itself; an entry
// for which there is no room is left out.
func (c *Canvas) placeLegend() {
	total := -2
	for i := range c.legend {
		total += c.legend[i].width(c) + 2
	}
	if col := c.w - total; c.head > 0 && col >= c.headEnd+2 {
		for i := range c.legend {
			col = c.entry(&c.legend[i], col, 0) + 2
		}
		return
	}
	if c.placeBlock(c.legend) {
		return
	}
	for i := range c.legend {
		c.placeBlock(c.legend[i : i+1])
	}
}

// width is the number of columns of an entry.
func (e *entry) width(c *Canvas) int { return sampleCols + 1 + c.width(e.name) }

// placeBlock writes entries below each other where they cover least: at the
// top, at the bottom or between, as far right as possible. It tells whether
// there is such a place without data.
func (c *Canvas) placeBlock(entries []entry) bool {
	width := 0
	for i := range entries {
		width = max(width, entries[i].width(c))
	}
	left, top, bottom := c.inside()
	lowest := bottom - len(entries) + 1
	best, bc, br := overSeries, 0, 0
	for i := top; i <= lowest; i++ {
		row := i - 1
		switch i {
		case top:
			row = top
		case top + 1:
			row = lowest
		}
		for at := c.w - width; at > left && best > 0; at-- {
			sum := 0
			for k := 0; k < len(entries) && sum < best; k++ {
				sum += c.cost(at, row+k, width) + c.touch(at-1, row+k) + c.touch(at+width, row+k)
			}
			if sum < best {
				best, bc, br = sum, at, row
			}
		}
	}
	if best == overSeries {
		return false
	}
	for i := range entries {
		c.entry(&entries[i], bc, br+i)
	}
	return true
}

// touch is the small cost of a block beside a cell that is not blank, or beside the edge.
func (c *Canvas) touch(col, row int) int {
	if col >= 0 && col < c.w && c.cells[row*c.w+col].layer == blank {
		return 0
	}
	return overRuler
}

// entry draws one sample with its name and returns the column after it.
func (c *Canvas) entry(e *entry, col, row int) int {
	for i := range sampleCols + 1 {
		c.glyph(col+i, row, ' ', Plain, label)
	}
	area := c.area
	c.area = rect{col * c.cw, row * c.ch, (col+sampleCols)*c.cw - 1, (row+1)*c.ch - 1}
	for i := range sampleCols {
		c.cells[row*c.w+col+i] = cell{}
	}
	c.drawSample(e.sample)
	c.area = area
	return c.Text(col+sampleCols+1, row, e.name, e.ink)
}

// samplePhase makes the gap of a dashed line fall into the middle of a sample.
const samplePhase = 2

// drawSample fills the frame, which is a few cells, with a sample.
func (c *Canvas) drawSample(s sample) {
	a := c.area
	y := float64(a.top + 1)
	p := pen{c: c, ink: s.ink, pattern: s.pattern, area: a}
	switch s.kind {
	case area:
		p.filled, p.base = true, float64(a.bottom)
		y = float64(a.top)
		fallthrough
	case line:
		p.to(float64(a.left), y)
		p.phase = samplePhase
		p.to(float64(a.right), y)
		p.lift()
	case points:
		c.point((a.left+a.right)/2, a.top+1, s.ink, s.pattern, false)
	case stems:
		s := column{c: c, ink: s.ink, pattern: s.pattern, base: float64(a.bottom)}
		s.add(float64(a.left), float64(a.top))
		s.add(float64(a.right), float64(a.top))
		s.flush()
	}
}
