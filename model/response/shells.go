package response

import (
	"math"
	"slices"
)

// shell is one level of a ring, ±k together, with its occupation per state.
type shell struct {
	energy, states float64
	full, empty    float64 // f and 1−f, each accurate relative to itself
}

// fillShells fills the levels from below with so many electrons of one spin,
// levels within tolerance of each other in equal fractions. It returns the
// Fermi energy: the partly filled level, or the middle of the gap.
func fillShells(shells []shell, electrons, tolerance float64) (fermi float64) {
	order := make([]*shell, len(shells))
	for i := range shells {
		order[i] = &shells[i]
	}
	slices.SortFunc(order, func(a, b *shell) int {
		if a.energy < b.energy {
			return -1
		}
		return 1
	})
	total := 0.0
	for _, s := range order {
		total += s.states
	}
	rounding := 1e-12 * total
	highest, lowest := math.Inf(-1), math.Inf(1)
	for i := 0; i < len(order); {
		end, room := i, 0.0
		for ; end < len(order) && order[end].energy-order[i].energy <= tolerance; end++ {
			room += order[end].states
		}
		f := math.Min(1, electrons/room)
		switch {
		case electrons > room-rounding:
			f = 1
		case electrons < rounding:
			f = 0
		}
		for _, s := range order[i:end] {
			s.full, s.empty = f, 1-f
		}
		if f > 0 {
			highest = order[end-1].energy
		}
		if f < 1 {
			lowest = math.Min(lowest, order[i].energy)
		}
		electrons = math.Max(0, electrons-room)
		i = end
	}
	if math.IsInf(highest, 0) || math.IsInf(lowest, 0) { // empty or full
		return order[0].energy
	}
	return (highest + lowest) / 2
}

// warmShells replaces the occupations of T = 0 by those of temperature T and
// the same number of electrons.
//
// It solves Σ states·(f − f0) = 0 for x = (μ − E_F)/T, with f − f0 as −(1−f)
// where the level was full, so that electrons and holes balance also where
// both are exponentially few.
func warmShells(shells []shell, fermi, T float64) {
	cold := make([]float64, len(shells))
	lo, hi := math.Inf(1), math.Inf(-1)
	var electrons, holes float64
	for i, s := range shells {
		cold[i] = s.full
		electrons += s.full * s.states
		holes += s.empty * s.states
		lo, hi = math.Min(lo, (s.energy-fermi)/T), math.Max(hi, (s.energy-fermi)/T)
	}
	if electrons == 0 || holes == 0 {
		return
	}
	// Some level has the mean occupation; see band.ChemicalPotential.
	bias := math.Log(electrons / holes)
	lo, hi = lo+bias, hi+bias
	x := math.Min(math.Max(0, lo), hi)
	for range 200 {
		var excess, slope float64
		for i := range shells {
			s := &shells[i]
			y := (s.energy-fermi)/T - x
			s.full, s.empty = 1/(1+math.Exp(y)), 1/(1+math.Exp(-y))
			change := s.full - cold[i]
			if cold[i] == 1 {
				change = -s.empty
			}
			excess += s.states * change
			slope += s.states * s.full * s.empty
		}
		if excess == 0 {
			return
		}
		if excess > 0 {
			hi = x
		} else {
			lo = x
		}
		change := math.Log1p(excess/electrons) - math.Log1p(-excess/holes)
		next := x - change*electrons*holes/(electrons+holes)/slope
		if !(next >= lo && next <= hi) {
			next = (lo + hi) / 2
		}
		if math.Abs(next-x) <= 1e-15*math.Max(1, math.Abs(x)) {
			return
		}
		x = next
	}
}
