package response

import (
	"math"
	"testing"

	"example.org/twokf/model"
)

// λ = 4α²/(πtK) and g²/(πtK_s) at half filling with two spins; half of the
// general form 4g_sα²/(2πv_F K), g_s g²/(2πv_F K_s) is lost away from there.
func TestCouplings(t *testing.T) {
	c := model.Chain{
		Hopping: 2.5, Spin: 2, Filling: 1,
		Bond: model.Phonon{Present: true, Coupling: 4.1, Stiffness: 21}, // Su, Schrieffer, Heeger 1980
		Site: model.Phonon{Present: true, Coupling: 1, Stiffness: 3},
	}
	bond, site := Couplings(c)
	near(t, "λ_bond of polyacetylene", bond, 0.407679176133, 1e-12)
	near(t, "λ_site", site, 1/(math.Pi*2.5*3), 1e-15)
	c.Filling, c.NextHopping = 0.6, 0.3
	v := 5*math.Sin(0.3*math.Pi) + 1.2*math.Sin(0.6*math.Pi)
	bond, site = Couplings(c)
	near(t, "λ_bond", bond, 4*2*4.1*4.1/(2*math.Pi*v*21), 1e-14)
	near(t, "λ_site", site, 2/(2*math.Pi*v*3), 1e-14)
	c.Bond = model.Phonon{}
	if bond, _ = Couplings(c); bond != 0 {
		t.Errorf("λ of an absent branch is %v", bond)
	}
	for _, filling := range []float64{0, 2} {
		c.Filling = filling
		if bond, site = Couplings(c); bond != 0 || site != 0 || WeakGap(c) != 0 {
			t.Errorf("an empty or full band has λ = %v, %v", bond, site)
		}
	}
}

// 2Δ = 4ε_c e^{−1/λ} with ε_c = 4t and 4t/e at half filling, 4t sin²k_F/|cos k_F|
// for sites and e^{−2sin²k_F} of it for bonds elsewhere (derived for this
// project, confirmed by trapezoid sums).
func TestWeakGapAgainstClosedCutoffs(t *testing.T) {
	const lambda = 0.3
	near(t, "bond, half filling", WeakGap(halfFilled(true, lambda))/(16/math.E*math.Exp(-1/lambda)), 1, 1e-12)
	near(t, "site, half filling", WeakGap(halfFilled(false, lambda))/(16*math.Exp(-1/lambda)), 1, 1e-12)
	for _, f := range []float64{0.1, 0.25, 1.0 / 3, 0.37, 0.45, 0.7} {
		c := model.Chain{Hopping: 1, Spin: 2, Filling: 2 * f, Site: branchOf(0.7)}
		sin, cos := math.Sincos(math.Pi * f)
		cutoff := 4 * sin * sin / math.Abs(cos)
		_, l := Couplings(c)
		near(t, "site", WeakGap(c)/(4*cutoff*math.Exp(-1/l)), 1, 1e-11)
		c.Bond, c.Site = c.Site, model.Phonon{}
		l, _ = Couplings(c)
		near(t, "bond", WeakGap(c)/(4*cutoff*math.Exp(-2*sin*sin-1/l)), 1, 1e-11)
	}
}

// The exact gap of the half-filled chain against its weak-coupling form.
// Source: independent mpmath elliptic integrals; ratios as tabulated.
func TestWeakGapAgainstExactGap(t *testing.T) {
	bond := []float64{1.00034, 1.00201, 1.00630, 1.01402, 1.02531, 1.05745, 1.09951, 1.20237, 1.31934}
	site := []float64{0.99928, 0.99602, 0.98852, 0.97717, 0.96399, 0.94035, 0.92688, 0.93079, 0.96231}
	for i, c := range referenceHalf {
		near(t, "Δ0 over weak coupling, bond", 2*c.bondGap/WeakGap(halfFilled(true, c.lambda)), bond[i], 6e-6)
		near(t, "Δ0 over weak coupling, site", 2*c.siteGap/WeakGap(halfFilled(false, c.lambda)), site[i], 6e-6)
	}
}
