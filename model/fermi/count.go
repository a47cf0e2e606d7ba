package fermi

import "math"

// lanes is how many energies are counted in one sweep along the chain: enough
// that one energy's division is done while the others' are under way.
const lanes = 8

// leastPivot stands for a pivot that came out as zero: so small that it is a
// level displaced by nothing that matters, and its inverse is still far from
// overflow when squared.
const leastPivot = 1e-100

// A counter counts levels below an energy as the number of negative pivots of
// H − E (Sylvester's law of inertia).
type counter struct {
	h        *Hamiltonian
	banded   bool    // count in the band matrix only
	singular float64 // part of its elements to which a determinant may cancel
	band     band
	folded   bool // band holds h
	front    front
}

// reset turns to another chain.
func (c *counter) reset(h *Hamiltonian) {
	n := len(h.Site)
	c.h, c.folded = h, false
	c.banded = h.Next != 0 || h.Ring && n < 3
	c.singular = nearSingular / max(1, float64(n)/100)
}

// nearSingular is the part of its elements to which the determinant of a 2×2
// pivot may cancel. The next pivot is then wrong by 2⁻⁵³/nearSingular of the
// hopping at one place; a level spread over n sites moves by the n-th part of
// that, and among n pivots one of n times the size is to be expected, so the
// limit falls with the length beyond a hundred sites.
const nearSingular = 1e-5

// below stores the number of levels below each energy.
func (c *counter) below(energy *[lanes]float64, number *[lanes]int) {
	switch {
	case c.banded:
		for l, e := range energy {
			number[l] = c.belowBand(e)
		}
	case c.h.Ring:
		doubt := c.belowRing(energy, number)
		for l, e := range energy {
			if doubt[l] {
				number[l] = c.belowBand(e)
			}
		}
	default:
		c.belowOpen(energy, number)
	}
}

// belowBand counts one energy with full pivoting.
func (c *counter) belowBand(e float64) int {
	if !c.folded {
		c.band.assemble(c.h)
		c.folded = true
	}
	return c.front.below(&c.band, e)
}

func negative(x float64) int { return int(math.Float64bits(x) >> 63) }

// belowOpen is the Sturm sequence of a tridiagonal matrix,
// p_i = Site[i] − E − Bond[i−1]²/p_{i−1}; it is exact for a matrix whose
// elements differ by a few roundings (W. Kahan, 1966; from memory).
func (c *counter) belowOpen(energy *[lanes]float64, number *[lanes]int) {
	var pivot [lanes]float64
	for l := range pivot {
		pivot[l] = 1
	}
	*number = [lanes]int{}
	var b float64
	for i, a := range c.h.Site {
		bb := b * b
		for l, e := range energy {
			p := a - e - bb/pivot[l]
			if p == 0 {
				p = leastPivot
			}
			number[l] += negative(p)
			pivot[l] = p
		}
		if i < len(c.h.Bond) {
			b = c.h.Bond[i]
		}
	}
}

// belowRing eliminates a ring of at least three sites in pairs of sites
// j, N−1−j, that is, as a block tridiagonal matrix with 2×2 blocks
//
//	D_j = A_j − B_{j−1} D_{j−1}⁻¹ B_{j−1},   B_j = diag(Bond[j], Bond[N−2−j]),
//
// whose negative eigenvalues are one if det D < 0, else two if Tr D < 0. It
// tells for which energies a block came near to singular.
func (c *counter) belowRing(energy *[lanes]float64, number *[lanes]int) (doubt [lanes]bool) {
	site, bond := c.h.Site, c.h.Bond
	n := len(site)
	pairs := n / 2
	var p, q, r, det [lanes]float64 // D = (p q; q r)
	for l := range det {
		det[l] = 1
	}
	*number = [lanes]int{}
	var left, right float64
	for j := range pairs {
		a, b := site[j], site[n-1-j]
		off := 0.0
		if j == 0 {
			off -= bond[n-1]
		}
		if j == n-1-j-1 {
			off -= bond[j]
		}
		ll, rr, lr := left*left, right*right, left*right
		for l, e := range energy {
			inv := 1 / det[l]
			pl, ql, rl := a-e-ll*r[l]*inv, off+lr*q[l]*inv, b-e-rr*p[l]*inv
			qq := ql * ql
			d := pl*rl - qq
			if math.Abs(d) <= c.singular*qq && j < n-1-pairs {
				doubt[l] = true // unless nothing follows
			}
			if d == 0 {
				d = leastPivot
			}
			one, two := negative(d), negative(pl+rl)
			number[l] += one + 2*(two&^one)
			p[l], q[l], r[l], det[l] = pl, ql, rl, d
		}
		left, right = bond[j], bond[n-2-j]
	}
	if n%2 == 1 {
		for l, e := range energy {
			d := site[pairs] - e - (left*left*r[l]-2*left*right*q[l]+right*right*p[l])/det[l]
			number[l] += negative(d)
		}
	}
	return doubt
}
