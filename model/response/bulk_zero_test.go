package response

import (
	"math"
	"slices"
	"testing"

	"example.org/twokf/model/band"
	"gonum.org/v1/gonum/integrate/quad"
	"pgregory.net/rapid"
)

// Closed form: χ0 = g_s/(4πt sin(q/2)) ln|(sin(q/2) + sin k_F)/(sin(q/2) − sin k_F)|.
func TestZeroTemperatureClosedForm(t *testing.T) {
	for _, f := range []float64{0.05, 0.25, 1.0 / 3, 0.37, 0.5, 0.8} {
		for _, spin := range []int{1, 2} {
			b := chain(f, spin)
			r := bulk(t, b, 0)
			for q := 0.003; q <= math.Pi; q += 0.01 {
				if math.Abs(q-b.Ordering()) < 1e-3 {
					continue
				}
				x, y := math.Sin(q/2), math.Sin(b.KF())
				want := float64(spin) / (4 * math.Pi * x) * math.Log(math.Abs((x+y)/(x-y)))
				near(t, "χ0", r.At(q).Site, want, 1e-10)
				near(t, "χ_b", r.At(q).Bond, 4*want-2*float64(spin)/math.Pi*y, 1e-10)
			}
		}
	}
}

func TestZeroTemperatureAgainstReference(t *testing.T) {
	for _, c := range referenceChiZero {
		r := bulk(t, chain(c.filling, 1), 0)
		for i, q := range []float64{0.1, 0.3, 0.6, 0.9} {
			s := r.At(q * math.Pi)
			near(t, "χ0", s.Site, c.site[i], 1e-13)
			near(t, "χ_b", s.Bond, c.bond[i], 1e-13)
		}
	}
}

// Published form of the logarithm, from memory: (g_s/2πv_F) ln(4 tan k_F/|q−2k_F|),
// at half filling (g_s/2πt) ln(4/|q−π|). Exact values: independent mpmath
// computation of the closed form.
func TestLogarithmAtTwoKF(t *testing.T) {
	for _, c := range []struct{ f, dq, exact, law float64 }{
		{0.37, -0.01, 0.5928389557788735, 0.5921423569278794},
		{0.37, -0.0001, 0.9914669913784075, 0.9914514850802916},
		{0.37, -1e-06, 1.3907608546772043, 1.3907606132327037},
		{0.25, -0.01, 0.6771077149771647, 0.6742766611797703},
		{0.25, -0.0001, 1.1925943975306075, 1.192540393320437},
		{0.25, -1e-06, 1.7108049245940076, 1.7108041254611037},
		{0.5, -0.01, 0.9535827872188051, 0.9535711990320793},
		{0.5, -0.0001, 1.6865067999864833, 1.6865067979115071},
		{0.5, -1e-06, 2.4194423967912337, 2.419442396790935},
	} {
		b := chain(c.f, 1)
		chi := bulk(t, b, 0).At(b.Ordering() + c.dq).Site
		near(t, "χ0 near 2kF", chi, c.exact, 1e-10)
		near(t, "χ0 near 2kF against the logarithm", chi, c.law, math.Abs(c.dq)+1e-9) // the law is right to first order in q − 2k_F
	}
}

func TestResponseIsInfiniteAtTwoKF(t *testing.T) {
	for _, f := range []float64{0.1, 0.25, 0.37, 0.5, 0.63, 0.9} {
		b := chain(f, 2)
		s := bulk(t, b, 0).At(b.Ordering())
		if !math.IsInf(s.Site, 1) || !math.IsInf(s.Bond, 1) || math.IsNaN(s.Mixed) {
			t.Errorf("at 2kF of filling %v the response is %+v", f, s)
		}
	}
	two := band.Band{Hopping: 1, NextHopping: -0.6, Spin: 2, Filling: 0.3}
	for _, k := range two.FermiPoints() {
		if s := bulk(t, two, 0).At(2 * k); !math.IsInf(s.Site, 1) {
			t.Errorf("χ0 at q = 2·%v is %v", k, s.Site)
		}
	}
}

