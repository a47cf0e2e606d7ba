package fermi

import (
	"errors"
	"math"

	"gonum.org/v1/gonum/blas"
	"gonum.org/v1/gonum/blas/blas64"
	"gonum.org/v1/gonum/lapack"
	"gonum.org/v1/gonum/lapack/lapack64"
)

// dense solves by diagonalising the full matrix, at a cost of N³.
type dense struct {
	matrix  []float64 // N×N; the eigenvectors in its columns after diagonalise
	levels  []float64 // ascending
	weights []float64 // occupation of each level
	work    []float64
}

// diagonalise stores the levels of h, ascending, and their eigenvectors.
func (d *dense) diagonalise(h *Hamiltonian) error {
	n := len(h.Site)
	d.matrix = resize(d.matrix, n*n)
	d.levels = resize(d.levels, n)
	clear(d.matrix)
	h.elements(func(i, j int, v float64) {
		d.matrix[min(i, j)*n+max(i, j)] += v
	})
	a := blas64.Symmetric{N: n, Stride: n, Data: d.matrix, Uplo: blas.Upper}
	if len(d.work) < 3*n {
		var size [1]float64
		lapack64.Syev(lapack.EVCompute, a, d.levels, size[:], -1)
		d.work = make([]float64, int(size[0]))
	}
	if !lapack64.Syev(lapack.EVCompute, a, d.levels, d.work, len(d.work)) {
		return errors.New("fermi: diagonalisation did not converge")
	}
	return nil
}

// solve fills st.
func (d *dense) solve(h *Hamiltonian, occ Occupation, st *State) error {
	if err := d.diagonalise(h); err != nil {
		return err
	}
	n := len(h.Site)
	spin := float64(occ.Spin)
	perSpin := occ.Electrons / spin
	same := sameLevel(h.Bounds())
	s := shellOf(d.levels, perSpin, same)
	entropy, mu := d.occupy(s, perSpin, occ.Temperature, same)

	st.ChemicalPotential = mu
	st.Highest, st.Lowest, st.OpenShell = s.highest, s.lowest, s.open
	st.Entropy = spin * entropy
	st.Energy = 0
	for m, f := range d.weights {
		st.Energy += spin * f * d.levels[m]
	}
	st.FreeEnergy = st.Energy - occ.Temperature*st.Entropy
	for i := range st.Density {
		row := d.matrix[i*n : (i+1)*n]
		var sum float64
		for m, v := range row {
			sum += d.weights[m] * v * v
		}
		st.Density[i] = spin * sum
	}
	for i := range st.BondOrder {
		j := (i + 1) % n
		row, next := d.matrix[i*n:(i+1)*n], d.matrix[j*n:(j+1)*n]
		var sum float64
		for m, v := range row {
			sum += d.weights[m] * v * next[m]
		}
		st.BondOrder[i] = 2 * spin * sum
	}
	return nil
}

// occupy fills d.weights and returns the entropy per spin and the chemical
// potential.
func (d *dense) occupy(s shell, perSpin, temperature, same float64) (entropy, mu float64) {
	n := len(d.levels)
	d.weights = resize(d.weights, n)
	mu = s.fermiLevel()
	empty := math.IsInf(s.highest, -1) || math.IsInf(s.lowest, 1)
	if temperature <= coldest*same || empty {
		share := s.share(perSpin)
		for m := range d.weights {
			switch {
			case m < s.full:
				d.weights[m] = 1
			case m < s.reach:
				d.weights[m] = share
			default:
				d.weights[m] = 0
			}
		}
		if temperature > 0 {
			entropy = float64(s.reach-s.full) * mixing(share)
		}
		return entropy, mu
	}
	shift := chemicalPotential(d.levels, mu, perSpin, temperature)
	for m, e := range d.levels {
		f, local := fermiFunction((e - mu - shift) / temperature)
		d.weights[m] = f
		entropy += local
	}
	return entropy, mu + shift
}

// resize returns s with length n; what it held is kept only if it fits.
func resize[T any](s []T, n int) []T {
	if cap(s) < n {
		return make([]T, n)
	}
	return s[:n]
}
