package study_test

import (
	"context"
	"math"
	"testing"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/mathext"
	"pgregory.net/rapid"

	"example.org/twokf/model"
	"example.org/twokf/model/study"
	"example.org/twokf/presets"
)

// gapOfHalfFilling returns the full gap 2Δ/t of the infinite half-filled chain at
// T = 0. With m the elliptic parameter (k²), the gap equations are
//
//	bond: 1/λ = [K(m) − E(m)]/m,             m = 1 − z², Δ = 2tz
//	site: 1/λ = 2t K(m)/√(4t² + Δ²),         m = 4t²/(4t² + Δ²)
//
// (W. P. Su, J. R. Schrieffer, A. J. Heeger, Phys. Rev. B 22, 2099 (1980), and the
// same of a site energy, from memory). Elliptic integrals: gonum v0.17.0.
func gapOfHalfFilling(site bool, lambda float64) float64 {
	missing := func(delta float64) float64 {
		if site {
			return 2*mathext.CompleteK(4/(4+delta*delta))/math.Sqrt(4+delta*delta) - 1/lambda
		}
		m := 1 - delta*delta/4
		return (mathext.CompleteK(m)-mathext.CompleteE(m))/m - 1/lambda
	}
	return 2 * bisect(missing, 1e-9, 1.9999)
}

// transitionOfHalfFilling returns T_P/t, where Δ vanishes:
//
//	bond: 1 = 2λt ∫_0^{π/2} sin²k tanh(ε/2T)/ε dk,   site: without the sin²k,   ε = 2t cos k
func transitionOfHalfFilling(site bool, lambda float64) float64 {
	return bisect(func(T float64) float64 {
		return 2*lambda*quad.Fixed(func(x float64) float64 { // x = π/2 − k
			e := 2 * math.Sin(x)
			f := math.Tanh(e/2/T) / e
			if !site {
				f *= math.Cos(x) * math.Cos(x)
			}
			return f
		}, 0, math.Pi/2, 4000, nil, 0) - 1
	}, 1e-4, 10)
}

// bisect returns the zero of a falling function.
func bisect(f func(float64) float64, lo, hi float64) float64 {
	for hi-lo > 1e-14*hi {
		middle := (lo + hi) / 2
		if f(middle) > 0 {
			lo = middle
		} else {
			hi = middle
		}
	}
	return lo
}

func nearly(t rapid.TB, what string, got, want, relative float64) {
	t.Helper()
	if !(math.Abs(got-want) <= relative*math.Abs(want)) {
		t.Errorf("%s is %.12g, expected %.12g", what, got, want)
	}
}

// The half-filled presets, made long enough to have the gap of the infinite chain
// and a level at k_F, have the gap and the transition temperature of the closed
// forms.
func TestHalfFilledPresets(t *testing.T) {
	for _, name := range []string{"polyene", "half", "spinless"} {
		t.Run(name, func(t *testing.T) {
			c, err := presets.Get(name)
			if err != nil {
				t.Fatal(err)
			}
			c.Temperature, c.Sites = 0, 400
			site := c.Site.Present
			lambda := float64(c.Spin) / (2 * math.Pi * c.Hopping) * c.Site.Coupling * c.Site.Coupling / c.Site.Stiffness
			if !site {
				lambda = 2 * float64(c.Spin) / (math.Pi * c.Hopping) * c.Bond.Coupling * c.Bond.Coupling / c.Bond.Stiffness
			}
			p := portraitOf(t, c)
			nearly(t, "λ", p.Transition.CouplingSite+p.Transition.CouplingBond, lambda, 1e-14)
			nearly(t, "2Δ", p.Lattice.Gap, c.Hopping*gapOfHalfFilling(site, lambda), 1e-8)
			nearly(t, "T_P", p.Transition.Temperature, c.Hopping*transitionOfHalfFilling(site, lambda), 1e-10)
			if math.Abs(p.Phonon.SoftestQ-math.Pi) > 1e-9 || p.Transition.First != p.Transition.Temperature {
				t.Errorf("softest at %g, first unstable at T %g instead of %g", p.Phonon.SoftestQ, p.Transition.First, p.Transition.Temperature)
			}
		})
	}
}

