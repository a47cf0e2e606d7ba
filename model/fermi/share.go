package fermi

import (
	"fmt"
	"runtime/debug"
)

// shareable is the length from which two sweeps are worth a core each.
const shareable = 8_000

// share is what a second sweep needs that runs beside the first.
type share struct {
	jobs          int
	sweep         sweep
	density, bond []float64
}

// A lot is what one sweep does: up to width poles, from first on.
type lot struct {
	h         *Hamiltonian
	poles     *poles
	first     int
	mu, scale float64
	symmetric bool
}

// add adds the lot to density and bond and returns its parts of the grand
// potential and of Σ_i ⟨c†_{i+2}c_i + h.c.⟩.
func (one lot) add(w *sweep, density, bond []float64) (omega, order float64) {
	w.order, w.symmetric = 0, one.symmetric
	w.load(one.poles, one.first, one.mu, one.scale)
	w.add(one.h, density, bond)
	for l := range width {
		if k := one.first + l; k < len(one.poles.weight) {
			omega -= one.poles.weight[k] / 2 * w.log[l]
		}
	}
	return omega, w.order
}

// two adds a lot and the one after it, side by side if there are cores for it,
// and returns their part of the grand potential. The second is gathered apart
// and added afterwards in either case, so that the sums are the same to the last
// bit.
func (p *poleSolver) two(now lot, density, bond []float64) (omega float64) {
	s := &p.share
	s.density, s.bond = resize(s.density, len(density)), resize(s.bond, len(bond))
	clear(s.density)
	clear(s.bond)
	next := now
	next.first += width

	var part [2]float64
	var order [2]float64
	if s.jobs > 1 {
		done := make(chan error, 1)
		go func() {
			defer func() {
				if r := recover(); r != nil {
					done <- fmt.Errorf("fermi: %v\n%s", r, debug.Stack())
				}
				close(done)
			}()
			part[1], order[1] = next.add(&s.sweep, s.density, s.bond)
		}()
		part[0], order[0] = now.add(&p.sweep, density, bond)
		if err := <-done; err != nil {
			panic(err) // where the caller can recover it
		}
	} else {
		part[0], order[0] = now.add(&p.sweep, density, bond)
		part[1], order[1] = next.add(&p.sweep, s.density, s.bond)
	}
	for i, n := range s.density {
		density[i] += n
	}
	for i, b := range s.bond {
		bond[i] += b
	}
	p.order += order[0]
	p.order += order[1]
	return part[0] + part[1]
}
