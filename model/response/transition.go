package response

import (
	"context"
	"fmt"
	"math"

	"example.org/twokf/model"
	"example.org/twokf/model/band"
)

// Coldest is the lowest transition temperature that Transition looks for, as a
// part of the band width; it belongs to λ ≈ 0.007.
const Coldest = 1e-60

// Transition returns the mean-field temperatures at which the uniform chain c
// loses its stability on cooling at fixed filling (Rice and Strässler 1973):
//
//   - at2kF, where the Ratio of PhononAt vanishes at the ordering vector;
//   - first ≥ at2kF, the highest temperature at which any q is unstable, with
//     that q. At half filling without t2 the two are the same.
//
// A temperature is 0 where there is no coupling, no filling, or where it would
// lie below Coldest; firstQ is then the ordering vector. The temperature is
// accurate to about 1e-12 of itself. An unstable interval between two stable
// ones is found when it spans a factor of two in T. In a band with two pairs of
// Fermi points a q that joins different pairs is followed down to about 1e-15 of
// the band width only. The error is that of ctx, or names a parameter that is
// out of its range.
func Transition(ctx context.Context, c model.Chain) (at2kF, first, firstQ float64, err error) {
	b := band.Of(c)
	ordering := b.Ordering()
	for i, p := range []model.Phonon{c.Bond, c.Site} {
		if p.Active() && !(p.Stiffness > 0) {
			return 0, 0, ordering, fmt.Errorf("stiffness of the %s phonon is %v; it must be positive", [...]string{"bond", "site"}[i], p.Stiffness)
		}
	}
	// χ0 ≤ g_s/4T and χ_b ≤ 4·g_s/4T, hence the trace of 1 − R is below 1 here.
	hottest := float64(c.Spin) / 4 * (4*strength(c.Bond) + strength(c.Site))
	if hottest == 0 || ordering == 0 {
		return 0, 0, ordering, ctx.Err()
	}
	lo, hi := b.Edges()
	floor := Coldest * (hi - lo)
	if lo == hi {
		floor = Coldest * hottest
	}

	at2kF, err = onset(ctx, hottest, floor, func(T float64) (float64, error) {
		bulk, err := NewBulk(b, T)
		if err != nil {
			return 0, err
		}
		return PhononAt(c, ordering, bulk.At(ordering)).Ratio, nil
	})
	if err != nil {
		return 0, 0, ordering, err
	}
	first, err = onset(ctx, hottest, math.Max(at2kF, floor), func(T float64) (float64, error) {
		bulk, err := NewBulk(b, T)
		if err != nil {
			return 0, err
		}
		_, ratio, err := Softest(ctx, c, bulk)
		return ratio, err
	})
	if err != nil {
		return 0, 0, ordering, err
	}
	const same = 1e-11
	firstQ = ordering
	if first <= at2kF*(1+same) {
		first = at2kF
	} else {
		bulk, err := NewBulk(b, first)
		if err != nil {
			return 0, 0, ordering, err
		}
		if firstQ, _, err = Softest(ctx, c, bulk); err != nil {
			return 0, 0, ordering, err
		}
	}
	return at2kF, first, firstQ, nil
}

// onset returns the highest temperature between hottest, where ratio > 0, and
// floor at which ratio is no longer positive; 0 if there is none. It steps
// down by factors of two as long as ratio bends, and then follows the
// logarithm, which is a straight line in ln T, to its zero.
func onset(ctx context.Context, hottest, floor float64, ratio func(T float64) (float64, error)) (float64, error) {
	of := func(lnT float64) (float64, error) {
		if err := ctx.Err(); err != nil {
			return 0, err
		}
		return ratio(math.Exp(lnT))
	}
	const (
		halvings  = 20    // 2^−20 hottest is far below every other energy
		tolerance = 1e-13 // of ln T
	)
	above, end := math.Log(hottest), math.Log(floor)
	highValue, err := of(above)
	if err != nil {
		return 0, err
	}
	for step := 1; above > end; step++ {
		below := above - math.Ln2
		if step > halvings || below < end {
			below = end
		}
		lowValue, err := of(below)
		if err != nil {
			return 0, err
		}
		if lowValue <= 0 {
			lnT, err := root(of, above, highValue, below, lowValue, tolerance)
			return math.Exp(lnT), err
		}
		above, highValue = below, lowValue
	}
	return 0, nil
}
