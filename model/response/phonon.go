package response

import (
	"context"
	"math"

	"example.org/twokf/model"
)

// PhononAt returns the phonon of the uniform chain c at q, 0 ≤ q ≤ π, whose
// electrons answer with s = χ(q). An electron is scattered from k to k+q by
//
//	g Q + α B·2cos(k+q/2),   B = b_q e^{−iq/2} = 2i sin(q/2) u_q,
//
// so in the coordinates (√K B, √K_s Q) the stiffness and the squared
// frequencies are the real matrices
//
//	R = 1 − ⎡ βχ_b       √(βγ)χ_sb ⎤ ,   Ω²_ij = ω_i ω_j R_ij,   β = α²/K, γ = g²/K_s,
//	        ⎣ √(βγ)χ_sb  γχ0       ⎦
//
// with ω = ω_b sin(q/2) and ω_s (Su, Schrieffer, Heeger 1980; Holstein 1959;
// second-order perturbation theory). Ratio is the lowest eigenvalue of R.
//
// Where only one branch has a frequency, Lower is that branch with the other
// one held still. Where χ is infinite, Ratio and Lower are −Inf; if the two
// branches then mix, Upper has no value and is 0.
func PhononAt(c model.Chain, q float64, s Static) Phonon {
	bond, site := strength(c.Bond), strength(c.Site)
	p := Phonon{BondRatio: softened(bond, s.Bond), SiteRatio: softened(site, s.Site)}
	mixing := 0.0
	if bond != 0 && site != 0 {
		mixing = -math.Sqrt(bond*site) * s.Mixed
	}
	p.Ratio, _ = eigenvalues(p.BondRatio, p.SiteRatio, mixing)
	if c.Bond.Present {
		p.BareBond = c.Bond.Frequency * math.Sin(q/2)
	}
	if c.Site.Present {
		p.BareSite = c.Site.Frequency
	}
	hasBond, hasSite := c.Bond.Present && c.Bond.Frequency > 0, c.Site.Present && c.Site.Frequency > 0
	switch {
	case hasBond && hasSite:
		lower, upper := eigenvalues(squared(p.BareBond, p.BondRatio), squared(p.BareSite, p.SiteRatio), p.BareBond*p.BareSite*mixing)
		p.Lower, p.Upper = signedRoot(lower), signedRoot(upper)
	case hasBond:
		p.Lower = signedRoot(squared(p.BareBond, p.BondRatio))
	case hasSite:
		p.Lower = signedRoot(squared(p.BareSite, p.SiteRatio))
	}
	return p
}

// strength returns coupling²/stiffness, an energy; 0 for a branch that
// electrons do not feel.
func strength(b model.Phonon) float64 {
	if !b.Active() {
		return 0
	}
	return b.Coupling * b.Coupling / b.Stiffness
}

// softened returns 1 − strength·χ.
func softened(strength, chi float64) float64 {
	if strength == 0 {
		return 1 // also where χ is infinite
	}
	return 1 - strength*chi
}

// squared returns Ω² = ω²·ratio; a mode without stiffness at all (ω = 0) has
// none to lose.
func squared(bare, ratio float64) float64 {
	if bare == 0 {
		return 0
	}
	return bare * bare * ratio
}

func signedRoot(x float64) float64 { return math.Copysign(math.Sqrt(math.Abs(x)), x) }

// eigenvalues of the symmetric matrix with the diagonal a, b. An infinite
// off-diagonal element comes with infinite diagonal ones; then the lower
// eigenvalue is −Inf and the upper one unknown, 0.
func eigenvalues(a, b, off float64) (lower, upper float64) {
	if off == 0 || math.IsNaN(off) {
		return math.Min(a, b), math.Max(a, b)
	}
	if math.IsInf(off, 0) {
		return math.Inf(-1), 0
	}
	half, mean := math.Hypot((a-b)/2, off), (a+b)/2
	far := mean + math.Copysign(half, mean)
	if far == 0 {
		return -half, half
	}
	near := (a*b - off*off) / far // no cancellation but in the determinant itself
	return math.Min(far, near), math.Max(far, near)
}

// Softest returns the global minimum over q in (0, π] of the Ratio of the
// chain c whose electrons answer with bulk. Ratio is −Inf where χ diverges.
func Softest(ctx context.Context, c model.Chain, bulk *Bulk) (q, ratio float64, err error) {
	const resolution = 200
	return lowest(ctx, bulk.Grid(resolution)[1:], func(q float64) float64 {
		return PhononAt(c, q, bulk.At(q)).Ratio
	})
}
