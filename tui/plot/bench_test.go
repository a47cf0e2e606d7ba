package plot_test

import (
	"math"
	"testing"

	"example.org/twokf/tui/plot"
)

// fourCurves draws 4 series of 400 points with marks and a legend.
type fourCurves struct {
	x   []float64
	ys  [4][]float64
	buf []byte
}

func newFourCurves() *fourCurves {
	f := &fourCurves{x: make([]float64, 400)}
	for s := range f.ys {
		f.ys[s] = make([]float64, len(f.x))
		for i := range f.x {
			f.x[i] = math.Pi * float64(i) / float64(len(f.x)-1)
			f.ys[s][i] = -2*math.Cos(f.x[i]) + 0.3*float64(s)*math.Sin(5*f.x[i])
		}
	}
	return f
}

func (f *fourCurves) draw(c *plot.Canvas, w, h int, cs plot.Charset) {
	c.Reset(w, h, cs)
	c.Heading("energy (t)", 1)
	c.Frame(plot.Axis{Min: 0, Max: math.Pi, Pi: true, Name: "k"}, plot.Axis{Min: -3, Max: 3}, 2)
	for s := range f.ys {
		c.Line(f.x, f.ys[s], plot.Ink(3+s), plot.Pattern(s))
		c.Name("band")
	}
	c.HMark(0.4, "EF", 7)
	c.VMark(1.2, "kF", 8)
	f.buf = f.buf[:0]
	for row := range h {
		f.buf = c.AppendRow(f.buf, row, sgr)
		f.buf = append(f.buf, '\n')
	}
}

// sgr styles a run with a 256-colour escape.
func sgr(dst []byte, ink plot.Ink, run []byte) []byte {
	dst = append(dst, "\x1b[38;5;"...)
	dst = append(dst, '0'+byte(ink), 'm')
	dst = append(dst, run...)
	return append(dst, "\x1b[m"...)
}

func BenchmarkFourCurves(b *testing.B) {
	for _, cs := range []struct {
		name string
		set  plot.Charset
	}{{"braille", plot.Braille}, {"ascii", plot.ASCII}} {
		b.Run(cs.name, func(b *testing.B) {
			f, c := newFourCurves(), plot.New(120, 40, cs.set)
			b.ReportAllocs()
			for b.Loop() {
				f.draw(c, 120, 40, cs.set)
			}
			b.ReportMetric(float64(len(f.buf)), "bytes/frame")
		})
	}
}
