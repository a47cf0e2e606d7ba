package relax

import (
	"context"
	"fmt"
	"math"
	"sort"
	"testing"

	"gonum.org/v1/gonum/mathext"
	"pgregory.net/rapid"

	"example.org/twokf/model"
)

// chain returns a ring with t = 1, unit coupling and the given stiffness.
func chain(site bool, spin, sites, electrons int, stiffness float64) model.Chain {
	c := model.Chain{Sites: sites, Hopping: 1, Spin: spin, ByNumber: true, Electrons: electrons}
	branch := model.Phonon{Present: true, Coupling: 1, Stiffness: stiffness}
	if site {
		c.Site = branch
	} else {
		c.Bond = branch
	}
	return c
}

// halfFilled returns a half-filled ring of coupling λ (λ_site = g_s g²/(2πtK_s),
// λ_bond = 2 g_s α²/(πtK)).
func halfFilled(site bool, spin, sites int, lambda float64) model.Chain {
	k := 2 * float64(spin) / (math.Pi * lambda)
	if site {
		k = float64(spin) / (2 * math.Pi * lambda)
	}
	return chain(site, spin, sites, sites*spin/2, k)
}

// polyacetylene with the values of W. P. Su, J. R. Schrieffer, A. J. Heeger,
// Phys. Rev. B 22, 2099 (1980).
func polyacetylene(sites, electrons int) model.Chain {
	return model.Chain{
		Energy: model.UnitEV, Sites: sites, Hopping: 2.5, Spin: 2, ByNumber: true, Electrons: electrons,
		Bond: model.Phonon{Present: true, Coupling: 4.1, Stiffness: 21},
	}
}

func relaxed(t *testing.T, c model.Chain, set Settings) *Lattice {
	t.Helper()
	l, err := Run(context.Background(), c, set)
	if err != nil {
		t.Fatal(err)
	}
	if !l.Converged {
		t.Errorf("%s: residual %g is above %g", l.Start, l.Residual, l.Tolerance)
	}
	return l
}

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.14g, want %.14g ± %.1g (off by %.2g)", what, got, want, tol, got-want)
	}
}

func gap(l *Lattice) float64 { return l.Electrons.Lowest - l.Electrons.Highest }

// TestHalfFilledChain holds long half-filled rings against the elliptic gap
// equations of the infinite chain, whose numbers the table has and gonum's
// complete elliptic integrals (mathext, parameter m = k²) confirm.
func TestHalfFilledChain(t *testing.T) {
	for _, r := range half {
		z := r.bondGap / 2
		k, e := mathext.CompleteK(1-z*z), mathext.CompleteE(1-z*z)
		if r.bondGap < 2 { // 1/λ = [K − E]/(1 − z²)
			near(t, fmt.Sprintf("bond gap equation at λ = %g", r.lambda), (k-e)/(1-z*z)*r.lambda, 1, 1e-12)
		}
		d := r.siteGap
		root := math.Sqrt(4 + d*d)
		near(t, fmt.Sprintf("site gap equation at λ = %g", r.lambda), 2*mathext.CompleteK(4/(4+d*d))/root*r.lambda, 1, 1e-12)

		for _, branch := range []struct {
			site         bool
			gap, e, cond float64
		}{{false, r.bondGap, r.bondE, r.bondCond}, {true, r.siteGap, r.siteE, r.siteCond}} {
			sites := 4 * int(math.Ceil(24*2/branch.gap/4)) // 4m, so that kF is on the ring; longer than 24 ξ, ξ = 2t/Δ
			sites = max(sites, 100)
			for _, spin := range []int{1, 2} {
				t.Run(fmt.Sprintf("site %v λ %g spin %d", branch.site, r.lambda, spin), func(t *testing.T) {
					l := relaxed(t, halfFilled(branch.site, spin, sites, r.lambda), Settings{Tolerance: 1e-10})
					n, g := float64(sites), float64(spin)
					near(t, "2Δ/2Δ∞", gap(l)/(2*branch.gap), 1, 1e-9)
					near(t, "E/N", l.FreeEnergy/n/g, branch.e, 1e-9*math.Abs(branch.e))
					near(t, "condensation energy of the infinite chain", -2/math.Pi-l.FreeEnergy/n/g, branch.cond, 1e-9*math.Abs(branch.e))
				})
			}
		}
	}
}

