package fermi

import (
	"fmt"
	"math"
)

// Bounds returns an interval that holds every level: the union of
// Gershgorin's discs, Site[i] ± Σ_{j≠i} |H_ij|. On rings of fewer than five
// sites, where elements of H fall on the same place, it may be wider.
func (h *Hamiltonian) Bounds() (lo, hi float64) {
	n := len(h.Site)
	lo, hi = math.Inf(1), math.Inf(-1)
	for i, a := range h.Site {
		var r float64
		if i < len(h.Bond) {
			r += math.Abs(h.Bond[i])
		}
		switch {
		case i > 0:
			r += math.Abs(h.Bond[i-1])
		case h.Ring && n > 0:
			r += math.Abs(h.Bond[n-1])
		}
		partners := 2
		if !h.Ring {
			partners = 0
			if i >= 2 {
				partners++
			}
			if i < n-2 {
				partners++
			}
		}
		r += float64(partners) * math.Abs(h.Next)
		lo, hi = min(lo, a-r), max(hi, a+r)
	}
	return lo, hi
}

// check panics when the lengths do not fit together and returns an error that
// names the first element that is not finite.
func (h *Hamiltonian) check() error {
	n := len(h.Site)
	want := n - 1
	if h.Ring {
		want = n
	}
	if n == 0 || len(h.Bond) != want {
		panic(fmt.Sprintf("fermi: %d sites, %d bonds (ring: %t)", n, len(h.Bond), h.Ring))
	}
	// The sum of numbers times zero is zero unless one of them is not finite.
	probe := 0 * h.Next
	for _, a := range h.Site {
		probe += 0 * a
	}
	for _, b := range h.Bond {
		probe += 0 * b
	}
	if probe == 0 {
		return nil
	}
	for i, a := range h.Site {
		if math.IsNaN(a) || math.IsInf(a, 0) {
			return fmt.Errorf("fermi: energy of site %d is %g, want a finite number", i, a)
		}
	}
	for i, b := range h.Bond {
		if math.IsNaN(b) || math.IsInf(b, 0) {
			return fmt.Errorf("fermi: hopping on bond %d is %g, want a finite number", i, b)
		}
	}
	return fmt.Errorf("fermi: hopping to the second neighbour is %g, want a finite number", h.Next)
}

// check returns an error unless the occupation is possible on n sites.
func (o Occupation) check(n int) error {
	most := float64(o.Spin) * float64(n)
	switch {
	case o.Spin < 1:
		return fmt.Errorf("fermi: %d spin states per level, want 1 or 2", o.Spin)
	case !(o.Electrons >= 0 && o.Electrons <= most):
		return fmt.Errorf("fermi: %g electrons on %d sites, want 0 to %g", o.Electrons, n, most)
	case !(o.Temperature >= 0) || math.IsInf(o.Temperature, 1):
		return fmt.Errorf("fermi: temperature %g, want a finite number not below 0", o.Temperature)
	}
	return nil
}

// negligible is the part of the largest element of H below which an element is
// taken as zero. It moves no level that can be told, but gonum v0.17.0 returns
// levels of 1e122 for blocks of elements below 1e-122.
const negligible = 1e-40

// elements calls f for the diagonal and every bond of H; elements on the same
// place come one after the other and are to be added.
func (h *Hamiltonian) elements(f func(i, j int, v float64)) {
	n := len(h.Site)
	largest := math.Abs(h.Next)
	for _, a := range h.Site {
		largest = max(largest, math.Abs(a))
	}
	for _, b := range h.Bond {
		largest = max(largest, math.Abs(b))
	}
	couple := func(i, j int, v float64) {
		j %= n
		if i == j {
			v *= 2 // the term and its conjugate
		}
		if math.Abs(v) > negligible*largest {
			f(i, j, v)
		}
	}
	for i, a := range h.Site {
		couple(i, i, a/2)
	}
	for i, b := range h.Bond {
		couple(i, i+1, -b)
	}
	for i := range h.Site {
		if h.Ring || i+2 < n {
			couple(i, i+2, -h.Next)
		}
	}
}
