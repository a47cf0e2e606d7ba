package fermi

import "math/cmplx"

// A nextSite is what elimination leaves of a site of a chain with
// second-neighbour hopping, for each pole of a sweep.
type nextSite struct {
	inverse   [width]complex128 // 1/d_i
	near, far [width]complex128 // L_{i+1,i}, L_{i+2,i}
	p, q      [width]complex128 // L_{P,i}, L_{Q,i}; not set between the two ends of a ring
}

// A nextBorder are the last two sites P, Q of a ring, a border that both ends
// of the band couple to.
type nextBorder struct {
	pp, pq, qq [width]complex128 // its block of A, later of G
	row        [width]complex128 // A G in its last row, see ring
	left       int               // from here to the last two sites of the band nothing couples to it
}

// secondNeighbours treats a chain with second-neighbour hopping (a ring has at
// least five sites). A = z − H is a band matrix with two off-diagonals, and
//
//	A = L D Lᵀ,   L_{j,i} = A'_{j,i}/d_i,   A'_{j,k} = A_{j,k} − Σ_{i<k} L_{j,i} d_i L_{k,i} (j ≥ k),
//	G_{i,k} = −Σ_{j>i} L_{j,i} G_{j,k} (k > i),   G_ii = 1/d_i − Σ_{j>i} L_{j,i} G_{j,i}
//
// (K. Takahashi, J. Fagan, M. Chin, 8th PICA Conference, 1973; from memory).
func (w *sweep) secondNeighbours(h *Hamiltonian, density, bond []float64) {
	w.next = resize(w.next, len(h.Site))
	var b nextBorder
	det := newProduct()
	w.forwardNext(h, &b, &det)
	if h.Ring {
		n := len(h.Site) - 2
		var x, y, z float64
		for l, a := range w.weight {
			d := b.pp[l]*b.qq[l] - b.pq[l]*b.pq[l]
			det.mantissa[l] *= square(d)
			d = reciprocal(d)
			b.pp[l], b.pq[l], b.qq[l] = b.qq[l]*d, -b.pq[l]*d, b.pp[l]*d
			b.row[l] = w.shifted(l, h.Site[n+1])*b.qq[l] + scaled(h.Bond[n], b.pq[l]) - 1
			x += a * real(b.pp[l])
			y += a * real(b.qq[l])
			z += a * real(b.pq[l])
		}
		density[n] += x
		density[n+1] += y
		bond[n] += 2 * z
		det.settle()
	}
	det.addTo(&w.log, 0.5)
	w.backwardNext(h, &b, density, bond)
}

// shifted returns z − energy.
func (w *sweep) shifted(l int, energy float64) complex128 {
	return complex(w.mu-energy, w.shift[l])
}

// forwardNext eliminates the band from the left.
func (w *sweep) forwardNext(h *Hamiltonian, b *nextBorder, det *product) {
	n := len(h.Site)
	t := h.Next
	var p0, p1, q0, q1 [width]complex128 // coupling of sites i, i+1 to P, Q
	if h.Ring {
		n -= 2
		for l := range width {
			b.pp[l], b.pq[l], b.qq[l] = w.shifted(l, h.Site[n]), complex(h.Bond[n], 0), w.shifted(l, h.Site[n+1])
			p0[l], q0[l], q1[l] = complex(t, 0), complex(h.Bond[n+1], 0), complex(t, 0)
		}
	}
	b.left = n
	coupled := h.Ring
	var d1, d2, c1 [width]complex128 // what A'_{i,i}, A'_{i+1,i+1} and A'_{i,i+1} have lost
	for i := range n {
		s := &w.next[i]
		var c, f float64
		if i+1 < n {
			c = h.Bond[i]
		}
		if i+2 < n {
			f = t
		}
		for l := range width {
			d := w.shifted(l, h.Site[i]) - d1[l]
			det.mantissa[l] *= square(d)
			e := reciprocal(d)
			v := complex(c, 0) - c1[l]
			near, far := v*e, scaled(f, e)
			d1[l], d2[l], c1[l] = d2[l]+near*v, scaled(f, far), scaled(f, near)
			s.inverse[l], s.near[l], s.far[l] = e, near, far
		}
		if i&w.mask == 0 {
			det.settle()
		}
		if h.Ring && i >= n-2 {
			coupled = true
			for l := range width {
				if i == n-1 {
					p0[l] += complex(h.Bond[i], 0)
					q0[l] += complex(t, 0)
				} else {
					p0[l] += complex(t, 0)
				}
			}
		}
		if !coupled {
			continue
		}
		var all float64
		for l := range width {
			p, q := p0[l]*s.inverse[l], q0[l]*s.inverse[l]
			b.pp[l] -= p * p0[l]
			b.pq[l] -= p * q0[l]
			b.qq[l] -= q * q0[l]
			p0[l], p1[l] = p1[l]-s.near[l]*p0[l], -s.far[l]*p0[l]
			q0[l], q1[l] = q1[l]-s.near[l]*q0[l], -s.far[l]*q0[l]
			s.p[l], s.q[l] = p, q
			all += square(p) + square(q) + square(p1[l]*s.inverse[l]) + square(q1[l]*s.inverse[l])
		}
		if i%8 == 0 && i < n-10 && all < w.faded {
			coupled, b.left = false, i+1
			p0, p1 = [width]complex128{}, [width]complex128{}
			q0, q1 = p0, p1
		}
	}
	det.settle()
}

