package plot

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

func TestCellAndAtAreInverse(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := New(rapid.IntRange(1, 120).Draw(t, "w"), rapid.IntRange(1, 60).Draw(t, "h"), Charset(rapid.IntRange(0, 1).Draw(t, "charset")))
		axis := func(name string) Axis {
			scale := math.Pow(10, rapid.Float64Range(-300, 300).Draw(t, name+" log scale"))
			lo := rapid.Float64Range(-1, 1).Draw(t, name+" lo")
			return Axis{Min: lo * scale, Max: (lo + rapid.Float64Range(1e-6, 2).Draw(t, name+" width")) * scale}
		}
		x, y := axis("x"), axis("y")
		c.Frame(x, y, 1)
		found := 0
		for row := -1; row <= c.h; row++ {
			for col := -1; col <= c.w; col++ {
				vx, vy, ok := c.At(col, row)
				if !ok {
					continue
				}
				found++
				if vx < x.Min || vx > x.Max || vy < y.Min || vy > y.Max {
					t.Fatalf("At(%d, %d) = (%g, %g) is outside the axes", col, row, vx, vy)
				}
				if gc, gr, ok := c.Cell(vx, vy); !ok || gc != col || gr != row {
					t.Fatalf("Cell(At(%d, %d)) = %d, %d, %v", col, row, gc, gr, ok)
				}
			}
		}
		for _, corner := range [][2]float64{{x.Min, y.Min}, {x.Min, y.Max}, {x.Max, y.Min}, {x.Max, y.Max}} {
			col, row, ok := c.Cell(corner[0], corner[1])
			if !ok {
				t.Fatalf("corner %v is not in the frame", corner)
			}
			if _, _, ok := c.At(col, row); !ok || found == 0 {
				t.Fatalf("At(%d, %d) is not in the frame", col, row)
			}
		}
	})
}

func TestNothingIsPointedAtOutsideTheFrame(t *testing.T) {
	c := New(40, 10, Braille)
	if _, _, ok := c.At(5, 5); ok {
		t.Error("a picture without a frame answers")
	}
	c.Frame(unit, unit, 1)
	for _, at := range [][2]int{{0, 0}, {40, 5}, {20, 9}, {20, -1}, {-1, 5}} {
		if x, y, ok := c.At(at[0], at[1]); ok {
			t.Errorf("At%v = (%g, %g)", at, x, y)
		}
	}
}

func TestNearest(t *testing.T) {
	xs := []float64{0, 1, 3}
	for _, tt := range []struct {
		x    float64
		want int
	}{{-5, 0}, {0.4, 0}, {0.6, 1}, {1.9, 1}, {2.1, 2}, {9, 2}, {math.Inf(1), 2}, {math.Inf(-1), 0}, {math.NaN(), -1}} {
		if got := Nearest(xs, tt.x); got != tt.want {
			t.Errorf("Nearest(%v, %g) = %d, want %d", xs, tt.x, got, tt.want)
		}
	}
	if got := Nearest(nil, 0); got != -1 {
		t.Errorf("Nearest(nil, 0) = %d, want -1", got)
	}
}
