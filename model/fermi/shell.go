package fermi

import "math"

// degenerate is the splitting, as a part of the band width, up to which levels
// count as one level at T = 0. Levels of a matrix are found to a few 1e-14 of
// the band width by diagonalisation and to some 1e-11 by counting, so a true
// degeneracy is never missed; and a gap above it is still resolved by the
// poles (its half-gap needs some fifty of them).
const degenerate = 1e-9

// wholeNumber is how near to a whole number, relative to the larger of it and
// one, the filled levels per spin must be to count as whole. The density then
// misses the electrons asked for by less than what it is solved to.
const wholeNumber = 1e-12

// A shell describes how levels are filled at T = 0: the lowest `full` levels
// wholly, the next up to `reach` in equal parts.
type shell struct {
	full, reach     int
	highest, lowest float64 // equal when open
	open            bool
}

// share is the part of each level between full and reach that is filled when
// there are n electrons per spin.
func (s shell) share(n float64) float64 {
	if s.reach == s.full {
		return 0
	}
	return (n - float64(s.full)) / float64(s.reach-s.full)
}

// fermiLevel is the chemical potential in the limit T → 0 with equally many
// levels on either edge of the gap; for an empty or full band the edge itself.
func (s shell) fermiLevel() float64 {
	switch {
	case s.open:
		return s.highest
	case math.IsInf(s.highest, 0):
		return s.lowest
	case math.IsInf(s.lowest, 0):
		return s.highest
	}
	return s.highest + (s.lowest-s.highest)/2
}

// sameLevel is the splitting below which two levels of h are one.
func sameLevel(lo, hi float64) float64 {
	const (
		rounding = 1e-13  // of the largest energy, in case the band is narrow and far from zero
		least    = 1e-300 // so that the window about a level at zero has a width
	)
	return max(degenerate*(hi-lo), rounding*max(math.Abs(lo), math.Abs(hi)), least)
}

// filled splits the number of electrons per spin into the levels that are
// filled whole and whether a part of one is left.
func filled(n float64) (whole int, part bool) {
	r := math.Round(n)
	if math.Abs(n-r) <= wholeNumber*max(1, r) {
		return int(r), false
	}
	return int(n), true
}

// shellOf fills ascending levels with n electrons per spin.
func shellOf(levels []float64, n, same float64) shell {
	k, part := filled(n)
	s := shell{full: k, reach: k, highest: math.Inf(-1), lowest: math.Inf(1)}
	switch {
	case part:
		s.open, s.highest = true, levels[k]
	default:
		if k > 0 {
			s.highest = levels[k-1]
		}
		if k < len(levels) {
			s.lowest = levels[k]
		}
		if s.lowest-s.highest > same {
			return s
		}
		s.open = true
		s.highest += (s.lowest - s.highest) / 2
	}
	s.lowest = s.highest
	for s.full > 0 && levels[s.full-1] >= s.highest-same {
		s.full--
	}
	for s.reach < len(levels) && levels[s.reach] <= s.highest+same {
		s.reach++
	}
	return s
}

// coldGap is the gap, in units of the temperature, across which nothing is
// excited: at either edge f differs from 0 or 1 by e⁻³⁰ = 1e-13.
const coldGap = 60

// frozen tells whether at this temperature the levels are filled as at T = 0.
func (s shell) frozen(temperature, same float64, empty [2]interval) bool {
	cold := func(e interval) bool { return e.hi-e.lo >= coldGap*temperature }
	switch {
	case temperature <= coldest*same || math.IsInf(s.highest, 0) || math.IsInf(s.lowest, 0):
		return true
	case !s.open:
		return cold(empty[0])
	case s.reach-s.full > 1:
		return false // levels that are one to counting may differ by T
	}
	return cold(empty[0]) && cold(empty[1])
}
