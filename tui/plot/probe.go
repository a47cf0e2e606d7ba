package plot

import (
	"math"
	"sort"
)

// At returns the values at the middle of a cell, for a pointer; ok is false
// outside the frame. It is the inverse of Cell.
func (c *Canvas) At(col, row int) (x, y float64, ok bool) {
	a := c.area
	if a.empty() || col < a.left/c.cw || col > a.right/c.cw || row < a.top/c.ch || row > a.bottom/c.ch {
		return 0, 0, false
	}
	return c.x.value(float64(col*c.cw) + float64(c.cw-1)/2), c.y.value(float64(row*c.ch) + float64(c.ch-1)/2), true
}

// Cell returns the cell in which the point (x, y) is drawn; ok is false
// outside the frame.
func (c *Canvas) Cell(x, y float64) (col, row int, ok bool) {
	px, py := c.x.dot(x), c.y.dot(y)
	if c.area.empty() || !c.area.contains(px, py) {
		return 0, 0, false
	}
	return round(px) / c.cw, round(py) / c.ch, true
}

// Nearest returns the index of the value in xs, which must ascend, that lies
// nearest to x; −1 if there is none or x is NaN.
func Nearest(xs []float64, x float64) int {
	if len(xs) == 0 || math.IsNaN(x) {
		return -1
	}
	i := sort.SearchFloat64s(xs, x)
	if i == len(xs) || i > 0 && x-xs[i-1] <= xs[i]-x {
		i--
	}
	return i
}
