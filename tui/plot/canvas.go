package plot

import "unicode"

// Ink is a role, such as "axis" or "first curve", that the caller maps to a
// style when the picture is written out. Plain stays unstyled.
type Ink uint8

// Plain is the ink of unstyled cells.
const Plain Ink = 0

// Charset says which characters a picture may use.
type Charset uint8

const (
	Braille Charset = iota // 2×4 dots in a cell, U+2800…U+28FF, and other one-cell characters
	ASCII                  // bytes 0x20…0x7E only; 1×3 dots in a cell, shown as . - '
)

// layer orders what shares a cell: a higher layer keeps its ink.
type layer uint8

const (
	blank  layer = iota
	shade        // areas
	ruler        // axes and marks
	series       // data
	label        // text
)

// cell is one character of the picture: either a glyph or a set of dots.
type cell struct {
	glyph rune  // 0: draw the dots
	dots  uint8 // braille: the low byte of the code point; ASCII: bit 0 high, 1 middle, 2 low
	form  form  // which characters stand for the dots in ASCII
	ink   Ink
	layer layer
}

// Canvas is a picture under construction. A zero Canvas wants a Reset first.
type Canvas struct {
	// Stale has the data drawn sparsely, so that an outdated picture is seen
	// as such even without colour. Set it before drawing.
	Stale bool
	// Trim leaves out the blanks at the end of a row.
	Trim bool

	w, h    int
	charset Charset
	cw, ch  int // dots in a cell
	cells   []cell

	head     int // rows taken by the heading
	headEnd  int // columns taken by the heading
	headInk  Ink
	area     rect // where data go, in dots
	x, y     scale
	labelRow int // row of the x labels, −1 without
	xName    string
	axisInk  Ink
	xt, yt   ticks
	last     sample
	notes    []note
	legend   []entry
	run      []byte // cells of equal ink on their way out
}

// rect is a rectangle of dots, all four sides included; empty if right < left.
type rect struct{ left, top, right, bottom int }

func (r rect) empty() bool { return r.right < r.left || r.bottom < r.top }

// New returns an empty picture of w columns and h rows; negative sizes count as 0.
func New(w, h int, cs Charset) *Canvas {
	c := new(Canvas)
	c.Reset(w, h, cs)
	return c
}

// Reset empties the picture and gives it a new size. Memory is reused; Stale
// and Trim are left as they are.
func (c *Canvas) Reset(w, h int, cs Charset) {
	c.w, c.h, c.charset = max(w, 0), max(h, 0), cs
	c.cw, c.ch = 2, 4
	if cs == ASCII {
		c.cw, c.ch = 1, 3
	}
	if n := c.w * c.h; n > cap(c.cells) {
		c.cells = make([]cell, n)
	} else {
		c.cells = c.cells[:n]
		clear(c.cells)
	}
	c.head, c.headEnd, c.headInk = 0, 0, Plain
	c.area = rect{0, 0, -1, -1}
	c.x, c.y = scale{}, scale{}
	c.labelRow, c.xName, c.axisInk = -1, "", Plain
	c.last = sample{}
	c.notes, c.legend = c.notes[:0], c.legend[:0]
}

// Size returns the number of columns and rows.
func (c *Canvas) Size() (w, h int) { return c.w, c.h }

// braille[y&3][x&1] is the bit of a dot, by the numbering of Unicode chapter 21.1.
var braille = [4][2]uint8{{0x01, 0x08}, {0x02, 0x10}, {0x04, 0x20}, {0x40, 0x80}}

// dot sets the dot (x, y), which must lie on the canvas.
func (c *Canvas) dot(x, y int, ink Ink, l layer, f form) {
	if c.charset == ASCII {
		c.asciiDot(x, y, ink, l, f)
		return
	}
	p := &c.cells[(y>>2)*c.w+x>>1]
	if p.glyph != 0 {
		return
	}
	p.dots |= braille[y&3][x&1]
	if l >= p.layer {
		p.layer, p.ink = l, ink
	}
}

// asciiDot sets a dot in ASCII, where a cell shows only one thing: the top one.
func (c *Canvas) asciiDot(x, y int, ink Ink, l layer, f form) {
	row := y / 3
	p := &c.cells[row*c.w+x]
	switch {
	case l < p.layer:
		return
	case l > p.layer || p.ink != ink || p.form != f:
		*p = cell{form: f, ink: ink, layer: l}
	}
	p.dots |= 1 << (y - 3*row)
}

// glyph puts r into a cell unless something on a higher layer is there.
func (c *Canvas) glyph(col, row int, r rune, ink Ink, l layer) {
	if col < 0 || col >= c.w || row < 0 || row >= c.h {
		return
	}
	if p := &c.cells[row*c.w+col]; l >= p.layer {
		*p = cell{glyph: r, ink: ink, layer: l}
	}
}

// Text writes s from the given cell on, over everything, and returns the
// column after it. What does not fit is cut off. Characters that are not one
// cell wide, or not ASCII where only ASCII may be used, become '?', except that
// a few signs have an ASCII spelling: π is written pi, − is -, × is x, · is . and … is ~.
func (c *Canvas) Text(col, row int, s string, ink Ink) int {
	for _, r := range s {
		if c.charset == ASCII && r == 'π' {
			c.glyph(col, row, 'p', ink, label)
			col, r = col+1, 'i'
		}
		c.glyph(col, row, c.safe(r), ink, label)
		col++
	}
	return col
}

// width is the number of columns that Text takes for s.
func (c *Canvas) width(s string) int {
	n := 0
	for _, r := range s {
		if c.charset == ASCII && r == 'π' {
			n++
		}
		n++
	}
	return n
}

// safe returns r if it may stand in a cell, or else a substitute.
func (c *Canvas) safe(r rune) rune {
	switch {
	case r >= ' ' && r <= '~':
		return r
	case c.charset == ASCII:
		switch r {
		case '−':
			return '-'
		case '×':
			return 'x'
		case '·':
			return '.'
		case '…':
			return '~'
		}
	case unicode.Is(narrow, r):
		return r
	}
	return '?'
}

// narrow holds the characters outside ASCII that are one cell wide in every
// terminal and never join with a neighbour.
var narrow = &unicode.RangeTable{
	R16: []unicode.Range16{
		{0x00a1, 0x00ac, 1}, {0x00ae, 0x02ff, 1}, // Latin, without the soft hyphen
		{0x0391, 0x03a1, 1}, {0x03a3, 0x03ff, 1}, // Greek
		{0x0400, 0x0482, 1}, {0x048a, 0x04ff, 1}, // Cyrillic
		{0x1e00, 0x1eff, 1},                      // more Latin
		{0x2010, 0x2027, 1}, {0x2030, 0x203b, 1}, // punctuation
		{0x2070, 0x2071, 1}, {0x2074, 0x208e, 1}, {0x2090, 0x209c, 1}, // super- and subscripts
		{0x2190, 0x2193, 1}, {0x21a6, 0x21a6, 1}, {0x21d0, 0x21d5, 1}, // arrows
		{0x2200, 0x22ff, 1}, // mathematical operators
		{0x2500, 0x259f, 1}, // lines and blocks
		{0x2800, 0x28ff, 1}, // braille
	},
	LatinOffset: 1,
}
