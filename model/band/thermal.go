package band

import "math"

// ChemicalPotential returns μ at temperature T ≥ 0 and fixed filling. It is
// −Inf for an empty and +Inf for a full band at T > 0.
//
// It solves ln n/(1−n) = ln f/(1−f) for the filling n(μ, T) of the band by
// Newton's method kept inside a bracket: both sides are nearly straight in μ
// in a cold band and in a hot one. Some level has occupation f exactly, hence
// μ − T ln f/(1−f) lies between the band's edges.
func (b Band) ChemicalPotential(T float64) float64 {
	s := b.surface()
	f := b.Filling / float64(b.Spin)
	switch {
	case T == 0:
		return s.energy
	case f <= 0:
		return math.Inf(-1)
	case f >= 1:
		return math.Inf(1)
	}
	bias := T * math.Log(f/(1-f))
	bottom, top := b.Edges()
	if bottom == top {
		return bottom + bias
	}
	excess, lo, hi := b.coldExcess(s, f, T), bottom+bias-s.energy, top+bias-s.energy
	x := math.Min(math.Max(0, lo), hi) // μ − E_F
	if b.Hot(T) {
		excess, x = b.hotExcess(s, f, T), (lo+hi)/2
	}
	const close = 1e-8 // of T, the scale on which the slope changes: the step after would be 1e-16 of it
	for range 100 {
		value, slope := excess(x)
		if value > 0 {
			hi = x
		} else {
			lo = x
		}
		step := -value / slope
		next := x + step
		if !(next >= lo && next <= hi) {
			next = (lo + hi) / 2
		}
		done := math.Abs(next-x) <= close*T
		x = next
		if done {
			break
		}
	}
	return s.energy + x
}

// coldExcess returns ln n/(1−n) − ln f/(1−f) and its derivative at
// μ = E_F + x, by the contour: n counts k itself, F(k) = k.
func (b Band) coldExcess(s surface, f, T float64) func(x float64) (value, slope float64) {
	c := b.branches(s)
	count := func(on *Branch, w *Wave) float64 { return on.departure(w) }
	overVelocity := func(w *Wave) complex128 { return 1 / w.Velocity }
	states := func(_ *Branch, w *Wave) float64 { return real(1 / w.Velocity) }
	bend := func(w *Wave) complex128 { // d²ε/dk²
		d2 := complex(2*b.Hopping, 0)*w.Cos + complex(8*b.NextHopping, 0)*(2*w.Cos*w.Cos-1)
		return -d2 / (w.Velocity * w.Velocity * w.Velocity)
	}
	return func(x float64) (float64, float64) {
		b.fill(c, x, T)
		dn, dos := c.sum(count, overVelocity), c.sum(states, bend)
		n := f + dn
		return math.Log1p(dn/f) - math.Log1p(-dn/(1-f)), dos / (n * (1 - n))
	}
}

// hotExcess is the same by the sum over equally spaced wave vectors.
func (b Band) hotExcess(s surface, f, T float64) func(x float64) (value, slope float64) {
	return func(x float64) (float64, float64) {
		var full, empty, slope float64
		b.eachHot(T, s.energy+x, func(_ float64, occupied, unoccupied float64) {
			full += occupied
			empty += unoccupied
			slope += occupied * unoccupied / T
		})
		return math.Log(full/empty) - math.Log(f/(1-f)), slope * (full + empty) / (full * empty)
	}
}

// eachHot visits Periodic equally spaced wave vectors with f and 1−f.
func (b Band) eachHot(T, mu float64, visit func(k, occupied, unoccupied float64)) {
	for i := range Periodic {
		k := 2 * math.Pi * float64(i) / Periodic
		x := (b.Energy(k) - mu) / T
		visit(k, 1/(1+math.Exp(x)), 1/(1+math.Exp(-x)))
	}
}

// BondOrder returns p = ⟨c†_{i+1}c_i + h.c.⟩ = (g_s/2π) ∫ 2cos k f dk at fixed
// filling; (2g_s/π) sin k_F in the band without t2 at T = 0.
func (b Band) BondOrder(T float64) float64 {
	if b.Hot(T) && b.Filling > 0 && b.Filling < float64(b.Spin) {
		var sum float64
		b.eachHot(T, b.ChemicalPotential(T), func(k, occupied, _ float64) {
			sum += 2 * math.Cos(k) * occupied
		})
		return sum * float64(b.Spin) / Periodic
	}
	p := b.Contour(T).sum(
		func(_ *Branch, w *Wave) float64 { return 2 * real(w.Sin) },
		func(w *Wave) complex128 { return 2 * w.Cos / w.Velocity })
	return p * float64(b.Spin)
}
