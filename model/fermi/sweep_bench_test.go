package fermi

import "testing"

func BenchmarkSweep(b *testing.B) {
	for _, kind := range []string{"open", "ringlow", "ringhigh", "next", "nextring"} {
		h := gapped(1000)
		if kind == "open" || kind == "next" {
			h.Ring = false
			h.Bond = h.Bond[:999]
		}
		if kind == "next" || kind == "nextring" {
			h.Next = .1
		}
		var w sweep
		p := poles{weight: []float64{.1, .2, .3, .4}, shift: []float64{.1, .2, .3, .4}}
		if kind == "ringhigh" {
			p.shift = []float64{1, 2, 3, 4}
		}
		den, bo := make([]float64, 1000), make([]float64, 1000)
		b.Run(kind, func(b *testing.B) {
			for b.Loop() {
				w.load(&p, 0, .01, 1)
				w.add(h, den, bo[:len(h.Bond)])
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/4000, "ns/pole")
		})
	}
}
