package band

import (
	"math"
	"testing"

	"example.org/twokf/model"
	"gonum.org/v1/gonum/integrate/quad"
	"pgregory.net/rapid"
)

func near(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s is %.17g, want %.17g (off by %.1e, allowed %.1e)", what, got, want, got-want, tolerance)
	}
}

// Source: independent numpy computation of the closed forms, cross-checked by
// quadrature over energy; 15 trusted digits.
func TestUniformChainAgainstReference(t *testing.T) {
	for _, c := range []struct {
		band                             Band
		kF, energy, velocity, dos, total float64
	}{
		{Band{1, 0, 1, 0.5}, 1.5707963267948966, 0, 2.0, 0.15915494309189535, -0.6366197723675814},
		{Band{1, 0, 1, 0.25}, 0.7853981633974483, -1.4142135623730951, 1.4142135623730951, 0.22507907903927651, -0.45015815807855303},
		{Band{1, 0, 1, 1.0 / 3}, 1.0471975511965979, -1.0, 1.7320508075688772, 0.18377629847393068, -0.5513288954217921},
		{Band{1, 0, 1, 0.37}, 1.1623892818282235, -0.7942957812695612, 1.8355092513679623, 0.17341775093019102, -0.5842607408922309},
		{Band{1, 0, 2, 0.5}, 0.7853981633974483, -1.4142135623730951, 1.4142135623730951, 0.45015815807855303, -0.9003163161571061},
		{Band{1, 0, 2, 0.25}, 0.39269908169872414, -1.8477590650225735, 0.7653668647301796, 0.831783817283511, -0.48724767920221634},
		{Band{1, 0, 2, 1.0 / 3}, 0.5235987755982989, -1.7320508075688772, 1.0, 0.6366197723675814, -0.6366197723675814},
		{Band{1, 0, 2, 0.37}, 0.5811946409141118, -1.6716147227365405, 1.0980456359962636, 0.5797753312775314, -0.6990375628371573},
		{Band{1, 0, 2, 1}, 1.5707963267948966, 0, 2.0, 0.3183098861837907, -1.2732395447351628},
		{Band{1, 0, 2, 2.0 / 3}, 1.0471975511965979, -1.0, 1.7320508075688772, 0.36755259694786135, -1.1026577908435842},
		{Band{1, 0, 2, 0.74}, 1.1623892818282235, -0.7942957812695612, 1.8355092513679623, 0.34683550186038203, -1.1685214817844618},
		{Band{1, 0.2, 1, 0.37}, 1.1623892818282235, -0.5204769388980858, 2.4186841533050916, 0.13160456926499706, -0.6306683250574436},
		{Band{1, -0.15, 2, 0.5}, 0.7853981633974483, -1.4142135623730951, 0.8142135623730951, 0.7818830363278383, -0.8048233503019688},
	} {
		points := c.band.FermiPoints()
		if len(points) != 1 {
			t.Fatalf("%+v has the Fermi points %v, want one", c.band, points)
		}
		near(t, "kF", points[0], c.kF, 1e-12)
		near(t, "KF", c.band.KF(), c.kF, 1e-12)
		near(t, "E_F", c.band.FermiEnergy(), c.energy, 1e-12)
		near(t, "v_F", c.band.FermiVelocity(), c.velocity, 1e-12)
		near(t, "density of states", c.band.DensityOfStates(), c.dos, 1e-12)
		near(t, "E/N", c.band.EnergyPerSite(), c.total, 1e-12)
	}
}

func TestOrderingVectorIsFolded(t *testing.T) {
	for _, c := range []struct{ filling, want float64 }{
		{0, 0}, {0.5, 0.5 * math.Pi}, {1, math.Pi}, {1.5, 0.5 * math.Pi}, {2, 0},
	} {
		near(t, "2kF", Band{1, 0, 2, c.filling}.Ordering(), c.want, 1e-15)
	}
}

func TestOfReadsTheChain(t *testing.T) {
	c := model.Chain{Hopping: 2.5, NextHopping: 0.1, Spin: 2, ByNumber: true, Electrons: 37, Sites: 100}
	if got, want := Of(c), (Band{Hopping: 2.5, NextHopping: 0.1, Spin: 2, Filling: 0.37}); got != want {
		t.Errorf("band is %+v, want %+v", got, want)
	}
}

// bands draws any band that is not flat, with one and with two pairs of Fermi points.
func bands() *rapid.Generator[Band] {
	return rapid.Custom(func(t *rapid.T) Band {
		b := Band{Spin: rapid.IntRange(1, 2).Draw(t, "spin")}
		b.Hopping = rapid.SampledFrom([]float64{1, 1, 1, -1, 2.5, 0.1, 0}).Draw(t, "t")
		b.NextHopping = rapid.SampledFrom([]float64{0, 0.2, -0.2, 0.7, -0.7, 3}).Draw(t, "t2")
		if b.Hopping == 0 && b.NextHopping == 0 {
			b.Hopping = 1
		}
		b.Filling = float64(b.Spin) * rapid.Float64Range(0.01, 0.99).Draw(t, "f")
		return b
	})
}

