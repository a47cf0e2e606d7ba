package response

import (
	"context"
	"errors"
	"math"
	"testing"

	"example.org/twokf/model"
	"example.org/twokf/model/band"
	"gonum.org/v1/gonum/integrate/quad"
)

// T_P of the half-filled chain at nine λ. Source: independent mpmath
// quadrature of the linearised gap equation, 12 trusted digits.
func TestTransitionAtHalfFilling(t *testing.T) {
	for _, c := range referenceHalf {
		for _, bond := range []bool{true, false} {
			want := c.siteT
			if bond {
				want = c.bondT
			}
			at2kF, first, q := transition(t, halfFilled(bond, c.lambda))
			near(t, "T_P", at2kF/want, 1, 1e-11)
			if first != at2kF || q != math.Pi {
				t.Errorf("first unstable at %v with q = %v, want %v with π", first, q, at2kF)
			}
		}
	}
}

func TestTransitionAgainstReference(t *testing.T) {
	for _, c := range referenceTransition {
		m := model.Chain{Hopping: 1, Spin: c.spin, Filling: c.f * float64(c.spin)}
		if c.bond {
			m.Bond = branchOf(c.strength)
		} else {
			m.Site = branchOf(c.strength)
		}
		at2kF, first, _ := transition(t, m)
		near(t, "T_P", at2kF/c.T, 1, 1e-10)
		if first < at2kF {
			t.Errorf("first unstable at %v, 2kF at %v", first, at2kF)
		}
		bond, site := Couplings(m)
		near(t, "λ", bond+site, c.lambda, 1e-12)
	}
}

// At the T_P found, the linearised gap equation of the half-filled chain holds:
// 1/λ = 2t∫₀^{π/2} w(k) tanh(E/2T)/E dk, E = 2t cos k, w = sin²k for bonds and
// 1 for sites (Su, Schrieffer, Heeger 1980, from memory). Source of the
// integral: Gauss-Legendre quadrature, gonum v0.17.0.
func TestTransitionSolvesTheGapEquation(t *testing.T) {
	for _, bond := range []bool{true, false} {
		for _, lambda := range []float64{0.3, 0.45, 0.7, 1.2} {
			T, _, _ := transition(t, halfFilled(bond, lambda))
			f := func(k float64) float64 {
				e := 2 * math.Cos(k)
				if bond {
					return 2 * math.Sin(k) * math.Sin(k) * math.Tanh(e/(2*T)) / e
				}
				return 2 * math.Tanh(e/(2*T)) / e
			}
			const panels = 16
			sum := 0.0
			for i := range panels {
				sum += quad.Fixed(f, math.Pi/2*float64(i)/panels, math.Pi/2*float64(i+1)/panels, 40, nil, 0)
			}
			near(t, "λ × gap integral", lambda*sum, 1, 1e-9)
		}
	}
}

// 2Δ/T_P = 2π/e^γ in weak coupling (Bardeen, Cooper, Schrieffer 1957), with
// exponentially small T_P, at half filling, away from it and with t2.
func TestWeakCouplingRatio(t *testing.T) {
	for _, c := range []model.Chain{
		halfFilled(true, 0.03), halfFilled(false, 0.03),
		{Hopping: 1, Spin: 2, Filling: 0.74, Site: branchOf(0.12)},
		{Hopping: 1, Spin: 1, Filling: 0.37, Bond: branchOf(0.06)},
		{Hopping: 1, NextHopping: 0.2, Spin: 2, Filling: 0.5, Bond: branchOf(0.04)},
		{Hopping: 2.5, NextHopping: -0.3, Spin: 2, Filling: 1.5, Site: branchOf(0.2)},
	} {
		T, _, _ := transition(t, c)
		if T == 0 || T > 1e-5 {
			t.Fatalf("T_P = %v is not weak coupling", T)
		}
		near(t, "2Δ/T_P", WeakGap(c)/T, 3.5277539777240466, 1e-7)
	}
}

