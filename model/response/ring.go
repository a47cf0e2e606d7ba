package response

import (
	"context"
	"errors"
	"fmt"
	"math"
	"runtime/debug"
	"sync"

	"example.org/twokf/model/band"
)

// Ring is the static response of a finite uniform ring at its own wave vectors
// q = 2πm/N. It may be used by several goroutines at once.
type Ring struct {
	Jobs int // cores that Curve may use; 0 or 1 means one

	sites   int
	spin    int
	t, t2   float64
	T       float64
	nearest float64 // a pair of levels closer than this is degenerate

	// f and 1−f of k = 2πj/N, at index j + N/2 for −N/2 ≤ j ≤ N.
	full, empty []float64
	// sin and cos of s = πl/N, 0 ≤ l ≤ N, for even and for odd l.
	sin, cos [2][]float64
}

// NewRing prepares χ of a uniform ring of n sites with the hoppings t and t2,
// that holds the given number of electrons at temperature T, on average if
// T > 0 (μ solved, grand-canonical Fermi factors). At T = 0 a degenerate level
// at E_F is filled in equal fractions. The error names a parameter that is out
// of its range.
func NewRing(n int, electrons float64, spin int, t, t2, T float64) (*Ring, error) {
	switch {
	case n < 1:
		return nil, fmt.Errorf("number of sites is %d; it must be at least 1", n)
	case spin < 1:
		return nil, fmt.Errorf("spin is %d; it must be at least 1", spin)
	case !(electrons >= 0 && electrons <= float64(n*spin)):
		return nil, fmt.Errorf("number of electrons is %v; it must lie in 0..%d", electrons, n*spin)
	case math.IsNaN(T) || T < 0 || math.IsInf(T, 1):
		return nil, fmt.Errorf("temperature is %v; it must be a number ≥ 0", T)
	case math.IsNaN(t-t2) || math.IsInf(t, 0):
		return nil, fmt.Errorf("hoppings are %v and %v; they must be finite", t, t2)
	}
	r := &Ring{sites: n, spin: spin, t: t, t2: t2, T: T}
	b := band.Band{Hopping: t, NextHopping: t2}
	shells := make([]shell, n/2+1)
	for j := range shells {
		shells[j] = shell{energy: b.Energy(2 * math.Pi * float64(j) / float64(n)), states: 2}
		if 2*j%n == 0 {
			shells[j].states = 1
		}
	}
	scale := math.Abs(t) + math.Abs(t2)
	if T < smallestT*scale {
		T, r.T = 0, 0
	}
	degenerate := 1e-12 * scale
	fermi := fillShells(shells, electrons/float64(spin), degenerate)
	r.nearest = degenerate
	if T > 0 {
		warmShells(shells, fermi, T)
		r.nearest = 1e-4 * T // (x/2)³/3 ≈ 4e-14 is left out of the series in x = Δ/T below
	}
	r.full, r.empty = make([]float64, n+n/2+1), make([]float64, n+n/2+1)
	for i := range r.full {
		j := i - n/2
		j = max(j, -j)
		if 2*j > n {
			j = n - j
		}
		r.full[i], r.empty[i] = shells[j].full, shells[j].empty
	}
	for parity := range 2 {
		for l := parity; l <= n; l += 2 {
			sin, cos := math.Sincos(math.Pi * float64(l) / float64(n))
			r.sin[parity] = append(r.sin[parity], sin)
			r.cos[parity] = append(r.cos[parity], cos)
		}
	}
	return r, nil
}

// At returns χ at q = 2πm/N; the symmetries of Bulk.At hold. At T = 0 it is
// +Inf where q joins two states of one partly filled level, which has no
// finite linear response, and other degenerate pairs do not contribute.
func (r *Ring) At(m int) Static {
	turns := int(math.Round(float64(m) / float64(r.sites)))
	m -= turns * r.sites
	s := r.sum(max(m, -m))
	if turns%2 != 0 {
		s.Mixed = -s.Mixed
	}
	return s
}

