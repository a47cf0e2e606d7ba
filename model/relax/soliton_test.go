package relax

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/mathext"

	"example.org/twokf/model"
)

// TestSolitons: a kink on an odd ring, against an independent computation, the
// continuum model (H. Takayama, Y. R. Lin-Liu, K. Maki, Phys. Rev. B 21, 2388
// (1980): E_s = 2Δ/π, half-width v_F/Δ, level at 0) and the published 0.42 eV.
func TestSolitons(t *testing.T) {
	for _, r := range solitons {
		t.Run(fmt.Sprintf("t %g N %d Δ %.3g", r.hopping, r.sites, r.bulkGap), func(t *testing.T) {
			c := model.Chain{Sites: r.sites, Hopping: r.hopping, Spin: 2, ByNumber: true, Electrons: r.sites,
				Bond: model.Phonon{Present: true, Coupling: r.coupling, Stiffness: r.stiffness}}
			l := relaxed(t, c, Settings{Tolerance: 1e-10})
			energy := l.FreeEnergy - float64(r.sites)*bulkEnergy(c)
			near(t, "creation energy", energy, r.energy, 1e-8)
			near(t, "mid-gap level", l.Electrons.Highest, r.level, 1e-8)
			width := kinkWidth(l)
			// the reference's fit holds the amplitude fixed; the two differ by the
			// finite ring, as 1/N
			near(t, "half-width (sites)", width, r.width, 0.25/float64(r.sites)*r.width)
			if r.bulkGap < 0.2*r.hopping {
				near(t, "E_s/Δ of the continuum", energy/r.bulkGap, 2/math.Pi, 0.03*2/math.Pi)
				near(t, "width of the continuum", width/(2*r.hopping/r.bulkGap), 1, 0.03)
			}
		})
	}
	// E_s of the infinite chain: the 1/N correction of the fixed-length ring
	// extrapolated from N = 101 and 201; published, rounded: 0.42 eV
	e := func(n int) float64 {
		c := polyacetylene(n, n)
		return relaxed(t, c, Settings{Tolerance: 1e-10}).FreeEnergy - float64(n)*bulkEnergy(c)
	}
	infinite := (201*e(201) - 101*e(101)) / 100
	near(t, "E_s (eV), N → ∞", infinite, 0.4078085, 1e-4*0.65)
	near(t, "E_s/Δ, N → ∞", infinite/(1.30075681374/2), 0.6270326, 1e-4)
	near(t, "published E_s", infinite/0.42, 1, 0.08)
}

// bulkEnergy is E/N of the infinite half-filled bond-phonon chain from the
// elliptic formula, at the root of the gap equation found by bisection.
func bulkEnergy(c model.Chain) float64 {
	lambda := 4 * c.Bond.Coupling * c.Bond.Coupling / (math.Pi * c.Hopping * c.Bond.Stiffness)
	lo, hi := 1e-9, 1-1e-9
	for hi-lo > 1e-15 {
		z := (lo + hi) / 2
		if m := 1 - z*z; (mathext.CompleteK(m)-mathext.CompleteE(m))/m > 1/lambda {
			lo = z
		} else {
			hi = z
		}
		if (lo+hi)/2 == lo || (lo+hi)/2 == hi {
			break
		}
	}
	z := (lo + hi) / 2
	return 2 * c.Hopping * (-2/math.Pi*mathext.CompleteE(1-z*z) + z*z/(math.Pi*lambda))
}

// kinkWidth fits A tanh((i − centre)/ℓ) to the bond-averaged staggered stretch of
// an odd ring that is cut opposite its kink: the ℓ that leaves the least
// squares, A being the best for it.
func kinkWidth(l *Lattice) float64 {
	n := len(l.Stretch)
	at, least := 0, math.Inf(1)
	for i := range n {
		if v := math.Abs(l.Stretch[i] - l.Stretch[(i+1)%n]); v < least {
			at, least = i, v
		}
	}
	order := make([]float64, n-1) // the kink is near the middle, (n−1)/2
	for i := range order {
		j := (at + i + n - (n-1)/2) % n
		order[i] = (l.Stretch[j] - l.Stretch[(j+1)%n]) / 2
		if i%2 == 1 {
			order[i] = -order[i]
		}
	}
	misfit := func(width, shift float64) float64 {
		var tt, to, oo float64
		for i, v := range order {
			th := math.Tanh((float64(i-(n-1)/2) - shift) / width)
			tt, to, oo = tt+th*th, to+th*v, oo+v*v
		}
		return oo - to*to/tt
	}
	width, shift, dw, ds := 15.0, 0.0, 14.0, 1.0
	for range 8 { // a grid that closes in
		w0, s0, least := width, shift, math.Inf(1)
		for i := -10; i <= 10; i++ {
			for j := -10; j <= 10; j++ {
				w, s := w0+dw*float64(i)/10, s0+ds*float64(j)/10
				if m := misfit(w, s); m < least {
					width, shift, least = w, s, m
				}
			}
		}
		dw, ds = dw/4, ds/4
	}
	return width
}

// TestPolarons: one electron too many on an even ring, against an independent
// computation and the continuum (D. K. Campbell, A. R. Bishop, Phys. Rev. B 24,
// 4859 (1981): E_p = 2√2Δ/π, levels ±Δ/√2).
func TestPolarons(t *testing.T) {
	for _, r := range polarons {
		t.Run(fmt.Sprintf("t %g N %d Δ %.3g", r.hopping, r.sites, r.bulkGap), func(t *testing.T) {
			c := model.Chain{Sites: r.sites, Hopping: r.hopping, Spin: 2, ByNumber: true, Electrons: r.sites + 1,
				Bond: model.Phonon{Present: true, Coupling: r.coupling, Stiffness: r.stiffness}}
			l := relaxed(t, c, Settings{Tolerance: 1e-10})
			energy := l.FreeEnergy - float64(r.sites)*bulkEnergy(c)
			near(t, "creation energy", energy, r.energy, 1e-8)
			near(t, "upper level", l.Electrons.Highest, r.level, 1e-7)
			if r.bulkGap < 0.2*r.hopping {
				near(t, "E_p/Δ of the continuum", energy/r.bulkGap, 2*math.Sqrt2/math.Pi, 0.03)
				near(t, "level/Δ of the continuum", l.Electrons.Highest/r.bulkGap, 1/math.Sqrt2, 0.03)
			}
		})
	}
}
