package response

import (
	"fmt"
	"math"
	"testing"

	"example.org/twokf/model"
	"example.org/twokf/model/band"
)

func BenchmarkCurveOf300(b *testing.B) {
	for _, t2 := range []float64{0, 0.2} {
		for _, T := range []float64{0, 1e-12, 0.001, 0.05, 1.5} {
			b.Run(fmt.Sprintf("t2=%v,T=%v", t2, T), func(b *testing.B) {
				r := bulk(b, band.Band{Hopping: 1, NextHopping: t2, Spin: 2, Filling: 0.74}, T)
				qs := r.Grid(300)[:300]
				dst := make([]Static, len(qs))
				for b.Loop() {
					if err := r.Curve(b.Context(), qs, dst); err != nil {
						b.Fatal(err)
					}
				}
			})
		}
	}
}

func BenchmarkNewBulk(b *testing.B) {
	for b.Loop() {
		bulk(b, chain(0.37, 2), 0.01)
	}
}

func BenchmarkRingOf2000(b *testing.B) {
	for _, T := range []float64{0, 0.02} {
		b.Run(fmt.Sprintf("T=%v", T), func(b *testing.B) {
			dst := make([]Static, 1001)
			for b.Loop() {
				if err := ring(b, 2000, 740, 1, 1, 0, T).Curve(b.Context(), dst); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

func BenchmarkTransition(b *testing.B) {
	for name, c := range map[string]model.Chain{
		"half filled": halfFilled(true, 0.4),
		"generic":     {Hopping: 1, Spin: 2, Filling: 0.74, Site: branchOf(math.Pi * 0.3)},
		"both":        {Hopping: 1, NextHopping: 0.1, Spin: 2, Filling: 0.74, Site: branchOf(0.6), Bond: branchOf(0.3)},
	} {
		b.Run(name, func(b *testing.B) {
			for b.Loop() {
				transition(b, c)
			}
		})
	}
}
