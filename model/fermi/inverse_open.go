package fermi

// open treats an open chain. With β_i = H_{i,i+1} = −Bond[i] elimination from
// the left and substitution from the right are
//
//	e_i = 1/(z − Site[i] − β_{i−1}² e_{i−1}),
//	G_{i,i+1} = β_i e_i G_{i+1,i+1},   G_ii = e_i (1 + β_i G_{i,i+1}).
func (w *sweep) open(h *Hamiltonian, density, bond []float64) {
	det := newProduct()
	var er, ei [width]float64
	w.forward(h, 0, len(h.Site), &er, &ei, &det)
	det.addTo(&w.log, 0.5)
	var gr, gi [width]float64
	w.backward(h, len(h.Site), 0, &gr, &gi, density, bond)
}

// forward eliminates sites from to to−1; (er, ei) is the inverse pivot of the
// site before and becomes that of the last one.
func (w *sweep) forward(h *Hamiltonian, from, to int, er, ei *[width]float64, det *product) {
	var b float64
	if from > 0 {
		b = h.Bond[from-1]
	}
	for i := from; i < to; i++ {
		x, bb := w.mu-h.Site[i], b*b
		c := &w.inverse[i]
		for l := range width {
			dr, di := x-bb*er[l], w.shift[l]-bb*ei[l]
			n := dr*dr + di*di
			det.mantissa[l] *= n
			n = 1 / n
			er[l], ei[l] = dr*n, -di*n
			c[l], c[width+l] = er[l], ei[l]
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

// backward substitutes from site from−1 down to site to; (gr, gi) is G of the
// site after and becomes that of the last one.
func (w *sweep) backward(h *Hamiltonian, from, to int, gr, gi *[width]float64, density, bond []float64) {
	for i := from - 1; i >= to; i-- {
		var b float64
		if i < len(bond) {
			b = -h.Bond[i]
		}
		c := &w.inverse[i]
		var n, p float64
		for l, a := range w.weight {
			er, ei := c[l], c[width+l]
			lr, li := b*er, b*ei
			or, oi := lr*gr[l]-li*gi[l], lr*gi[l]+li*gr[l]
			gr[l], gi[l] = er+lr*or-li*oi, ei+lr*oi+li*or
			n += a * gr[l]
			p += a * or
		}
		density[i] += n
		if i < len(bond) {
			bond[i] += 2 * p
		}
	}
}
