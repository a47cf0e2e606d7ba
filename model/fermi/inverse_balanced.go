package fermi

// balanced tells whether the levels lie symmetric about an energy, whatever
// the hoppings, and which: equal site energies and hopping only between two
// sublattices. With half the levels filled that energy is the chemical
// potential at any temperature and every density is ½ per spin.
func (h *Hamiltonian) balanced() (middle float64, ok bool) {
	if h.Next != 0 || h.Ring && len(h.Site)%2 == 1 {
		return 0, false
	}
	for _, a := range h.Site {
		if a != h.Site[0] {
			return 0, false
		}
	}
	return h.Site[0], true
}

// balanced treats a balanced chain with μ in the middle, where all is real or
// imaginary and costs a third: in the formulas of open and ring put
//
//	e_i = −i ε_i,  m_i = (−i)^{i+1} μ_i,  G_ii = −i γ_i,  G_iB = (−i)^{i+2} g_i,  G_BB = −i/σ.
//
// A cell holds ε and μ. Nothing is to be added to the densities.
func (w *sweep) balanced(h *Hamiltonian, bond []float64) {
	n := len(h.Site)
	det := newProduct()
	var e, g [width]float64
	if !h.Ring {
		w.forwardReal(h, 0, n, &e, &det)
		det.addTo(&w.log, 1)
		w.backwardReal(h, n, 0, &g, bond)
		return
	}
	last := n - 1
	half := float64(1 - n/2%2*2) // (−1)^{N/2}
	var y, sigma [width]float64
	for l := range width {
		y[l], sigma[l] = -h.Bond[last], w.shift[l]
	}
	left := w.forwardBorderReal(h, 0, last-1, &e, &y, &sigma, &det)
	w.forwardReal(h, left, last-1, &e, &det)
	if left < last-1 {
		y = [width]float64{}
	}
	for l := range width {
		y[l] += half * h.Bond[last-1] // y = (−i)^{N−2} η
	}
	w.forwardBorderReal(h, last-1, last, &e, &y, &sigma, &det)

	var b [width]float64 // g
	var p float64
	c := &w.inverse[last-1]
	for l, a := range w.weight {
		det.mantissa[l] *= sigma[l]
		sigma[l] = 1 / sigma[l]
		b[l] = c[width+l] * sigma[l]
		g[l] = c[l] - c[width+l]*b[l]
		p += a * b[l]
	}
	det.settle()
	det.addTo(&w.log, 1)
	bond[last-1] += 2 * half * p
	end := b // g_{n−1}

	w.fadeReal(h, last-1, left, &b)
	w.backwardReal(h, last-1, left, &g, bond)
	w.backwardBorderReal(h, left, &g, &b, &sigma, bond)
	p = 0
	for l, a := range w.weight {
		p -= a * b[l]
		w.miss(l, (w.shift[l]*sigma[l]+half*h.Bond[last-1]*end[l]-h.Bond[last]*b[l]-1)*sigma[l])
	}
	bond[last] += 2 * p
}

func (w *sweep) forwardReal(h *Hamiltonian, from, to int, e *[width]float64, det *product) {
	var b float64
	if from > 0 {
		b = h.Bond[from-1]
	}
	for i := from; i < to; i++ {
		bb := b * b
		c := &w.inverse[i]
		for l := range width {
			d := w.shift[l] + bb*e[l]
			det.mantissa[l] *= d
			e[l] = 1 / d
			c[l] = e[l]
		}
		if i&w.mask == 0 {
			det.settle()
		}
		if i < len(h.Bond) {
			b = h.Bond[i]
		}
	}
	det.settle()
}

func (w *sweep) backwardReal(h *Hamiltonian, from, to int, g *[width]float64, bond []float64) {
	for i := from - 1; i >= to; i-- {
		var b float64
		if i < len(bond) {
			b = -h.Bond[i]
		}
		c := &w.inverse[i]
		var p float64
		for l, a := range w.weight {
			o := -b * c[l] * g[l]
			g[l] = c[l] * (1 + b*o)
			p += a * o
		}
		if i < len(bond) {
			bond[i] += 2 * p
		}
	}
}

func (w *sweep) forwardBorderReal(h *Hamiltonian, from, to int, e, y, sigma *[width]float64, det *product) int {
	var b float64
	if from > 0 {
		b = -h.Bond[from-1]
	}
	for i := from; i < to; i++ {
		bb := b * b
		b = -h.Bond[i]
		sign := float64(1 - i%2*2)
		c := &w.inverse[i]
		var all float64
		for l := range width {
			d := w.shift[l] + bb*e[l]
			det.mantissa[l] *= d
			d = 1 / d
			m := y[l] * d
			e[l], c[l], c[width+l] = d, d, m
			sigma[l] += sign * y[l] * m
			y[l] = b * m
			all += m * m
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

func (w *sweep) fadeReal(h *Hamiltonian, from, to int, b *[width]float64) {
	for i := from - 1; i >= to; i-- {
		c := &w.inverse[i]
		var all float64
		for l := range width {
			b[l] *= h.Bond[i] * c[l]
			all += b[l] * b[l]
		}
		if i%8 == 0 && all < w.faded {
			*b = [width]float64{}
			return
		}
	}
}

func (w *sweep) backwardBorderReal(h *Hamiltonian, from int, g, b, sigma *[width]float64, bond []float64) {
	for i := from - 1; i >= 0; i-- {
		t := -h.Bond[i]
		sign := float64(1 - i%2*2)
		c := &w.inverse[i]
		var p float64
		for l, a := range w.weight {
			lr, m := t*c[l], sign*c[width+l]
			o := m*b[l] - lr*g[l]
			b[l] = c[width+l]*sigma[l] - lr*b[l]
			g[l] = c[l] + lr*o - m*b[l]
			p += a * o
		}
		bond[i] += 2 * p
	}
}
