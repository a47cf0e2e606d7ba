package fermi

import "math"

// wideInverse does what sweep.secondNeighbours does, for any kind of chain of at
// least five sites, one pole at a time, in twice the precision and some thirty
// times the time.
type wideInverse struct {
	site []wideSite
}

type wideSite struct{ inverse, near, far, p, q wide }

// add adds a Re G_ii to density and 2a Re G_{i,i+1} to bond and returns
// ln |det A| and Σ_i Re G_{i,i+2}.
func (x *wideInverse) add(h *Hamiltonian, mu, s, a float64, density, bond []float64) (log, order float64) {
	n := len(h.Site)
	x.site = resize(x.site, n)
	shifted := func(i int) wide {
		z := widen(mu, s)
		return z.sub(widen(h.Site[i], 0))
	}
	t := widen(h.Next, 0)
	var pp, pq, qq wide
	var p, q [3]wide
	if h.Ring {
		n -= 2
		pp, pq, qq = shifted(n), widen(h.Bond[n], 0), shifted(n+1)
		p[0] = t
		q[0], q[1] = widen(h.Bond[n+1], 0), t
	}
	det, exponent := 1.0, 0
	gather := func(d wide) {
		det *= d.norm().hi
		f, e := math.Frexp(det)
		det = f
		exponent += e
	}
	var d1, d2, c1 wide
	for i := range n {
		v := &x.site[i]
		if h.Ring {
			switch i {
			case n - 1:
				p[0] = p[0].add(widen(h.Bond[i], 0))
				q[0] = q[0].add(t)
			case n - 2:
				p[0] = p[0].add(t)
			}
		}
		d := shifted(i).sub(d1)
		var c, f wide
		if i+1 < n {
			c = widen(h.Bond[i], 0).sub(c1)
		}
		if i+2 < n {
			f = t
		}
		gather(d)
		v.inverse = d.reciprocal()
		v.near, v.far = c.mul(v.inverse), f.mul(v.inverse)
		d1, d2, c1 = d2.add(v.near.mul(c)), v.far.mul(f), v.near.mul(f)
		if h.Ring {
			v.p, v.q = p[0].mul(v.inverse), q[0].mul(v.inverse)
			pp = pp.sub(v.p.mul(p[0]))
			pq = pq.sub(v.p.mul(q[0]))
			qq = qq.sub(v.q.mul(q[0]))
			p = [3]wide{p[1].sub(v.near.mul(p[0])), p[2].sub(v.far.mul(p[0]))}
			q = [3]wide{q[1].sub(v.near.mul(q[0])), q[2].sub(v.far.mul(q[0]))}
		}
	}
	if h.Ring {
		d := pp.mul(qq).sub(pq.mul(pq))
		gather(d)
		d = d.reciprocal()
		pp, pq, qq = qq.mul(d), pq.mul(d).neg(), pp.mul(d)
		density[n] += a * pp.re.hi
		density[n+1] += a * qq.re.hi
		bond[n] += 2 * a * pq.re.hi
	}
	log = 0.5 * (math.Log(det) + math.Ln2*float64(exponent))

	var g11, g12, g22, p1, p2, q1, q2 wide
	for i := n - 1; i >= 0; i-- {
		v := &x.site[i]
		g1 := v.near.mul(g11).add(v.far.mul(g12)).neg()
		g2 := v.near.mul(g12).add(v.far.mul(g22)).neg()
		g := v.inverse
		if h.Ring {
			g1 = g1.sub(v.p.mul(p1).add(v.q.mul(q1)))
			g2 = g2.sub(v.p.mul(p2).add(v.q.mul(q2)))
			p0 := v.near.mul(p1).add(v.far.mul(p2)).add(v.p.mul(pp)).add(v.q.mul(pq)).neg()
			q0 := v.near.mul(q1).add(v.far.mul(q2)).add(v.p.mul(pq)).add(v.q.mul(qq)).neg()
			g = g.sub(v.p.mul(p0).add(v.q.mul(q0)))
			p1, p2, q1, q2 = p0, p1, q0, q1
		}
		g = g.sub(v.near.mul(g1).add(v.far.mul(g2)))
		density[i] += a * g.re.hi
		switch {
		case i+2 < n:
			bond[i] += 2 * a * g1.re.hi
			order += g2.re.hi
		case i+2 == n:
			bond[i] += 2 * a * g1.re.hi
			order += p1.re.hi
		case h.Ring:
			bond[i] += 2 * a * p1.re.hi
			order += q1.re.hi
		}
		g11, g12, g22 = g, g1, g11
	}
	if h.Ring {
		bond[n+1] += 2 * a * q1.re.hi
		order += p1.re.hi + q2.re.hi
	}
	return log, order
}
