package band

import (
	"math"
	"math/cmplx"
	"sync"

	"gonum.org/v1/gonum/mat"
)

// A thermal average of a function X of the Fermi energy is
//
//	⟨X⟩ = ∫ dE (−f'(E−μ)) X(E),   X(E) = Re X⁺(E + i0),
//
// with X⁺ analytic in the upper half plane, where f has the poles
// z_n = μ + iπT(2n+1). Moving the path past the first P of them, to the line
// Im z = 2πTP on which f' takes the same values again, gives
//
//	⟨X⟩ = Re Σ_i w_i X⁺(μ + Tξ_i + 2πiTP) + 2πT Σ_{n<P} Im dX⁺/dz(z_n),
//
// w_i, ξ_i being the Gauss rule for the weight −f'. On the line X⁺ is smooth on
// the scale 2πTP ≫ T, so that a few points are exact to rounding at every T,
// near band edges as well as near logarithms. Derived for this project.
const (
	poles      = 12
	linePoints = 6
)

// Hot reports whether T is so high that a plain sum over Periodic wave vectors
// is exact to rounding and cheaper, and free of the cancellation between the
// line and the poles.
func (b Band) Hot(T float64) bool { return T > math.Abs(b.Hopping)+math.Abs(b.NextHopping) }

// Periodic is the number of equally spaced k over 2π that a sum over the band
// needs in a Hot band: Fermi factors are then analytic for |Im k| < 0.5, and
// the periodic trapezoid rule errs by exp(−0.5·Periodic).
const Periodic = 80

// Contour is the path above, and stands for the sum over Fermi points of T = 0.
// A function X(E) = (1/π) Σ_points ±F(k), F odd, has the average
//
//	⟨X⟩ = (1/π) Σ_branches [Σ_Line Weight·Re F(k) + Σ_Poles Weight·Im (dF/dk)/(dε/dk)].
//
// There is one branch without t2 and two with it.
type Contour []Branch

// Branch is one solution k of ε(k) = z along the contour. All its wave vectors
// depart from one point of the real axis: a Fermi point of T = 0 if there is
// one, else k = 0 or π, where damped waves end at T = 0.
type Branch struct {
	Fermi       bool
	Near, Far   float64 // that point, and π minus it
	CosNear     float64 // cos k at E_F; beyond ±1 without a Fermi point
	Line, Poles []Wave
}

// Wave is a complex wave vector k, 0 ≤ Re k ≤ π. Where cos k is compared with
// the cosine of something close to the Fermi point, use CosNear + Shift.
type Wave struct {
	Weight     float64    // signed
	Shift      complex128 // cos k − CosNear, accurate relative to itself
	Cos, Sin   complex128 // of k
	Cos2, Sin2 complex128 // of k/2
	Velocity   complex128 // dε/dk
}

// Contour returns the path at temperature T ≥ 0 and at the chemical potential
// that belongs to it. At T = 0 it is the Fermi points themselves. It is empty
// for an empty, full or flat band.
func (b Band) Contour(T float64) Contour {
	s := b.surface()
	if s.count == 0 {
		return nil
	}
	if T == 0 {
		var c Contour
		for _, p := range s.points[:s.count] {
			c = append(c, p.branch())
			last := &c[len(c)-1]
			last.Line = []Wave{b.wave(last, p.outward, 0)}
		}
		return c
	}
	c := b.branches(s)
	b.fill(c, b.ChemicalPotential(T)-s.energy, T)
	return c
}

func (p point) branch() Branch {
	return Branch{Fermi: true, Near: p.k, Far: p.supplement, CosNear: math.Cos(p.k)}
}

// branches returns the contour's branches with room for their waves.
func (b Band) branches(s surface) Contour {
	c := Contour{s.points[0].branch()}
	switch other := -b.Hopping/(2*b.NextHopping) - c[0].CosNear; {
	case s.count == 2:
		c = append(c, s.points[1].branch())
	case math.Abs(other) > 1e20: // includes t2 = 0: the second wave is infinitely damped
	case other > 0:
		c = append(c, Branch{Near: 0, Far: math.Pi, CosNear: other})
	default:
		c = append(c, Branch{Near: math.Pi, Far: 0, CosNear: other})
	}
	for i := range c {
		c[i].Line, c[i].Poles = make([]Wave, linePoints), make([]Wave, poles)
	}
	return c
}

