package response

import (
	"fmt"
	"math"
	"testing"

	"example.org/twokf/model"
	"example.org/twokf/model/band"
	"gonum.org/v1/gonum/mat"
	"pgregory.net/rapid"
)

func TestKohnAnomalyAgainstReference(t *testing.T) {
	for _, c := range referenceTransition {
		b := chain(c.f, c.spin)
		m := model.Chain{Hopping: 1, Spin: c.spin, Filling: b.Filling}
		if c.bond {
			m.Bond = branchOf(c.strength)
		} else {
			m.Site = branchOf(c.strength)
		}
		for _, row := range c.kohn {
			q := row[0] * math.Pi
			p := PhononAt(m, q, bulk(t, b, row[1]*c.T).At(q))
			near(t, "Ω²/ω²", p.Ratio, row[2], 1e-10)
			alone := p.SiteRatio
			if c.bond {
				alone = p.BondRatio
			}
			if p.Ratio != alone {
				t.Errorf("one branch has the ratio %v, alone %v", p.Ratio, alone)
			}
		}
	}
}

// Near T_P, Ω²/ω² ≃ λ ln(T/T_P) (Rice and Strässler 1973, from memory); the
// exact values by an independent numpy computation.
func TestSofteningNearTheTransition(t *testing.T) {
	const lambda = 0.3
	for _, c := range referenceNear {
		m := halfFilled(c.bond, lambda)
		TP, _, _ := transition(t, m)
		m.Bond.Stiffness /= 2 / float64(c.spin) // same λ for spinless electrons needs twice the strength
		m.Site.Stiffness /= 2 / float64(c.spin)
		m.Spin, m.Filling = c.spin, float64(c.spin)/2
		for _, row := range c.rows {
			T := row[0] * TP
			got := PhononAt(m, math.Pi, bulk(t, band.Of(m), T).At(math.Pi)).Ratio
			near(t, "Ω²/ω²", got, row[1], 1e-10)
			if row[0] <= 1.05 {
				near(t, "Ω²/ω² over λ ln(T/T_P)", got/(lambda*math.Log(row[0])), 1, 0.02)
			}
		}
	}
}

func TestPhononConventions(t *testing.T) {
	c := model.Chain{Hopping: 1, Spin: 2, Filling: 0.7}
	s := Static{Site: 0.5, Bond: 1.2, Mixed: 0.6}
	const q = 1.1
	if p := PhononAt(c, q, s); p != (Phonon{Ratio: 1, BondRatio: 1, SiteRatio: 1}) {
		t.Errorf("without branches: %+v", p)
	}
	c.Bond = model.Phonon{Present: true, Coupling: 1, Stiffness: 2, Frequency: 0.1} // (α²/K)χ_b = 0.6
	p := PhononAt(c, q, s)
	near(t, "bond ratio", p.Ratio, 0.4, 1e-15)
	near(t, "bare bond", p.BareBond, 0.1*math.Sin(q/2), 1e-17)
	near(t, "soft bond", p.Lower, p.BareBond*math.Sqrt(0.4), 1e-16)
	if p.Upper != 0 || p.BareSite != 0 || p.SiteRatio != 1 {
		t.Errorf("a branch too many in %+v", p)
	}
	c.Site = model.Phonon{Present: true, Coupling: 2, Stiffness: 1} // γχ0 = 2, no mass
	p = PhononAt(c, q, s)
	near(t, "site ratio", p.SiteRatio, -1, 1e-15)
	near(t, "bond branch with the other held still", p.Lower, p.BareBond*math.Sqrt(0.4), 1e-16)
	off := math.Sqrt(0.5*4) * 0.6
	near(t, "trace", p.Ratio, (0.4-1)/2-math.Hypot(0.7, off), 1e-15)
	c.Site.Frequency = 0.3
	p = PhononAt(c, q, s)
	near(t, "Ω² sum", p.Upper*p.Upper-p.Lower*p.Lower, p.BareBond*p.BareBond*0.4-0.09, 1e-15)
	if !(p.Lower < 0) || !(p.Upper > 0) {
		t.Errorf("one unstable and one stable mode: %+v", p)
	}
	c.Bond.Coupling = 0 // there, but not coupled
	p = PhononAt(c, q, s)
	if p.Ratio != -1 || p.BondRatio != 1 || p.Lower != -0.3 || math.Abs(p.Upper-p.BareBond) > 1e-16 {
		t.Errorf("an uncoupled branch moved: %+v", p)
	}
}