// The chain that is too short to distort has the T_P of the infinite one all the
// same, and the gap of its undistorted levels.
func TestChainTooShortToDistort(t *testing.T) {
	c, err := presets.Get("weak")
	if err != nil {
		t.Fatal(err)
	}
	p := portraitOf(t, c)
	lambda := p.Transition.CouplingBond
	nearly(t, "T_P", p.Transition.Temperature, c.Hopping*transitionOfHalfFilling(false, lambda), 1e-10)
	nearly(t, "gap", p.Lattice.Gap, 4*c.Hopping*math.Sin(math.Pi/float64(c.Sites)), 1e-9) // between k = π/2 ± π/N
	nearly(t, "predicted gap", p.Transition.WeakGap, c.Hopping*gapOfHalfFilling(false, lambda), 1e-3)
	if p.Lattice.DisplacementAmplitude > 1e-9 {
		t.Errorf("displacement %g", p.Lattice.DisplacementAmplitude)
	}
}

// Δ0 and T_P of the half-filled chain in units of t, by independent scipy and
// mpmath computations: root of the elliptic gap equation, and of the linearised
// gap equation with quadrature.
var halfFilling = []struct{ lambda, bondGap, bondT, siteGap, siteT float64 }{
	{0.2, 0.019836846442, 0.011242582639, 0.053864499611, 0.030553841297},
	{0.25, 0.054011809087, 0.030565587233, 0.145941989419, 0.082951388034},
	{0.3, 0.105651436981, 0.059565701956, 0.282116166450, 0.160905771482},
	{0.35, 0.171395407796, 0.096009083096, 0.448970878490, 0.256564173491},
	{0.4, 0.247692333601, 0.137497186154, 0.633034034773, 0.360345187307},
	{0.5, 0.421176707094, 0.228306823653, 1.018100768417, 0.566637159014},
	{0.6, 0.611181681309, 0.322359325332, 1.400516325040, 0.760627917044},
	{0.8, 1.013828374169, 0.507381516893, 2.133416156485, 1.121519628983},
	{1.0, 1.428425559656, 0.685213245776, 2.832120940841, 1.463351580642},
}

// ratioOf returns 2Δ/T_P of a half-filled ring of at least thirty coherence
// lengths 2t/Δ.
func ratioOf(t *testing.T, site bool, lambda float64) (gap, temperature float64) {
	t.Helper()
	sites := 4 * int(math.Ceil(120/gapOfHalfFilling(site, lambda)/4))
	p, err := study.Run(context.Background(), halfFilledRing(site, max(sites, 40), lambda), study.Settings{Levels: 20})
	if err != nil {
		t.Fatal(err)
	}
	if !p.Lattice.Converged {
		t.Errorf("λ = %g is not converged", lambda)
	}
	return p.Lattice.Gap, p.Transition.Temperature
}

// The lattice is relaxed to 1e-9 in a density or bond order, which is worth 2g²/K_s
// = 2πλt times that in the site phonon's gap, or 1e-9 of the gap at most.
func TestGapAndTransitionOfHalfFilling(t *testing.T) {
	for _, row := range halfFilling {
		gap, temperature := ratioOf(t, false, row.lambda)
		nearly(t, "bond 2Δ", gap, 2*row.bondGap, 2e-9)
		nearly(t, "bond T_P", temperature, row.bondT, 1e-9)
		gap, temperature = ratioOf(t, true, row.lambda)
		nearly(t, "site 2Δ", gap, 2*row.siteGap, 2e-9)
		nearly(t, "site T_P", temperature, row.siteT, 1e-9)
	}
}