// Where q joins different pairs of Fermi points the logarithm diverges as well;
// rounding of k ends it, and it must not turn into a difference of infinities.
func TestResponseBetweenPairsOfFermiPoints(t *testing.T) {
	for f := 0.01; f < 0.4; f += 0.001 {
		b := band.Band{Hopping: 1, NextHopping: -0.6, Spin: 1, Filling: f}
		k := b.FermiPoints()
		if len(k) != 2 {
			continue
		}
		r := bulk(t, b, 0)
		at, beside := r.At(k[1]-k[0]), r.At((k[1]-k[0])*(1+1e-4))
		if math.IsNaN(at.Site+at.Bond+at.Mixed) || math.IsInf(at.Site, 0) || at.Site < beside.Site {
			t.Errorf("filling %v: χ is %+v at κ2 − κ1, %+v beside it", f, at, beside)
		}
	}
}

// χ0(q → 0) is the density of states, and the bond response follows with the
// vertex 2cos k at the Fermi points (elementary).
func TestUniformResponseIsTheDensityOfStates(t *testing.T) {
	for _, b := range []band.Band{chain(0.37, 1), chain(0.25, 2), {Hopping: 1, NextHopping: 0.2, Spin: 2, Filling: 0.5}, {Hopping: 1, NextHopping: -0.6, Spin: 2, Filling: 0.3}} {
		r := bulk(t, b, 0)
		for _, q := range []float64{0, 1e-12, 1e-7, 1e-4} {
			near(t, "χ0(q→0)/D", r.At(q).Site/b.DensityOfStates(), 1, 1e-6)
		}
		var mixed, bond float64
		for _, k := range b.FermiPoints() {
			w := 2 * math.Cos(k)
			d := float64(b.Spin) / math.Pi / math.Abs(b.Velocity(k))
			mixed += w * d
			bond += w * w * d
		}
		near(t, "χ_sb(q→0)", r.At(0).Mixed, mixed, 1e-12)
		near(t, "χ_b(q→0)", r.At(0).Bond, bond, 1e-12)
		near(t, "χ0 at T → 0", bulk(t, b, 1e-5).At(0).Site/b.DensityOfStates(), 1, 1e-6)
	}
}

// With t2, and one or two pairs of Fermi points: the definition integrated over
// the pairs of an occupied and an empty state. Source: Gauss-Legendre
// quadrature, gonum v0.17.0, between all the points where an occupation jumps.
func TestZeroTemperatureByQuadrature(t *testing.T) {
	for _, b := range []band.Band{
		{Hopping: 1, NextHopping: 0.2, Spin: 1, Filling: 0.37}, {Hopping: 1, NextHopping: -0.15, Spin: 2, Filling: 1.4},
		{Hopping: 1, NextHopping: 0.6, Spin: 2, Filling: 1.7}, {Hopping: 1, NextHopping: -0.6, Spin: 2, Filling: 0.3},
		{Hopping: 0, NextHopping: 1, Spin: 2, Filling: 0.7}, {Hopping: -1, NextHopping: 0.3, Spin: 1, Filling: 0.6},
		{Hopping: 1, NextHopping: 1e-9, Spin: 1, Filling: 0.37},
	} {
		r := bulk(t, b, 0)
		for _, q := range []float64{0.3, 1.0, 1.9, 2.5, 3.0} {
			got, want := r.At(q), zeroByQuadrature(b, q)
			if d := distance(got, want); !(d < 1e-9*(1+want.Site)) {
				t.Errorf("χ(%v) of %+v is %+v, by quadrature %+v", q, b, got, want)
			}
		}
	}
}

