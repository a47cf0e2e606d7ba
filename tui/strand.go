package tui

import "math"

// strand is one quantity along the chain, as it is shown.
type strand struct {
	name, unit string
	values     []float64
	ring       bool // the last site is the first one's neighbour
	filter     filter
}

// filter says how a strand is made from the values of the sites.
type filter int

const (
	asIs filter = iota
	// amplitude is (−1)^i (2x_i − x_{i−1} − x_{i+1})/4, that of a period-2 pattern
	// with its sign: a kink is where it changes.
	amplitude
	// smooth is (x_{i−1} + 2x_i + x_{i+1})/4: a period-2 pattern averages out.
	smooth
)

// append appends the strand at the sites from ≤ i < to.
func (t *strand) append(dst []float64, from, to int) []float64 {
	x := t.values
	if t.filter == asIs {
		return append(dst, x[from:to]...)
	}
	for i := from; i < to; i++ {
		l, r := i-1, i+1
		if l < 0 || r == len(x) {
			l, r = t.neighbours(i)
		}
		v := x[l] + 2*x[i] + x[r]
		if t.filter == amplitude {
			v = 2*x[i] - x[l] - x[r]
			if i&1 == 1 {
				v = -v
			}
		}
		dst = append(dst, v/4)
	}
	return dst
}

// neighbours of site i; at an open end the missing one is its mirror image.
func (t *strand) neighbours(i int) (left, right int) {
	n := len(t.values)
	left, right = i-1, i+1
	if t.ring {
		return (left + n) % n, right % n
	}
	if left < 0 {
		left = min(1, n-1)
	}
	if right == n {
		right = max(n-2, 0)
	}
	return left, right
}

// extent returns the lowest and the highest value at the sites from ≤ i < to;
// lo > hi if there are none. A long chain is walked along block by block.
func (t *strand) extent(from, to int) (lo, hi float64) {
	var block [256]float64
	lo, hi = math.Inf(1), math.Inf(-1)
	for to = min(to, len(t.values)); from < to; from += len(block) {
		for _, v := range t.append(block[:0], from, min(from+len(block), to)) {
			if v < lo { // comparing is faster than min and max, which look for NaN
				lo = v
			}
			if v > hi {
				hi = v
			}
		}
	}
	return lo, hi
}
