package response

import (
	"math"

	"example.org/twokf/model/band"
)

// At T = 0 the response of the infinite chain is a sum over the Fermi points
// k > 0 where occupied states lie inside (+) or outside (−),
//
//	χ_w(q) = (g_s/π) Σ ± [W(k+q/2) − W(k−q/2)],   dW/ds = w(s)/[ε(s+q/2) − ε(s−q/2)],
//	ε(s+q/2) − ε(s−q/2) = σ sin s (a + b cos s),  σ = sin(q/2), a = 4t, b = 16 t2 cos(q/2).
//
// Partial fractions in cos s give W in logarithms. At T > 0 the same functions
// of a complex k are summed over a band.Contour. Without t2 this is the closed
// form χ0 = g_s/(4πtσ) ln|(σ+sin k)/(σ−sin k)|, and χ_b = 4χ0 − p/t. Derived for
// this project.
//
// wavevector holds what depends on q alone.
type wavevector struct {
	half       float64 // q/2
	sin, cos   float64 // σ and cos(q/2)
	sin2, cos2 float64 // of q/4
	a, b       float64
}

// newWavevector expects 0 ≤ q ≤ π.
func newWavevector(t, t2, q float64) wavevector {
	v := wavevector{half: q / 2, sin: math.Sin(q / 2), cos: math.Sin((math.Pi - q) / 2), a: 4 * t}
	v.sin2, v.cos2 = math.Sincos(q / 4)
	v.b = 16 * t2 * v.cos
	return v
}

// branch is a band.Branch with what does not depend on q.
type branch struct {
	band.Branch
	overVelocity []complex128 // of the poles
}

// cosines returns cos k − cos(q/2) and cos k + cos(q/2) at the point from which
// the branch departs, accurate relative to themselves where they vanish.
func (on *branch) cosines(v *wavevector) (minus, plus complex128) {
	switch {
	case on.Fermi:
	case on.Near == 0:
		return complex((on.CosNear-1)+2*v.sin2*v.sin2, 0), complex(on.CosNear+v.cos, 0)
	default:
		return complex(on.CosNear-v.cos, 0), complex((on.CosNear+1)-2*v.sin2*v.sin2, 0)
	}
	away := (on.Near - v.half) / 2
	s, c := math.Sincos(away)
	return complex(-2*s*math.Sin(away+v.half), 0), complex(2*c*math.Sin((on.Far-v.half)/2), 0)
}

// sum returns the branch's part of χ, without the factor g_s/π.
func (on *branch) sum(v *wavevector) (total Static) {
	minus, plus := on.cosines(v)
	for i := range on.Line {
		w := &on.Line[i]
		total.add(w.Weight, logs(w, v, minus+w.Shift, plus+w.Shift))
	}
	for i := range on.Poles {
		w := &on.Poles[i]
		total.add(w.Weight, residue(w, on.overVelocity[i], v, minus+w.Shift, plus+w.Shift))
	}
	return total
}

// logs returns Re[W(k+q/2) − W(k−q/2)] for the three vertices.
//
// With X = 1 − cos(k+q/2), Y = 1 + cos(k−q/2), u± = a + b cos(k±q/2), the two
// poles of 1/D at cos s = ±1 contribute
//
//	L₊ = ln|X² u₋ / (cos k − cos q/2)² u₊| / 2σ(a+b),
//	L₋ = ln|Y² u₊ / (cos k + cos q/2)² u₋| / 2σ(a−b),
//
// and the bond vertex adds ln|u₊/u₋|/σb.
//
// minus and plus are cos k ∓ cos(q/2).
func logs(w *band.Wave, v *wavevector, minus, plus complex128) Static {
	sin2, cos2 := complex(v.sin2, 0), complex(v.cos2, 0)
	x := w.Sin2*cos2 + w.Cos2*sin2
	y := w.Cos2*cos2 + w.Sin2*sin2
	x, y = 2*x*x, 2*y*y
	mean := complex(v.a, 0) + complex(v.b*v.cos, 0)*w.Cos
	away := complex(v.b*v.sin, 0) * w.Sin
	above, below := nonzero(mean-away), nonzero(mean+away)
	lp := logRatio(x*x*below, minus, above, w.Sin*x, v.sin*(v.a+v.b))
	lm := logRatio(y*y*above, plus, below, w.Sin*y, v.sin*(v.a-v.b))
	lu := logDifference(norm2(above), norm2(below), dot(w.Sin, mean), -4*v.sin*v.b) * -2
	return Static{Site: lp + lm, Mixed: 2 * (lp - lm), Bond: 4 * (lp + lm + lu)}
}

// logRatio returns ln|num/(p²u)|/2d where num = p²u + 2d·rest. It is infinite
// for p = 0.
func logRatio(num, p, u, rest complex128, d float64) float64 {
	den := p * p * u
	n2, d2 := norm2(num), norm2(den)
	if n2 > 2*d2 { // |p|⁴ may have underflowed
		return (math.Log(n2) - 2*math.Log(norm2(p)) - math.Log(norm2(u))) / (4 * d)
	}
	return logDifference(n2, d2, dot(rest, num+den), 2*d) / 2
}

// logDifference returns (ln n2 − ln d2)/d where n2 = d2 + d·slope, which becomes
// slope/d2 for d → 0.
func logDifference(n2, d2, slope, d float64) float64 {
	if n2 < d2/2 || n2 > 2*d2 {
		return (math.Log(n2) - math.Log(d2)) / d
	}
	slope /= d2
	x := slope * d
	if math.Abs(x) < 1e-8 {
		return slope * (1 - x/2)
	}
	return slope * math.Log1p(x) / x
}

// nonzero keeps u± = 0 at T = 0, where q joins two different Fermi points and
// L₊ + L₋ is infinite, from turning into Inf − Inf. Rounding of k has long
// blurred that point: the response is then large instead of infinite.
func nonzero(u complex128) complex128 {
	if u == 0 {
		return 1e-20
	}
	return u
}

func dot(z, w complex128) float64 { return real(z)*real(w) + imag(z)*imag(w) }

func norm2(z complex128) float64 { return dot(z, z) }

// residue returns the imaginary part of d/dk[W(k+q/2) − W(k−q/2)]/(dε/dk), which
// is a rational function of cos k.
func residue(w *band.Wave, overVelocity complex128, v *wavevector, minus, plus complex128) Static {
	c := w.Cos
	a, b, bcos := complex(v.a, 0), complex(v.b, 0), complex(v.b*v.cos, 0)
	product := c*c - complex(v.sin*v.sin, 0) // cos(k+q/2) cos(k−q/2)
	twins := minus * plus
	den := twins * (a*a + 2*a*bcos*c + b*b*product)
	over := overVelocity * complex(real(den), -imag(den)) * complex(1/norm2(den), 0)
	site := (a*c + bcos*(2*c*c-1)) * over
	mixed := (a*complex(v.cos, 0) + b*c*product) * over
	bond := (a*c + bcos) * over * twins
	return Static{Site: 2 * imag(site), Mixed: 4 * imag(mixed), Bond: 8 * imag(site-bond)}
}

func (s *Static) add(weight float64, t Static) {
	s.Site += weight * t.Site
	s.Bond += weight * t.Bond
	s.Mixed += weight * t.Mixed
}
