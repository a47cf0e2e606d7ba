package response

import (
	"context"
	"math"
	"slices"
)

// Grid returns about n wave vectors over [0, π], ascending, denser around the
// places where χ bends: 0, π, the ordering vector, and where q joins Fermi
// points. It contains these places themselves.
func (r *Bulk) Grid(n int) []float64 {
	places := []float64{0, math.Pi, r.band.Ordering()}
	points := r.band.FermiPoints()
	for i, k := range points {
		places = append(places, 2*math.Min(k, math.Pi-k))
		if i > 0 {
			sum := k + points[0]
			places = append(places, k-points[0], math.Min(sum, 2*math.Pi-sum))
		}
	}
	slices.Sort(places)
	places = slices.Compact(places)
	share := 0.0
	for i, p := range places[1:] {
		share += math.Sqrt(p - places[i])
	}
	qs := []float64{0}
	for i, end := range places[1:] {
		start := places[i]
		steps := max(1, int(math.Round(float64(n)*math.Sqrt(end-start)/share)))
		for j := 1; j < steps; j++ {
			u, v := float64(j)/float64(steps), float64(steps-j)/float64(steps)
			qs = append(qs, start+(end-start)*u*u/(u*u+v*v))
		}
		qs = append(qs, end)
	}
	return qs
}

// Peak returns where χ0(q, T) is highest, and its height: 2kF and +Inf at T = 0
// in the band without t2. At finite T and fixed filling it stands beside 2kF.
// When ctx ends first it returns 2kF and the height there.
func (r *Bulk) Peak(ctx context.Context) (q, chi float64) {
	const resolution = 200
	q, chi, err := lowest(ctx, r.Grid(resolution), func(q float64) float64 { return -r.At(q).Site })
	if err != nil {
		q = r.band.Ordering()
		return q, r.At(q).Site
	}
	return q, -chi
}
