package fermi

// A band is H in an order of the sites that keeps its elements near the
// diagonal: the natural order for an open chain, and 0, N−1, 1, N−2, … for a
// ring, folded flat like a belt, which doubles the half-bandwidth.
type band struct {
	n, width int       // order, number of off-diagonals on either side
	data     []float64 // element (k, k+d) at k*(width+1)+d
}

// assemble stores h.
func (b *band) assemble(h *Hamiltonian) {
	n := len(h.Site)
	b.n, b.width = n, 1
	if h.Next != 0 {
		b.width *= 2
	}
	if h.Ring {
		b.width *= 2
	}
	b.width = min(b.width, n-1)
	place := func(i int) int { return i }
	if h.Ring {
		place = func(i int) int { return min(2*i, 2*(n-1-i)+1) }
	}
	b.data = resize(b.data, n*(b.width+1))
	clear(b.data)
	h.elements(func(i, j int, v float64) {
		k, l := place(i), place(j)
		b.data[min(k, l)*(b.width+1)+max(k-l, l-k)] += v
	})
}

// at returns element (k, k+d), zero outside the matrix.
func (b *band) at(k, d int) float64 {
	if d > b.width || k+d >= b.n {
		return 0
	}
	return b.data[k*(b.width+1)+d]
}