// fill computes the waves for μ = E_F + shift.
func (b Band) fill(c Contour, shift, T float64) {
	nodes, weights := logisticRule()
	for i, xi := range nodes {
		cos := b.departures(c, complex(shift+T*xi, 2*math.Pi*T*poles))
		for j := range c {
			c[j].Line[i] = b.wave(&c[j], math.Copysign(weights[i], -imag(cos[j])), cos[j])
		}
	}
	for n := range poles {
		cos := b.departures(c, complex(shift, math.Pi*T*float64(2*n+1)))
		for j := range c {
			c[j].Poles[n] = b.wave(&c[j], math.Copysign(2*math.Pi*T, -imag(cos[j])), cos[j])
		}
	}
}

// departures returns cos k − CosNear of each branch at the energy E_F + zeta.
// With C = cos k, 4t2 C² + 2tC − 2t2 + z = 0, so they are ∓2ζ/(β + √(β² − 16 t2 ζ)),
// β = 2t + 8t2 C at E_F. Of ±k the one with Im k > 0 counts; where that is −k,
// Im C > 0, and the weight is negative.
func (b Band) departures(c Contour, zeta complex128) [2]complex128 {
	beta := 2*b.Hopping + 8*b.NextHopping*c[0].CosNear
	root := cmplx.Sqrt(complex(beta*beta, 0) - complex(16*b.NextHopping, 0)*zeta)
	if beta < 0 {
		root = -root
	}
	cos := -2 * zeta / (complex(beta, 0) + root)
	return [2]complex128{cos, -cos}
}

func (b Band) wave(on *Branch, weight float64, shift complex128) Wave {
	w := Wave{Weight: weight, Shift: shift}
	below, above := 1-on.CosNear, 1+on.CosNear
	if on.Fermi {
		s, c := math.Sin(on.Near/2), math.Sin(on.Far/2)
		below, above = 2*s*s, 2*c*c
	}
	w.Cos = complex(on.CosNear, 0) + shift
	w.Sin2, w.Cos2 = cmplx.Sqrt((complex(below, 0)-shift)/2), cmplx.Sqrt((complex(above, 0)+shift)/2)
	w.Sin = 2 * w.Sin2 * w.Cos2
	w.Velocity = w.Sin * (complex(2*b.Hopping, 0) + complex(8*b.NextHopping, 0)*w.Cos)
	return w
}

// departure returns Re k − Near, accurate relative to itself.
func (on *Branch) departure(w *Wave) float64 {
	if on.Fermi {
		sin, cos := complex(math.Sin(on.Near), 0), complex(on.CosNear, 0)
		s := -w.Shift*(2*cos+w.Shift)/(w.Sin+sin)*cos - w.Shift*sin // sin(k − Near)
		if s2 := s * s; cmplx.Abs(s) < 0.01 {
			return real(s * (1 + s2/6*(1+s2*9/20*(1+s2*25/42))))
		}
	}
	if on.Near > math.Pi/2 { // Re arccos, Kahan 1987
		return on.Far - 2*math.Atan(real(w.Cos2)/real(w.Sin2))
	}
	return 2*math.Atan(real(w.Sin2)/real(w.Cos2)) - on.Near
}

// sum returns ⟨X⟩ for a function F of k and its dF/dk over dε/dk.
func (c Contour) sum(f func(*Branch, *Wave) float64, slope func(*Wave) complex128) float64 {
	total := 0.0
	for i := range c {
		for j := range c[i].Line {
			w := &c[i].Line[j]
			total += w.Weight * f(&c[i], w)
		}
		for j := range c[i].Poles {
			w := &c[i].Poles[j]
			total += w.Weight * imag(slope(w))
		}
	}
	return total / math.Pi
}

// logisticRule returns the Gauss rule for the weight 1/(4cosh²(ξ/2)), whose
// monic orthogonal polynomials have the recurrence coefficients
// π²n⁴/(4n²−1) (continuous Hahn polynomials), by Golub and Welsch 1969.
var logisticRule = sync.OnceValues(func() (nodes, weights []float64) {
	jacobi := mat.NewSymDense(linePoints, nil)
	for n := 1; n < linePoints; n++ {
		x := float64(n)
		jacobi.SetSym(n-1, n, math.Pi*x*x/math.Sqrt(4*x*x-1))
	}
	var eigen mat.EigenSym
	if !eigen.Factorize(jacobi, true) {
		panic("band: a symmetric matrix of finite numbers has no eigenvalues")
	}
	var vectors mat.Dense
	eigen.VectorsTo(&vectors)
	nodes, weights = eigen.Values(nil), make([]float64, linePoints)
	for i := range weights {
		weights[i] = vectors.At(0, i) * vectors.At(0, i)
	}
	return nodes, weights
})
