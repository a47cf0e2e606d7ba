package fermi

import (
	"context"
	"math"
	"slices"
	"testing"
)

// uniformRing returns the energy of n electrons of one spin on a uniform ring
// of size sites (geometric sum over k = 2πj/size; n odd: closed shell).
func uniformRing(size, n float64) float64 {
	e := -2 * math.Sin(math.Pi*n/size) / math.Sin(math.Pi/size)
	if math.Mod(n, 2) == 0 {
		e *= math.Cos(math.Pi / size)
	}
	return e
}

// Values: independent mpmath computation, level sums to 30 digits.
func TestUniformRingEnergy(t *testing.T) {
	for _, tt := range []struct {
		spin, sites, electrons int
		open                   bool
		want                   float64
	}{
		{1, 50, 25, false, -31.8519422198173092},
		{1, 50, 12, true, -21.7611293458435085},
		{1, 50, 13, false, -23.2190666006863316},
		{1, 50, 18, true, -28.7636283227272222},
		{1, 100, 50, true, -63.6410319075479161},
		{1, 100, 25, false, -45.0232214654700822},
		{1, 100, 34, true, -55.7690613854689052},
		{1, 400, 200, true, -254.642672937744291},
		{1, 400, 133, false, -220.199733297637027},
		{1, 400, 148, true, -233.699490985147946},
		{2, 50, 50, false, -63.7038844396346184},
		{2, 50, 25, true, -44.9801959465298401},
		{2, 50, 34, false, -55.8241394791941537},
		{2, 50, 37, true, -58.3788152285845896},
		{2, 100, 100, true, -127.282063815095832},
		{2, 100, 74, false, -116.871371799865253},
		{2, 400, 400, true, -509.285345875488582},
		{2, 400, 266, false, -440.399466595274054},
		{2, 400, 296, true, -467.398981970295893},
	} {
		for _, m := range []Method{Dense, Poles} {
			if m == Dense && tt.sites > 100 {
				continue // slow
			}
			s := Solver{Method: m}
			st := solve(t, &s, uniform(tt.sites, true, 1), Occupation{Electrons: float64(tt.electrons), Spin: tt.spin})
			tol := map[Method]float64{Dense: 1e-12, Poles: 1e-10}[m] * math.Abs(tt.want)
			if st.Method != m.String() || math.Abs(st.Energy-tt.want) > tol {
				t.Errorf("%v (asked for %v): %d electrons of %d spins on %d sites: energy %.17g, want %.17g", st.Method, m, tt.electrons, tt.spin, tt.sites, st.Energy, tt.want)
			}
			if st.OpenShell != tt.open {
				t.Errorf("%v: %d electrons of %d spins on %d sites: open shell %t", m, tt.electrons, tt.spin, tt.sites, st.OpenShell)
			}
		}
	}
}

// Closed form, every filling of small rings, where elements of H fall on the
// same place, and some of long ones.
func TestUniformRingClosedForm(t *testing.T) {
	check := func(m Method, sites, n int, tol float64) {
		s := Solver{Method: m}
		st := solve(t, &s, uniform(sites, true, 1), Occupation{Electrons: float64(n), Spin: 1})
		want := uniformRing(float64(sites), float64(n))
		if sites == 1 {
			want = -2 * float64(n)
		}
		// Poles are as good for a level that is empty, so few electrons on many
		// sites are known to a part of the sites.
		if math.Abs(st.Energy-want) > tol*max(1, math.Abs(want))+1e-3*tol*float64(sites) {
			t.Errorf("%v: %d electrons on %d sites: energy %.15g, want %.15g", m, n, sites, st.Energy, want)
		}
		order := -want / float64(sites)
		for i, p := range st.BondOrder {
			if math.Abs(p-order) > max(tol, 1e-11) || math.Abs(st.Density[i]-float64(n)/float64(sites)) > max(tol, 1e-11) {
				t.Fatalf("%v: %d electrons on %d sites: site %d has density %.15g, bond order %.15g, want %.15g", m, n, sites, i, st.Density[i], p, order)
			}
		}
	}
	for sites := 1; sites <= 12; sites++ {
		for n := 0; n <= sites; n++ {
			check(Dense, sites, n, 1e-12)
			check(Poles, sites, n, 1e-10)
		}
	}
	for _, n := range []int{1, 5000, 9999} {
		check(Poles, 10000, n, 1e-10)
	}
}

// The gap of the dimerised ring, hopping 1 ± z, is 4z: between the two states
// at k = π/2, which a ring of 4m sites has (closed form).
func TestDimerisedRingGap(t *testing.T) {
	var s Solver
	for _, n := range []int{8, 100, 1000} {
		for _, z := range []float64{0.3, 0.01, 1e-6} {
			st := solve(t, &s, dimerised(n, true, z), Occupation{Electrons: float64(n), Spin: 2})
			if st.OpenShell || math.Abs(st.Lowest-2*z) > 1e-11 || math.Abs(st.Highest+2*z) > 1e-11 || math.Abs(st.ChemicalPotential) > 1e-14 {
				t.Errorf("%d sites, z = %g: levels %.15g and %.15g about μ = %g", n, z, st.Highest, st.Lowest, st.ChemicalPotential)
			}
		}
	}
}

// Levels of the uniform open chain, −2 cos(πk/(N+1)), and of the ring with
// second neighbours, −2 cos k − 2 t2 cos 2k (closed forms).
func TestUniformLevels(t *testing.T) {
	var s Solver
	var got []float64
	for _, n := range []int{1, 2, 3, 50, 501} {
		open, ring := make([]float64, n), make([]float64, n)
		for k := range n {
			open[k] = -2 * math.Cos(math.Pi*float64(k+1)/float64(n+1))
			q := 2 * math.Pi * float64(k) / float64(n)
			ring[k] = -2*math.Cos(q) - 0.6*math.Cos(2*q)
		}
		slices.Sort(ring)
		for _, tt := range []struct {
			h    *Hamiltonian
			want []float64
		}{{uniform(n, false, 1), open}, {uniform(n, true, 1), ring}} {
			if tt.h.Ring {
				tt.h.Next = 0.3
			}
			var err error
			if got, err = s.Levels(context.Background(), got, tt.h); err != nil {
				t.Fatal(err)
			}
			if d := farthest(got, tt.want); len(got) != n || !(d <= 1e-12) {
				t.Errorf("%d sites, ring %t: %d levels differ by %g", n, tt.h.Ring, len(got), d)
			}
		}
	}
}
