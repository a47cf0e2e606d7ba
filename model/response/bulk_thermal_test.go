package response

import (
	"math"
	"testing"

	"example.org/twokf/model/band"
	"gonum.org/v1/gonum/integrate/quad"
	"pgregory.net/rapid"
)

func TestResponseAgainstReference(t *testing.T) {
	for _, c := range referenceChi {
		for _, spin := range []int{1, 2} { // proportional to g_s at equal band filling
			b := chain(c.filling, spin)
			r := bulk(t, b, c.T)
			for i, q := range c.q {
				s := r.At(q)
				near(t, "χ0", s.Site/float64(spin), c.site[i], 1e-11)
				near(t, "χ_b", s.Bond/float64(spin), c.bond[i], 1e-11)
			}
		}
	}
	for _, c := range referenceUniform {
		near(t, "χ0(q = 0)", bulk(t, chain(c.filling, 1), c.T).At(0).Site, c.chi, 1e-11)
	}
	// Independent sum over 4000 Matsubara frequencies with a tail: 0.39623871451412324, 9 digits.
	near(t, "χ0(2kF)", bulk(t, chain(0.37, 1), 0.1).At(0.74*math.Pi).Site, 0.3962387144840183, 1e-12)
}

// The contour sum and the sum for hot bands are the definition, for any t2,
// any filling, and any q.
func TestResponseIsTheDefinition(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		b := anyBand(rt)
		T := rapid.SampledFrom([]float64{0.02, 0.1, 0.5, 0.99, 1.01, 1.5, 3, 50, 1e6}).Draw(rt, "T")
		q := rapid.SampledFrom([]float64{0, 1e-5, 0.3, b.Ordering(), 2, math.Pi - 1e-4, math.Pi}).Draw(rt, "q")
		points := 200 + int(160*(math.Abs(b.Hopping)+2*math.Abs(b.NextHopping))/T)
		got, want := bulk(t, b, T).At(q), definition(b, b.ChemicalPotential(T), T, q, points, 0.137)
		if d := distance(got, want); !(d < 1e-11*want.Site) {
			rt.Errorf("χ(%v) of %+v at T = %v is %+v, want %+v", q, b, T, got, want)
		}
	})
}

// Source: Gauss-Legendre quadrature, gonum v0.17.0, on panels no wider than T.
func TestResponseByQuadrature(t *testing.T) {
	b, T, q := band.Band{Hopping: 1, NextHopping: 0.3, Spin: 2, Filling: 0.8}, 0.02, 1.3
	mu := b.ChemicalPotential(T)
	f := func(s float64) float64 {
		x, y := b.Energy(s-q/2), b.Energy(s+q/2)
		return (1/(1+math.Exp((x-mu)/T)) - 1/(1+math.Exp((y-mu)/T))) / (y - x)
	}
	sum := 0.0
	const panels = 160
	for i := range panels {
		sum += quad.Fixed(f, math.Pi*float64(i)/panels, math.Pi*float64(i+1)/panels, 16, nil, 0)
	}
	near(t, "χ0", bulk(t, b, T).At(q).Site, sum*2/math.Pi, 1e-11)
}

// χ_b = 4χ0 − p/t holds at any q and T without t2 (exact identity); p from the
// band, χ from here.
func TestBondResponseIdentity(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		f := rapid.Float64Range(0.03, 0.97).Draw(rt, "f")
		T := rapid.SampledFrom([]float64{0, 1e-6, 0.01, 0.2, 0.9, 1.5, 10}).Draw(rt, "T")
		q := rapid.Float64Range(1e-3, math.Pi).Draw(rt, "q")
		b := chain(f, 2)
		s := bulk(t, b, T).At(q)
		if d := math.Abs(s.Bond - 4*s.Site + b.BondOrder(T)); d > 1e-11*(1+s.Site) {
			rt.Errorf("χ_b − 4χ0 + p/t = %.1e at f = %v, T = %v, q = %v", d, f, T, q)
		}
	})
	// Source: independent numpy computation.
	for _, c := range []struct{ f, T, q, bond float64 }{
		{0.37, 0.05, 1.1, 0.20627000408365959}, {0.25, 0.2, 2.2, 0.44436865445371115}, {0.5, 0.02, 3.0, 1.520707290293431},
	} {
		near(t, "χ_b", bulk(t, chain(c.f, 1), c.T).At(c.q).Bond, c.bond, 1e-12)
	}
}