// 2Δ/T_P tends to 2π/e^γ = 3.52775 as λ → 0, from above for the bond phonon and
// from below for the site phonon, where it has a minimum near λ = 0.35 before it
// grows towards 4.
func TestRatioOfGapToTransition(t *testing.T) {
	const weakCoupling = 3.52775397
	ratio := func(site bool, lambda float64) float64 {
		gap, temperature := ratioOf(t, site, lambda)
		return gap / temperature
	}
	if r := ratio(true, 0.15); r >= weakCoupling || weakCoupling-r > 1e-3*weakCoupling {
		t.Errorf("site, λ = 0.15: %.6f", r)
	}
	if r := ratio(false, 0.17); r <= weakCoupling || r-weakCoupling > 1e-3*weakCoupling {
		t.Errorf("bond, λ = 0.17: %.6f", r)
	}
	lowest, at, before := math.Inf(1), 0.0, weakCoupling
	for _, lambda := range []float64{0.2, 0.25, 0.3, 0.33, 0.35, 0.37, 0.4, 0.5, 0.6, 0.8, 1, 2, 4} {
		r := ratio(true, lambda)
		if r < lowest {
			lowest, at = r, lambda
		}
		if falling := r < before; falling != (lambda <= 0.35) && math.Abs(lambda-0.35) > 0.03 {
			t.Errorf("site, λ = %g: %.6f after %.6f", lambda, r, before)
		}
		before = r
	}
	if math.Abs(at-0.35) > 0.03 || math.Abs(lowest-3.500) > 1e-3 {
		t.Errorf("site: minimum %.5f at λ = %g", lowest, at)
	}
	if before < 3.95 || before > 4 {
		t.Errorf("site, λ = 4: %.5f, expected to be close below 4", before)
	}
	previous := weakCoupling
	for _, lambda := range []float64{0.2, 0.3, 0.4, 0.6, 0.8} {
		r := ratio(false, lambda)
		if r <= previous {
			t.Errorf("bond, λ = %g: %.6f after %.6f", lambda, r, previous)
		}
		previous = r
	}
}

// Polyacetylene with the values of W. P. Su, J. R. Schrieffer, A. J. Heeger, Phys.
// Rev. B 22, 2099 (1980); numbers by an independent mpmath computation, root of
// the elliptic gap equation and of the linearised one.
func TestPolyacetylene(t *testing.T) {
	c, err := presets.Get("polyene")
	if err != nil {
		t.Fatal(err)
	}
	c.Sites = 400 // 4m: k_F is a wave vector of the ring, and the gap that of the infinite chain
	p := portraitOf(t, c)
	nearly(t, "T_P", p.Transition.Temperature, 0.360459483445, 1e-11)
	nearly(t, "2Δ", p.Lattice.Gap, 1.30075681374, 1e-9)
	nearly(t, "u", p.Lattice.DisplacementAmplitude, 0.0396572199312, 1e-8)
	nearly(t, "E/N", p.Lattice.FreeEnergy/400, -3.19624101744, 1e-11)
	nearly(t, "λ", p.Transition.CouplingBond, 0.407679176133, 1e-11)
}

// At a generic filling both phonons together order at a higher temperature than
// either alone.
func TestBothBranchesOrderFirst(t *testing.T) {
	for _, x := range []struct {
		electrons  int // on 30 sites, per spin
		bond, site float64
	}{
		{5, 0.3, 0.3}, {7, 0.25, 0.4}, {7, 0.5, 0.2}, {9, 0.2, 0.2}, {9, 0.4, 0.3}, {11, 0.3, 0.45}, {13, 0.35, 0.35}, {21, 0.3, 0.3},
	} {
		of := func(bond, site float64) *study.Transition {
			return portraitOf(t, genericRing(30, 2*x.electrons, bond, site)).Transition
		}
		both, justBond, justSite := of(x.bond, x.site), of(x.bond, 0), of(0, x.site)
		nearly(t, "λ bond", both.CouplingBond, x.bond, 1e-12)
		nearly(t, "λ site", both.CouplingSite, x.site, 1e-12)
		if alone := math.Max(justBond.Temperature, justSite.Temperature); !(both.Temperature > alone*(1+1e-6)) {
			t.Errorf("%+v: T_P %g together, %g alone", x, both.Temperature, alone)
		}
		if alone := math.Max(justBond.First, justSite.First); !(both.First > alone*(1-1e-9)) { // the same if that is at q = π
			t.Errorf("%+v: first unstable at %g together, %g alone", x, both.First, alone)
		}
	}
}

