package fermi

import (
	"context"
	"math"
)

// A bracket holds the level of the given index, counted from 0: lo ≤ ε ≤ hi.
type bracket struct {
	index  int
	lo, hi float64
}

func (b *bracket) width() float64  { return b.hi - b.lo }
func (b *bracket) middle() float64 { return b.lo + (b.hi-b.lo)/2 }

// learn uses that number levels lie below energy.
func (b *bracket) learn(energy float64, number int) {
	if number > b.index {
		b.hi = min(b.hi, energy)
	} else {
		b.lo = max(b.lo, energy)
	}
}

// narrow counts levels until done, dividing the brackets among the lanes of
// each sweep. It gives up, as if done, when no bracket can be divided.
func (c *counter) narrow(ctx context.Context, done func() bool, brackets ...*bracket) error {
	for !done() {
		if err := context.Cause(ctx); err != nil {
			return err
		}
		var different [lanes]*bracket
		kinds, fine := 0, true
		for k, b := range brackets {
			fine = fine && b.width() <= 0x1p-51*max(math.Abs(b.lo), math.Abs(b.hi))
			if k == 0 || b.lo != brackets[k-1].lo || b.hi != brackets[k-1].hi {
				different[kinds] = b
				kinds++
			}
		}
		if fine {
			return nil
		}
		var energy [lanes]float64
		for l := range energy {
			k := l % kinds
			b, each := different[k], (lanes-1-k)/kinds+1
			energy[l] = b.lo + b.width()*float64(l/kinds+1)/float64(each+1)
		}
		c.teach(&energy, brackets...)
	}
	return nil
}

// teach counts at the energies and lets the brackets learn from it.
func (c *counter) teach(energy *[lanes]float64, brackets ...*bracket) {
	var number [lanes]int
	c.below(energy, &number)
	for l, e := range energy {
		for _, b := range brackets {
			b.learn(e, number[l])
		}
	}
}
