package fermi

import (
	"context"
	"errors"
	"fmt"
)

// A Method is a way to find the occupied states.
type Method int

// Methods.
const (
	Fastest Method = iota // whichever of the others costs less
	Dense                 // full diagonalisation, N³
	Poles                 // sum over inverses at complex energies, linear in N
)

// String returns the name that State.Method carries.
func (m Method) String() string {
	switch m {
	case Dense:
		return "dense"
	case Poles:
		return "poles"
	}
	return "fastest"
}

// Solver finds the electrons of chains. The zero value is ready. It owns the
// workspace and what the last chain has taught (edges of the gap, chemical
// potential, poles), so a sequence of similar chains is best given to one
// Solver. It serves one goroutine at a time.
type Solver struct {
	Method Method // the zero value chooses by cost

	// RoughEdges lets Solve report Highest and Lowest to a few per cent of the
	// gap, never on the wrong side of a level, which is all that the densities
	// and energies need: for the inside of a self-consistent loop.
	RoughEdges bool

	// Jobs is how many cores the sums over poles and the counts of long chains may use; 0 or 1
	// means one. The answer is the same to the last bit.
	Jobs int

	dense  dense
	poles  poleSolver
	waves  waves
	second gapFinder // for the other half of a sample of levels
	levels tridiagonal
}

// Forget makes the Solver as good as new but for its workspace: what it returns
// next depends on nothing that it has solved before.
func (s *Solver) Forget() {
	s.poles.gap.guess = s.poles.gap.guess[:0]
	s.poles.step = [2]poles{}
	s.poles.warm.key = warmKey{}
	s.poles.warm.mu, s.poles.warm.slope = 0, 0
}

// largestDense is the longest chain that is diagonalised in full: the time
// grows as N³ and cannot be interrupted; at 1000 sites it is about 2 s.
const largestDense = 1000

// Up to these lengths a chain is diagonalised although it could be summed over
// poles. At T = 0 the sum is faster from about ten sites on, but a diagonalised
// chain of sixteen takes 20 µs and has no error to speak of. At T > 0 making
// the poles takes as long as some twenty diagonalisations of 32 sites.
const (
	cheapDense     = 16
	cheapDenseWarm = 32
)

// Solve finds the state of the electrons of h and stores it in st, whose
// slices are reused when they are long enough. It returns an error when an
// element of h is not finite, when the occupation is impossible, when the chain
// is too long for the method, and the cause when ctx ends; st is then undefined.
func (s *Solver) Solve(ctx context.Context, h *Hamiltonian, occ Occupation, st *State) error {
	if err := context.Cause(ctx); err != nil {
		return err
	}
	if err := h.check(); err != nil {
		return err
	}
	if err := occ.check(len(h.Site)); err != nil {
		return err
	}
	st.Density = resize(st.Density, len(h.Site))
	st.BondOrder = resize(st.BondOrder, len(h.Bond))
	if s.Method == Fastest && (occ.Temperature == 0 || len(h.Site) <= longestHot) && h.alike() {
		st.Method = "waves"
		s.waves.solve(h, occ, st)
		return nil
	}
	if s.choose(len(h.Site), occ.Temperature) == Poles {
		st.Method = Poles.String()
		s.poles.share.jobs = s.Jobs
		err := s.poles.solve(ctx, h, occ, st, s.RoughEdges)
		if !errors.Is(err, errUnresolved) || len(h.Site) > largestDense {
			return err
		}
	}
	if len(h.Site) > largestDense {
		return fmt.Errorf("fermi: %d sites are too many to be diagonalised in full, want at most %d", len(h.Site), largestDense)
	}
	st.Method = Dense.String()
	return s.dense.solve(h, occ, st)
}

// choose is the one place where the method is chosen.
func (s *Solver) choose(sites int, temperature float64) Method {
	cheap := cheapDense
	if temperature > 0 {
		cheap = cheapDenseWarm
	}
	switch {
	case sites < fewestSites || s.Method == Dense:
		return Dense
	case s.Method == Poles || sites > cheap:
		return Poles
	}
	return Dense
}

// Edges returns the highest occupied and the lowest unoccupied level of h when
// the lowest perSpin levels are filled, and whether a level is only partly
// filled, in which case both are that level. Where there is no such level the
// edge is infinite. perSpin is the number of electrons divided by the spin
// states; a part of a level counts as partly filled.
func (s *Solver) Edges(ctx context.Context, h *Hamiltonian, perSpin float64) (highest, lowest float64, open bool, err error) {
	if err := context.Cause(ctx); err != nil {
		return 0, 0, false, err
	}
	if err := h.check(); err != nil {
		return 0, 0, false, err
	}
	if err := (Occupation{Electrons: perSpin, Spin: 1}).check(len(h.Site)); err != nil {
		return 0, 0, false, err
	}
	g := &s.poles.gap
	g.reset(h)
	e, _, err := g.find(ctx, perSpin, false)
	return e.highest, e.lowest, e.open, err
}
