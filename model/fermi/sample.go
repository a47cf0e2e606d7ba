package fermi

import (
	"context"
	"errors"
	"fmt"
	"runtime/debug"
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
	dst = resize(dst, len(numbers))
	// two halves, whatever the number of cores, so that the answer is the same
	half := len(numbers) / 2
	first := func() error { return s.poles.gap.sample(ctx, dst[:half], h, numbers[:half], tolerance) }
	second := func() error { return s.second.sample(ctx, dst[half:], h, numbers[half:], tolerance) }
	if s.Jobs > 1 && len(h.Site) >= shareable {
		done := make(chan error, 1)
		go func() {
			defer func() {
				if r := recover(); r != nil {
					done <- fmt.Errorf("fermi: %v\n%s", r, debug.Stack())
				}
			}()
			done <- second()
		}()
		return dst, errors.Join(first(), <-done)
	}
	return dst, errors.Join(first(), second())
}

// sample is SampleLevels for one core.
func (g *gapFinder) sample(ctx context.Context, dst []float64, h *Hamiltonian, numbers []int, tolerance float64) error {
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
			return err
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
					return fmt.Errorf("fermi: the counts of levels near %g contradict each other", energies[l])
				}
			}
		}
	}
	for i := range brackets {
		dst[i] = brackets[i].middle()
	}
	return nil
}
