package response

import (
	"context"
	"math"
)

// lowest returns the minimum of f over [qs[0], qs[last]]: the lowest of the
// ascending points qs, refined by golden sections between its neighbours.
func lowest(ctx context.Context, qs []float64, f func(q float64) float64) (q, value float64, err error) {
	at := 0
	value = math.Inf(1)
	for i, q := range qs {
		if i%256 == 0 && ctx.Err() != nil {
			return 0, 0, ctx.Err()
		}
		if v := f(q); v < value {
			at, value = i, v
		}
	}
	q = qs[at]
	if math.IsInf(value, -1) {
		return q, value, nil
	}
	const golden = 0.6180339887498949
	lo, hi := qs[max(at-1, 0)], qs[min(at+1, len(qs)-1)]
	x1, x2 := hi-golden*(hi-lo), lo+golden*(hi-lo)
	f1, f2 := f(x1), f(x2)
	for hi-lo > 1e-15*(1+hi) {
		if f1 < f2 {
			hi, x2, f2 = x2, x1, f1
			x1 = hi - golden*(hi-lo)
			f1 = f(x1)
		} else {
			lo, x1, f1 = x1, x2, f2
			x2 = lo + golden*(hi-lo)
			f2 = f(x2)
		}
		for _, p := range [2][2]float64{{x1, f1}, {x2, f2}} {
			if p[1] < value {
				q, value = p[0], p[1]
			}
		}
	}
	return q, value, nil
}

// root returns the zero of f between a and b, where fa and fb have different
// signs, by regula falsi with the ends weighted as by Anderson and Björck 1973.
func root(f func(x float64) (float64, error), a, fa, b, fb, tolerance float64) (float64, error) {
	for range 200 {
		if fb == 0 || math.Abs(b-a) <= tolerance {
			break
		}
		x := b - fb*(b-a)/(fb-fa)
		if math.Abs(x-b) < tolerance/2 { // step over the zero, so that the bracket closes
			x = b + math.Copysign(tolerance/2, a-b)
		}
		fx, err := f(x)
		if err != nil {
			return 0, err
		}
		if (fx < 0) != (fb < 0) {
			a, fa = b, fb
		} else if m := 1 - fx/fb; m > 0 {
			fa *= m
		} else {
			fa /= 2
		}
		b, fb = x, fx
	}
	return b, nil
}
