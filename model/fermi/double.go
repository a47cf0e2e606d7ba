package fermi

import "math"

// A double is a number to some 32 digits, hi + lo (T. J. Dekker, Numer. Math.
// 18, 224 (1971)).
type double struct{ hi, lo float64 }

func (a double) add(b double) double {
	s := a.hi + b.hi
	t := s - a.hi
	e := (a.hi - (s - t)) + (b.hi - t) + (a.lo + b.lo)
	hi := s + e
	return double{hi, e - (hi - s)}
}

func (a double) neg() double         { return double{-a.hi, -a.lo} }
func (a double) sub(b double) double { return a.add(b.neg()) }

func (a double) mul(b double) double {
	p := a.hi * b.hi
	e := math.FMA(a.hi, b.hi, -p) + (a.hi*b.lo + a.lo*b.hi)
	hi := p + e
	return double{hi, e - (hi - p)}
}

func (a double) reciprocal() double {
	q := double{1 / a.hi, 0}
	one := double{1, 0}
	q = q.add(q.mul(one.sub(a.mul(q))))
	return q.add(q.mul(one.sub(a.mul(q))))
}

// A wide is a complex number of doubles.
type wide struct{ re, im double }

// widen returns x + i y.
func widen(x, y float64) wide { return wide{double{x, 0}, double{y, 0}} }

func (a wide) add(b wide) wide { return wide{a.re.add(b.re), a.im.add(b.im)} }
func (a wide) neg() wide       { return wide{a.re.neg(), a.im.neg()} }
func (a wide) sub(b wide) wide { return a.add(b.neg()) }

func (a wide) mul(b wide) wide {
	return wide{
		a.re.mul(b.re).sub(a.im.mul(b.im)),
		a.re.mul(b.im).add(a.im.mul(b.re)),
	}
}

func (a wide) norm() double { return a.re.mul(a.re).add(a.im.mul(a.im)) }

func (a wide) reciprocal() wide {
	n := a.norm().reciprocal()
	return wide{a.re.mul(n), a.im.mul(n).neg()}
}
