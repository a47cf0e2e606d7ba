package study

import (
	"time"

	"example.org/twokf/model"
	"example.org/twokf/model/doubt"
	"example.org/twokf/model/relax"
	"example.org/twokf/model/response"
)

// Portrait is everything that is known about one chain. It is immutable once
// published: a later stage publishes a new Portrait that shares the parts.
// A nil part has not been computed yet, or does not exist for this chain.
type Portrait struct {
	Chain model.Chain

	Band       *Band       // infinite uniform chain
	Response   *Response   // χ(q, T) of the infinite chain
	Ring       *Ring       // χ(q, T) of the finite ring; nil for an open chain
	Phonon     *Phonon     // renormalised phonon of the infinite uniform chain
	Transition *Transition // mean-field T_P
	Lattice    *Lattice    // relaxed finite chain
	Levels     *Levels     // one-electron levels of the relaxed finite chain
	Doubts     []doubt.Doubt

	Troubles []Trouble // stages that could not be done, and why
	Seconds  float64   // time spent so far, without the reused parts
	Complete bool      // every stage has finished

	finished map[string]bool // stages that have run, well or badly
	levels   int             // Settings.Levels that Levels were found with
}

// Trouble is a stage that failed, in words for the user.
type Trouble struct {
	Stage string
	Err   error
}

// Progress tells how far a long stage is.
type Progress struct {
	Stage   string
	Done    float64       // 0..1
	Detail  string        // such as "force 3e-5 of 1e-8"
	Elapsed time.Duration // since the study began
	Left    time.Duration // of this stage, if it goes on as it has; 0: not known
}

// Band is the infinite uniform chain.
type Band struct {
	K, Energy       []float64 // dispersion over 0..π, ascending k
	FermiEnergy     float64   // μ(T=0)
	KF              float64   // π f
	Ordering        float64   // 2kF folded into [0, π]
	FermiPoints     []float64 // where ε = E_F in (0, π), ascending; usually {kF}
	Velocity        float64   // |dE/dk| at kF; 0 in an empty, full or flat band
	DensityOfStates float64   // per site and energy, all spins; +Inf in a flat band or at a band edge
}

// Response holds χ over wave vectors.
type Response struct {
	Q           []float64 // 0..π ascending, denser where χ bends
	Chi         []response.Static
	PeakQ, Peak float64 // highest point of the bulk χ0(q, T); Peak +Inf where it diverges
}

// Ring holds χ of the finite uniform ring at its own wave vectors.
type Ring struct {
	Q   []float64         // 2πm/N in 0..π, ascending; of long rings a sample
	Chi []response.Static // +Inf where the response diverges (open shell, T = 0)

	complete bool // no sample made for looking at
}

// Phonon holds the renormalised phonon over wave vectors.
type Phonon struct {
	Q        []float64
	Branch   []response.Phonon
	SoftestQ float64
	Softest  float64      // lowest Ω²/ω²; −Inf where χ diverges
	Unstable [][2]float64 // q ranges where Ω² < 0
}

// Transition is where the uniform chain loses its stability on cooling.
type Transition struct {
	Temperature                float64 // mean-field k_B T_P: Ω²(2kF, T_P) = 0; 0 when there is none
	First                      float64 // where any q first goes unstable on cooling, ≥ Temperature
	FirstQ                     float64
	CouplingBond, CouplingSite float64 // λ of each branch
	WeakGap                    float64 // 4 ε_c e^{−1/λ}, full gap of the infinite chain in weak coupling; 0 when not defined
}

// Lattice is the relaxed chain with its order parameters.
type Lattice struct {
	*relax.Lattice
	Ordering                                                                       float64 // wave vector Q of the amplitudes, 2kF of the electrons actually on the chain
	DisplacementAmplitude, SiteModeAmplitude, DensityAmplitude, BondOrderAmplitude float64 // A_Q
	Gap                                                                            float64 // lowest unoccupied − highest occupied

	Counted              bool // whether kinks are defined here: a distorted chain near half filling
	Kinks, KinksDemanded int
}

// Levels are the one-electron levels of the relaxed chain.
type Levels struct {
	Energy    []float64 // ascending
	K         []float64 // the place of each level in the band of the undistorted chain, 0..π
	Tolerance float64   // of each energy; 0: exact but for rounding
}
