package fermi

import (
	"math"
	"sort"
	"testing"

	"gonum.org/v1/gonum/mat"
	"pgregory.net/rapid"
)

// Counting against the levels of gonum v0.17.0, at energies drawn at random and
// close beside the levels, where elimination is nearly singular.
func TestCountsAgreeWithDiagonalisation(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		h := drawChain(t, 1, 40)
		var e mat.EigenSym
		if !e.Factorize(matrix(h), false) {
			t.Fatal("no convergence")
		}
		level := e.Values(nil)
		n := len(level)
		var c counter
		c.reset(h)
		const near = 1e-11
		var energy [lanes]float64
		for l := range energy {
			energy[l] = drawEnergy(t, "energy") * 2
			if l%2 == 0 {
				energy[l] = level[rapid.IntRange(0, n-1).Draw(t, "level")] + rapid.SampledFrom([]float64{-near, near}).Draw(t, "beside")
			}
		}
		var number [lanes]int
		c.below(&energy, &number)
		for l, x := range energy {
			// Levels within rounding of the energy may count either way.
			least := sort.SearchFloat64s(level, x-near/2)
			most := sort.SearchFloat64s(level, x+near/2)
			if number[l] < least || number[l] > most {
				t.Errorf("%d levels below %.15g, want %d to %d", number[l], x, least, most)
			}
		}
	})
}

// A uniform ring has pairs of levels −2 cos k, and parts of it have levels at
// the same energies: the hardest case for elimination. Closed form.
func TestCountsBesidePairsOfLevels(t *testing.T) {
	for _, n := range []int{12, 60, 300, 3000} {
		for _, next := range []float64{0, 0.2} {
			h := uniform(n, true, 1)
			h.Next = next
			level := make([]float64, n)
			for k := range n {
				q := 2 * math.Pi * float64(k) / float64(n)
				level[k] = -2*math.Cos(q) - 2*next*math.Cos(2*q)
			}
			sort.Float64s(level)
			var c counter
			c.reset(h)
			for _, m := range []int{1, 3, 4, 6} { // k = 2π/m·j is a level of every ring here
				for _, beside := range []float64{-1e-9, -1e-11, 1e-11, 1e-9} {
					q := 2 * math.Pi / float64(m)
					x := -2*math.Cos(q) - 2*next*math.Cos(2*q) + beside
					var energy [lanes]float64
					for l := range energy {
						energy[l] = x
					}
					var number [lanes]int
					c.below(&energy, &number)
					if want := sort.SearchFloat64s(level, x); number[0] != want {
						t.Errorf("%d sites, next %g: %d levels below %.15g, want %d", n, next, number[0], x, want)
					}
				}
			}
		}
	}
}

func TestBoundsHoldEveryLevel(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		h := drawChain(t, 1, 20)
		var e mat.EigenSym
		if !e.Factorize(matrix(h), false) {
			t.Fatal("no convergence")
		}
		level := e.Values(nil)
		lo, hi := h.Bounds()
		if slack := 1e-13 * (1 + hi - lo); level[0] < lo-slack || level[len(level)-1] > hi+slack {
			t.Errorf("levels %.15g to %.15g, bounds %.15g to %.15g", level[0], level[len(level)-1], lo, hi)
		}
	})
	// The bounds of an open chain are not those of a ring: its ends have one neighbour.
	if lo, hi := uniform(2, false, 1).Bounds(); lo != -1 || hi != 1 {
		t.Errorf("two sites: bounds %g, %g, want -1, 1", lo, hi)
	}
}

// All levels against gonum v0.17.0.
func TestLevelsAgreeWithDiagonalisation(t *testing.T) {
	var s Solver
	var got []float64
	rapid.Check(t, func(t *rapid.T) {
		h := drawChain(t, 1, 60)
		var e mat.EigenSym
		if !e.Factorize(matrix(h), false) {
			t.Fatal("no convergence")
		}
		var err error
		if got, err = s.Levels(t.Context(), got, h); err != nil {
			t.Fatal(err)
		}
		if d := farthest(got, e.Values(nil)); len(got) != len(h.Site) || !(d <= 1e-12) {
			t.Errorf("%d levels of %d differ by %g", len(got), len(h.Site), d)
		}
	})
}