func TestHalfFilledRings(t *testing.T) {
	for _, r := range ringHalf {
		t.Run(fmt.Sprintf("site %v λ %.2g N %d", r.site, r.lambda, r.sites), func(t *testing.T) {
			l := relaxed(t, halfFilled(r.site, 2, r.sites, r.lambda), Settings{Tolerance: 1e-10})
			near(t, "E/N", l.FreeEnergy/float64(r.sites)/2, r.e, 1e-9)
			// Δ = α·|b|·2 (b = 2u, Δ = 4αu) or g|q|: the order parameter, not the gap
			order := maxAbs(l.Stretch) * 2
			if r.site {
				order = maxAbs(l.SiteMode)
			}
			near(t, "Δ", order, r.gap, 1e-8)
		})
	}
}

// TestPolyacetylene checks the exact minimum of the published parameter set and
// that the published, rounded values (u0 ≈ 0.04 Å, 2Δ ≈ 1.4 eV) are near it.
func TestPolyacetylene(t *testing.T) {
	l := relaxed(t, polyacetylene(400, 400), Settings{})
	near(t, "u0 (Å)", maxAbs(l.Displacement), 0.0396572199312, 1e-6*0.04)
	near(t, "2Δ (eV)", gap(l), 1.30075681374, 1e-6)
	near(t, "E/N (eV)", l.FreeEnergy/400, -3.19624101744, 1e-9)
	near(t, "published u0", maxAbs(l.Displacement)/0.04, 1, 0.08)
	near(t, "published 2Δ", gap(l)/1.4, 1, 0.08)
}

// TestSuperlattices: the lowest commensurate states at third and quarter
// filling (and half), energy, gap and pattern, both branches.
func TestSuperlattices(t *testing.T) {
	for _, r := range superlattices {
		t.Run(fmt.Sprintf("site %v spin %d period %d λ %g", r.site, r.spin, r.period, r.lambda), func(t *testing.T) {
			// 26 times the coherence length makes the ring the infinite chain
			sites := 2 * r.period * int(math.Ceil(60/r.gap/float64(r.period))) // kF is on the ring
			sites = max(sites, 60*r.period)
			l := relaxed(t, chain(r.site, r.spin, sites, sites*r.spin/r.period, r.stiffness), Settings{Tolerance: 1e-10})
			near(t, "E/N", l.FreeEnergy/float64(sites), r.e, 1e-8)
			near(t, "gap", gap(l), r.gap, 1e-8)
			pattern := l.Stretch
			if r.site {
				pattern = l.SiteMode
			}
			got, want := sortedCell(pattern, r.period), sortedCell(r.pattern, r.period)
			for i := range got {
				near(t, fmt.Sprintf("pattern %d of %v", i, want), got[i], want[i], 1e-8)
			}
		})
	}
}

func sortedCell(x []float64, period int) []float64 {
	cell := append([]float64(nil), x[:period]...)
	sort.Float64s(cell)
	return cell
}