// Both branches: at generic filling the lower mode goes soft above either
// branch alone; at half filling they do not mix, and the stronger one decides.
func TestBothBranchesTogether(t *testing.T) {
	for _, c := range []struct{ filling, t2, bond, site float64 }{
		{0.74, 0, 0.5, 0.9}, {0.5, 0.1, 0.4, 1}, {1.3, -0.1, 0.6, 0.5}, {1.0 / 3, 0, 0.3, 1.2},
	} {
		m := model.Chain{Hopping: 1, NextHopping: c.t2, Spin: 2, Filling: c.filling}
		m.Bond = branchOf(c.bond)
		bondOnly, _, _ := transition(t, m)
		m.Site = branchOf(c.site)
		both, first, _ := transition(t, m)
		m.Bond = model.Phonon{}
		siteOnly, _, _ := transition(t, m)
		if !(both > bondOnly*1.0001 && both > siteOnly*1.0001 && bondOnly > 0 && siteOnly > 0 && first >= both) {
			t.Errorf("%+v: both %v, bond %v, site %v", c, both, bondOnly, siteOnly)
		}
	}
	half := halfFilled(true, 0.4)
	bondOnly, _, _ := transition(t, half)
	half.Site = branchOf(math.Pi * 0.2)
	both, _, _ := transition(t, half)
	near(t, "T_P at half filling", both, bondOnly, 1e-12)
}

// The law of two branches is right to leading order in λ.
func TestWeakGapOfBothBranches(t *testing.T) {
	off := 0.0
	for _, scale := range []float64{1, 0.5} {
		c := model.Chain{Hopping: 1, Spin: 2, Filling: 0.74, Bond: branchOf(0.03 * scale), Site: branchOf(0.12 * scale)}
		T, _, _ := transition(t, c)
		previous := off
		off = math.Abs(WeakGap(c)/T/3.5277539777240466 - 1)
		if off > 0.05 || (previous != 0 && off > 0.6*previous) {
			t.Errorf("2Δ/T_P is off by %v, at twice the coupling by %v", off, previous)
		}
	}
}

// A band with two pairs of Fermi points orders where q joins them, not at 2kF.
func TestTransitionWithTwoPairsOfFermiPoints(t *testing.T) {
	c := model.Chain{Hopping: 1, NextHopping: -0.6, Spin: 2, Filling: 0.5, Site: branchOf(0.6)}
	at2kF, first, q := transition(t, c)
	if first <= at2kF || q == band.Of(c).Ordering() {
		t.Errorf("first unstable at %v with q = %v, 2kF at %v", first, q, at2kF)
	}
	b := bulk(t, band.Of(c), first*1.001)
	if _, ratio, err := Softest(t.Context(), c, b); err != nil || ratio <= 0 {
		t.Errorf("unstable above the first transition: %v, %v", ratio, err)
	}
	near(t, "Ratio at the first transition", PhononAt(c, q, bulk(t, band.Of(c), first).At(q)).Ratio, 0, 1e-10)
	if bond, site := Couplings(c); bond != 0 || site != 0 || WeakGap(c) != 0 {
		t.Errorf("λ = %v, %v is not defined here", bond, site)
	}
}

func TestNoTransition(t *testing.T) {
	site := branchOf(0.5)
	for name, c := range map[string]model.Chain{
		"no branch":     {Hopping: 1, Spin: 2, Filling: 1},
		"no coupling":   {Hopping: 1, Spin: 2, Filling: 1, Site: model.Phonon{Present: true, Stiffness: 1}},
		"empty":         {Hopping: 1, Spin: 2, Filling: 0, Site: site},
		"full":          {Hopping: 1, Spin: 2, Filling: 2, Site: site},
		"below Coldest": halfFilled(true, 0.005),
	} {
		at2kF, first, q := transition(t, c)
		if at2kF != 0 || first != 0 || q != band.Of(c).Ordering() {
			t.Errorf("%s: %v, %v, %v", name, at2kF, first, q)
		}
	}
	// A flat band is unstable below f(1−f) g_s g²/K_s, at every q.
	at2kF, _, _ := transition(t, model.Chain{Spin: 2, Filling: 0.5, Site: site})
	near(t, "T_P of a flat band", at2kF, 0.5*2*0.25*0.75, 1e-12)
}

func TestTransitionStopsWhenAsked(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	if _, _, _, err := Transition(ctx, halfFilled(true, 0.3)); !errors.Is(err, context.Canceled) {
		t.Errorf("error is %v", err)
	}
	c := halfFilled(true, 0.3)
	if _, _, err := Softest(ctx, c, bulk(t, band.Of(c), 0.1)); !errors.Is(err, context.Canceled) {
		t.Errorf("error is %v", err)
	}
	c.Bond.Stiffness = 0
	want := "stiffness of the bond phonon is 0; it must be positive"
	if _, _, _, err := Transition(t.Context(), c); err == nil || err.Error() != want {
		t.Errorf("error is %v, want %v", err, want)
	}
}
