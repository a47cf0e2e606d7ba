package study_test

import (
	"math"
	"math/cmplx"
	"testing"

	"pgregory.net/rapid"

	"example.org/twokf/model"
	"example.org/twokf/model/study"
	"example.org/twokf/presets"
)

// A_Q[x] = (2/N)·|Σ_j x_j e^{−iQj}|, (1/N) where Q and −Q are the same.
func directAmplitude(x []float64, q float64) float64 {
	var sum complex128
	for j, v := range x {
		sum += complex(v, 0) * cmplx.Exp(complex(0, -q*float64(j)))
	}
	factor := 2.0
	if q == math.Pi || q == 0 {
		factor = 1
	}
	return factor * cmplx.Abs(sum) / float64(len(x))
}

// The amplitude of a wave is the wave's amplitude, whatever its phase, and other
// waves of the ring do not count.
func TestAmplitudeOfAWave(t *testing.T) {
	const sites, height = 60, 0.3
	wave := func(m int, phase float64) []float64 {
		x := make([]float64, sites)
		for j := range x {
			x[j] = height * math.Cos(2*math.Pi*float64(m*j)/sites+phase)
		}
		return x
	}
	for _, c := range []struct {
		name    string
		x       []float64
		m       int // Q = 2πm/N
		want    float64
		between string
	}{
		{name: "2kF", x: wave(17, 0.4), m: 17, want: height},
		{name: "2kF, another phase", x: wave(17, 2), m: 17, want: height},
		{name: "staggered", x: wave(30, 0), m: 30, want: height},
		{name: "staggered, at a node", x: wave(30, math.Pi/2), m: 30, want: 0},
		{name: "uniform", x: wave(0, 0), m: 0, want: height},
		{name: "another wave", x: wave(16, 0.4), m: 17, want: 0},
		{name: "staggered seen at 2kF", x: wave(30, 0), m: 17, want: 0},
	} {
		q := 2 * math.Pi * float64(c.m) / sites
		if got := study.Amplitude(c.x, q, sites); math.Abs(got-c.want) > 1e-14 {
			t.Errorf("%s: %g, expected %g", c.name, got, c.want)
		}
	}
}

func TestAmplitudeIsTheDirectSum(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := rapid.SliceOfN(rapid.Float64Range(-3, 3), 1, 50).Draw(t, "pattern")
		q := rapid.OneOf(rapid.Float64Range(0.01, math.Pi-0.01), rapid.Just(math.Pi), rapid.Just(0.0)).Draw(t, "Q")
		if got, want := study.Amplitude(x, q, len(x)), directAmplitude(x, q); math.Abs(got-want) > 1e-12 {
			t.Errorf("%g, expected %g", got, want)
		}
	})
}

// The four amplitudes of a portrait are those of its own patterns at its own Q,
// and at a minimum they hang together: n_i = ν − (K_s/g) q_i, b_i = −(α/K)(p_i − p̄)
// and, on a ring, |b_Q| = 2 sin(Q/2)|u_Q| (stationarity, closed form).
func TestAmplitudesOfPresets(t *testing.T) {
	for _, preset := range presets.List() {
		t.Run(preset.Name, func(t *testing.T) {
			c, l := preset.Chain, portraitOf(t, preset.Chain).Lattice
			n, _ := c.Count()
			q := 2 * math.Pi * float64(n) / float64(c.Spin*c.Sites)
			q = math.Min(q, 2*math.Pi-q)
			near := func(what string, got, want, tolerance float64) {
				t.Helper()
				if math.Abs(got-want) > tolerance {
					t.Errorf("%s: %g, expected %g", what, got, want)
				}
			}
			near("Q", l.Ordering, q, 1e-14)
			near("A[n]", l.DensityAmplitude, directAmplitude(l.Electrons.Density, q), 1e-13)
			if c.Boundary == model.Ring { // the sum over an open chain's bonds is shorter
				near("A[p]", l.BondOrderAmplitude, directAmplitude(l.Electrons.BondOrder, q), 1e-13)
			}
			if c.Bond.Active() {
				near("A[u]", l.DisplacementAmplitude, directAmplitude(l.Displacement, q), 1e-13)
				if c.Boundary == model.Ring {
					near("A[p] from A[u]", l.BondOrderAmplitude, c.Bond.Stiffness/c.Bond.Coupling*2*math.Sin(q/2)*l.DisplacementAmplitude, 1e-8)
				}
			} else {
				near("A[u] of no bond phonon", l.DisplacementAmplitude, 0, 0)
			}
			if c.Site.Active() {
				near("A[q]", l.SiteModeAmplitude, directAmplitude(l.SiteMode, q), 1e-13)
				near("A[n] from A[q]", l.DensityAmplitude, c.Site.Stiffness/c.Site.Coupling*l.SiteModeAmplitude, 1e-8)
			} else {
				near("A[q] of no site phonon", l.SiteModeAmplitude, 0, 0)
			}
		})
	}
}