// TestQuarterFilledMap: the quarter-filled bond-phonon chain of pattern
// (+,−,−,+)b has the half-filled chain's energy and gap divided by √2, and
// b = Δ_half/2α (derived: H² on one sublattice is the half-filled problem).
func TestQuarterFilledMap(t *testing.T) {
	for _, r := range half {
		if r.lambda < 0.3 || r.lambda > 0.5 || r.lambda == 0.35 {
			continue
		}
		t.Run(fmt.Sprintf("λ %g", r.lambda), func(t *testing.T) {
			sites := 8 * int(math.Ceil(12*2/r.bondGap))
			// λ_bond = 4 g_s α²/(2π v_F K), v_F = 2 sin(π/4)
			k := 8 / (2 * math.Pi * math.Sqrt2 * r.lambda)
			c := chain(false, 2, sites, sites/2, k)
			start := Seed{Name: "(+,−,−,+)", Stretch: make([]float64, sites)}
			for i := range start.Stretch {
				start.Stretch[i] = []float64{1, -1, -1, 1}[i%4] * 0.1
			}
			l := relaxed(t, c, Settings{Tolerance: 1e-10, Starts: []Seed{start}})
			near(t, "E/N", l.FreeEnergy/float64(sites), 2*r.bondE/math.Sqrt2, 1e-9)
			near(t, "gap", gap(l), 2*r.bondGap/math.Sqrt2, 1e-9)
			near(t, "b", maxAbs(l.Stretch), r.bondGap/2, 1e-8)
		})
	}
}

// TestWarming holds the order parameter against the tanh gap equation at six
// temperatures.
func TestWarming(t *testing.T) {
	transition := map[bool]map[float64]float64{ // k_B T_P/t at these λ, from the same computation
		false: {0.25: 0.030565587233, 0.40767917613329685: 0.360459483445 / 2.5, 0.6: 0.322359325332},
		true:  {0.25: 0.082951388034, 0.4: 0.360345187307, 0.8: 1.121519628983},
	}
	for _, r := range warming {
		for i, part := range []float64{0.2, 0.4, 0.6, 0.8, 0.9, 0.95} {
			t.Run(fmt.Sprintf("site %v λ %.2g T %g T_P", r.site, r.lambda, part), func(t *testing.T) {
				c := halfFilled(r.site, 2, 802, r.lambda)
				cold := orderOf(relaxed(t, c, Settings{}), r.site)
				c.Temperature = part * transition[r.site][r.lambda]
				warm := orderOf(relaxed(t, c, Settings{}), r.site)
				near(t, "Δ(T)/Δ(0)", warm/cold, r.ratio[i], 1e-7)
			})
		}
	}
}

// TestWeakCouplingCurve: at λ = 0.2 the order parameter follows the universal
// weak-coupling curve (the BCS gap equation; G. Grüner, Rev. Mod. Phys. 60, 1129
// (1988)) within 3·10⁻³.
func TestWeakCouplingCurve(t *testing.T) {
	universal := map[float64]float64{0.4: 0.9850337124, 0.8: 0.7110430424, 0.9: 0.5263419346}
	for _, site := range []bool{false, true} {
		at := map[bool]float64{false: 0.011242582639, true: 0.030553841297}[site] // k_B T_P/t at λ = 0.2
		c := halfFilled(site, 1, 2402, 0.2)
		cold := orderOf(relaxed(t, c, Settings{}), site)
		for part, want := range universal {
			c.Temperature = part * at
			near(t, fmt.Sprintf("site %v Δ(%g T_P)/Δ(0)", site, part), orderOf(relaxed(t, c, Settings{}), site)/cold, want, 3e-3)
		}
	}
}

// transitions holds k_B T_P/t of the half-filled chain from the linearised tanh
// gap equation (independent computation by quadrature and root finding).
var transitions = []struct{ lambda, bond, site float64 }{
	{0.2, 0.011242582638716338, 0.03055384129687676},
	{0.25, 0.030565587233462237, 0.0829513880340011},
	{0.3, 0.059565701955570795, 0.16090577148221516},
	{0.35, 0.09600908309573562, 0.25656417349127053},
	{0.4, 0.1374971861538949, 0.3603451873070587},
	{0.5, 0.2283068236530043, 0.566637159014406},
	{0.6, 0.32235932533226613, 0.7606279170439456},
	{0.8, 0.5073815168931936, 1.121519628983075},
	{1.0, 0.685213245776359, 1.4633515806422526},
}

