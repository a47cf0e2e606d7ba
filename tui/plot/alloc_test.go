package plot_test

import (
	"testing"

	"example.org/twokf/tui/plot"
)

func TestAFrameAllocatesNothing(t *testing.T) {
	for _, cs := range []plot.Charset{plot.Braille, plot.ASCII} {
		f, c := newFourCurves(), new(plot.Canvas)
		area := make([]float64, len(f.x))
		draw := func() {
			f.draw(c, 120, 40, cs)
			f.draw(c, 58, 12, cs)
			c.Stems(f.x, f.ys[0], 0, 1, plot.Solid)
			c.Area(f.x, area, 1, 2)
			c.Points(f.x, area, 3, plot.Heavy)
			c.Name("more")
			f.buf = c.AppendRow(f.buf[:0], 3, sgr)
		}
		if n := testing.AllocsPerRun(20, draw); n != 0 {
			t.Errorf("charset %d: %g allocations", cs, n)
		}
	}
}
