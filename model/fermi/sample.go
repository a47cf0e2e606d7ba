package fermi

import (
	"context"
	"fmt"
	"slices"
)

// SampleLevels stores the levels of the given numbers (0 is the lowest; the
// numbers ascend) in dst to within tolerance, an energy, and returns it. It
// counts levels instead of diagonalising: the cost is that of some
// len(numbers)·log2(band width/tolerance) counts, linear in the length of the
// chain. A nil dst is allocated. It panics if a number is not that of a level.
func (s *Solver) SampleLevels(ctx context.Context, dst []float64, h *Hamiltonian, numbers []int, tolerance float64) ([]float64, error) {
	if err := h.check(); err != nil {
		return nil, err
	}
	if !slices.IsSorted(numbers) || len(numbers) > 0 && (numbers[0] < 0 || numbers[len(numbers)-1] >= len(h.Site)) {
		panic(fmt.Sprintf("fermi: numbers of levels must ascend within 0..%d", len(h.Site)-1))
	}
	g := &s.poles.gap
	g.reset(h)
	tolerance = max(tolerance, g.sharp())
	brackets := make([]bracket, len(numbers))
	for i, n := range numbers {
		brackets[i] = bracket{n, g.lo, g.hi}
	}
	var energies [lanes]float64
	var counts [lanes]int
	for {
		if err := context.Cause(ctx); err != nil {
			return nil, err
		}
		wide := 0
		for i := range brackets { // the midpoints of different brackets, as many as are counted at once
			b := &brackets[i]
			if b.width() <= tolerance {
				continue
			}
			if m := b.middle(); wide == 0 || m != energies[wide-1] {
				if wide == lanes {
					break
				}
				energies[wide] = m
				wide++
			}
		}
		if wide == 0 {
			break
		}
		for l := wide; l < lanes; l++ {
			energies[l] = energies[wide-1]
		}
		g.below(&energies, &counts)
		for i := range brackets {
			for l := range wide {
				if brackets[i].learn(energies[l], counts[l]); brackets[i].hi < brackets[i].lo {
					return nil, fmt.Errorf("fermi: the counts of levels near %g contradict each other", energies[l])
				}
			}
		}
	}
	dst = resize(dst, len(numbers))
	for i := range brackets {
		dst[i] = brackets[i].middle()
	}
	return dst, nil
}