// TestVanishingOrder: the order parameter vanishes at T_P to 10⁻⁴: Δ² is linear
// in T below it (mean field), so two points give the zero.
func TestVanishingOrder(t *testing.T) {
	for _, r := range transitions {
		for _, site := range []bool{false, true} {
			at := r.bond
			if site {
				at = r.site
			}
			sites := 2 * int(math.Ceil(max(50, 30/(math.Pi*at)))) // the ring's own error is e^(−πTN/v_F), v_F = 2t
			square := func(part float64) float64 {
				c := halfFilled(site, 2, sites, r.lambda)
				c.Temperature = part * at
				d := orderOf(relaxed(t, c, Settings{}), site)
				return d * d
			}
			a, b := square(0.999), square(0.9995)
			near(t, fmt.Sprintf("site %v λ %g: T(Δ = 0)/T_P", site, r.lambda), 0.9995+0.0005*b/(a-b), 1, 1e-4)
		}
	}
}

func orderOf(l *Lattice, site bool) float64 {
	if site {
		return maxAbs(l.SiteMode)
	}
	return 2 * maxAbs(l.Stretch)
}

// randomChain draws a short chain with either or both branches, t2, any
// boundary and filling, at T > 0.
func randomChain(t *rapid.T) model.Chain {
	c := model.Chain{
		Sites:       rapid.IntRange(3, 24).Draw(t, "sites"),
		Boundary:    rapid.SampledFrom([]model.Boundary{model.Ring, model.Open}).Draw(t, "boundary"),
		Hopping:     1,
		NextHopping: rapid.Float64Range(-0.4, 0.4).Draw(t, "t2"),
		Spin:        rapid.IntRange(1, 2).Draw(t, "spin"),
		ByNumber:    true,
		Temperature: rapid.Float64Range(0.05, 0.6).Draw(t, "T"),
	}
	c.Electrons = rapid.IntRange(1, c.Spin*c.Sites-1).Draw(t, "electrons")
	which := rapid.IntRange(1, 3).Draw(t, "branches")
	if which&1 != 0 {
		c.Bond = model.Phonon{Present: true, Coupling: rapid.Float64Range(0.3, 1).Draw(t, "α"), Stiffness: rapid.Float64Range(1, 6).Draw(t, "K")}
	}
	if which&2 != 0 {
		c.Site = model.Phonon{Present: true, Coupling: rapid.Float64Range(0.3, 1).Draw(t, "g"), Stiffness: rapid.Float64Range(0.5, 3).Draw(t, "Ks")}
	}
	return c
}

// TestMinimumIsSelfConsistent: at every minimum n_i = ν − (K_s/g) q_i and
// p_i = p̄ − (K/α) b_i (stationarity), q and b have zero sum, and no start ended
// lower.
func TestMinimumIsSelfConsistent(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := randomChain(t)
		l, err := Run(context.Background(), c, Settings{})
		if err != nil {
			t.Fatal(err)
		}
		if !l.Converged {
			t.Skip("not converged: nothing is claimed")
		}
		n := float64(c.Electrons) / float64(c.Sites)
		for i, q := range l.SiteMode {
			if d := l.Electrons.Density[i] - n + q*c.Site.Stiffness/c.Site.Coupling; math.Abs(d) > 1e-8 {
				t.Fatalf("site %d: n − ν + (K_s/g) q = %g", i, d)
			}
		}
		mean := 0.0
		for _, p := range l.Electrons.BondOrder {
			mean += p / float64(len(l.Electrons.BondOrder))
		}
		for i, b := range l.Stretch {
			if d := l.Electrons.BondOrder[i] - mean + b*c.Bond.Stiffness/c.Bond.Coupling; math.Abs(d) > 1e-8 {
				t.Fatalf("bond %d: p − p̄ + (K/α) b = %g", i, d)
			}
		}
		for _, a := range l.Tried {
			if a.Converged && a.FreeEnergy < l.FreeEnergy-1e-9 {
				t.Fatalf("start %q ended at %.12g, below the answer %.12g", a.Name, a.FreeEnergy, l.FreeEnergy)
			}
		}
		if l.FreeEnergy > l.Undistorted+1e-9 {
			t.Fatalf("relaxed chain at %.12g is above the undistorted one at %.12g", l.FreeEnergy, l.Undistorted)
		}
	})
}

