package response

import (
	"context"
	"fmt"
	"math"

	"example.org/twokf/model/band"
)

// smallestT is the lowest temperature that is told from zero, as a part of the band
// width. Fourth powers of T/t appear; far below they underflow.
const smallestT = 1e-70

// Bulk is the static response of the infinite uniform chain at one temperature
// and fixed filling. It may be used by several goroutines at once.
type Bulk struct {
	band        band.Band
	temperature float64
	response    func(r *Bulk, q float64) Static // for 0 ≤ q ≤ π

	branches []branch  // cold
	hot      []hotNode // hot
	mu       float64
}

// NewBulk prepares χ(q, T) of the band b at temperature T ≥ 0. The error names
// a parameter that is out of its range.
//
// Every temperature costs the same, see band.Contour, and χ is accurate to about
// 1e-13; where t ≪ t2, to 1e-16 t2/t near q = π. A temperature below 1e-70 of the
// band width counts as zero.
func NewBulk(b band.Band, T float64) (*Bulk, error) {
	switch {
	case math.IsNaN(T) || T < 0 || math.IsInf(T, 1):
		return nil, fmt.Errorf("temperature is %v; it must be a number ≥ 0", T)
	case b.Spin < 1:
		return nil, fmt.Errorf("spin is %d; it must be at least 1", b.Spin)
	case !(b.Filling >= 0 && b.Filling <= float64(b.Spin)):
		return nil, fmt.Errorf("filling is %v; it must lie in 0..%d", b.Filling, b.Spin)
	case math.IsNaN(b.Hopping-b.NextHopping) || math.IsInf(b.Hopping, 0):
		return nil, fmt.Errorf("hoppings are %v and %v; they must be finite", b.Hopping, b.NextHopping)
	}
	lo, hi := b.Edges()
	if T < smallestT*(hi-lo) {
		T = 0
	}
	r := &Bulk{band: b, temperature: T}
	switch {
	case b.Filling == 0 || b.Filling == float64(b.Spin):
		r.response = func(*Bulk, float64) Static { return Static{} }
	case lo == hi:
		r.response = (*Bulk).flat
	case b.Hot(T):
		r.response = (*Bulk).periodicSum
		r.mu = b.ChemicalPotential(T)
		r.hot = hotNodes()
	default:
		r.response = (*Bulk).contourSum
		r.branches = branches(b.Contour(T))
	}
	return r, nil
}

// Temperature returns T, 0 where it was too low to be told from zero.
func (r *Bulk) Temperature() float64 { return r.temperature }

// At returns χ(q). Site and Bond are even and 2π-periodic in q; Mixed changes
// its sign with q → q + 2π, as its bond phase e^{iq/2} does.
//
// At T = 0 the response is +Inf where q joins k and −k at the Fermi energy, and
// in a flat, partly filled band. An empty or full band does not respond. Where
// q joins two different pairs of Fermi points (with t2) and χ diverges as well,
// rounding ends the logarithm near 1e-16 t.
func (r *Bulk) At(q float64) Static {
	turns := math.Round(q / (2 * math.Pi))
	q = math.Min(math.Abs(q-2*math.Pi*turns), math.Pi)
	s := r.response(r, q)
	switch {
	case q == math.Pi: // inversion about a bond maps π on itself
		s.Mixed = 0
	case math.Mod(turns, 2) != 0:
		s.Mixed = -s.Mixed
	}
	return s
}

// Curve writes χ(qs[i]) to dst[i]. It panics if the lengths differ and returns
// the error of ctx if that ends first.
func (r *Bulk) Curve(ctx context.Context, qs []float64, dst []Static) error {
	if len(qs) != len(dst) {
		panic(fmt.Sprintf("response: %d wave vectors for %d results", len(qs), len(dst)))
	}
	for i, q := range qs {
		if i%1024 == 0 && ctx.Err() != nil {
			return ctx.Err()
		}
		dst[i] = r.At(q)
	}
	return nil
}