// At half filling the two do not mix: T_P is that of the stronger branch.
func TestBranchesDoNotMixAtHalfFilling(t *testing.T) {
	both := halfFilledRing(true, 20, 0.3)
	both.Bond = halfFilledRing(false, 20, 0.5).Bond
	T := portraitOf(t, both).Transition.Temperature
	nearly(t, "T_P", T, math.Max(halfFilling[2].siteT, halfFilling[5].bondT), 1e-9)
}

// Where a ring is much longer than v_F/πT, its levels and the infinite chain
// give the same condensation: above T_P nothing distorts, below it something does.
func TestLatticeAgreesWithTransition(t *testing.T) {
	for _, site := range []bool{false, true} {
		c := halfFilledRing(site, 402, 0.4)
		T := portraitOf(t, c).Transition.Temperature
		for _, x := range []struct {
			factor    float64
			distorted bool
		}{{0.98, true}, {1.02, false}} {
			c.Temperature = x.factor * T
			p := portraitOf(t, c)
			amplitude := p.Lattice.DisplacementAmplitude + p.Lattice.SiteModeAmplitude
			if (amplitude > 1e-3) != x.distorted || (p.Phonon.Softest < 0) != x.distorted {
				t.Errorf("site %v at %g T_P: amplitude %g, softest Ω²/ω² %g", site, x.factor, amplitude, p.Phonon.Softest)
			}
		}
	}
}

// The levels of the finite chain leave just the gap that the lattice reports.
func TestLevelsLeaveTheGap(t *testing.T) {
	for _, preset := range presets.List() {
		c := preset.Chain
		p := portraitOf(t, c)
		n, _ := c.Count()
		if c.Spin == 2 && n%2 == 1 {
			continue // the level in the middle is half filled
		}
		below, above := p.Levels.Energy[n/c.Spin-1], p.Levels.Energy[n/c.Spin]
		if gap := above - below; math.Abs(gap-p.Lattice.Gap) > 1e-9*c.Hopping {
			t.Errorf("%s: levels leave %.12g, the lattice says %.12g", preset.Name, gap, p.Lattice.Gap)
		}
		if len(p.Levels.K) != c.Sites {
			t.Errorf("%s: %d places for %d levels", preset.Name, len(p.Levels.K), c.Sites)
		}
		for i := 1; i < len(p.Levels.Energy); i++ {
			if p.Levels.Energy[i] < p.Levels.Energy[i-1] {
				t.Errorf("%s: levels are not in order", preset.Name)
				break
			}
		}
	}
}

// An undistorted chain's levels stand on its band, on the ring and, at k = πm/(N+1),
// on the open chain (elementary).
func TestLevelsStandOnTheBand(t *testing.T) {
	for _, boundary := range []model.Boundary{model.Ring, model.Open} {
		c := ring(41, 30, 2)
		c.Boundary = boundary
		l := portraitOf(t, c).Levels
		for i, k := range l.K {
			if k < 0 || k > math.Pi || math.Abs(l.Energy[i]+2*math.Cos(k)) > 1e-12 {
				t.Errorf("%s: level %.12g at k = %g", boundary, l.Energy[i], k)
			}
		}
	}
}