// TestForces: the force is the derivative of the free energy (Hellmann–Feynman),
// by central differences, T = 0 and T > 0, both branches, t2 ≠ 0.
func TestForces(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := randomChain(t)
		if rapid.Bool().Draw(t, "cold") {
			c.Temperature = 0
			c.Electrons = c.Spin * max(1, c.Electrons/c.Spin) // whole levels: no kink of the energy at E_F
			if c.Electrons == c.Spin*c.Sites {
				c.Electrons -= c.Spin
			}
		}
		p := newProblem(c)
		at := newWalker(p)
		x := make([]float64, p.size())
		for i := range x {
			x[i] = rapid.Float64Range(-0.3, 0.3).Draw(t, "x")
		}
		p.project(x)
		ctx := context.Background()
		if err := at.stand(ctx, x); err != nil {
			t.Fatal(err)
		}
		if c.Temperature == 0 && at.electrons.Lowest-at.electrons.Highest < 1e-2 {
			t.Skip("levels too close to E_F for a finite difference")
		}
		g := append([]float64(nil), at.g...)
		i := rapid.IntRange(0, len(x)-1).Draw(t, "coordinate")
		const h = 1e-4
		energy := func(step float64) float64 {
			y := append([]float64(nil), x...)
			y[i] += step
			p.project(y)
			if err := at.stand(ctx, y); err != nil {
				t.Fatal(err)
			}
			return at.free
		}
		slope := (8*(energy(h)-energy(-h)) - (energy(2*h) - energy(-2*h))) / (12 * h)
		if math.Abs(slope-g[i]) > 1e-6 {
			t.Fatalf("∂F/∂x_%d = %.10g by differences, %.10g by Hellmann–Feynman", i, slope, g[i])
		}
	})
}

// TestUniformIsStationary: every start but the undistorted chain leaves the
// saddle of a half-filled ring, and a start that is put there is pushed off.
func TestUniformIsASaddle(t *testing.T) {
	c := halfFilled(false, 2, 102, 0.45)
	l := relaxed(t, c, Settings{Starts: []Seed{{Name: "nothing"}}})
	want := relaxed(t, c, Settings{})
	near(t, "E/N from the saddle", l.FreeEnergy/102, want.FreeEnergy/102, 1e-10)
	if l.Curvature <= 0 {
		t.Errorf("curvature along 2kF at the minimum is %g", l.Curvature)
	}
}

// TestStiffChainsStayUniform: above T_P, in weak coupling on a short ring, in an
// empty and in a full band the chain keeps b = q = 0.
func TestStiffChainsStayUniform(t *testing.T) {
	hot := halfFilled(true, 2, 102, 0.3)
	hot.Temperature = 0.2
	weak := halfFilled(false, 2, 62, 0.15)
	empty, full := halfFilled(true, 2, 30, 0.4), halfFilled(false, 1, 30, 0.4)
	empty.Electrons, full.Electrons = 0, 30
	for name, c := range map[string]model.Chain{"hot": hot, "weak": weak, "empty": empty, "full": full} {
		l := relaxed(t, c, Settings{})
		if d := max(maxAbs(l.Stretch), maxAbs(l.SiteMode)); d > 1e-7 {
			t.Errorf("%s: a pattern of %g is left (%s)", name, d, l.Start)
		}
		near(t, name+": F", l.FreeEnergy, l.Undistorted, 1e-9)
	}
}

