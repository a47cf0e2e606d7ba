package fermi

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"
	"time"
)

func TestCountScratch(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	worst := map[string]float64{}
	for trial := range 400 {
		n := 1 + rng.IntN(80)
		if trial < 10 {
			n = 200
		}
		h := &Hamiltonian{Site: make([]float64, n), Ring: rng.IntN(2) == 0}
		h.Bond = make([]float64, n-1)
		if h.Ring {
			h.Bond = make([]float64, n)
		}
		kind := rng.IntN(4)
		for i := range h.Bond {
			h.Bond[i] = 1
			switch kind {
			case 1:
				h.Bond[i] += 0.2 * float64(1-2*(i%2))
			case 2:
				h.Bond[i] = 1 + 0.3*rng.NormFloat64()
			}
		}
		for i := range h.Site {
			if kind >= 2 {
				h.Site[i] = rng.NormFloat64()
			}
		}
		if rng.IntN(2) == 0 {
			h.Next = 0.3
		}
		var s Solver
		levels, err := s.Levels(context.Background(), nil, h)
		if err != nil {
			t.Fatal(err)
		}
		var c counter
		c.reset(h)
		lo, hi := h.Bounds()
		name := "open"
		if h.Ring {
			name = "ring"
		}
		if h.Next != 0 {
			name += "next"
		}
		for k := range n {
			a, b := lo-1, hi+1
			for range 60 {
				m := (a + b) / 2
				var e [lanes]float64
				var num [lanes]int
				for i := range e {
					e[i] = m
				}
				c.below(&e, &num)
				if num[0] > k {
					b = m
				} else {
					a = m
				}
			}
			d := math.Abs(a - levels[k])
			if d > worst[name] {
				worst[name] = d
				t.Log(name, kind, n, k, d)
			}
		}
	}
	for _, ring := range []int{0, 1, 2, 3} {
		n := 1000
		h := &Hamiltonian{Site: make([]float64, n), Bond: make([]float64, n-1), Ring: ring%2 == 1}
		if h.Ring {
			h.Bond = make([]float64, n)
		}
		for i := range h.Bond {
			h.Bond[i] = 1 + 0.1*rng.NormFloat64()
		}
		if ring > 1 {
			h.Next = .1
		}
		var c counter
		c.reset(h)
		e := [lanes]float64{-.3, -.2, -.1, -.05, .03, .1, .2, .3}
		var num [lanes]int
		t0 := time.Now()
		for range 100 {
			c.below(&e, &num)
		}
		t.Log(ring, time.Since(t0)/100, "per 8x1000")
	}
}
