package fermi

import (
	"context"
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/lapack/gonum"
)

// longestSpectrum is the longest chain all of whose levels are found: the last
// step takes N² and cannot be interrupted; at 10 000 sites it is about 3 s.
const longestSpectrum = 10_000

// Levels appends all levels of h, ascending, to dst[:0] and returns it, at a
// cost of N². It returns an error when an element of h is not finite, when the
// chain is longer than 10 000 sites, and the cause when ctx ends.
func (s *Solver) Levels(ctx context.Context, dst []float64, h *Hamiltonian) ([]float64, error) {
	if err := context.Cause(ctx); err != nil {
		return nil, err
	}
	if err := h.check(); err != nil {
		return nil, err
	}
	n := len(h.Site)
	if n > longestSpectrum {
		return nil, fmt.Errorf("fermi: all levels of a chain of %d sites were asked for, want at most %d", n, longestSpectrum)
	}
	t := &s.levels
	t.band.assemble(h)
	if err := t.reduce(ctx); err != nil {
		return nil, err
	}
	dst = append(dst[:0], t.diagonal...)
	if n > 1 && !(gonum.Implementation{}).Dsterf(n, dst, t.off) {
		return nil, errors.New("fermi: the levels did not converge")
	}
	return dst, nil
}

// tridiagonal is a band matrix on its way to tridiagonal form.
type tridiagonal struct {
	band          band
	data          []float64 // like band.data with one more off-diagonal, for the bulge
	stride        int
	diagonal, off []float64
}

// reduce makes the band tridiagonal, removing one off-diagonal after another.
// Each element of it is rotated away with its neighbour, which makes a bulge
// outside the band that is rotated on, by the bandwidth each time, until it
// leaves the matrix (H. Rutishauser, Proc. Symp. Appl. Math. 15, 219 (1963);
// H. R. Schwarz, Numer. Math. 12, 231 (1968)).
func (t *tridiagonal) reduce(ctx context.Context) error {
	b := &t.band
	n := b.n
	t.stride = b.width + 2
	t.data = resize(t.data, n*t.stride)
	for k := range n {
		for d := range t.stride {
			t.data[k*t.stride+d] = b.at(k, d)
		}
	}
	for width := b.width; width > 1; width-- {
		for k := range n - width {
			if err := context.Cause(ctx); err != nil {
				return err
			}
			for row, q := k, k+width; q < n; row, q = q-1, q+width {
				if !t.rotate(row, q, width) {
					break
				}
			}
		}
	}
	t.diagonal, t.off = resize(t.diagonal, n), resize(t.off, max(n-1, 0))
	for k := range n {
		t.diagonal[k] = t.data[k*t.stride]
		if k < n-1 {
			t.off[k] = t.data[k*t.stride+1]
		}
	}
	return nil
}

// rotate turns rows and columns q−1 and q so that element (row, q) vanishes,
// and tells whether there was anything to do.
func (t *tridiagonal) rotate(row, q, width int) bool {
	a, m := t.data, t.stride
	p := q - 1
	x, y := a[row*m+p-row], a[row*m+q-row]
	if y == 0 {
		return false
	}
	r := math.Hypot(x, y)
	c, s := x/r, y/r
	for j := max(0, p-width); j < p; j++ {
		v := a[j*m+p-j : j*m+q-j+1]
		v[0], v[1] = c*v[0]+s*v[1], c*v[1]-s*v[0]
	}
	a[row*m+q-row] = 0
	pp, pq, qq := a[p*m], a[p*m+1], a[q*m]
	a[p*m] = c*c*pp + 2*c*s*pq + s*s*qq
	a[q*m] = s*s*pp - 2*c*s*pq + c*c*qq
	a[p*m+1] = (c*c-s*s)*pq + c*s*(qq-pp)
	for j := q + 1; j <= min(q+width, len(a)/m-1); j++ {
		v, w := a[p*m+j-p], a[q*m+j-q]
		a[p*m+j-p], a[q*m+j-q] = c*v+s*w, c*w-s*v
	}
	return true
}
