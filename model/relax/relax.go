// Package relax finds the lattice that minimises the free energy of electrons
// plus springs at a fixed number of electrons,
//
//	F[b, q] = F_el(N_e, T; t − α b, g q) + (K/2) Σ b² + (K_s/2) Σ q²,
//
// over all stretches b and local modes q of zero sum (a ring cannot stretch as
// a whole, an open chain is held at its length, and the uniform local mode is
// left out of every energy). Its stationary points obey
//
//	b_i = −(α/K)(p_i − p̄),   q_i = −(g/K_s)(n_i − n̄),
//
// with p the bond order and n the density, spins summed (W. P. Su, J. R.
// Schrieffer, A. J. Heeger, Phys. Rev. B 22, 2099 (1980); T. Holstein, Ann.
// Phys. 8, 325 (1959)).
//
// A small residual does not prove a ground state: the undistorted chain is
// stationary too. So several starts are relaxed, the lowest is kept, and its
// curvature along the 2kF patterns is tested.
package relax

import (
	"context"
	"math"
	"slices"

	"example.org/twokf/model"
	"example.org/twokf/model/fermi"
)

// Lattice is a relaxed chain. Slices are never changed once it is published.
type Lattice struct {
	Stretch      []float64 // b_i = u_{i+1} − u_i; length N (ring) or N−1 (open), sum 0; nil without a bond phonon
	Displacement []float64 // u_i, zero mean, length N; nil without a bond phonon
	SiteMode     []float64 // q_i, zero mean, length N; nil without a site phonon

	Electrons fermi.State

	FreeEnergy    float64 // electrons plus springs, whole chain
	LatticeEnergy float64 // springs alone, whole chain
	Undistorted   float64 // free energy of the same chain with b = q = 0

	Residual   float64 // largest |(K/α) b_i + p_i − p̄| or |(K_s/g) q_i + n_i − n̄|: a bond order or a density
	Tolerance  float64 // what Residual was held against
	Converged  bool
	Iterations int     // of the start that won
	Curvature  float64 // lowest second derivative along the 2kF patterns, the bare spring being 1; negative: not a minimum

	Start string    // which start led here
	Tried []Attempt // every start and where it ended
}

// Attempt is one start and its outcome.
type Attempt struct {
	Name       string
	FreeEnergy float64
	Residual   float64
	Converged  bool
	Iterations int
}

// Settings adjusts a relaxation. The zero value asks for the defaults.
type Settings struct {
	Tolerance     float64        // on Residual; 0 means 1e-9, about ten times what the electrons are solved to
	MaxIterations int            // per start; 0 means 1000
	Starts        []Seed         // nil means those of Seeds(c) that are worth it, see likelySeeds
	Previous      *Lattice       // tried first when its shape fits; it stands in for the random start
	Jobs          int            // cores to use, for starts side by side or for the sums of one; 0 means one
	Progress      func(Progress) // if not nil, called now and then, never concurrently
}

// Progress tells how far a relaxation is.
type Progress struct {
	Start            string
	Finished, Starts int     // starts done, starts in all
	Iteration        int     // of the start under way
	Residual         float64 // now
	Tolerance        float64 // wanted
}

const (
	defaultTolerance     = 1e-9
	defaultMaxIterations = 1000

	// tieEnergy is the free energy per site, in units of the band scale, below
	// which two ends count as the same energy: the electron solver's rounding.
	tieEnergy = 1e-12
	// scoutGain, likewise, is by how much the free energy per site of a chain of a
	// thousand sites may lie below that of a long one and be the same: a kink
	// left over on a million sites is more.
	scoutGain = 1e-7
	// saddleCurvature, in units of the bare spring, is well above the
	// finite-difference noise of the curvature test and far below any real
	// instability (−λ times a logarithm).
	saddleCurvature = -1e-5
)

