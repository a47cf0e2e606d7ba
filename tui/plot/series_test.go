package plot

import (
	"math"
	"math/bits"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// dotsPerColumn counts the dots set in each column of dots of the frame.
func dotsPerColumn(c *Canvas) []int {
	n := make([]int, c.area.right-c.area.left+1)
	for x := range n {
		for row := range c.h {
			p := c.cells[row*c.w+(c.area.left+x)/c.cw]
			if p.layer != series {
				continue
			}
			mask := uint8(0xff)
			if c.charset == Braille {
				mask = 0x47 // dots 1, 2, 3, 7
				if (c.area.left+x)&1 == 1 {
					mask = 0xb8
				}
			}
			n[x] += bits.OnesCount8(p.dots & mask)
		}
	}
	return n
}

// bare returns a picture without rulers, all of it frame.
func bare(w, h int, cs Charset, x, y Axis) *Canvas {
	c := New(w, h, cs)
	c.Frame(x, y, Plain)
	return c
}

var unit = Axis{Min: 0, Max: 1}

func TestAGentleCurveIsOneDotThin(t *testing.T) {
	for name, cs := range charsets {
		rapid.Check(t, func(t *rapid.T) {
			c := bare(5, 2, cs, unit, unit) // narrower than a ruler wants
			n := rapid.IntRange(2, 200).Draw(t, "points")
			rise := rapid.Float64Range(-0.75, 0.75).Draw(t, "rise") // less than a dot per column
			var xs, ys []float64
			for i := range n {
				x := float64(i) / float64(n-1)
				xs, ys = append(xs, x), append(ys, 0.5+rise*(x-0.5))
			}
			c.Line(xs, ys, 1, Solid)
			for x, dots := range dotsPerColumn(c) {
				if dots != 1 {
					t.Fatalf("%s: column %d has %d dots\n%s", name, x, dots, c)
				}
			}
		})
	}
}

func TestASpikeAmongAMillionIsSeen(t *testing.T) {
	const n = 1_000_000
	xs, ys := make([]float64, n), make([]float64, n)
	for i := range xs {
		xs[i] = float64(i)
	}
	ys[618_034] = 1
	for name, cs := range charsets {
		for kind, draw := range map[string]func(*Canvas){
			"line":  func(c *Canvas) { c.Line(xs, ys, 1, Solid) },
			"stems": func(c *Canvas) { c.Stems(xs, ys, 0, 1, Solid) },
		} {
			c := bare(120, 2, cs, Axis{Max: n - 1}, unit)
			draw(c)
			tall := 0
			for _, dots := range dotsPerColumn(c) {
				if dots > c.ch {
					tall++
				}
			}
			if tall < 1 || tall > 2 {
				t.Errorf("%s %s: %d columns show the spike\n%s", name, kind, tall, c)
			}
		}
	}
}

// With 1.0 to 3 sites per column an alternating value would beat with the
// columns if only some sites were drawn.
func TestCrowdedStemsDoNotBeat(t *testing.T) {
	for name, cs := range charsets {
		for _, n := range []int{241, 250, 300, 333, 480, 777} {
			var xs, ys []float64
			for i := range n {
				xs, ys = append(xs, float64(i)), append(ys, float64(i&1))
			}
			c := bare(120, 2, cs, Axis{Max: float64(n - 1)}, unit)
			c.Stems(xs, ys, 0.5, 1, Solid)
			for x, dots := range dotsPerColumn(c) {
				if dots != 2*c.ch {
					t.Fatalf("%s: %d alternating sites: column %d has %d dots of %d\n%s", name, n, x, dots, 2*c.ch, c)
				}
			}
		}
	}
}

func TestStemsReachFromTheBaseToTheValue(t *testing.T) {
	c := bare(5, 2, Braille, Axis{Max: 9}, Axis{Min: -3, Max: 4})
	c.Stems([]float64{0, 3, 6, 9}, []float64{4, -3, 0, math.NaN()}, 0, 1, Solid)
	got := dotsPerColumn(c)
	for x, want := range map[int]int{0: 5, 3: 4, 6: 1, 9: 0, 1: 0} {
		if got[x] != want {
			t.Errorf("column %d has %d dots, want %d\n%s", x, got[x], want, c)
		}
	}
}

func TestNonFinitePointsBreakTheLine(t *testing.T) {
	for _, gap := range []float64{math.NaN(), math.Inf(1), math.Inf(-1)} {
		c := bare(5, 2, Braille, Axis{Max: 9}, unit)
		c.Line([]float64{0, 3, 5, 6, 9}, []float64{0.5, 0.5, gap, 0.5, 0.5}, 1, Solid)
		for x, dots := range dotsPerColumn(c) {
			want := 1
			if x == 4 || x == 5 {
				want = 0
			}
			if dots != want {
				t.Errorf("%g: column %d has %d dots, want %d\n%s", gap, x, dots, want, c)
			}
		}
	}
}

// A segment whose ends lie far outside shows the same piece as its clipped self.
func TestFarEndsDoNotBendALine(t *testing.T) {
	for _, far := range []float64{1, 10, 1e6, 1e12} {
		c := bare(5, 2, Braille, unit, unit)
		c.Line([]float64{0.5 - far, 0.5 + far}, []float64{0.5 - far, 0.5 + far}, 1, Solid)
		near := bare(5, 2, Braille, unit, unit)
		near.Line([]float64{0, 1}, []float64{0, 1}, 1, Solid)
		if c.String() != near.String() {
			t.Errorf("ends at ±%g:\n%swant\n%s", far, c, near)
		}
	}
	up := bare(5, 2, Braille, unit, unit)
	up.Line([]float64{0, 1}, []float64{-math.MaxFloat64, math.MaxFloat64}, 1, Solid)
	for x, dots := range dotsPerColumn(up) {
		if middle := x == 4 || x == 5; !middle && dots > 0 || x == 5 && dots < 8 { // of the two it is on the edge of, the later
			t.Errorf("a line from −1.8e308 to 1.8e308 has %d dots in column %d\n%s", dots, x, up)
		}
	}
}

func TestWorkIsBoundedHoweverFarTheData(t *testing.T) {
	xs := []float64{-math.MaxFloat64, math.MaxFloat64, -1e300, 1e300, 0.5, 0.5}
	ys := []float64{math.MaxFloat64, -math.MaxFloat64, 1e300, -1e300, 1e308, -1e308}
	c := bare(300, 100, Braille, unit, unit)
	for p := range Pattern(patterns) {
		c.Line(xs, ys, 1, p)
		c.Stems(xs, ys, -math.MaxFloat64, 1, p)
		c.Area(xs, ys, math.MaxFloat64, 1)
		c.Points(xs, ys, 1, p)
	}
	if !strings.ContainsFunc(c.String(), func(r rune) bool { return r > 0x2800 }) {
		t.Error("lines across the frame are not seen")
	}
}

// Every pattern looks different from the others without colour, as a curve,
// as points and in the legend.
func TestPatternsDifferWithoutColour(t *testing.T) {
	var xs, ys []float64
	for i := range 100 {
		xs, ys = append(xs, float64(i)/99), append(ys, 0.5+0.4*math.Sin(float64(i)/15))
	}
	for name, cs := range charsets {
		for kind, draw := range map[string]func(*Canvas, Pattern){
			"line":  func(c *Canvas, p Pattern) { c.Line(xs, ys, 1, p) },
			"stems": func(c *Canvas, p Pattern) { c.Stems(xs[:30], ys[:30], 0, 1, p) },
			"stale line": func(c *Canvas, p Pattern) {
				c.Stale = true
				c.Line(xs, ys, 1, p)
			},
			"points": func(c *Canvas, p Pattern) { c.Points(xs[:5], ys[:5], 1, p) },
			"line in the legend": func(c *Canvas, p Pattern) {
				c.Line(nil, nil, 1, p)
				c.Name("x")
			},
			"points in the legend": func(c *Canvas, p Pattern) {
				c.Points(nil, nil, 1, p)
				c.Name("x")
			},
		} {
			seen := map[string]Pattern{}
			for p := range Pattern(patterns) {
				c := bare(40, 10, cs, unit, unit)
				draw(c, p)
				if q, found := seen[c.String()]; found {
					t.Errorf("%s: %s of patterns %d and %d look the same\n%s", name, kind, p, q, c)
				}
				seen[c.String()] = p
			}
		}
	}
}

func TestAnAreaStaysBelowTheCurve(t *testing.T) {
	for name, cs := range charsets {
		c := bare(5, 2, cs, unit, unit)
		c.Line([]float64{0, 1}, []float64{0, 0}, 1, Solid)
		c.Area([]float64{0, 1}, []float64{1, 1}, 0, 2)
		for i, p := range c.cells[5:] {
			if p.ink != 1 {
				t.Errorf("%s: cell %d of the curve has ink %d\n%s", name, i, p.ink, c)
			}
		}
	}
}

func TestLengthsMustAgree(t *testing.T) {
	defer func() {
		if recover() == nil {
			t.Error("no panic")
		}
	}()
	New(40, 10, Braille).Line(make([]float64, 2), make([]float64, 3), 1, Solid)
}
