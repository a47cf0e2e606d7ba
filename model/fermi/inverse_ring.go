package fermi

import "math"

// A border is what a sweep carries along a ring besides the open chain: the
// last site B and what couples to it.
type border struct {
	yr, yi [width]float64 // coupling of the site at hand to B
	sr, si [width]float64 // pivot of B, later its inverse G_BB
	gr, gi [width]float64 // G_{i+1,B}
}

// ring treats a ring of at least three sites as an open chain of n = N−1 sites
// whose ends couple to the last site B:
//
//	y_0 = β_{N−1},  m_i = y_i e_i,  y_{i+1} = β_i m_i,  y_{n−1} += β_{N−2},
//	1/G_BB = z − Site[B] − Σ m_i y_i,
//	G_{i,i+1} = l G_{i+1,i+1} + m_i G_{i+1,B},   l = β_i e_i,
//	G_iB = l G_{i+1,B} + m_i G_BB,
//	G_ii = e_i + l G_{i,i+1} + m_i G_iB.
//
// When a level lies within s of μ and the open chain has one there too, as with
// the pairs of a uniform ring, 1/G_BB is small and cancels out of numbers of
// order 1/s. Then the last row of (z − H) G = 1, which the substitution comes
// back to in the end, is missed by the relative error of G_BB.
//
// Couplings to B fade away from either end, in a gap exponentially; where they
// have, the chain is open.
func (w *sweep) ring(h *Hamiltonian, density, bond []float64) {
	last := len(h.Site) - 1
	det := newProduct()
	var b border
	for l := range width {
		b.yr[l] = -h.Bond[last]
		b.sr[l], b.si[l] = w.mu-h.Site[last], w.shift[l]
	}
	var er, ei [width]float64
	left := w.forwardBorder(h, 0, last-1, &er, &ei, &b, &det)
	w.forward(h, left, last-1, &er, &ei, &det)
	if left < last-1 {
		b.yr, b.yi = [width]float64{}, [width]float64{}
	}
	for l := range width {
		b.yr[l] -= h.Bond[last-1]
	}
	w.forwardBorder(h, last-1, last, &er, &ei, &b, &det)

	var gr, gi [width]float64
	var n, nn, p float64
	for l, a := range w.weight {
		d := b.sr[l]*b.sr[l] + b.si[l]*b.si[l]
		det.mantissa[l] *= d
		b.sr[l], b.si[l] = b.sr[l]/d, -b.si[l]/d
		e, m := &w.inverse[last-1], &w.border[last-1]
		b.gr[l] = m[l]*b.sr[l] - m[width+l]*b.si[l]
		b.gi[l] = m[l]*b.si[l] + m[width+l]*b.sr[l]
		gr[l] = e[l] + m[l]*b.gr[l] - m[width+l]*b.gi[l]
		gi[l] = e[width+l] + m[l]*b.gi[l] + m[width+l]*b.gr[l]
		n += a * b.sr[l]
		nn += a * gr[l]
		p += a * b.gr[l]
	}
	end := b // holds G_{n−1,B}
	det.settle()
	det.addTo(&w.log, 0.5)
	density[last] += n
	density[last-1] += nn
	bond[last-1] += 2 * p

	w.fade(h, last-1, left, &b)
	w.backward(h, last-1, left, &gr, &gi, density, bond)
	w.backwardBorder(h, left, &gr, &gi, &b, density, bond)
	p = 0
	x, y, z := w.mu-h.Site[last], h.Bond[last-1], h.Bond[last]
	for l, a := range w.weight {
		p += a * b.gr[l]
		s := w.shift[l]
		re := x*b.sr[l] - s*b.si[l] + y*end.gr[l] + z*b.gr[l] - 1
		im := x*b.si[l] + s*b.sr[l] + y*end.gi[l] + z*b.gi[l]
		w.miss(l, math.Hypot(re, im)*math.Hypot(b.sr[l], b.si[l]))
	}
	bond[last] += 2 * p
}

// forwardBorder eliminates sites from to to−1 like forward, with the border.
// It stops where the coupling to the border has faded and returns that site.
func (w *sweep) forwardBorder(h *Hamiltonian, from, to int, er, ei *[width]float64, y *border, det *product) int {
	var b float64
	if from > 0 {
		b = -h.Bond[from-1]
	}
	for i := from; i < to; i++ {
		x, bb := w.mu-h.Site[i], b*b
		b = -h.Bond[i]
		c, m := &w.inverse[i], &w.border[i]
		var all float64
		for l := range width {
			dr, di := x-bb*er[l], w.shift[l]-bb*ei[l]
			n := dr*dr + di*di
			det.mantissa[l] *= n
			n = 1 / n
			e, f := dr*n, -di*n
			er[l], ei[l] = e, f
			c[l], c[width+l] = e, f
			yr, yi := y.yr[l], y.yi[l]
			mr, mi := yr*e-yi*f, yr*f+yi*e
			m[l], m[width+l] = mr, mi
			y.sr[l] -= mr*yr - mi*yi
			y.si[l] -= mr*yi + mi*yr
			y.yr[l], y.yi[l] = b*mr, b*mi
			all += mr*mr + mi*mi
		}
		if i&w.mask == 0 {
			det.settle()
			if all < w.faded {
				return i + 1
			}
		}
	}
	det.settle()
	return to
}

// fade carries G_{i+1,B} from site from down to site to, where the sites do not
// couple to the border themselves.
func (w *sweep) fade(h *Hamiltonian, from, to int, b *border) {
	for i := from - 1; i >= to; i-- {
		t := -h.Bond[i]
		c := &w.inverse[i]
		var all float64
		for l := range width {
			lr, li := t*c[l], t*c[width+l]
			gr, gi := lr*b.gr[l]-li*b.gi[l], lr*b.gi[l]+li*b.gr[l]
			b.gr[l], b.gi[l] = gr, gi
			all += gr*gr + gi*gi
		}
		if i%8 == 0 && all < w.faded {
			b.gr, b.gi = [width]float64{}, [width]float64{}
			return
		}
	}
}

// backwardBorder substitutes from site from−1 down to site 0 like backward,
// with the border.
func (w *sweep) backwardBorder(h *Hamiltonian, from int, gr, gi *[width]float64, b *border, density, bond []float64) {
	for i := from - 1; i >= 0; i-- {
		t := -h.Bond[i]
		c, m := &w.inverse[i], &w.border[i]
		var n, p float64
		for l, a := range w.weight {
			er, ei := c[l], c[width+l]
			mr, mi := m[l], m[width+l]
			lr, li := t*er, t*ei
			br, bi := b.gr[l], b.gi[l]
			or := lr*gr[l] - li*gi[l] + mr*br - mi*bi
			oi := lr*gi[l] + li*gr[l] + mr*bi + mi*br
			nr := lr*br - li*bi + mr*b.sr[l] - mi*b.si[l]
			ni := lr*bi + li*br + mr*b.si[l] + mi*b.sr[l]
			b.gr[l], b.gi[l] = nr, ni
			gr[l] = er + lr*or - li*oi + mr*nr - mi*ni
			gi[l] = ei + lr*oi + li*or + mr*ni + mi*nr
			n += a * gr[l]
			p += a * or
		}
		density[i] += n
		bond[i] += 2 * p
	}
}