// (m w g_s/2πv_F) ln(2e^γ ε_c/πT), ε_c = 4t sin²k_F/|cos k_F| for sites, times
// e^{−2sin²k_F} for bonds; at half filling m = 2, ε_c = 4t and 4t/e.
func TestLogarithmOfTemperature(t *testing.T) {
	for _, c := range referenceLog {
		b := chain(c.filling, 1)
		v := b.FermiVelocity()
		sin2, m, site := math.Pow(math.Sin(b.KF()), 2), 1.0, 0.0
		if c.filling == 0.5 {
			m, site = 2, 4
		} else {
			site = 4 * sin2 / math.Abs(math.Cos(b.KF()))
		}
		bond := site * math.Exp(-2*sin2)
		if c.filling == 0.5 {
			bond = 4 / math.E
		}
		for _, row := range c.rows {
			T := row[0]
			s := bulk(t, b, T).At(b.Ordering())
			near(t, "χ0(2kF)", s.Site, row[1], 1e-11)
			near(t, "χ_b(2kF)", s.Bond, row[2], 1e-11)
			if T <= 0.01 {
				near(t, "χ0(2kF) against the logarithm", s.Site, m/(2*math.Pi*v)*math.Log(bcs*site/T), 1e-3)
				near(t, "χ_b(2kF) against the logarithm", s.Bond, 4*m/(2*math.Pi*v)*math.Log(bcs*bond/T), 1e-3)
			}
		}
	}
}

// The logarithm goes on as far as temperatures can be told from zero, also
// where q joins the Fermi points of the smaller of two pairs; away from there
// the response becomes that of T = 0.
func TestResponseInTheCold(t *testing.T) {
	for _, b := range []band.Band{chain(0.37, 2), chain(0.5, 2), chain(0.81, 1), {Hopping: 1, NextHopping: 0.3, Spin: 2, Filling: 1.3}, {Hopping: 1, NextHopping: -0.6, Spin: 2, Filling: 0.3}} {
		k := b.FermiPoints()[0]
		weight := float64(b.Spin) / (2 * math.Pi * math.Abs(b.Velocity(k)))
		q := 2 * math.Min(k, math.Pi-k)
		if q == math.Pi {
			weight *= 2
		}
		warm := bulk(t, b, 1e-6).At(q)
		for _, T := range []float64{1e-10, 1e-17, 1e-30, 1e-60} {
			cold := bulk(t, b, T).At(q)
			near(t, "growth of χ0", (cold.Site-warm.Site)/(weight*math.Log(1e-6/T)), 1, 1e-8)
			near(t, "growth of χ_b", (cold.Bond-warm.Bond)/(weight*math.Log(1e-6/T)), 4, 1e-7)
		}
		for _, q := range []float64{0, 0.3, 1.1, 2.9} {
			if d := distance(bulk(t, b, 1e-9).At(q), bulk(t, b, 0).At(q)); d > 1e-12 {
				t.Errorf("χ(%v) of %+v is off by %.1e at T = 1e-9", q, b, d)
			}
		}
	}
	if bulk(t, chain(0.3, 1), 1e-80).Temperature() != 0 {
		t.Error("1e-80 is told from zero")
	}
}

func TestPeakShiftsOffTwoKF(t *testing.T) {
	for _, c := range referencePeak {
		b := chain(c.filling, 1)
		q, chi := bulk(t, b, c.T).Peak(t.Context())
		near(t, "height of the peak", chi, c.chi, 1e-10)
		near(t, "shift of the peak", q-b.Ordering(), c.shift, 0.01*math.Abs(c.shift)+1e-6)
	}
	b := chain(0.37, 2)
	if q, chi := bulk(t, b, 0).Peak(t.Context()); q != b.Ordering() || !math.IsInf(chi, 1) {
		t.Errorf("at T = 0 the peak is at %v with %v", q, chi)
	}
	// Far below the spacing of any grid the peak stands at 2kF: its shift is of second order in T.
	if q, _ := bulk(t, b, 1e-9).Peak(t.Context()); math.Abs(q-b.Ordering()) > 1e-11 {
		t.Errorf("at T = 1e-9 the peak is off 2kF by %v", q-b.Ordering())
	}
}

func TestNewBulkNamesWhatIsWrong(t *testing.T) {
	for _, c := range []struct {
		band band.Band
		T    float64
		want string
	}{
		{chain(0.5, 1), -1, "temperature is -1; it must be a number ≥ 0"},
		{chain(0.5, 1), math.NaN(), "temperature is NaN; it must be a number ≥ 0"},
		{band.Band{Hopping: 1}, 0, "spin is 0; it must be at least 1"},
		{chain(1.5, 2), 0, "filling is 3; it must lie in 0..2"},
		{band.Band{Hopping: math.Inf(1), Spin: 1}, 0, "hoppings are +Inf and 0; they must be finite"},
	} {
		if _, err := NewBulk(c.band, c.T); err == nil || err.Error() != c.want {
			t.Errorf("error is %v, want %v", err, c.want)
		}
	}
}
