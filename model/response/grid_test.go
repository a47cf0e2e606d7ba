package response

import (
	"context"
	"errors"
	"math"
	"slices"
	"testing"

	"example.org/twokf/model/band"
	"pgregory.net/rapid"
)

func TestGridHoldsThePlacesWhereChiBends(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		b := anyBand(rt)
		n := rapid.IntRange(20, 600).Draw(rt, "n")
		qs := bulk(t, b, 0).Grid(n)
		places := []float64{0, math.Pi, b.Ordering()}
		for _, k := range b.FermiPoints() {
			places = append(places, 2*math.Min(k, math.Pi-k))
		}
		for _, p := range places {
			if !slices.Contains(qs, p) {
				rt.Errorf("grid of %+v lacks %v", b, p)
			}
		}
		for i := 1; i < len(qs); i++ {
			if qs[i] <= qs[i-1] {
				rt.Errorf("grid of %+v does not ascend at %v", b, qs[i])
			}
		}
		if len(qs) < n-10 || len(qs) > n+10 {
			rt.Errorf("grid for %d has %d points", n, len(qs))
		}
	})
}

func TestGridIsDenseAtTwoKF(t *testing.T) {
	b := chain(0.37, 1)
	qs := bulk(t, b, 0).Grid(300)
	i := slices.Index(qs, b.Ordering())
	near(t, "spacing at 2kF", math.Max(qs[i+1]-qs[i], qs[i]-qs[i-1]), 0, 3e-4)
	for i := 1; i < len(qs); i++ {
		near(t, "spacing", qs[i]-qs[i-1], 0, 0.05)
	}
}

func TestCurveIsAtOfEach(t *testing.T) {
	r := bulk(t, band.Band{Hopping: 1, NextHopping: 0.1, Spin: 2, Filling: 0.7}, 0.05)
	qs := r.Grid(50)
	dst := make([]Static, len(qs))
	if err := r.Curve(t.Context(), qs, dst); err != nil {
		t.Fatal(err)
	}
	for i, q := range qs {
		if dst[i] != r.At(q) {
			t.Errorf("χ(%v) differs", q)
		}
	}
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	if err := r.Curve(ctx, qs, dst); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled curve returns %v", err)
	}
	defer func() {
		if recover() == nil {
			t.Error("lengths that differ are accepted")
		}
	}()
	_ = r.Curve(t.Context(), qs, dst[1:])
}
