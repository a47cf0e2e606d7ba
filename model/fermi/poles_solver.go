package fermi

import (
	"context"
	"errors"
	"fmt"
	"math"
)

// poleSolver sums over poles at a cost linear in the length of the chain.
type poleSolver struct {
	gap   gapFinder
	step  [2]poles // the last steps at T = 0, below and above an open shell
	sweep sweep
	order float64 // Σ_i ⟨c†_{i+2}c_i + h.c.⟩ of the last sum, when Next ≠ 0
	warm  warm
	share share

	half   bool    // a balanced chain, half filled
	middle float64 // then its chemical potential
}

// errUnresolved is what poles fail with on their own account.
var errUnresolved = errors.New("fermi: no sum over poles")

// fewestSites is the length from which every kind of chain can be swept: on
// shorter rings elements of H fall on the same place.
const fewestSites = 5

// solve fills st.
func (p *poleSolver) solve(ctx context.Context, h *Hamiltonian, occ Occupation, st *State, rough bool) error {
	spin := float64(occ.Spin)
	perSpin := occ.Electrons / spin
	p.gap.reset(h)
	s, empty, err := p.gap.find(ctx, perSpin, rough)
	if err != nil {
		return err
	}
	st.ChemicalPotential = s.fermiLevel()
	p.middle, p.half = h.balanced()
	p.half = p.half && perSpin == float64(len(h.Site))/2
	if p.half {
		st.ChemicalPotential = p.middle
	}
	st.Highest, st.Lowest, st.OpenShell = s.highest, s.lowest, s.open
	if s.frozen(occ.Temperature, p.gap.same, empty) {
		err = p.solveCold(ctx, h, spin, s, empty, perSpin, occ.Temperature, st)
	} else {
		err = p.solveWarm(ctx, h, spin, perSpin, occ.Temperature, st)
	}
	if err != nil {
		return err
	}
	missing := occ.Electrons
	for _, n := range st.Density {
		missing -= n
	}
	if !(math.Abs(missing) <= 1e-9*float64(len(h.Site))) {
		return fmt.Errorf("%w: the densities miss %g of %g electrons", errUnresolved, missing, occ.Electrons)
	}
	return nil
}

// solveCold fills levels from below, a degenerate one in equal parts:
// ρ = (1−x) P_full + x P_reach.
func (p *poleSolver) solveCold(ctx context.Context, h *Hamiltonian, spin float64, s shell, empty [2]interval, perSpin, temperature float64, st *State) error {
	clear(st.Density)
	clear(st.BondOrder)
	x := s.share(perSpin)
	energy, err := p.project(ctx, h, 0, s.full, empty[0], spin*(1-x), st)
	if err != nil {
		return err
	}
	st.Energy = spin * (1 - x) * energy
	st.Entropy = 0
	if x > 0 {
		if energy, err = p.project(ctx, h, 1, s.reach, empty[1], spin*x, st); err != nil {
			return err
		}
		st.Energy += spin * x * energy
		if temperature > 0 {
			st.Entropy = spin * float64(s.reach-s.full) * mixing(x)
		}
	}
	st.FreeEnergy = st.Energy - temperature*st.Entropy
	return nil
}

// project adds scale times the projector on the lowest `filled` levels, which
// end at an empty interval, to the densities and bond orders of st and returns
// the sum of those levels.
func (p *poleSolver) project(ctx context.Context, h *Hamiltonian, which, filled int, empty interval, scale float64, st *State) (energy float64, err error) {
	n := len(h.Site)
	switch filled {
	case 0:
		return 0, nil
	case n:
		for i, a := range h.Site {
			st.Density[i] += scale
			energy += a
		}
		return energy, nil
	}
	mu := empty.lo + (empty.hi-empty.lo)/2
	if p.half && 2*filled == n {
		mu = p.middle
	}
	m := min(empty.hi-mu, mu-empty.lo)
	M := max(p.gap.hi-mu, mu-p.gap.lo)
	step := &p.step[which]
	if !step.covers(m, M) {
		if !step.zolotarev(narrower*m, wider*M, poleTolerance) {
			return 0, fmt.Errorf("%w: a gap of %g in a band of width %g cannot be resolved, want at least %g", errUnresolved, empty.hi-empty.lo, p.gap.hi-p.gap.lo, p.gap.same)
		}
	}
	omega, err := p.sum(ctx, h, step, mu, scale, st.Density, st.BondOrder)
	return omega + mu*float64(filled), err
}

// sum adds scale·f(H − μ) to density and bond and returns the grand potential
// Σ ω(ε − μ) per spin.
func (p *poleSolver) sum(ctx context.Context, h *Hamiltonian, f *poles, mu, scale float64, density, bond []float64) (omega float64, err error) {
	n := float64(len(h.Site))
	for i, a := range h.Site {
		density[i] += scale / 2
		omega += (a - mu) / 2
	}
	omega -= n * f.constant
	p.order = 0
	for first := 0; first < len(f.weight); first += width {
		if err := context.Cause(ctx); err != nil {
			return 0, err
		}
		now := lot{h: h, poles: f, first: first, mu: mu, scale: scale / 2, symmetric: p.half && mu == p.middle}
		if next := first + width; len(h.Site) >= shareable && next < len(f.weight) {
			omega += p.two(now, density, bond)
			first = next
			continue
		}
		part, order := now.add(&p.sweep, density, bond)
		omega += part
		p.order += order
	}
	if math.IsNaN(omega) || math.IsInf(omega, 0) {
		return 0, fmt.Errorf("%w: energies of order %g are too large or too small to be summed", errUnresolved, f.outer)
	}
	return omega, nil
}