// Run relaxes the chain from every start and returns the lowest end. A chain
// without coupling comes back undistorted and converged. The error is the
// context's, or the electron solver's; a relaxation that merely did not
// converge is no error but Lattice.Converged == false.
func Run(ctx context.Context, c model.Chain, set Settings) (*Lattice, error) {
	if set.Tolerance == 0 {
		set.Tolerance = defaultTolerance
	}
	if set.MaxIterations == 0 {
		set.MaxIterations = defaultMaxIterations
	}
	p := newProblem(c)
	walkers := []*walker{newWalker(p)}
	w := walkers[0]
	err := w.stand(ctx, nil)
	if err != nil {
		return nil, err
	}
	uniform := w.at("undistorted", 0)
	uniform.x = nil
	if p.size() == 0 {
		return w.lattice(ctx, uniform, uniform, set.Tolerance)
	}

	starts, scouted := slices.Clone(set.Starts), math.Inf(1)
	if starts == nil {
		if starts, scouted, err = likelySeeds(ctx, c, set); err != nil {
			return nil, err
		}
	}
	var ends []*end
	if prev := set.Previous; prev != nil && p.fits(prev) {
		earlier := Seed{Name: "previous", Stretch: prev.Stretch, SiteMode: prev.SiteMode}
		if math.IsInf(scouted, 1) {
			if set.Starts == nil { // at random has been tried when the chain was new
				starts = slices.DeleteFunc(starts, func(s Seed) bool { return s.Name == atRandom })
			}
			starts = append([]Seed{earlier}, starts...)
		} else { // fresh starts on a long chain only if they have something to gain
			w.solver.Jobs = set.Jobs
			ends, err = race(ctx, walkers, []Seed{earlier}, set)
			if ctx.Err() != nil {
				return nil, err
			}
			if err != nil { // its electrons cannot be solved here; a fresh start's may be
				ends = nil
			} else if e := ends[0]; e.residual <= set.Tolerance && e.free/float64(c.Sites) <= scouted+scoutGain*p.scale() {
				starts = nil
			}
		}
	}
	jobs := set.Jobs
	if p.size() > manyCoordinates {
		jobs = 1 // a walker is most of the memory
	}
	for len(walkers) < min(jobs, len(starts)) {
		walkers = append(walkers, newWalker(p))
	}
	w.solver.Jobs = 1
	if len(walkers) == 1 {
		w.solver.Jobs = set.Jobs // the cores that no other start needs
	}
	fresh, err := race(ctx, walkers, starts, set)
	if err != nil {
		return nil, err
	}
	ends = append(ends, fresh...)

	best := p.lowest(append(ends, uniform))
	if err := w.testCurvature(ctx, best); err != nil {
		return nil, err
	}
	for try := 0; best.curvature < saddleCurvature && try < 2; try++ {
		down, err := w.offSaddle(ctx, best, set)
		if err != nil {
			return nil, err
		}
		ends = append(ends, down)
		if best = p.lowest([]*end{down, best}); best != down {
			break
		}
		if err := w.testCurvature(ctx, best); err != nil {
			return nil, err
		}
	}
	l, err := w.lattice(ctx, best, uniform, set.Tolerance)
	if err != nil {
		return nil, err
	}
	for _, e := range ends {
		l.Tried = append(l.Tried, Attempt{e.name, e.free, e.residual, e.residual <= set.Tolerance, e.iterations})
	}
	return l, nil
}

// lowest picks the end of lowest free energy. Ends that are equal to rounding
// are settled in favour of the undistorted chain, then of the earlier start.
func (p *problem) lowest(ends []*end) *end {
	tie := tieEnergy * p.scale() * float64(p.sites)
	best := ends[0]
	for _, e := range ends[1:] {
		switch gain := best.free - e.free; {
		case gain > tie:
			best = e
		case gain > -tie && e.name == "undistorted" && !(best.residual < e.residual/2):
			best = e
		}
	}
	return best
}

// fits reports whether a lattice has the shape of this problem.
func (p *problem) fits(l *Lattice) bool {
	return len(l.Stretch) == p.bonds && len(l.SiteMode) == p.modes
}

// lattice solves for the electrons at an end once more, gap edges and all, and
// hands out what it finds; the walker is of no use after that.
func (w *walker) lattice(ctx context.Context, e, undistorted *end, tolerance float64) (*Lattice, error) {
	w.solver.RoughEdges = false
	w.release()
	if err := w.stand(ctx, e.x); err != nil {
		return nil, err
	}
	l := &Lattice{
		Electrons:     w.electrons,
		FreeEnergy:    w.free,
		LatticeEnergy: w.springs,
		Undistorted:   undistorted.free,
		Residual:      w.residual,
		Tolerance:     tolerance,
		Converged:     w.residual <= tolerance,
		Iterations:    e.iterations,
		Curvature:     e.curvature,
		Start:         e.name,
	}
	l.Stretch, l.SiteMode = w.patterns(w.x)
	if l.Stretch != nil {
		l.Displacement = displacement(l.Stretch, w.sites)
	}
	return l, nil
}

// displacement sums the stretches up to positions of zero mean.
func displacement(stretch []float64, sites int) []float64 {
	u := make([]float64, sites)
	var mean float64
	for i := 1; i < sites; i++ {
		u[i] = u[i-1] + stretch[i-1]
		mean += u[i]
	}
	mean /= float64(sites)
	for i := range u {
		u[i] -= mean
	}
	return u
}

// maxAbs returns the largest magnitude in x, 0 for none.
func maxAbs(x []float64) float64 {
	m := 0.0
	for _, v := range x {
		m = math.Max(m, math.Abs(v))
	}
	return m
}
