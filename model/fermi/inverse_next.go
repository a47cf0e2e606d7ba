package fermi

import (
	"math"
	"math/cmplx"
)

// nextInverse is the workspace for chains with second-neighbour hopping, one
// pole at a time. A = z − H is a band matrix with two off-diagonals; the last
// two sites P, Q of a ring are a border that both ends of the band couple to.
type nextInverse struct {
	site []nextSite
}

type nextSite struct {
	inverse   complex128 // 1/d_i
	near, far complex128 // L_{i+1,i}, L_{i+2,i}
	p, q      complex128 // L_{P,i}, L_{Q,i}
}

// add adds a Re G_ii to density and 2a Re G_{i,i+1} to bond and returns
// ln |det A|, Σ_i Re G_{i,i+2} and an estimate of the error of G, where G = A⁻¹
// and
//
//	A = L D Lᵀ,   L_{j,i} = A'_{j,i}/d_i,   A'_{j,k} = A_{j,k} − Σ_{i<k} L_{j,i} d_i L_{k,i} (j ≥ k),
//	G_{i,k} = −Σ_{j>i} L_{j,i} G_{j,k} (k > i),   G_ii = 1/d_i − Σ_{j>i} L_{j,i} G_{j,i}
//
// (K. Takahashi, J. Fagan, M. Chin, 8th PICA Conference, 1973; from memory).
// A ring has at least five sites.
func (x *nextInverse) add(h *Hamiltonian, z complex128, a float64, density, bond []float64) (log, order, miss float64) {
	n := len(h.Site)
	x.site = resize(x.site, n)
	t := complex(h.Next, 0)
	var pp, pq, qq complex128 // the block of the border
	var row complex128        // A G in its last row, see ring
	var p, q [3]complex128    // coupling of sites i, i+1, i+2 to it
	if h.Ring {
		n -= 2
		pp, pq, qq = z-complex(h.Site[n], 0), complex(h.Bond[n], 0), z-complex(h.Site[n+1], 0)
		p[0] = t
		q[0], q[1] = complex(h.Bond[n+1], 0), t
	}
	det := 1.0
	exponent := 0
	gather := func(v float64) {
		det *= v
		f, e := math.Frexp(det)
		det = f
		exponent += e
	}
	var d1, d2, c1 complex128 // what A'_{i,i}, A'_{i+1,i+1} and A'_{i,i+1} have lost
	for i := range n {
		s := &x.site[i]
		if h.Ring {
			switch i {
			case n - 1:
				p[0] += complex(h.Bond[i], 0)
				q[0] += t
			case n - 2:
				p[0] += t
			}
		}
		d := z - complex(h.Site[i], 0) - d1
		var c, f complex128
		if i+1 < n {
			c = complex(h.Bond[i], 0) - c1
		}
		if i+2 < n {
			f = t
		}
		s.inverse = reciprocal(d)
		gather(real(d)*real(d) + imag(d)*imag(d))
		s.near, s.far = c*s.inverse, f*s.inverse
		d1, d2, c1 = d2+s.near*c, s.far*f, s.near*f
		if h.Ring {
			s.p, s.q = p[0]*s.inverse, q[0]*s.inverse
			pp -= s.p * p[0]
			pq -= s.p * q[0]
			qq -= s.q * q[0]
			p = [3]complex128{p[1] - s.near*p[0], p[2] - s.far*p[0], 0}
			q = [3]complex128{q[1] - s.near*q[0], q[2] - s.far*q[0], 0}
		}
	}

	if h.Ring {
		d := pp*qq - pq*pq
		gather(real(d)*real(d) + imag(d)*imag(d))
		d = reciprocal(d)
		pp, pq, qq = qq*d, -pq*d, pp*d // now G
		density[n] += a * real(pp)
		density[n+1] += a * real(qq)
		bond[n] += 2 * a * real(pq)
		row = (z-complex(h.Site[n+1], 0))*qq + complex(h.Bond[n], 0)*pq
	}
	log = 0.5 * (math.Log(det) + math.Ln2*float64(exponent))

	var g11, g12, g22 complex128  // G of sites i+1, i+2
	var p1, p2, q1, q2 complex128 // and with P, Q
	for i := n - 1; i >= 0; i-- {
		s := &x.site[i]
		g1 := -(s.near*g11 + s.far*g12)
		g2 := -(s.near*g12 + s.far*g22)
		g := s.inverse
		if h.Ring {
			g1 -= s.p*p1 + s.q*q1
			g2 -= s.p*p2 + s.q*q2
			p0 := -(s.near*p1 + s.far*p2 + s.p*pp + s.q*pq)
			q0 := -(s.near*q1 + s.far*q2 + s.p*pq + s.q*qq)
			g -= s.p*p0 + s.q*q0
			p1, p2, q1, q2 = p0, p1, q0, q1
			if i == n-1 {
				row += t * q0
			}
		}
		g -= s.near*g1 + s.far*g2
		density[i] += a * real(g)
		switch {
		case i+2 < n:
			bond[i] += 2 * a * real(g1)
			order += real(g2)
		case i+2 == n:
			bond[i] += 2 * a * real(g1)
			order += real(p1) // zero on an open chain, like q1
		case h.Ring:
			bond[i] += 2 * a * real(p1)
			order += real(q1)
		}
		g11, g12, g22 = g, g1, g11
	}
	if h.Ring {
		bond[n+1] += 2 * a * real(q1)
		order += real(p1) + real(q2)
		row += complex(h.Bond[n+1], 0)*q1 + t*q2 - 1
		miss = cmplx.Abs(row) * cmplx.Abs(qq)
	}
	return log, order, miss
}

// reciprocal returns 1/z for a z that is far from overflow.
func reciprocal(z complex128) complex128 {
	x, y := real(z), imag(z)
	n := 1 / (x*x + y*y)
	return complex(x*n, -y*n)
}