func zeroByQuadrature(b band.Band, q float64) (sum Static) {
	energy := b.FermiEnergy()
	var jumps []float64
	for _, k := range b.FermiPoints() {
		for _, side := range []float64{-1, 1} {
			for _, turn := range []float64{-2 * math.Pi, 0, 2 * math.Pi} {
				jumps = append(jumps, side*k-q/2+turn, side*k+q/2+turn)
			}
		}
	}
	jumps = append(jumps, 0, math.Pi)
	inside := jumps[:0]
	for _, s := range jumps {
		if s >= 0 && s <= math.Pi {
			inside = append(inside, s)
		}
	}
	slices.Sort(inside)
	for i := 1; i < len(inside); i++ {
		lo, hi := inside[i-1], inside[i]
		mid := (lo + hi) / 2
		if (b.Energy(mid-q/2) < energy) == (b.Energy(mid+q/2) < energy) {
			continue
		}
		integrate := func(w func(c float64) float64) float64 {
			f := func(s float64) float64 {
				return w(2*math.Cos(s)) / math.Abs(b.Energy(s+q/2)-b.Energy(s-q/2))
			}
			const panels = 40
			total := 0.0
			for p := range panels {
				total += quad.Fixed(f, lo+(hi-lo)*float64(p)/panels, lo+(hi-lo)*float64(p+1)/panels, 20, nil, 0)
			}
			return total * float64(b.Spin) / math.Pi
		}
		sum.add(1, Static{
			Site:  integrate(func(float64) float64 { return 1 }),
			Bond:  integrate(func(w float64) float64 { return w * w }),
			Mixed: integrate(func(w float64) float64 { return w }),
		})
	}
	return sum
}

// The response at T = 0 is a positive form in the two vertices, even in q and
// periodic, and the same for holes with t2 reversed, where the bond vertex
// changes its sign.
func TestSymmetriesOfTheResponse(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		b := anyBand(rt)
		T := rapid.SampledFrom([]float64{0, 1e-8, 0.003, 0.1, 0.8, 4}).Draw(rt, "T")
		q := rapid.Float64Range(0, math.Pi).Draw(rt, "q")
		r := bulk(t, b, T)
		s := r.At(q)
		if s.Site < 0 || s.Bond < -1e-12 || s.Mixed*s.Mixed > s.Site*s.Bond*(1+1e-9)+1e-9 || math.IsNaN(s.Site+s.Bond+s.Mixed) {
			rt.Errorf("χ(%v) of %+v at T = %v is %+v: not a positive form", q, b, T, s)
		}
		// Rounding of q−2kF is felt by the logarithm: compare where χ is not steep.
		tolerance := 1e-10 * (1 + s.Site + s.Bond)
		if d := distance(s, r.At(-q)); d > tolerance {
			rt.Errorf("χ(q) − χ(−q) = %v", d)
		}
		turned := r.At(q + 2*math.Pi)
		turned.Mixed = -turned.Mixed
		if steep := math.Abs(s.Site-r.At(q*(1+1e-12)).Site) > tolerance; !steep && distance(s, turned) > 100*tolerance {
			rt.Errorf("χ(q + 2π) is %+v, χ(q) is %+v", r.At(q+2*math.Pi), s)
		}
		holes := bulk(t, band.Band{Hopping: b.Hopping, NextHopping: -b.NextHopping, Spin: b.Spin, Filling: float64(b.Spin) - b.Filling}, T).At(q)
		holes.Mixed = -holes.Mixed
		if steep := math.Abs(s.Site-r.At(q*(1+1e-12)).Site) > tolerance; !steep && distance(s, holes) > 100*tolerance {
			rt.Errorf("holes answer with %+v, electrons with %+v", holes, s)
		}
	})
}

func TestEmptyFullAndFlatBandsRespond(t *testing.T) {
	for _, T := range []float64{0, 0.1, 5} {
		for _, b := range []band.Band{chain(0, 2), chain(1, 2)} {
			if s := bulk(t, b, T).At(1); s != (Static{}) {
				t.Errorf("%+v at T = %v responds with %+v", b, T, s)
			}
		}
		s := bulk(t, band.Band{Spin: 2, Filling: 0.5}, T).At(1)
		if T == 0 {
			if !math.IsInf(s.Site, 1) || !math.IsInf(s.Bond, 1) || s.Mixed != 0 {
				t.Errorf("a flat band at T = 0 responds with %+v", s)
			}
			continue
		}
		near(t, "flat χ0", s.Site, 2*0.25*0.75/T, 1e-14)
		near(t, "flat χ_b", s.Bond, 2*s.Site, 1e-14)
	}
}
