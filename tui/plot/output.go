package plot

import "unicode/utf8"

// AppendRow appends one row to dst and returns it: exactly as many columns as
// the picture has, or fewer if Trim is set. Each run of cells of equal ink is
// passed to style, which appends it with its escapes; style may be nil, for
// plain text. Blank cells inside a run belong to it, others are never styled,
// nor are runs of Plain ink. A row that does not exist appends nothing.
func (c *Canvas) AppendRow(dst []byte, row int, style func(dst []byte, ink Ink, run []byte) []byte) []byte {
	if row < 0 || row >= c.h {
		return dst
	}
	c.settle()
	run, ink, blanks := c.run[:0], Plain, 0
	line := c.cells[row*c.w : (row+1)*c.w]
	for col := 0; col < len(line); col++ {
		p := &line[col]
		if p.layer == blank {
			blanks++
			continue
		}
		r := c.show(p)
		if r == ' ' {
			blanks++
			continue
		}
		if p.ink != ink || len(run) == 0 {
			dst = flush(dst, ink, run, style)
			dst = spaces(dst, blanks)
			run, ink = run[:0], p.ink
		} else {
			run = spaces(run, blanks)
		}
		blanks = 0
		run = utf8.AppendRune(run, r)
	}
	dst = flush(dst, ink, run, style)
	if !c.Trim {
		dst = spaces(dst, blanks)
	}
	c.run = run
	return dst
}

func flush(dst []byte, ink Ink, run []byte, style func([]byte, Ink, []byte) []byte) []byte {
	if len(run) == 0 || style == nil || ink == Plain {
		return append(dst, run...)
	}
	return style(dst, ink, run)
}

func spaces(dst []byte, n int) []byte {
	const some = "                                                                "
	for ; n > len(some); n -= len(some) {
		dst = append(dst, some...)
	}
	return append(dst, some[:n]...)
}

// String returns the picture as plain text, each row ended by a newline.
func (c *Canvas) String() string {
	var out []byte
	for row := range c.h {
		out = append(c.AppendRow(out, row, nil), '\n')
	}
	return string(out)
}

// show returns the character for a cell.
func (c *Canvas) show(p *cell) rune {
	switch {
	case p.glyph != 0:
		return p.glyph
	case p.dots == 0:
		return ' '
	case c.charset == ASCII:
		return rune(spelling[p.form][p.dots])
	}
	return 0x2800 + rune(p.dots)
}
