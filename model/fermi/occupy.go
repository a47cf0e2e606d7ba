package fermi

import "math"

// coldest is the temperature, as a part of the splitting within which levels
// are one, at and below which the limit T → 0 is taken. There every larger gap
// is more than fifty T, so nothing is excited across it.
const coldest = 1.0 / 50

// fermiFunction returns f = 1/(1+e^y) for y = (ε−μ)/T and the entropy
// −f ln f − (1−f) ln(1−f) of one level, without overflow or cancellation.
func fermiFunction(y float64) (f, entropy float64) {
	e := math.Exp(-math.Abs(y))
	f = e / (1 + e)
	entropy = math.Log1p(e)
	if e > 0 {
		entropy += math.Abs(y) * f
	}
	if y < 0 {
		f = 1 / (1 + e)
	}
	return f, entropy
}

// mixing returns the entropy of one level filled to the part x.
func mixing(x float64) float64 {
	if x <= 0 || x >= 1 {
		return 0
	}
	return -x*math.Log(x) - (1-x)*math.Log1p(-x)
}

// chemicalPotential solves Σ f(ε) = n for ascending levels at temperature T,
// 0 < n < N, by Newton's method kept inside a bracket, and returns μ measured
// from ref, the Fermi level at T = 0, so that it is resolved far below the
// rounding of ε. What is balanced is the electrons above the n-th level against
// the holes below it, which loses nothing to cancellation at low T.
func chemicalPotential(levels []float64, ref, n, temperature float64) float64 {
	const most = 200 // bisection alone would be done
	k, part := filled(n)
	rest := 0.0
	if part {
		rest = n - float64(k)
	}
	size := float64(len(levels))
	shift := temperature * math.Log((size-n)/n) // every level at ε is filled n/N at μ = ε − shift
	lo, hi := levels[0]-ref-shift, levels[len(levels)-1]-ref-shift
	x := min(max(0, lo), hi)
	for range most {
		var up, down, slope float64
		for i, e := range levels {
			y := (e - ref - x) / temperature
			z := math.Exp(-math.Abs(y))
			f := z / (1 + z)
			slope += f / (1 + z)
			switch {
			case i >= k && y < 0:
				f = 1 / (1 + z)
				fallthrough
			case i >= k:
				up += f
			case y > 0:
				f = 1 / (1 + z)
				fallthrough
			default:
				down += f
			}
		}
		excess := up - down - rest
		if math.Abs(excess) <= 1e-14*(up+down+rest) {
			break
		}
		if excess > 0 {
			hi = x
		} else {
			lo = x
		}
		next := x - excess*temperature/slope
		if !(next > lo && next < hi) {
			next = lo + (hi-lo)/2
		}
		if next == x {
			break
		}
		x = next
	}
	return x
}