// The Fermi points carry all the electrons: occupied intervals, found from
// ε(k) < E_F alone, add up to the filling.
func TestFermiSeaHoldsTheElectrons(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		b := bands().Draw(rt, "band")
		edges := append(append([]float64{0}, b.FermiPoints()...), math.Pi)
		var filling, energy float64
		for i := 1; i < len(edges); i++ {
			lo, hi := edges[i-1], edges[i]
			if b.Energy((lo+hi)/2) < b.FermiEnergy() {
				filling += float64(b.Spin) / math.Pi * (hi - lo)
				// Source: Gauss-Legendre quadrature, gonum v0.17.0.
				energy += float64(b.Spin) / math.Pi * quad.Fixed(b.Energy, lo, hi, 40, nil, 0)
			}
		}
		if math.Abs(filling-b.Filling) > 1e-12 {
			rt.Errorf("sea of %+v holds %.15g", b, filling)
		}
		if math.Abs(energy-b.EnergyPerSite()) > 1e-12 {
			rt.Errorf("energy of %+v is %.15g, by quadrature %.15g", b, b.EnergyPerSite(), energy)
		}
		for _, k := range b.FermiPoints() {
			if math.Abs(b.Energy(k)-b.FermiEnergy()) > 1e-12 {
				rt.Errorf("ε(%v) of %+v is not E_F", k, b)
			}
		}
		lo, hi := b.Edges()
		for k := 0.0; k < math.Pi; k += 0.01 {
			if e := b.Energy(k); e < lo-1e-12 || e > hi+1e-12 {
				rt.Errorf("ε(%v) of %+v lies outside of its edges", k, b)
			}
		}
	})
}

// dE/dν = E_F and dν/dE_F = density of states: central differences.
func TestDerivativesByFilling(t *testing.T) {
	for _, b := range []Band{{1, 0, 2, 0.6}, {1, 0.2, 1, 0.3}, {1, 0.7, 2, 1.6}, {1, -0.7, 2, 0.2}, {0, 1, 1, 0.4}, {-1, 0.1, 2, 0.3}} {
		const h = 1e-5
		less, more := b, b
		less.Filling, more.Filling = b.Filling-h, b.Filling+h
		near(t, "dE/dν", (more.EnergyPerSite()-less.EnergyPerSite())/(2*h), b.FermiEnergy(), 1e-8)
		near(t, "dν/dμ", 2*h/(more.FermiEnergy()-less.FermiEnergy())/b.DensityOfStates(), 1, 1e-7)
	}
}

func TestSymmetriesOfTheBand(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		b := bands().Draw(rt, "band")
		k := rapid.Float64Range(-10, 10).Draw(rt, "k")
		if math.Abs(b.Energy(k)-b.Energy(-k)) > 1e-10 || math.Abs(b.Velocity(k)+b.Velocity(-k)) > 1e-10 {
			rt.Errorf("%+v is not even in k", b)
		}
		const h = 1e-5
		if math.Abs((b.Energy(k+h)-b.Energy(k-h))/(2*h)-b.Velocity(k)) > 1e-7 {
			rt.Errorf("velocity of %+v is not dε/dk", b)
		}
		holes := Band{b.Hopping, -b.NextHopping, b.Spin, float64(b.Spin) - b.Filling}
		T := rapid.SampledFrom([]float64{0, 1e-9, 0.01, 0.3, 7}).Draw(rt, "T")
		scale := 1 + T
		if math.Abs(holes.ChemicalPotential(T)+b.ChemicalPotential(T)) > 1e-10*scale {
			rt.Errorf("μ of %+v at %v is not minus that of the holes", b, T)
		}
		if math.Abs(holes.BondOrder(T)-b.BondOrder(T)) > 1e-10 {
			rt.Errorf("bond order of %+v at %v is not that of the holes", b, T)
		}
		turned := Band{-b.Hopping, b.NextHopping, b.Spin, b.Filling} // k → k + π
		if math.Abs(turned.ChemicalPotential(T)-b.ChemicalPotential(T)) > 1e-10*scale {
			rt.Errorf("μ of %+v depends on the sign of t", b)
		}
	})
}

func TestEmptyFullAndFlatBands(t *testing.T) {
	inf := math.Inf(1)
	for _, c := range []struct {
		name       string
		band       Band
		energy, mu float64 // μ at T = 0.1
	}{
		{"empty", Band{1, 0, 2, 0}, -2, -inf},
		{"full", Band{1, 0, 2, 2}, 2, inf},
		{"empty with t2", Band{1, 1, 2, 0}, -4, -inf},
		{"flat", Band{0, 0, 2, 1}, 0, 0},
		{"flat at quarter filling", Band{0, 0, 2, 0.5}, 0, -0.1 * math.Log(3)},
	} {
		near(t, c.name+": E_F", c.band.FermiEnergy(), c.energy, 1e-15)
		if n := len(c.band.FermiPoints()); n != 0 {
			t.Errorf("%s: %d Fermi points", c.name, n)
		}
		if v := c.band.FermiVelocity(); v != 0 {
			t.Errorf("%s: velocity %v", c.name, v)
		}
		if d := c.band.DensityOfStates(); d != inf {
			t.Errorf("%s: density of states %v", c.name, d)
		}
		if e := c.band.EnergyPerSite(); e != 0 {
			t.Errorf("%s: energy %v", c.name, e)
		}
		if mu := c.band.ChemicalPotential(0.1); mu != c.mu && !(math.Abs(mu-c.mu) < 1e-15) {
			t.Errorf("%s: μ = %v, want %v", c.name, mu, c.mu)
		}
		near(t, c.name+": bond order", c.band.BondOrder(0.1), 0, 1e-15)
	}
}