// backwardNext substitutes from the right.
func (w *sweep) backwardNext(h *Hamiltonian, b *nextBorder, density, bond []float64) {
	n := len(h.Site)
	if h.Ring {
		n -= 2
	}
	var g11, g12, g22 [width]complex128  // G of sites i+1, i+2
	var p1, p2, q1, q2 [width]complex128 // and with P, Q
	carried := h.Ring
	for i := n - 1; i >= 0; i-- {
		s := &w.next[i]
		ends := h.Ring && (i < b.left || i >= n-2)
		var x, y, z float64
		for l, a := range w.weight {
			near, far := s.near[l], s.far[l]
			g1 := -(near*g11[l] + far*g12[l])
			g2 := -(near*g12[l] + far*g22[l])
			g := s.inverse[l]
			if ends {
				sp, sq := s.p[l], s.q[l]
				g1 -= sp*p1[l] + sq*q1[l]
				g2 -= sp*p2[l] + sq*q2[l]
				p := -(near*p1[l] + far*p2[l] + sp*b.pp[l] + sq*b.pq[l])
				q := -(near*q1[l] + far*q2[l] + sp*b.pq[l] + sq*b.qq[l])
				g -= sp*p + sq*q
				p1[l], p2[l], q1[l], q2[l] = p, p1[l], q, q1[l]
			}
			g -= near*g1 + far*g2
			g11[l], g12[l], g22[l] = g, g1, g11[l]
			x += a * real(g)
			y += a * real(g1)
			z += a * real(g2)
		}
		if carried && !ends {
			var all float64
			for l := range width {
				p := -(s.near[l]*p1[l] + s.far[l]*p2[l])
				q := -(s.near[l]*q1[l] + s.far[l]*q2[l])
				p1[l], p2[l], q1[l], q2[l] = p, p1[l], q, q1[l]
				all += square(p) + square(q) + square(p2[l]) + square(q2[l])
			}
			if i%8 == 0 && all < w.faded {
				carried = false
				p1, p2 = [width]complex128{}, [width]complex128{}
				q1, q2 = p1, p2
			}
		}
		density[i] += x
		if i+1 < n {
			bond[i] += 2 * y
		}
		if i+2 < n {
			w.order += 2 * z
			continue
		}
		if !h.Ring {
			continue
		}
		for l, a := range w.weight {
			if i+2 == n {
				w.order += 2 * a * real(p1[l])
				continue
			}
			bond[i] += 2 * a * real(p1[l])
			w.order += 2 * a * real(q1[l])
			b.row[l] += scaled(h.Next, q1[l])
		}
	}
	if !h.Ring {
		return
	}
	var x float64
	for l, a := range w.weight {
		x += a * real(q1[l])
		w.order += 2 * a * (real(p1[l]) + real(q2[l]))
		b.row[l] += scaled(h.Bond[n+1], q1[l]) + scaled(h.Next, q2[l])
		w.miss(l, cmplx.Abs(b.row[l])*cmplx.Abs(b.qq[l]))
	}
	bond[n+1] += 2 * x
}

// reciprocal returns 1/z for a z that is far from overflow.
func reciprocal(z complex128) complex128 {
	n := 1 / square(z)
	return complex(real(z)*n, -imag(z)*n)
}

// scaled returns x z.
func scaled(x float64, z complex128) complex128 { return complex(x*real(z), x*imag(z)) }

// square returns |z|².
func square(z complex128) float64 { return real(z)*real(z) + imag(z)*imag(z) }
