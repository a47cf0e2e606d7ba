package fermi

import "math"

// mostPoles is beyond what any gap that counts as a gap asks for.
const mostPoles = 100

// zolotarev sets the poles of the step at T = 0: the best rational
// approximation of given degree to the sign function on m ≤ |x| ≤ M,
//
//	sgn x ≈ x Σ_p a_p/(x² + s_p²),   s_p² = m² t_{2p−1},
//	a_p = D m ∏_{l<r} (t_{2l} − t_{2p−1}) / ∏_{l≠p} (t_{2l−1} − t_{2p−1}),
//	t_l = sc²(l K/2r; k),   k' = m/M,
//
// with as many poles r as it takes for an error of f below tolerance (E. I.
// Zolotarev, 1877; N. I. Achieser, Theory of Approximation, 1956, §50; from
// memory). It reports whether that was reached.
func (p *poles) zolotarev(m, M, tolerance float64) bool {
	r := max(1, int(math.Log(2/tolerance)*math.Log(4*M/m)/(math.Pi*math.Pi)))
	for ; r <= mostPoles; r++ {
		if p.sign(m, M, r) <= tolerance {
			p.inner, p.outer = m, M
			p.match(func(x float64) float64 { return min(x, 0) })
			return true
		}
	}
	*p = poles{}
	return false
}

// sign sets r poles and returns the largest error of f.
func (p *poles) sign(m, M float64, r int) float64 {
	dual := min(m/M, 1-1e-9) // k'; at k' = 1 the range is a point
	node := nodes(dual, r)
	p.weight, p.shift = resize(p.weight, r), resize(p.shift, r)
	for k := range r {
		t := node[2*k+1]
		a := m
		for l := range r {
			if l > 0 {
				a *= node[2*l] - t
			}
			if l != k {
				a /= node[2*l+1] - t
			}
		}
		p.weight[k], p.shift[k] = a, m*math.Sqrt(t)
	}
	// The error swings between extremes of equal size; two of opposite sign
	// are known in closed form.
	s0 := p.odd(m)
	s1 := p.odd(m * math.Sqrt((1+node[1])/(1+dual*dual*node[1])))
	for k := range p.weight {
		p.weight[k] *= 2 / (s0 + s1)
	}
	return math.Abs(s0-s1) / (s0 + s1) / 2
}

// nodes returns t_l = sc²(l K/2r; k) for 0 < l < 2r, by theta series in the
// nome of the complementary modulus, which converge the faster the smaller k'.
// Beyond the middle t_{2r−l} = 1/(k'² t_l).
func nodes(dual float64, r int) []float64 {
	k := math.Sqrt((1 - dual) * (1 + dual))
	quarter := math.Pi / 2 / mean(1, dual) // K
	other := math.Pi / 2 / mean(1, k)      // K'
	t := make([]float64, 2*r)
	lnq := -math.Pi * quarter / other
	for l := 1; l <= r; l++ {
		z := math.Pi * quarter * float64(l) / float64(2*r) / (2 * other)
		var above, below float64
		below = 1
		sign := 1.0
		for n := range 20 {
			h := float64(n) + 0.5
			// The hyperbolic functions alone would overflow.
			grow := math.Exp(lnq*h*h+2*h*z) - math.Exp(lnq*h*h-2*h*z)
			above += sign * grow
			sign = -sign
			j := float64(n + 1)
			wave := math.Exp(lnq*j*j+2*j*z) + math.Exp(lnq*j*j-2*j*z)
			below += sign * wave
			if math.Abs(grow) < 1e-18*math.Abs(above) && wave < 1e-18 {
				break
			}
		}
		sc := above / (math.Sqrt(dual) * below)
		t[l] = sc * sc
		t[2*r-l] = 1 / (dual * dual * t[l])
	}
	return t
}

// mean is the arithmetic–geometric mean of a and b.
func mean(a, b float64) float64 {
	for range 40 {
		if math.Abs(a-b) <= 1e-15*a {
			break
		}
		a, b = (a+b)/2, math.Sqrt(a*b)
	}
	return a
}
