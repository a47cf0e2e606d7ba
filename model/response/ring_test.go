package response

import (
	"context"
	"errors"
	"math"
	"testing"

	"example.org/twokf/model/band"
	"pgregory.net/rapid"
)

func TestRingAgainstReference(t *testing.T) {
	for _, c := range referenceRing {
		r := ring(t, c.sites, c.electrons, 1, 1, 0, c.T)
		for i, m := range c.m {
			near(t, "ring χ0", r.At(m).Site, c.site[i], 1e-12)
			if c.bond != nil {
				near(t, "ring χ_b", r.At(m).Bond, c.bond[i], 1e-12)
			}
		}
	}
}

// ringMu solves Σ f = electrons per spin by bisection.
func ringMu(b band.Band, n int, perSpin, T float64) float64 {
	lo, hi := -1e3*(1+T), 1e3*(1+T)
	for range 200 {
		mu, sum := (lo+hi)/2, 0.0
		for j := range n {
			sum += 1 / (1 + math.Exp((b.Energy(2*math.Pi*float64(j)/float64(n))-mu)/T))
		}
		if sum > perSpin {
			hi = mu
		} else {
			lo = mu
		}
	}
	return (lo + hi) / 2
}

// Any ring, small and large, with t2 that makes levels cross: the definition
// summed over all k with −f' for degenerate pairs.
func TestRingIsTheDefinition(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		b := anyBand(rt)
		n := rapid.OneOf(rapid.IntRange(1, 12), rapid.IntRange(13, 80)).Draw(rt, "sites")
		T := rapid.SampledFrom([]float64{0.03, 0.3, 2, 40}).Draw(rt, "T")
		electrons := rapid.Float64Range(0.1, 0.9).Draw(rt, "f") * float64(n*b.Spin)
		m := rapid.IntRange(0, n/2).Draw(rt, "m")
		r := ring(t, n, electrons, b.Spin, b.Hopping, b.NextHopping, T)
		mu := ringMu(b, n, electrons/float64(b.Spin), T)
		q := 2 * math.Pi * float64(m) / float64(n)
		got, want := r.At(m), definition(b, mu, T, q, n, float64(m)/2)
		// μ by bisection is uncertain in the gap of a closed shell, where χ(0) is exponentially small.
		if d := distance(got, want); !(d < 1e-10*want.Site+1e-12) {
			rt.Errorf("χ(%d of %d) of %+v at T = %v is %+v, want %+v", m, n, b, T, got, want)
		}
	})
}

func TestRingBondIdentity(t *testing.T) {
	for _, n := range []int{5, 12, 101, 200} {
		for _, T := range []float64{0, 0.01, 0.5} {
			electrons := 2.0 * float64((n/3)|1) // odd per spin: a closed shell
			r := ring(t, n, electrons, 2, 1, 0, T)
			p := 0.0
			for j := range n {
				p += 2 * 2 * math.Cos(2*math.Pi*float64(j)/float64(n)) * r.full[n/2+j] / float64(n)
			}
			for m := 1; m <= n/2; m++ {
				s := r.At(m)
				near(t, "χ_b − 4χ0 + p/t", s.Bond-4*s.Site+p, 0, 1e-11)
			}
		}
	}
}

// Published scaling, from memory: sums over N points approach the integral as
// e^{−πTN/v_F}; values from an independent numpy computation.
func TestRingApproachesTheInfiniteChain(t *testing.T) {
	const f, T = 0.37, 0.02
	b := chain(f, 1)
	infinite := bulk(t, b, T).At(b.Ordering()).Site
	previous := 0.0
	for _, c := range referenceFiniteRing {
		n := int(c[0])
		off := ring(t, n, f*c[0], 1, 1, 0, T).At(int(math.Round(f*c[0]))).Site - infinite
		near(t, "ring − bulk", off/c[1], 1, 1e-6)
		if previous != 0 {
			decay := math.Exp(-math.Pi * T * 100 / b.FermiVelocity())
			if ratio := math.Abs(off/previous) / decay; ratio < 0.5 || ratio > 2 {
				t.Errorf("100 more sites bring the factor %v, want %v", off/previous, decay)
			}
		}
		previous = off
	}
}