func TestInfiniteResponse(t *testing.T) {
	minus := math.Inf(-1)
	for _, c := range []struct {
		name         string
		b            band.Band
		bond, site   bool
		ratio        float64
		lower, upper float64
	}{
		{"bond", chain(0.37, 2), true, false, minus, minus, 0},
		{"site", chain(0.37, 2), false, true, minus, minus, 0},
		{"both, mixed", chain(0.37, 2), true, true, minus, minus, 0},
		{"both, hole-like", chain(0.81, 2), true, true, minus, minus, 0},
		{"both, half filled", chain(0.5, 2), true, true, minus, minus, minus},
		{"neither", chain(0.37, 2), false, false, 1, 0, 0},
	} {
		m := model.Chain{Hopping: 1, Spin: 2, Filling: c.b.Filling}
		if c.bond {
			m.Bond = model.Phonon{Present: true, Coupling: 1, Stiffness: 1, Frequency: 0.1}
		}
		if c.site {
			m.Site = model.Phonon{Present: true, Coupling: 1, Stiffness: 1, Frequency: 0.1}
		}
		q := c.b.Ordering()
		p := PhononAt(m, q, bulk(t, c.b, 0).At(q))
		if p.Ratio != c.ratio || p.Lower != c.lower || p.Upper != c.upper {
			t.Errorf("%s: %+v", c.name, p)
		}
		softest, ratio, err := Softest(t.Context(), m, bulk(t, c.b, 0))
		if err != nil || ratio != c.ratio || (c.ratio == minus && softest != q) {
			t.Errorf("%s: softest %v at %v, %v", c.name, ratio, softest, err)
		}
	}
}

// Inversion about a bond forbids the mixed response at q = π for any filling
// and t2; particle–hole symmetry forbids it for all q at half filling without t2.
func TestMixedResponseVanishes(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		b := anyBand(rt)
		T := rapid.SampledFrom([]float64{0, 0.01, 0.5, 3}).Draw(rt, "T")
		// At π itself it is 0 by construction; close to it the sum must agree.
		const dq = 1e-7
		s := bulk(t, b, T).At(math.Pi - dq)
		if math.Abs(s.Mixed) > 1e3*dq*(1+s.Site*s.Site) {
			rt.Errorf("χ_sb(π) of %+v at T = %v is %v", b, T, s.Mixed)
		}
		q := rapid.Float64Range(0, 3).Draw(rt, "q")
		if m := bulk(t, chain(0.5, 2), T).At(q).Mixed; math.Abs(m) > 1e-13 {
			rt.Errorf("χ_sb(%v) at half filling is %v", q, m)
		}
	})
}