// flat: every pair is degenerate, −f' = f(1−f)/T, and ⟨4cos²⟩ = 2.
func (r *Bulk) flat(float64) Static {
	f := r.band.Filling / float64(r.band.Spin)
	site := r.band.Filling * (1 - f) / r.temperature
	return Static{Site: site, Bond: 2 * site}
}

func branches(c band.Contour) []branch {
	bs := make([]branch, len(c))
	for i := range c {
		bs[i] = branch{Branch: c[i], overVelocity: make([]complex128, len(c[i].Poles))}
		for j, w := range c[i].Poles {
			bs[i].overVelocity[j] = 1 / w.Velocity
		}
	}
	return bs
}

// contourSum is the response by the functions of kernel.go.
func (r *Bulk) contourSum(q float64) Static {
	if r.band.Hopping == 0 && q > math.Pi/2 {
		// Two separate chains, ε(k+π) = ε(k): χ0(q) = χ0(π−q), cos² ↔ sin².
		s := r.contourSum(math.Pi - q)
		if math.IsInf(s.Site, 1) {
			return Static{Site: s.Site, Bond: s.Site}
		}
		return Static{Site: s.Site, Bond: 4*s.Site - s.Bond}
	}
	var sum Static
	v := newWavevector(r.band.Hopping, r.band.NextHopping, q)
	for i := range r.branches {
		sum.add(1, r.branches[i].sum(&v))
	}
	if r.band.Hopping == 0 {
		sum.Mixed = 0 // and the vertex 2cos changes its sign
	}
	scale := float64(r.band.Spin) / math.Pi
	return Static{Site: scale * sum.Site, Bond: scale * sum.Bond, Mixed: scale * sum.Mixed}
}

// hotNode is one midpoint s = k + q/2 of the sum for high temperatures; s and −s
// count alike.
type hotNode struct{ weight, sin, cos, sin2, cos2 float64 } // of s and 2s

func hotNodes() []hotNode {
	ns := make([]hotNode, band.Periodic/2+1)
	for i := range ns {
		s := 2 * math.Pi * float64(i) / band.Periodic
		ns[i].weight = 2
		ns[i].sin, ns[i].cos = math.Sincos(s)
		ns[i].sin2, ns[i].cos2 = math.Sincos(2 * s)
	}
	ns[0].weight, ns[len(ns)-1].weight = 1, 1
	return ns
}

// periodicSum is the definition of χ summed over equally spaced s with
//
//	[f(k) − f(k+q)]/Δ = (sinh x / x) / 2T(cosh x + cosh y),   x = Δ/2T,
//
// Δ = ε(k+q) − ε(k) and y = (ε(k) + ε(k+q) − 2μ)/2T.
func (r *Bulk) periodicSum(q float64) Static {
	t, t2, overT := r.band.Hopping, r.band.NextHopping, 1/r.temperature
	sin, cos := math.Sincos(q / 2)
	sin2, cos2 := math.Sincos(q)
	var sum Static
	for i := range r.hot {
		n := &r.hot[i]
		x := 2 * (t*n.sin*sin + t2*n.sin2*sin2) * overT
		y := (-2*(t*n.cos*cos+t2*n.cos2*cos2) - r.mu) * overT
		term := n.weight * sinhc(x) / (math.Cosh(x) + math.Cosh(y))
		sum.Site += term
		sum.Mixed += 2 * n.cos * term
		sum.Bond += 4 * n.cos * n.cos * term
	}
	scale := float64(r.band.Spin) * overT / (2 * band.Periodic)
	return Static{Site: scale * sum.Site, Bond: scale * sum.Bond, Mixed: scale * sum.Mixed}
}

func sinhc(x float64) float64 {
	if math.Abs(x) < 1e-4 {
		return 1 + x*x/6
	}
	return math.Sinh(x) / x
}
