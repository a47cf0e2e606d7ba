package fermi

import "math"

// poleTolerance is the largest error of the occupation f(ε) of any level, and so
// bounds that of densities and bond orders. The error changes sign from level
// to level, which leaves some 1e-13 of the hopping a site in the energy. Two
// digits more or less are three poles in twelve.
const poleTolerance = 1e-12

// poles stand for an occupation as a sum over poles on the line μ ± i s_p,
//
//	f(x) = ½ − ½ x Σ_p a_p/(x² + s_p²),   x = ε − μ,
//
// so that ρ = f(H) = ½ + ½ Σ_p a_p Re (μ + i s_p − H)⁻¹. The grand potential of
// one level, of which f is the derivative, is
//
//	ω(x) = ½ x − ¼ Σ_p a_p ln(x² + s_p²) − C.
type poles struct {
	weight, shift []float64 // a_p, s_p > 0
	constant      float64   // C
	inner, outer  float64   // good for inner ≤ |x| ≤ outer
}

// odd returns x Σ_p a_p/(x² + s_p²) = 1 − 2 f(x).
func (p *poles) odd(x float64) float64 {
	var sum float64
	for k, a := range p.weight {
		sum += a / (x*x + p.shift[k]*p.shift[k])
	}
	return x * sum
}

// match chooses the constant C so that ω follows exact on the average over the
// range in which levels may lie.
func (p *poles) match(exact func(x float64) float64) {
	const points = 16
	p.constant = 0
	for j := range points {
		x := p.inner + (p.outer-p.inner)*(float64(j)+0.5)/points
		w := 0.5*x - exact(x)
		for k, a := range p.weight {
			w -= 0.25 * a * math.Log(x*x+p.shift[k]*p.shift[k])
		}
		p.constant += w / points
	}
}

// narrower and wider are the room left when poles are made, so that they
// serve the next chains of a sequence too; wasteful is the part of the gap
// below which they are made anew. Each costs the logarithm of it, in per cent.
const (
	narrower = 0.9
	wider    = 1.03
	wasteful = 0.6
)

// covers tells whether the poles are good for levels at m to M from μ, and not
// much more.
func (p *poles) covers(m, M float64) bool {
	return len(p.weight) > 0 && p.inner <= m && p.outer >= M && p.inner >= wasteful*m && wasteful*p.outer <= M
}
