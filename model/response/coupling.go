package response

import (
	"math"

	"example.org/twokf/model"
	"example.org/twokf/model/band"
)

// bcs is 2e^γ/π, the T_P of weak coupling in units of ε_c e^{−1/λ}.
var bcs = 2 * math.Exp(eulerGamma) / math.Pi

const eulerGamma = 0.57721566490153286060651209008240243

// Couplings returns the dimensionless λ of each branch, the coefficient of the
// logarithm in Ω²(2kF)/ω² = 1 − λ ln(1.134 ε_c/T):
//
//	λ_bond = 4 g_s α²/(2π v_F K),   λ_site = g_s g²/(2π v_F K_s),
//
// and twice that at half filling, where 2kF and −2kF are the same. A λ is 0
// where its branch is not coupled, and both are 0 where v_F = 0 or where 2kF
// does not join Fermi points, in a band with two pairs of them.
func Couplings(c model.Chain) (bond, site float64) {
	perSite := logWeight(band.Of(c))
	return 4 * perSite * strength(c.Bond), perSite * strength(c.Site)
}

// logWeight is the coefficient of ln(1/T) in χ0(2kF).
func logWeight(b band.Band) float64 {
	v := b.FermiVelocity()
	if len(b.FermiPoints()) != 1 || v == 0 {
		return 0
	}
	weight := float64(b.Spin) / (2 * math.Pi * v)
	if b.Ordering() == math.Pi {
		weight *= 2
	}
	return weight
}

// WeakGap returns the full gap of the infinite chain in weak coupling,
//
//	2Δ = 4 ε_c e^{−1/λ},
//
// and 0 where λ is 0. The cutoff ε_c of each branch (4t for sites and 4t/e for
// bonds at half filling) is read off χ(2kF, T → 0), with t2 too. With both
// branches λ is the sum and
//
//	λ² ln ε_c = λ_b² ln ε_b + λ_s² ln ε_s + 2λ_bλ_s ln ε_sb,
//
// ε_sb being the cutoff of the mixed response; at half filling the branches do
// not mix, and the larger gap is returned.
func WeakGap(c model.Chain) float64 {
	b := band.Of(c)
	bond, site := Couplings(c)
	if bond == 0 && site == 0 {
		return 0
	}
	lo, hi := b.Edges()
	cold := 1e-30 * (hi - lo)
	bulk, err := NewBulk(b, cold)
	if err != nil {
		return 0
	}
	s, weight := bulk.At(b.Ordering()), logWeight(b)
	logCutoff := func(chi, weight float64) float64 { return chi/weight + math.Log(cold/bcs) }
	logBond, logSite := logCutoff(s.Bond, 4*weight), logCutoff(s.Site, weight)
	gap := func(lambda, logCutoff float64) float64 {
		if lambda == 0 {
			return 0
		}
		return 4 * math.Exp(logCutoff-1/lambda)
	}
	if b.Ordering() == math.Pi {
		return math.Max(gap(bond, logBond), gap(site, logSite))
	}
	lambda, logMixed := bond+site, logCutoff(math.Abs(s.Mixed), 2*weight)
	return gap(lambda, (bond*bond*logBond+site*site*logSite+2*bond*site*logMixed)/(lambda*lambda))
}
