package fermi

import (
	"context"
	"math"

	"gonum.org/v1/gonum/mat"
	"pgregory.net/rapid"
)

// uniform is a chain of equal sites at zero energy with hopping t.
func uniform(n int, ring bool, t float64) *Hamiltonian {
	h := &Hamiltonian{Site: make([]float64, n), Bond: make([]float64, n-1), Ring: ring}
	if ring {
		h.Bond = make([]float64, n)
	}
	for i := range h.Bond {
		h.Bond[i] = t
	}
	return h
}

// dimerised alternates hoppings 1 ± z.
func dimerised(n int, ring bool, z float64) *Hamiltonian {
	h := uniform(n, ring, 1)
	for i := range h.Bond {
		h.Bond[i] += z * float64(1-i%2*2)
	}
	return h
}

// uneven is a ring with a gap at half filling and no symmetry.
func uneven(n int) *Hamiltonian {
	h := dimerised(n, true, 0.1)
	for i := range h.Site {
		h.Site[i] = 0.02 * math.Cos(float64(i))
		h.Bond[i] += 0.005 * math.Sin(3*float64(i))
	}
	return h
}

// A tester is a *testing.T or a *rapid.T.
type tester interface {
	Helper()
	Fatal(args ...any)
	Fatalf(format string, args ...any)
}

// solve fails the test on an error.
func solve(t tester, s *Solver, h *Hamiltonian, occ Occupation) State {
	t.Helper()
	var st State
	if err := s.Solve(context.Background(), h, occ, &st); err != nil {
		t.Fatalf("%d sites, ring %t, next %g, %+v: %v", len(h.Site), h.Ring, h.Next, occ, err)
	}
	return st
}

// matrix writes out the definition of Hamiltonian.
func matrix(h *Hamiltonian) *mat.SymDense {
	n := len(h.Site)
	m := mat.NewSymDense(n, nil)
	hop := func(i, j int, t float64) {
		switch {
		case i == j:
			m.SetSym(i, i, m.At(i, i)-2*t)
		default:
			m.SetSym(i, j, m.At(i, j)-t)
		}
	}
	for i := range n {
		m.SetSym(i, i, m.At(i, i)+h.Site[i])
		if h.Ring || i+1 < n {
			hop(i, (i+1)%n, h.Bond[i])
		}
		if h.Ring || i+2 < n {
			hop(i, (i+2)%n, h.Next)
		}
	}
	return m
}

// reference finds the state by diagonalisation with gonum v0.17.0 and plain
// sums, ⟨c†_{i+2}c_i + h.c.⟩ summed over i, and the smallest distance of two
// levels that are not the same to rounding.
func reference(t tester, h *Hamiltonian, occ Occupation) (st State, next, apart float64) {
	t.Helper()
	n := len(h.Site)
	spin := float64(occ.Spin)
	var e mat.EigenSym
	if !e.Factorize(matrix(h), true) {
		t.Fatal("no convergence")
	}
	level := e.Values(nil)
	var v mat.Dense
	e.VectorsTo(&v)
	f := make([]float64, n)
	want := occ.Electrons / spin
	apart = math.Inf(1)
	for m := 1; m < n; m++ {
		if d := level[m] - level[m-1]; d > 1e-12 {
			apart = min(apart, d)
		}
	}
	if occ.Temperature > 0 {
		lo, hi := level[0]-100*occ.Temperature, level[n-1]+100*occ.Temperature
		for range 200 {
			mu := (lo + hi) / 2
			sum := 0.0
			for m, x := range level {
				f[m] = 1 / (1 + math.Exp((x-mu)/occ.Temperature))
				sum += f[m]
			}
			if sum > want {
				hi = mu
			} else {
				lo = mu
			}
		}
		st.ChemicalPotential = lo
	} else {
		for m := 0; m < n; {
			same := m + 1
			for same < n && level[same]-level[m] < 1e-7 {
				same++
			}
			part := min(1, max(0, (want-float64(m))/float64(same-m)))
			for ; m < same; m++ {
				f[m] = part
			}
		}
	}
	st.Density, st.BondOrder = make([]float64, n), make([]float64, len(h.Bond))
	for m := range n {
		st.Energy += spin * f[m] * level[m]
		if f[m] > 0 && f[m] < 1 {
			st.Entropy -= spin * (f[m]*math.Log(f[m]) + (1-f[m])*math.Log(1-f[m]))
		}
		for i := range n {
			st.Density[i] += spin * f[m] * v.At(i, m) * v.At(i, m)
			if i < len(h.Bond) {
				st.BondOrder[i] += 2 * spin * f[m] * v.At(i, m) * v.At((i+1)%n, m)
			}
			if h.Ring || i+2 < n {
				next += 2 * spin * f[m] * v.At(i, m) * v.At((i+2)%n, m)
			}
		}
	}
	if occ.Temperature == 0 {
		st.Entropy = 0
	}
	st.FreeEnergy = st.Energy - occ.Temperature*st.Entropy
	return st, next, apart
}

// drawChain draws rings and open chains: uniform, dimerised, with random
// hoppings (of either sign, or zero), with random site energies, with and
// without second neighbours.
func drawChain(t *rapid.T, least, most int) *Hamiltonian {
	n := rapid.IntRange(least, most).Draw(t, "sites")
	h := uniform(n, rapid.Bool().Draw(t, "ring"), 1)
	switch rapid.IntRange(0, 2).Draw(t, "bonds") {
	case 1:
		z := drawEnergy(t, "z")
		for i := range h.Bond {
			h.Bond[i] += z * float64(1-i%2*2)
		}
	case 2:
		for i := range h.Bond {
			h.Bond[i] = drawEnergy(t, "bond")
		}
	}
	if rapid.Bool().Draw(t, "sites differ") {
		for i := range h.Site {
			h.Site[i] = drawEnergy(t, "site")
		}
	}
	if rapid.Bool().Draw(t, "second neighbours") {
		h.Next = drawEnergy(t, "next")
	}
	return h
}

// drawEnergy draws a number between −2 and 2 in steps that make levels either
// the same or clearly different, as a rule.
func drawEnergy(t *rapid.T, name string) float64 {
	return float64(rapid.IntRange(-200, 200).Draw(t, name)) / 100
}

// drawOccupation draws a whole number of electrons, or as many as sites.
func drawOccupation(t *rapid.T, sites int, temperatures ...float64) Occupation {
	spin := rapid.IntRange(1, 2).Draw(t, "spin")
	electrons := rapid.IntRange(0, spin*sites).Draw(t, "electrons")
	if rapid.Bool().Draw(t, "half filled") {
		electrons = spin * sites / 2
	}
	return Occupation{
		Electrons:   float64(electrons),
		Spin:        spin,
		Temperature: rapid.SampledFrom(temperatures).Draw(t, "temperature"),
	}
}

// farthest returns the largest difference of two lists.
func farthest(a, b []float64) (d float64) {
	for i := range a {
		d = max(d, math.Abs(a[i]-b[i]))
		if math.IsNaN(a[i] - b[i]) {
			return math.NaN()
		}
	}
	return d
}
