package band

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/integrate/quad"
)

// Moments of 1/(4cosh²(ξ/2)): (2^{2n} − 2) π^{2n} |B_{2n}|, Bernoulli numbers
// (handbook). A Gauss rule of m points has them right up to ξ^{2m−1}.
func TestLogisticRuleHasTheMoments(t *testing.T) {
	nodes, weights := logisticRule()
	for n, bernoulli := range []float64{1, 1.0 / 6, 1.0 / 30, 1.0 / 42, 1.0 / 30, 5.0 / 66} {
		want := (math.Pow(4, float64(n)) - 2) * math.Pow(math.Pi, 2*float64(n)) * bernoulli
		if n == 0 {
			want = 1
		}
		got := 0.0
		for i, x := range nodes {
			got += weights[i] * math.Pow(x, 2*float64(n))
		}
		near(t, "moment", got/want, 1, 1e-12)
	}
}

// Source: independent numpy computation (periodic trapezoid rule and root
// finding).
func TestChemicalPotentialAgainstReference(t *testing.T) {
	for _, c := range []struct{ filling, T, mu float64 }{
		{0.5, 0.2, 0}, {0.25, 0.01, -1.4140971200896657}, {0.25, 0.1, -1.4008939136540965}, {0.25, 0.2, -1.3656775626053779},
	} {
		near(t, "μ", Band{1, 0, 1, c.filling}.ChemicalPotential(c.T), c.mu, 1e-12)
	}
}

// thermalBands have one and two pairs of Fermi points, low and high fillings,
// and Fermi energies close to a band edge and to a van Hove point inside.
var thermalBands = []Band{
	{1, 0, 1, 0.37}, {1, 0, 2, 1.6}, {1, 0.2, 2, 0.5}, {1, -0.15, 2, 0.5}, {1, 0.6, 2, 0.3}, {1, -0.6, 2, 0.3},
	{1, -0.6, 2, 1.2}, {1, 0.6, 2, 1.9}, {0, 1, 2, 0.6}, {-1, 0.3, 1, 0.4}, {1, 1e-9, 2, 0.8}, {1, 0.25, 2, 0.9},
	{1, 0, 2, 0.002}, {1, 0, 2, 1.999}, {1, 0.6, 2, 0.7837},
}

// The definition: ν = (g_s/2π)∫ f dk and p = (g_s/2π)∫ 2cos k f dk by the
// periodic trapezoid rule with enough points to be exact.
func TestFillingAndBondOrderAreThermalAverages(t *testing.T) {
	for _, b := range thermalBands {
		for _, T := range []float64{1e-3, 0.01, 0.1, 0.5, 0.99, 1.01, 1.5, 30, 1e6} {
			mu := b.ChemicalPotential(T)
			points := 200 + int(200/T)
			var n, p float64
			for i := range points {
				k := 2 * math.Pi * float64(i) / float64(points)
				f := 1 / (1 + math.Exp((b.Energy(k)-mu)/T))
				n += f
				p += 2 * math.Cos(k) * f
			}
			scale := float64(b.Spin) / float64(points)
			if off := math.Abs(n*scale - b.Filling); off > 1e-12*b.Filling {
				t.Errorf("filling of %+v at T = %v is off by %.1e", b, T, off)
			}
			if off := math.Abs(p*scale - b.BondOrder(T)); off > 1e-13 {
				t.Errorf("bond order of %+v at T = %v is off by %.1e", b, T, off)
			}
		}
	}
}

// The same with the Gauss-Legendre rule of gonum v0.17.0 on panels, at one
// temperature.
func TestFillingByQuadrature(t *testing.T) {
	b, T := Band{1, -0.3, 2, 0.7}, 0.05
	mu, n := b.ChemicalPotential(T), 0.0
	const panels = 20
	for i := range panels {
		lo, hi := math.Pi*float64(i)/panels, math.Pi*float64(i+1)/panels
		n += quad.Fixed(func(k float64) float64 { return 1 / (1 + math.Exp((b.Energy(k)-mu)/T)) }, lo, hi, 30, nil, 0)
	}
	near(t, "filling", n*2/math.Pi, b.Filling, 1e-12)
}

// Sommerfeld's expansion (handbook): μ − E_F = −(π²/6) T² D'/D for T → 0. The
// shift is resolved relative to T however small that is.
func TestChemicalPotentialInTheCold(t *testing.T) {
	for _, b := range []Band{{1, 0, 1, 0.37}, {1, 0.2, 2, 0.5}, {1, 0.6, 2, 1.7}} {
		const h = 1e-4
		less, more := b, b
		less.Filling, more.Filling = b.Filling-h, b.Filling+h
		slope := math.Log(more.DensityOfStates()/less.DensityOfStates()) / (more.FermiEnergy() - less.FermiEnergy())
		const T = 1e-4
		want := -math.Pi * math.Pi / 6 * T * T * slope
		near(t, "shift of μ", (b.ChemicalPotential(T)-b.FermiEnergy())/want, 1, 1e-5)
		for _, T := range []float64{1e-300, 1e-100, 1e-20, 1e-12} {
			near(t, "μ", b.ChemicalPotential(T), b.FermiEnergy(), 1e-15)
			near(t, "bond order", b.BondOrder(T), b.BondOrder(0), 1e-14)
		}
	}
}

// A dilute hot band is a classical gas: ν = g_s e^{μ/T} I0(2t/T), with the
// modified Bessel function I0(1) = 1.2660658777520084 (handbook).
func TestDiluteGas(t *testing.T) {
	b := Band{Hopping: 1, Spin: 2, Filling: 1e-12}
	near(t, "μ", b.ChemicalPotential(2), 2*math.Log(1e-12/2/1.2660658777520084), 1e-10)
}

func BenchmarkChemicalPotential(b *testing.B) {
	for _, c := range []struct {
		name string
		band Band
		T    float64
	}{{"cold", Band{1, 0, 2, 0.5}, 0.01}, {"cold with t2", Band{1, 0.2, 2, 0.5}, 0.01}, {"hot", Band{1, 0, 2, 0.5}, 3}} {
		b.Run(c.name, func(b *testing.B) {
			for b.Loop() {
				c.band.ChemicalPotential(c.T)
			}
		})
	}
}
