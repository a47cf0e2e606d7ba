package relax

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

// TestWaves: rotating from site to site is as good as a cosine for each site,
// and the amplitude is the discrete Fourier sum.
func TestWaves(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		q := rapid.Float64Range(-math.Pi, math.Pi).Draw(t, "q")
		phase := rapid.Float64Range(-10, 10).Draw(t, "phase")
		x := make([]float64, rapid.IntRange(0, 300).Draw(t, "n"))
		cosines(x, 2, q, phase)
		var re, im float64
		for j, v := range x {
			if want := 2 * math.Cos(q*float64(j)+phase); math.Abs(v-want) > 1e-12 {
				t.Fatalf("site %d: %v, want %v", j, v, want)
			}
			re += v * math.Cos(q*float64(j))
			im -= v * math.Sin(q*float64(j))
		}
		if got, want := Amplitude(x, q), math.Hypot(re, im); math.Abs(got-want) > 1e-10 {
			t.Fatalf("amplitude %v, want %v", got, want)
		}
	})
}