// Curve writes χ at q = 2πm/N to dst[m], m = 0..N/2. It panics if the length of
// dst is not N/2+1 and returns the error of ctx if that ends first.
func (r *Ring) Curve(ctx context.Context, dst []Static) error {
	if len(dst) != r.sites/2+1 {
		panic(fmt.Sprintf("response: %d results for a ring of %d sites, which has %d wave vectors", len(dst), r.sites, r.sites/2+1))
	}
	every := 1 + 1_000_000/r.sites // a few milliseconds
	part := func(first, step int) error {
		for m := first; m < len(dst); m += step {
			if m/step%every == 0 && ctx.Err() != nil {
				return ctx.Err()
			}
			dst[m] = r.sum(m)
		}
		return nil
	}
	jobs := max(1, r.Jobs)
	if r.sites < worthSharing {
		jobs = 1
	}
	errs := make([]error, jobs)
	var wait sync.WaitGroup
	for j := 1; j < jobs; j++ {
		wait.Go(func() {
			defer func() {
				if p := recover(); p != nil { // in here it would leave a terminal raw
					errs[j] = fmt.Errorf("response: %v\n%s", p, debug.Stack())
				}
			}()
			errs[j] = part(j, jobs)
		})
	}
	errs[0] = part(0, jobs)
	wait.Wait()
	return errors.Join(errs...)
}

// worthSharing is the ring from which Curve takes long enough, 0.4 ms, to be worth
// more than one core.
const worthSharing = 600

// sum runs over midpoints s = k + q/2 = πl/N in (0, π), those in (−π, 0) being
// their mirror images, with ε(k+q) − ε(k) = sin s (A + B cos s); s = 0 and π
// are degenerate pairs.
func (r *Ring) sum(m int) Static {
	n := r.sites
	q := 2 * math.Pi * float64(m) / float64(n)
	a, b := 4*r.t*math.Sin(q/2), 8*r.t2*math.Sin(q)
	parity := m % 2
	first := 2 - parity // l of the first midpoint
	count := max(0, (n+1-first)/2)
	i := n/2 + (first-m)/2 // index of k; first and m have the same parity
	full, empty := r.full[i:][:count], r.empty[i:][:count]
	fullQ, emptyQ := r.full[i+m:][:count], r.empty[i+m:][:count]
	sin, cos := r.sin[parity][1-parity:][:count], r.cos[parity][1-parity:][:count]
	var s0, s1, s2 float64
	for p, f := range full {
		c := cos[p]
		delta := sin[p] * (a + b*c)
		x := (f - fullQ[p]) / delta
		if math.Abs(delta) <= r.nearest {
			x = r.degenerate(delta, f, empty[p], fullQ[p], emptyQ[p])
		}
		s0 += x
		x *= c
		s1 += x
		s2 += x * c
	}
	s0, s1, s2 = 2*s0, 2*s1, 2*s2
	for _, l := range [2]int{0, n} {
		if (l-m)%2 == 0 {
			i := n/2 + (l-m)/2
			x := r.degenerate(0, r.full[i], r.empty[i], r.full[i], r.empty[i])
			s0 += x
			s1 += x * float64(1-2*l/n)
			s2 += x
		}
	}
	scale := float64(r.spin) / float64(n)
	s := Static{Site: scale * s0, Bond: scale * 4 * s2, Mixed: scale * 2 * s1}
	if 2*m == n || math.IsNaN(s1) { // inversion; at q = 2kF of an open shell s = 0 and s = π may both diverge
		s.Mixed = 0
	}
	return s
}

// degenerate returns [f(ε) − f(ε+Δ)]/Δ for small Δ: f(ε)[1 − f(ε+Δ)](1 − e^{−x})/Δ
// with x = Δ/T.
func (r *Ring) degenerate(delta, full, empty, fullQ, emptyQ float64) float64 {
	if r.T == 0 {
		if full > 0 && empty > 0 && fullQ > 0 && emptyQ > 0 {
			return math.Inf(1)
		}
		return 0
	}
	x := delta / r.T
	return full * emptyQ / r.T * (1 - x/2*(1-x/3))
}