func TestRingWithOpenShell(t *testing.T) {
	// 4 of 10 sites per spin: ±k with 2 states hold 1 electron.
	r := ring(t, 10, 8, 2, 1, 0, 0)
	if s := r.At(4); !math.IsInf(s.Site, 1) || !math.IsInf(s.Bond, 1) || !math.IsInf(s.Mixed, 1) {
		t.Errorf("at 2kF of an open shell χ is %+v", s)
	}
	if s := r.At(0); !math.IsInf(s.Site, 1) {
		t.Errorf("at q = 0 of an open shell χ is %+v", s)
	}
	// Half filling of N = 4m: both zero modes ±π/2, and inversion forbids mixing.
	if s := ring(t, 8, 8, 2, 1, 0, 0).At(4); !math.IsInf(s.Site, 1) || s.Mixed != 0 {
		t.Errorf("at π of the half-filled ring of 8 sites χ is %+v", s)
	}
	// A closed shell does not answer at q = 0, and answers finitely elsewhere.
	closed := ring(t, 10, 10, 2, 1, 0, 0)
	for m := range 6 {
		if s := closed.At(m); math.IsInf(s.Site, 0) || math.IsNaN(s.Site+s.Bond+s.Mixed) || (m == 0) != (s.Site == 0) {
			t.Errorf("closed shell at m = %d: %+v", m, s)
		}
	}
	// The other wave vectors are the limit T → 0.
	cold := ring(t, 10, 8, 2, 1, 0, 1e-3)
	for _, m := range []int{1, 2, 3, 5} {
		if d := distance(r.At(m), cold.At(m)); d > 1e-12 {
			t.Errorf("T = 0 and T → 0 differ by %v at m = %d", d, m)
		}
	}
	// Partly filled by a fraction of an electron: f(1−f)/T on each of ±k.
	tiny := ring(t, 10, 7, 2, 1, 0, 1e-30)
	near(t, "χ0 of an open shell", tiny.At(4).Site*1e-30, 2.0/10*0.25*0.75, 1e-12)
}

// Exponentially few electrons and holes balance: μ of a closed shell stands
// where Σ f = N says, not somewhere in the gap.
func TestRingBalancesElectronsAndHoles(t *testing.T) {
	for _, T := range []float64{0.02, 0.05, 1} {
		r := ring(t, 12, 10, 2, 1, 0.1, T)
		var electrons, holes float64
		for j := range 12 {
			f, e := r.full[6+j], r.empty[6+j]
			if j <= 2 || j >= 10 {
				holes += e
			} else {
				electrons += f
			}
		}
		near(t, "electrons/holes", electrons/holes, 1, 1e-12)
	}
}

func TestSymmetriesOfTheRing(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		b := anyBand(rt)
		n := 2 * rapid.IntRange(2, 30).Draw(rt, "half the sites")
		electrons := float64(rapid.IntRange(1, n*b.Spin-1).Draw(rt, "electrons"))
		T := rapid.SampledFrom([]float64{0.01, 0.2, 5}).Draw(rt, "T")
		m := rapid.IntRange(-n, n).Draw(rt, "m")
		r := ring(t, n, electrons, b.Spin, b.Hopping, b.NextHopping, T)
		s := r.At(m)
		if s.Site < 0 || s.Bond < -1e-12 {
			rt.Errorf("χ = %+v is negative", s)
		}
		if r.At(-m) != s && m%n != n/2 && m%n != -n/2 {
			rt.Errorf("χ(q) = %+v, χ(−q) = %+v", s, r.At(-m))
		}
		turned := r.At(m + 2*n)
		if distance(turned, s) != 0 {
			rt.Errorf("χ(q) = %+v, χ(q + 4π) = %+v", s, turned)
		}
		holes := ring(t, n, float64(n*b.Spin)-electrons, b.Spin, b.Hopping, -b.NextHopping, T).At(m)
		holes.Mixed = -holes.Mixed
		if d := distance(s, holes); d > 1e-10*(1+s.Site) {
			rt.Errorf("holes answer with %+v, electrons with %+v", holes, s)
		}
	})
}

func TestRingCurveIsAtOfEach(t *testing.T) {
	for _, n := range []int{1, 2, 3, 4, 7, 30} {
		r := ring(t, n, float64(n), 2, 1, 0.2, 0.1)
		dst := make([]Static, n/2+1)
		if err := r.Curve(t.Context(), dst); err != nil {
			t.Fatal(err)
		}
		for m := range dst {
			if dst[m] != r.At(m) {
				t.Errorf("χ(%d of %d) differs", m, n)
			}
		}
	}
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	if err := ring(t, 4, 4, 2, 1, 0, 0.1).Curve(ctx, make([]Static, 3)); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled curve returns %v", err)
	}
}

func TestRingEmptyFullAndFlat(t *testing.T) {
	for _, T := range []float64{0, 0.1} {
		for _, electrons := range []float64{0, 20} {
			for m := range 6 {
				if s := ring(t, 10, electrons, 2, 1, 0, T).At(m); s != (Static{}) {
					t.Errorf("%v electrons on 10 sites answer with %+v", electrons, s)
				}
			}
		}
	}
	near(t, "flat ring", ring(t, 10, 10, 2, 0, 0, 0.1).At(3).Site, 2*0.25/0.1, 1e-12)
}

func TestNewRingNamesWhatIsWrong(t *testing.T) {
	for _, c := range []struct {
		n         int
		electrons float64
		spin      int
		t, T      float64
		want      string
	}{
		{0, 0, 1, 1, 0, "number of sites is 0; it must be at least 1"},
		{4, 4, 0, 1, 0, "spin is 0; it must be at least 1"},
		{4, 9, 2, 1, 0, "number of electrons is 9; it must lie in 0..8"},
		{4, 4, 2, 1, -1, "temperature is -1; it must be a number ≥ 0"},
		{4, 4, 2, math.NaN(), 0, "hoppings are NaN and 0; they must be finite"},
	} {
		if _, err := NewRing(c.n, c.electrons, c.spin, c.t, 0, c.T); err == nil || err.Error() != c.want {
			t.Errorf("error is %v, want %v", err, c.want)
		}
	}
}
