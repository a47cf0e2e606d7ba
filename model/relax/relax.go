// Package relax finds the lattice that minimises the free energy of electrons
// plus springs.
package relax

import "example.org/twokf/model/fermi"

// Lattice is a relaxed chain. Slices are never changed once it is published.
type Lattice struct {
	Stretch      []float64 // b_i = u_{i+1} − u_i; length N (ring) or N−1 (open), sum 0; nil without a bond phonon
	Displacement []float64 // u_i, zero mean, length N; nil without a bond phonon
	SiteMode     []float64 // q_i, zero mean, length N; nil without a site phonon

	Electrons fermi.State

	FreeEnergy    float64 // electrons plus springs, whole chain
	LatticeEnergy float64 // springs alone, whole chain
	Undistorted   float64 // free energy of the same chain with b = q = 0

	Residual   float64 // largest force left, in energy per unit of displacement
	Tolerance  float64 // what Residual was held against
	Converged  bool
	Iterations int

	Start string  // which start led here
	Tried []Start // every start and where it ended
}

// Start is one attempt and its outcome.
type Start struct {
	Name       string
	FreeEnergy float64
	Residual   float64
	Converged  bool
	Iterations int
}
