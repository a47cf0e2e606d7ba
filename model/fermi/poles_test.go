package fermi

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"
)

func TestPolesScratch(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	worst := map[string]float64{}
	sp := Solver{Method: Poles}
	sd := Solver{Method: Dense}
	for trial := range 1000 {
		n := 5 + rng.IntN(100)
		h := &Hamiltonian{Site: make([]float64, n), Ring: rng.IntN(2) == 0}
		h.Bond = make([]float64, n-1)
		if h.Ring {
			h.Bond = make([]float64, n)
		}
		kind := rng.IntN(5)
		for i := range h.Bond {
			h.Bond[i] = 1
			switch kind {
			case 1:
				h.Bond[i] += 0.2 * float64(1-2*(i%2))
			case 2, 4:
				h.Bond[i] = 1 + 0.3*rng.NormFloat64()
			}
		}
		for i := range h.Site {
			if kind >= 2 && kind < 4 {
				h.Site[i] = rng.NormFloat64()
			}
		}
		if rng.IntN(2) == 0 && kind != 4 {
			h.Next = 0.3
		}
		occ := Occupation{Electrons: float64(rng.IntN(2*n + 1)), Spin: 2}
		if kind == 4 {
			occ.Electrons = float64(n)
		}
		if rng.IntN(2) == 0 {
			occ.Temperature = math.Pow(10, 2-6*rng.Float64())
		}
		var a, b State
		if err := sd.Solve(context.Background(), h, occ, &a); err != nil {
			t.Fatal(err)
		}
		sp.RoughEdges = rng.IntN(2) == 0
		if err := sp.Solve(context.Background(), h, occ, &b); err != nil {
			t.Fatal(err)
		}
		if b.Method != "poles" || a.Method != "dense" {
			t.Fatal("method")
		}
		name := "open"
		if h.Ring {
			name = "ring"
		}
		if h.Next != 0 {
			name += "next"
		}
		if kind == 4 {
			name += "half"
		}
		if occ.Temperature > 0 {
			name += "/warm"
			if st := math.Abs(a.Entropy-b.Entropy) / float64(n); st*occ.Temperature > worst["TS"+name] {
				worst["TS"+name] = st * occ.Temperature
				t.Log("TS", name, kind, n, occ, a.Entropy, b.Entropy, a.Energy-b.Energy, a.FreeEnergy-b.FreeEnergy, a.Highest, a.Lowest, a.OpenShell)
			}
		} else if b.OpenShell {
			name += "/shell"
		}
		if a.OpenShell != b.OpenShell {
			t.Errorf("%d %s kind %d n %d occ %v %v %v", trial, name, kind, n, occ, a.Highest-a.Lowest, b.Highest-b.Lowest)
		}
		var d float64
		for i := range a.Density {
			d = max(d, math.Abs(a.Density[i]-b.Density[i]))
		}
		for i := range a.BondOrder {
			d = max(d, math.Abs(a.BondOrder[i]-b.BondOrder[i]))
		}
		if d > worst[name] {
			worst[name] = d
			t.Log(name, kind, n, "rho", d, occ)
		}
		e := max(math.Abs(a.Energy-b.Energy), math.Abs(a.FreeEnergy-b.FreeEnergy)/(1+occ.Temperature)) / float64(n)
		if e > worst["E"+name] {
			worst["E"+name] = e
			t.Log(name, kind, n, "E", e)
		}
		if !sp.RoughEdges && !math.IsInf(a.Highest, 0) && !math.IsInf(a.Lowest, 0) {
			d = math.Abs(a.Highest-b.Highest) + math.Abs(a.Lowest-b.Lowest)
			if d > worst["edges"+name] {
				worst["edges"+name] = d
				t.Log(name, kind, n, "edges", d)
			}
		}
	}
	for k, v := range worst {
		t.Log(k, v)
	}
}

func gapped(n int) *Hamiltonian {
	h := &Hamiltonian{Site: make([]float64, n), Bond: make([]float64, n), Ring: true}
	for i := range h.Bond {
		h.Bond[i] = 1 + 0.075*float64(1-2*(i%2)) + 0.001*math.Sin(float64(i))
		h.Site[i] = 0.01 * math.Cos(float64(i))
	}
	return h
}

func benchmarkSolve(b *testing.B, n int, rough bool, extra int) {
	h := gapped(n)
	s := Solver{RoughEdges: rough}
	var st State
	b.ReportAllocs()
	occ := Occupation{Electrons: float64(n + extra), Spin: 2}
	k := 0
	for b.Loop() {
		k++
		h.Bond[k%n] *= 1 + 1e-4*float64(k%3-1)
		if err := s.Solve(context.Background(), h, occ, &st); err != nil {
			b.Fatal(err)
		}
	}
}
func BenchmarkRough200(b *testing.B)    { benchmarkSolve(b, 200, true, 0) }
func BenchmarkSharp200(b *testing.B)    { benchmarkSolve(b, 200, false, 0) }
func BenchmarkRough1000(b *testing.B)   { benchmarkSolve(b, 1000, true, 0) }
func BenchmarkSharp1000(b *testing.B)   { benchmarkSolve(b, 1000, false, 0) }
func BenchmarkRough10000(b *testing.B)  { benchmarkSolve(b, 10000, true, 0) }
func BenchmarkRough100000(b *testing.B) { benchmarkSolve(b, 100000, true, 0) }

func BenchmarkHalf(b *testing.B) {
	for _, n := range []int{200, 1000, 10000, 100000} {
		h := gapped(n)
		clear(h.Site)
		s := Solver{RoughEdges: true}
		var st State
		occ := Occupation{Electrons: float64(n), Spin: 2}
		k := 0
		b.Run("", func(b *testing.B) {
			for b.Loop() {
				k++
				h.Bond[k%n] *= 1 + 1e-4*float64(k%3-1)
				if err := s.Solve(context.Background(), h, occ, &st); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
func BenchmarkPolaron200(b *testing.B) { benchmarkSolve(b, 200, true, 1) }
