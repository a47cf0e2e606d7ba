package fermi

import (
	"context"
	"math"
)

// roughly is how wide the bracket of an edge may be, as a part of the gap, when
// all that is wanted is a gap that is certainly empty: it costs the poles
// ln(1+2·0.05)/ln(4M/m), one or two per cent.
const roughly = 0.05

// sharply is how wide it may be, as a part of the band width, when the level
// itself is wanted: some ten times what counting can tell.
const sharply = 1e-13

// A gapFinder finds the shell structure at the Fermi energy by counting levels.
type gapFinder struct {
	counter
	lo, hi float64 // bounds of all levels
	same   float64 // splitting up to which levels are one
	guess  []float64
}

// An interval holds no level.
type interval struct{ lo, hi float64 }

// reset turns to another chain but remembers where the last gap was.
func (g *gapFinder) reset(h *Hamiltonian) {
	g.counter.reset(h)
	g.lo, g.hi = h.Bounds()
	g.same = sameLevel(g.lo, g.hi)
	// A level may lie on the bound.
	pad := 0x1p-40*(g.hi-g.lo) + 0x1p-50*max(math.Abs(g.lo), math.Abs(g.hi)) + leastPivot
	g.lo -= pad
	g.hi += pad
	g.same = max(g.same, pad)
}

// find fills the levels with n electrons per spin. Between every level that is
// filled whole and the next one lies an empty interval, which it returns: one
// if the shell is closed, one below and one above the level if it is open. The
// edges of the shell are exact to sharply·(band width) unless rough.
func (g *gapFinder) find(ctx context.Context, n float64, rough bool) (s shell, empty [2]interval, err error) {
	k, part := filled(n)
	switch {
	case part:
		return g.findLevel(ctx, k, rough)
	case k == 0 || k == len(g.h.Site):
		return g.findEnd(ctx, k)
	}
	return g.findGap(ctx, k, rough)
}

// findEnd returns the only edge of an empty or full band.
func (g *gapFinder) findEnd(ctx context.Context, k int) (s shell, empty [2]interval, err error) {
	s = shell{full: k, reach: k, highest: math.Inf(-1), lowest: math.Inf(1)}
	b := bracket{max(k-1, 0), g.lo, g.hi}
	err = g.narrow(ctx, func() bool { return b.width() <= g.sharp() }, &b)
	if k == 0 {
		s.lowest = b.middle()
	} else {
		s.highest = b.middle()
	}
	return s, empty, err
}

// findGap looks between the k-th level and the next.
func (g *gapFinder) findGap(ctx context.Context, k int, rough bool) (s shell, empty [2]interval, err error) {
	below, above := bracket{k - 1, g.lo, g.hi}, bracket{k, g.lo, g.hi}
	g.recall(&below, &above)
	err = g.narrow(ctx, func() bool {
		least, most := above.lo-below.hi, above.hi-below.lo
		wide := max(below.width(), above.width())
		return wide <= g.sharp() && (least > g.same || most <= g.same) ||
			rough && wide <= roughly*least && least > g.same
	}, &below, &above)
	if err != nil {
		return s, empty, err
	}
	gap := above.middle() - below.middle()
	if gap <= g.same {
		return g.surround(ctx, below.middle()+gap/2)
	}
	g.guess = append(g.guess[:0], below.middle(), above.middle())
	s = shell{full: k, reach: k, highest: below.middle(), lowest: above.middle()}
	return s, [2]interval{{below.hi, above.lo}}, nil
}

// findLevel looks at a level of which a part is filled.
func (g *gapFinder) findLevel(ctx context.Context, k int, rough bool) (s shell, empty [2]interval, err error) {
	level := bracket{k, g.lo, g.hi}
	if rough && k > 0 && k < len(g.h.Site)-1 {
		below, above := bracket{k - 1, g.lo, g.hi}, bracket{k + 1, g.lo, g.hi}
		g.recall(&below, &level, &above)
		alone := func() bool {
			room := min(level.lo-below.hi, above.lo-level.hi)
			return room > g.same && max(below.width(), level.width(), above.width()) <= 2*roughly*room
		}
		err = g.narrow(ctx, func() bool { return alone() || level.width() <= g.sharp() }, &below, &level, &above)
		if err != nil {
			return s, empty, err
		}
		if alone() {
			g.guess = append(g.guess[:0], below.middle(), level.middle(), above.middle())
			s = shell{full: k, reach: k + 1, highest: level.middle(), lowest: level.middle(), open: true}
			return s, [2]interval{{below.hi, level.lo}, {level.hi, above.lo}}, nil
		}
	}
	if err = g.narrow(ctx, func() bool { return level.width() <= g.sharp() }, &level); err != nil {
		return s, empty, err
	}
	return g.surround(ctx, level.middle())
}

// sharp is the width at which a bracket counts as a level.
func (g *gapFinder) sharp() float64 { return sharply * (g.hi - g.lo) }

// recall counts about the last answer, if it was of the same kind: in a
// self-consistent loop that brackets the new one.
func (g *gapFinder) recall(brackets ...*bracket) {
	if len(g.guess) != len(brackets) {
		return
	}
	var energy [lanes]float64
	for l := range energy {
		e := g.guess[l%len(brackets)]
		d := g.guess[len(brackets)-1] - g.guess[0]
		energy[l] = e + d*[...]float64{-0.02, 0.02, 0.1, -0.1}[l/len(brackets)]
		energy[l] = min(max(energy[l], g.lo), g.hi)
	}
	g.teach(&energy, brackets...)
}

// surround finds the levels that share the open shell at a level and an empty
// interval on either side of it. Beyond the band there is no level.
func (g *gapFinder) surround(ctx context.Context, level float64) (s shell, empty [2]interval, err error) {
	lo, hi := level-g.same, level+g.same
	var energy [lanes]float64
	for l := range energy {
		energy[l] = lo
	}
	energy[1] = hi
	var number [lanes]int
	g.below(&energy, &number)
	s = shell{full: number[0], reach: number[1], highest: level, lowest: level, open: true}

	before, after := bracket{s.full - 1, g.lo, lo}, bracket{s.reach, hi, g.hi}
	empty = [2]interval{{math.Inf(-1), lo}, {hi, math.Inf(1)}}
	if s.full > 0 {
		err = g.narrow(ctx, func() bool { return before.width() <= 4*roughly*(lo-before.hi) }, &before)
		empty[0].lo = before.hi
	}
	if s.reach < len(g.h.Site) && err == nil {
		err = g.narrow(ctx, func() bool { return after.width() <= 4*roughly*(after.lo-hi) }, &after)
		empty[1].hi = after.lo
	}
	return s, empty, err
}
