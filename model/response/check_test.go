package response

import (
	"math"
	"testing"

	"example.org/twokf/model"
	"example.org/twokf/model/band"
	"pgregory.net/rapid"
)

func near(t testing.TB, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s is %.17g, want %.17g (off by %.1e, allowed %.1e)", what, got, want, got-want, tolerance)
	}
}

func chain(f float64, spin int) band.Band {
	return band.Band{Hopping: 1, Spin: spin, Filling: f * float64(spin)}
}

func bulk(t testing.TB, b band.Band, T float64) *Bulk {
	t.Helper()
	r, err := NewBulk(b, T)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

func ring(t testing.TB, n int, electrons float64, spin int, t1, t2, T float64) *Ring {
	t.Helper()
	r, err := NewRing(n, electrons, spin, t1, t2, T)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

func transition(t testing.TB, c model.Chain) (at2kF, first, firstQ float64) {
	t.Helper()
	at2kF, first, firstQ, err := Transition(t.Context(), c)
	if err != nil {
		t.Fatal(err)
	}
	return at2kF, first, firstQ
}

// branchOf returns a phonon of unit coupling with the given coupling²/stiffness.
func branchOf(strength float64) model.Phonon {
	return model.Phonon{Present: true, Coupling: 1, Stiffness: 1 / strength}
}

// halfFilled returns a half-filled chain of spin 2 with one branch of coupling
// λ = 4α²/(πtK) or g²/(πtK_s).
func halfFilled(bond bool, lambda float64) model.Chain {
	c := model.Chain{Hopping: 1, Spin: 2, Filling: 1}
	if bond {
		c.Bond = branchOf(math.Pi * lambda / 4)
	} else {
		c.Site = branchOf(math.Pi * lambda)
	}
	return c
}

// anyBand draws bands with one and two pairs of Fermi points.
func anyBand(t *rapid.T) band.Band {
	b := band.Band{
		Hopping:     rapid.SampledFrom([]float64{1, 1, 1, 2.5, 0.3, -1, 0}).Draw(t, "t"),
		NextHopping: rapid.SampledFrom([]float64{0, 0, 0.2, -0.15, 0.6, -0.6}).Draw(t, "t2"),
		Spin:        rapid.IntRange(1, 2).Draw(t, "spin"),
	}
	if b.Hopping == 0 && b.NextHopping == 0 {
		b.NextHopping = 1
	}
	b.Filling = float64(b.Spin) * rapid.Float64Range(0.02, 0.98).Draw(t, "f")
	return b
}

// definition sums χ over equally spaced midpoints s = k + q/2 from its
// definition, with enough points for the periodic trapezoid rule to be exact.
// It is also the exact response of a ring of that many sites, if twice the
// midpoints are states of the ring.
func definition(b band.Band, mu, T, q float64, points int, offset float64) Static {
	var sum Static
	for i := range points {
		s := 2 * math.Pi * (float64(i) + offset) / float64(points)
		x, y := (b.Energy(s-q/2)-mu)/T, (b.Energy(s+q/2)-mu)/T
		if x > y {
			x, y = y, x
		}
		// [f(x) − f(y)]/(y − x), written without cancellation
		term := 1 / (1 + math.Exp(x)) / (1 + math.Exp(-y)) / T
		if y-x > 1e-12 {
			term *= -math.Expm1(x-y) / (y - x)
		}
		w := 2 * math.Cos(s)
		sum.add(1, Static{Site: term, Bond: w * w * term, Mixed: w * term})
	}
	scale := float64(b.Spin) / float64(points)
	return Static{Site: scale * sum.Site, Bond: scale * sum.Bond, Mixed: scale * sum.Mixed}
}

func distance(a, b Static) float64 {
	return math.Max(math.Abs(a.Site-b.Site), math.Max(math.Abs(a.Bond-b.Bond), math.Abs(a.Mixed-b.Mixed)))
}
