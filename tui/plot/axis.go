package plot

import "math"

// Axis is the range of one coordinate.
//
// The ruler reaches from Min to Max, so give it what the data reach. Min and
// Max are exchanged if they are in the wrong order; equal ones are spread to
// a range about the value; a NaN or ±Inf leaves the picture empty.
type Axis struct {
	Min, Max float64
	Pi       bool   // ticks at multiples of π, as for wave vectors in 1/a
	Whole    bool   // ticks at whole numbers, written in full, as for places that are counted
	Name     string // written among the tick labels if there is room; x axis only
}

func (a Axis) numbering() numbering {
	switch {
	case a.Pi:
		return multiplesOfPi
	case a.Whole:
		return wholes
	}
	return decimals
}

// bounds returns a finite range with lo < hi if there is one.
func (a Axis) bounds() (lo, hi float64, ok bool) {
	lo, hi = a.Min, a.Max
	if !finite(lo) || !finite(hi) {
		return 0, 0, false
	}
	if lo > hi {
		lo, hi = hi, lo
	}
	if lo == hi {
		d := math.Abs(lo) / 2
		if d < 0x1p-1000 {
			d = 1
		}
		lo, hi = max(lo-d, -math.MaxFloat64), min(hi+d, math.MaxFloat64)
	}
	return lo, hi, true
}

func finite(v float64) bool { return v-v == 0 }

// scale maps values linearly to dots,
//
//	dot = zero + nudge + (v·pre − lo·pre)·k
//
// where pre is a power of two that keeps all products in range for every lo < hi.
type scale struct {
	lo, hi        float64
	pre, loPre, k float64
	zero, last    float64 // dots of lo and hi
}

// nudge, in dots, moves what would fall exactly between two dots off that edge:
// rounding, which differs between machines, then decides nothing.
const nudge = 1e-5

// far bounds dot coordinates: far outside, but differences stay finite.
const far = 1e300

// newScale maps [lo, hi], lo < hi, to the dots [zero, last].
func newScale(lo, hi float64, zero, last int) scale {
	_, e := math.Frexp(max(math.Abs(lo), math.Abs(hi)))
	s := scale{lo: lo, hi: hi, zero: float64(zero), last: float64(last)}
	s.pre = math.Ldexp(1, min(-e, 1000))
	s.loPre = lo * s.pre
	s.k = (s.last - s.zero) / (hi*s.pre - s.loPre)
	return s
}

// dot returns the place of v, within ±far; NaN if v is not finite.
func (s *scale) dot(v float64) float64 {
	d := s.zero + nudge + (v*s.pre-s.loPre)*s.k
	switch {
	case d > -far && d < far:
		return d
	case !finite(v):
		return math.NaN()
	case s.k == 0:
		return s.zero
	case (v > s.hi) == (s.k > 0):
		return far
	}
	return -far
}

// value is the inverse of dot, cut off at the ends of the range.
func (s *scale) value(dot float64) float64 {
	t := 0.5
	if s.last != s.zero {
		t = min(max((dot-s.zero)/(s.last-s.zero), 0), 1)
	}
	return min(max(s.lo*(1-t)+s.hi*t, s.lo), s.hi)
}
