package fermi

import (
	"context"
	"fmt"
	"math"
	"sync"
)

// warm is what is kept for electrons at T > 0.
type warm struct {
	trials [2]trial

	key   warmKey // what the following belong to
	mu    float64 // the last chemical potential
	slope float64 // and dN/dμ per spin
}

type warmKey struct {
	sites                int
	perSpin, temperature float64
}

// A trial is what the electrons do at some chemical potential.
type trial struct {
	mu, excess    float64 // excess is Σ f − n per spin
	omega, order  float64 // grand potential per spin; Σ_i ⟨c†_{i+2}c_i + h.c.⟩, all spins
	density, bond []float64
}

// solveWarm finds the chemical potential by interpolating the number of
// electrons between trials. Densities are interpolated between the last two
// trials too, which makes the number exact; their error is of second order.
// The free energy Ω + μN is stationary in μ.
func (p *poleSolver) solveWarm(ctx context.Context, h *Hamiltonian, spin, perSpin, temperature float64, st *State) error {
	const most = 100
	w := &p.warm
	size := float64(len(h.Site))
	key := warmKey{len(h.Site), perSpin, temperature}
	if w.key != key {
		w.mu, w.slope = st.ChemicalPotential, 0
	}
	shift := temperature * math.Log((size-perSpin)/perSpin) // every level at ε is filled n/N at μ = ε − shift
	r := root{lo: p.gap.lo - shift, hi: p.gap.hi - shift, slope: w.slope}
	enough := max(1e-13*min(perSpin, size-perSpin), 4e-16*size)
	before, now := &w.trials[0], &w.trials[1]
	mu := min(max(w.mu, r.lo), r.hi)
	switch {
	case p.half:
		mu = p.middle
	case st.Lowest-st.Highest > wideGap*temperature && (mu < st.Highest || mu > st.Lowest):
		// The last chain was a different one, and there is no coming back from a
		// band into a gap by slopes.
		mu, r.slope = st.ChemicalPotential, 0
	}
	for range most {
		if err := p.try(ctx, h, mu, spin, key, before); err != nil {
			return err
		}
		before, now = now, before
		r.learn(mu, now.excess)
		if r.slope == 0 {
			r.slope = p.firstSlope(now.excess, key, st)
		}
		exact := math.Abs(now.excess) <= enough
		// Interpolating between the two leaves |N″δδ′/2N′²|, where N″ ≲ N′/T and
		// N′ is the slope between them.
		slope := (now.excess - before.excess) / (now.mu - before.mu)
		close := r.known > 1 && math.Abs(now.excess*before.excess) <= 2e-14*size*temperature*slope
		if exact || close || r.stuck() {
			if exact || r.known == 1 {
				before = now
			}
			p.blend(h, spin, key, before, now, st)
			w.key, w.mu, w.slope = key, st.ChemicalPotential, r.slope
			return nil
		}
		mu = r.next()
	}
	return fmt.Errorf("%w: no chemical potential between %g and %g gives %g electrons per spin at temperature %g", errUnresolved, r.lo, r.hi, perSpin, temperature)
}

// wideGap is the gap, in units of the temperature, across which so few
// electrons are excited that N(μ) changes exponentially.
const wideGap = 8

// firstSlope guesses dN/dμ: so that the step is half of T when the number of
// electrons excited across a gap decides, else as for an even band.
func (p *poleSolver) firstSlope(excess float64, key warmKey, st *State) float64 {
	if st.Lowest-st.Highest > wideGap*key.temperature {
		return 2 * math.Abs(excess) / key.temperature
	}
	filling := key.perSpin / float64(key.sites)
	return key.perSpin * (1 - filling) / (key.temperature + (p.gap.hi-p.gap.lo)/4)
}

// try stores what the electrons do at mu.
func (p *poleSolver) try(ctx context.Context, h *Hamiltonian, mu, spin float64, key warmKey, t *trial) error {
	f := polesFor(key.temperature, max(p.gap.hi-mu, mu-p.gap.lo))
	if f == nil {
		return fmt.Errorf("%w: temperature %g cannot be resolved in a band of width %g", errUnresolved, key.temperature, p.gap.hi-p.gap.lo)
	}
	t.mu = mu
	t.density, t.bond = resize(t.density, len(h.Site)), resize(t.bond, len(h.Bond))
	clear(t.density)
	clear(t.bond)
	var err error
	t.omega, err = p.sum(ctx, h, f, mu, spin, t.density, t.bond)
	t.order = p.order
	t.excess = -spin * key.perSpin
	for _, n := range t.density {
		t.excess += n
	}
	t.excess /= spin
	return err
}

// roomy is the ratio of neighbouring ranges for which thermal poles are made:
// ranges are rounded up to a power of it times T, so that the same poles serve
// similar chains and depend on nothing but T and the rounded range.
const roomy = 1.1

// polesFor returns poles that are good for |ε − μ| ≤ M at the temperature, or
// nil if there are none. They are not to be changed.
func polesFor(temperature, M float64) *poles {
	reach := temperature * math.Pow(roomy, math.Ceil(math.Log(max(M/temperature, 1))/math.Log(roomy)))
	return thermal.get(thermalKey{temperature, max(reach, M)})
}

// thermal keeps the poles of the last few temperatures and ranges for all
// solvers: making them takes milliseconds, and they depend on their key alone.
var thermal thermalCache

type thermalKey struct{ temperature, reach float64 }

type thermalCache struct {
	lock sync.Mutex
	keys []thermalKey // latest last
	made map[thermalKey]*poles
}

// keptPoles is how many are kept, some kB each.
const keptPoles = 32

func (c *thermalCache) get(key thermalKey) *poles {
	c.lock.Lock()
	defer c.lock.Unlock() // held while they are made: another solver wants the same
	if f, ok := c.made[key]; ok {
		return f
	}
	f := new(poles)
	if !f.fermiDirac(key.temperature, key.reach, poleTolerance) {
		f = nil
	}
	if c.made == nil {
		c.made = make(map[thermalKey]*poles)
	}
	if len(c.keys) == keptPoles {
		delete(c.made, c.keys[0])
		c.keys = append(c.keys[:0], c.keys[1:]...)
	}
	c.keys = append(c.keys, key)
	c.made[key] = f
	return f
}

// blend stores the state at the chemical potential where the excess, taken as
// linear between two trials (or one twice), vanishes.
func (p *poleSolver) blend(h *Hamiltonian, spin float64, key warmKey, before, now *trial, st *State) {
	x := 0.0 // part of the trial before
	if d := now.excess - before.excess; d != 0 {
		x = now.excess / d
	}
	var energy float64
	for i, n := range now.density {
		n += x * (before.density[i] - n)
		st.Density[i] = n
		energy += h.Site[i] * n
	}
	for i, b := range now.bond {
		b += x * (before.bond[i] - b)
		st.BondOrder[i] = b
		energy -= h.Bond[i] * b
	}
	energy -= h.Next * (now.order + x*(before.order-now.order))
	st.ChemicalPotential = now.mu + x*(before.mu-now.mu)
	st.Energy = energy
	best := now
	if math.Abs(before.excess) < math.Abs(now.excess) {
		best = before
	}
	// d(Ω + μn)/dμ = −excess, linear up to the answer.
	rest := best.excess / 2 * (st.ChemicalPotential - best.mu)
	st.FreeEnergy = spin * (best.omega + best.mu*key.perSpin - rest)
	st.Entropy = max(0, (energy-st.FreeEnergy)/key.temperature)
}
