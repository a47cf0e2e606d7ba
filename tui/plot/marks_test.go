package plot

import (
	"math"
	"strings"
	"testing"
)

// row returns one row of the picture.
func row(c *Canvas, i int) string { return string(c.AppendRow(nil, i, nil)) }

func TestLabelsOfNeighbouringMarksStayApart(t *testing.T) {
	for name, cs := range charsets {
		for _, apart := range []float64{0, 0.01, 0.05, 0.1, 0.3} {
			c := New(58, 12, cs)
			c.Frame(unit, unit, 1)
			c.VMark(0.5, "kF", 2)
			c.VMark(0.5+apart, "2kF", 3)
			c.VMark(0.5+apart/2, "Q", 4)
			c.HMark(0.9, "EF", 5)
			picture := c.String()
			fields := strings.FieldsFunc(picture, func(r rune) bool {
				return !strings.ContainsRune("2kFQE", r) // what is not a letter of a label
			})
			for _, want := range []string{"kF", "2kF", "Q", "EF"} {
				found := false
				for _, f := range fields {
					found = found || f == want
				}
				if !found {
					t.Errorf("%s: marks %g apart: no %q by itself\n%s", name, apart, want, picture)
				}
			}
		}
	}
}

func TestLabelsKeepClearOfTheCurve(t *testing.T) {
	for name, cs := range charsets {
		for _, peak := range []float64{0.02, 0.3, 0.5, 0.98} {
			var xs, ys []float64
			for i := range 201 {
				x := float64(i) / 200
				xs, ys = append(xs, x), append(ys, math.Exp(-200*(x-peak)*(x-peak)))
			}
			draw := func(marks bool) *Canvas {
				c := New(58, 12, cs)
				c.Frame(unit, unit, 1)
				c.Line(xs, ys, 2, Solid)
				if marks {
					c.VMark(peak, "peak", 3)
					c.HMark(0.5, "half", 4)
					c.Name("response")
				}
				_ = c.String()
				return c
			}
			with, without := draw(true), draw(false)
			for i := range without.cells {
				if without.cells[i].layer == series && with.cells[i].layer == label {
					t.Fatalf("%s: peak at %g: a label covers the curve\n%s", name, peak, with)
				}
			}
			for _, want := range []string{"peak", "half", "response"} {
				if !strings.Contains(with.String(), want) {
					t.Errorf("%s: peak at %g: no %q\n%s", name, peak, want, with)
				}
			}
		}
	}
}

func TestMarksOutsideTheFrameAreNotDrawn(t *testing.T) {
	for name, cs := range charsets {
		c := New(58, 12, cs)
		c.Frame(unit, unit, 1)
		empty := c.String()
		for _, v := range []float64{-0.1, 1.1, math.NaN(), math.Inf(1), math.MaxFloat64} {
			c.VMark(v, "kF", 2)
			c.HMark(v, "EF", 3)
		}
		if got := c.String(); got != empty {
			t.Errorf("%s:\n%s", name, got)
		}
	}
}

func TestTheLegendPrefersTheHeading(t *testing.T) {
	for name, cs := range charsets {
		for _, tt := range []struct {
			heading string
			first   bool // the legend stands in the first row
		}{
			{"energy (t)", true},
			{"density of electrons per site, all spins summed up", false},
		} {
			c := New(58, 12, cs)
			c.Heading(tt.heading, 1)
			c.Frame(unit, unit, 1)
			c.Line([]float64{0, 1}, []float64{0, 0}, 2, Solid)
			c.Name("relaxed")
			first := row(c, 0)
			if !strings.HasPrefix(first, tt.heading) {
				t.Errorf("%s: heading %q", name, first)
			}
			if strings.Contains(first, "relaxed") != tt.first || !strings.Contains(c.String(), "relaxed") {
				t.Errorf("%s: heading %q:\n%s", name, tt.heading, c)
			}
		}
	}
}