// The force constants measured on a ring: free energies of rings distorted by
// u_i = Re U e^{iqi} and Q_i = Re W e^{iqi}, diagonalised with gonum v0.17.0,
// second differences in U and W. For q ≠ π the energy per site is
// ¼ (U, W)* Φ (U, W); U stands for B = 2i sin(q/2) U.
func TestForceConstantsByFiniteDifferences(t *testing.T) {
	const n, T = 12, 0.2
	for _, c := range []struct {
		m  int
		t2 float64
	}{{3, 0}, {4, 0.2}, {5, -0.7}, {2, 0.2}} {
		t.Run(fmt.Sprintf("q=2π·%d/12,t2=%v", c.m, c.t2), func(t *testing.T) {
			chain := model.Chain{
				Hopping: 1, NextHopping: c.t2, Spin: 2, Filling: 10.0 / n,
				Bond: model.Phonon{Present: true, Coupling: 0.8, Stiffness: 1.1, Frequency: 0.2},
				Site: model.Phonon{Present: true, Coupling: 0.7, Stiffness: 0.9, Frequency: 0.15},
			}
			q := 2 * math.Pi * float64(c.m) / n
			curvature := func(u, w complex128) float64 {
				const h = 1e-3
				f := func(x float64) float64 {
					return distortedFreeEnergy(chain, n, 10, T, q, u*complex(x, 0), w*complex(x, 0))
				}
				second := func(h float64) float64 { return (f(h) + f(-h) - 2*f(0)) / (h * h) }
				return 2 * (4*second(h) - second(2*h)) / 3 / n // 4·½·d²F/dx²: the form (u,w)*Φ(u,w)
			}
			s := ring(t, n, 10, 2, 1, c.t2, T).At(c.m)
			p := PhononAt(chain, q, s)

			uu, ww := curvature(1, 0), curvature(0, 1)
			sin := math.Sin(q / 2)
			near(t, "Φ_uu", uu, 4*sin*sin*1.1*p.BondRatio, 1e-6)
			near(t, "Φ_ww", ww, 0.9*p.SiteRatio, 1e-6)
			inPhase := (curvature(1, 1) - uu - ww) / 2             // Re Φ_uw
			quarter := (curvature(1, complex(0, 1)) - uu - ww) / 2 // −Im Φ_uw
			near(t, "Re Φ_uw", inPhase, 0, 1e-6)
			// B*W with B = 2i sin(q/2)·u: −gα χ_sb Re(W* B) has its extremum at W = i u.
			near(t, "Im Φ_uw", quarter, -0.7*0.8*s.Mixed*2*sin, 1e-6)

			mass, massSite := 4*1.1/(0.2*0.2), 0.9/(0.15*0.15)
			d := mat.NewSymDense(2, []float64{uu / mass, quarter / math.Sqrt(mass*massSite), quarter / math.Sqrt(mass*massSite), ww / massSite})
			var eigen mat.EigenSym
			eigen.Factorize(d, false)
			values := eigen.Values(nil)
			near(t, "lower Ω²", p.Lower*math.Abs(p.Lower), values[0], 1e-7)
			near(t, "upper Ω²", p.Upper*math.Abs(p.Upper), values[1], 1e-7)
			r := mat.NewSymDense(2, []float64{uu / (4 * sin * sin * 1.1), quarter / math.Sqrt(4*sin*sin*1.1*0.9), quarter / math.Sqrt(4*sin*sin*1.1*0.9), ww / 0.9})
			eigen.Factorize(r, false)
			near(t, "ratio", p.Ratio, eigen.Values(nil)[0], 1e-6)
			if math.Abs(quarter) < 1e-3 {
				t.Error("the branches hardly mix: the test says nothing")
			}
		})
	}
}

// distortedFreeEnergy returns F of electrons at fixed number, plus springs.
func distortedFreeEnergy(c model.Chain, n int, electrons, T, q float64, u, w complex128) float64 {
	at := func(z complex128, i int) float64 {
		return real(z * complex(math.Cos(q*float64(i)), math.Sin(q*float64(i))))
	}
	h := mat.NewSymDense(n, nil)
	add := func(i, j int, x float64) { h.SetSym(i, j, h.At(i, j)+x) }
	springs := 0.0
	for i := range n {
		b := at(u, i+1) - at(u, i)
		add(i, (i+1)%n, -(c.Hopping - c.Bond.Coupling*b))
		add(i, (i+2)%n, -c.NextHopping)
		add(i, i, c.Site.Coupling*at(w, i))
		springs += c.Bond.Stiffness*b*b/2 + c.Site.Stiffness*at(w, i)*at(w, i)/2
	}
	var eigen mat.EigenSym
	eigen.Factorize(h, false)
	levels := eigen.Values(nil)
	lo, hi := -20.0, 20.0
	for range 100 {
		mu, sum := (lo+hi)/2, 0.0
		for _, e := range levels {
			sum += float64(c.Spin) / (1 + math.Exp((e-mu)/T))
		}
		if sum > electrons {
			hi = mu
		} else {
			lo = mu
		}
	}
	mu := (lo + hi) / 2
	free := mu*electrons + springs
	for _, e := range levels {
		free -= float64(c.Spin) * T * math.Log1p(math.Exp(-(e-mu)/T))
	}
	return free
}

func TestSoftestIsTheGlobalMinimum(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		b := anyBand(rt)
		T := rapid.SampledFrom([]float64{0.005, 0.1, 0.6}).Draw(rt, "T")
		c := model.Chain{Hopping: b.Hopping, NextHopping: b.NextHopping, Spin: b.Spin, Filling: b.Filling, Bond: branchOf(0.3), Site: branchOf(0.5)}
		r := bulk(t, b, T)
		_, ratio, err := Softest(t.Context(), c, r)
		if err != nil {
			rt.Fatal(err)
		}
		for i := 1; i <= 1000; i++ {
			q := math.Pi * float64(i) / 1000
			if p := PhononAt(c, q, r.At(q)); p.Ratio < ratio-1e-6 {
				rt.Errorf("ratio %v at %v lies below the softest, %v", p.Ratio, q, ratio)
			}
		}
	})
}
