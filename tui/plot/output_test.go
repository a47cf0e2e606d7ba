package plot

import (
	"fmt"
	"math"
	"strings"
	"testing"
)

func TestRunsOfEqualInkAreStyledTogether(t *testing.T) {
	c := New(12, 1, Braille)
	c.Text(1, 0, "ab cd", 1)
	c.Text(7, 0, "e", 2)
	c.Text(9, 0, "f", Plain)
	tag := func(dst []byte, ink Ink, run []byte) []byte { return fmt.Appendf(dst, "<%d:%s>", ink, run) }
	if got, want := string(c.AppendRow([]byte("> "), 0, tag)), ">  <1:ab cd> <2:e> f  "; got != want {
		t.Errorf("AppendRow = %q, want %q", got, want)
	}
}

// A stale curve has at most half of its dots, without long gaps, whatever the
// slope and the pattern; rulers and texts stay.
func TestAStaleCurveIsSparseButWhole(t *testing.T) {
	for name, cs := range charsets {
		for p := range Pattern(patterns) {
			for _, slope := range []float64{0, 0.25, 0.5, 1, 2, 3.1, -1, -0.5} {
				var xs, ys []float64
				for i := range 1001 {
					x := float64(i) / 1000
					xs, ys = append(xs, x), append(ys, 0.1+0.8*math.Mod(4+slope*x, 1))
				}
				draw := func(stale bool) (c *Canvas, curve int) {
					c = New(60, 20, cs)
					c.Stale = stale
					c.Frame(unit, unit, 1)
					rulers := dots(c.String())
					c.Line(xs, ys, 1, p)
					return c, dots(c.String()) - rulers
				}
				_, fresh := draw(false)
				c, stale := draw(true)
				if 10*stale > 6*fresh {
					t.Errorf("%s, pattern %d, slope %g: %d dots of %d are left\n%s", name, p, slope, stale, fresh, c)
				}
				if gap := longestGap(c); gap > 4 {
					t.Errorf("%s, pattern %d, slope %g: %d columns in a row are empty\n%s", name, p, slope, gap, c)
				}
			}
		}
		c := New(58, 12, cs)
		c.Stale = true
		gappedBand(c)
		for _, want := range []string{"energy (t)", "kF", "EF", "levels"} {
			if !strings.Contains(c.String(), want) {
				t.Errorf("%s: stale picture without %q\n%s", name, want, c)
			}
		}
	}
}

// longestGap counts the columns of cells of the frame, at most in a row, that show no data.
func longestGap(c *Canvas) int {
	longest, gap := 0, 0
	for col := c.area.left / c.cw; col < c.w; col++ {
		gap++
		for row := range c.h {
			if c.cells[row*c.w+col].layer == series {
				gap = 0
			}
		}
		longest = max(longest, gap)
	}
	return longest
}

// dots counts braille dots, or characters in ASCII.
func dots(picture string) int {
	n := 0
	for _, r := range picture {
		switch {
		case r >= 0x2800:
			for b := r - 0x2800; b != 0; b &= b - 1 {
				n++
			}
		case r > ' ':
			n++
		}
	}
	return n
}