// TestJobsDoNotMatter: the answer is the same to the last bit however many cores
// work on the starts.
func TestJobsDoNotMatter(t *testing.T) {
	c := polyacetylene(60, 61)
	one := relaxed(t, c, Settings{Jobs: 1})
	many := relaxed(t, c, Settings{Jobs: 4})
	if one.FreeEnergy != many.FreeEnergy || one.Start != many.Start {
		t.Errorf("1 job: %v from %s, 4 jobs: %v from %s", one.FreeEnergy, one.Start, many.FreeEnergy, many.Start)
	}
	for i := range one.Stretch {
		if one.Stretch[i] != many.Stretch[i] {
			t.Fatalf("bond %d: %v and %v", i, one.Stretch[i], many.Stretch[i])
		}
	}
}

// TestLongChainsAreScoutedOnShortOnes: on a long chain only the start that wins on
// a short one is relaxed, and it ends at the short chain's energy per site.
func TestLongChainsAreScoutedOnShortOnes(t *testing.T) {
	c := model.Chain{Sites: 20_000, Hopping: 1, Spin: 2, ByNumber: true, Electrons: 10_000,
		Bond: model.Phonon{Present: true, Coupling: 0.6, Stiffness: 1.2}, Site: model.Phonon{Present: true, Coupling: 0.5, Stiffness: 0.5}}
	long := relaxed(t, c, Settings{Tolerance: 1e-8})
	if len(long.Tried) != 1 {
		t.Errorf("%d starts were relaxed", len(long.Tried))
	}
	c.Sites, c.Electrons = 400, 200
	short := relaxed(t, c, Settings{Tolerance: 1e-8})
	near(t, "E/N", long.FreeEnergy/20_000, short.FreeEnergy/400, 1e-9)
	if short.Start != long.Start {
		t.Errorf("%s wins on 400 sites, %s on 20000", short.Start, long.Start)
	}
}

// TestShorterChains: the chain on which the starts of a long one are compared has
// its parity and its electrons for each site, a lone one of an odd chain included.
func TestShorterChains(t *testing.T) {
	for _, r := range []struct{ sites, electrons, wantSites, want int }{
		{200_000, 200_000, 1000, 1000},
		{20_001, 20_001, 1001, 1001},
		{100_000, 60_000, 1000, 600},
	} {
		s := shorter(polyacetylene(r.sites, r.electrons))
		if s.Sites != r.wantSites || s.Electrons != r.want {
			t.Errorf("%d electrons on %d sites: %d on %d, want %d on %d", r.electrons, r.sites, s.Electrons, s.Sites, r.want, r.wantSites)
		}
	}
}

func TestCancel(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := Run(ctx, polyacetylene(100, 100), Settings{}); err == nil {
		t.Error("a cancelled relaxation returned no error")
	}
}

// TestSeamlessPatterns: displacements add up to the stretches and have zero mean.
func TestDisplacement(t *testing.T) {
	l := relaxed(t, polyacetylene(50, 50), Settings{})
	sum := 0.0
	for i, u := range l.Displacement {
		sum += u
		next := l.Displacement[(i+1)%50]
		near(t, fmt.Sprintf("u_%d+1 − u_%d", i, i), next-u, l.Stretch[i], 1e-12)
	}
	near(t, "Σu", sum, 0, 1e-12)
}

// BenchmarkLength is the cost of a relaxation from one 2kF start on one core.
func BenchmarkLength(b *testing.B) {
	for _, n := range []int{200, 1000, 10_000, 100_000, 1_000_000} {
		b.Run(fmt.Sprint(n), func(b *testing.B) {
			c := polyacetylene(n, n)
			b.ReportAllocs()
			for b.Loop() {
				l, err := Run(context.Background(), c, Settings{Starts: Seeds(c)[:1]})
				if err != nil || !l.Converged {
					b.Fatal(err)
				}
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(n), "ns/site")
		})
	}
}
