package fermi

import (
	"math"
	"slices"
)

// width is how many poles share one sweep along the chain: while one waits for
// its division the others go on.
const width = 4

// A cell holds one complex number for each pole of a sweep: real parts, then
// imaginary parts.
type cell [2 * width]float64

// A sweep finds the diagonal and first off-diagonal of (z − H)⁻¹ for up to
// width poles z = μ + i s at once, by elimination from one end of the chain and
// back substitution from the other. All pivots have an imaginary part of at
// least s, so none needs to be exchanged.
type sweep struct {
	mu, outer     float64        // outer is the largest distance of a level from mu
	symmetric     bool           // the chain is balanced about mu
	mask          int            // products of pivots are settled at sites i with i&mask == 0
	shift, weight [width]float64 // s; a, zero for a lane that is not used
	faded         float64        // square of m (see ring) below which it is dropped
	log           [width]float64 // ln |det(z − H)|, an output

	order float64 // twice Σ_i Σ_p a_p Re G_{i,i+2}, gathered when Next ≠ 0
	error float64 // largest error of Σ_p a_p Re G_ii that was noticed

	inverse []cell // 1/pivot of each site
	border  []cell // coupling to the border of a ring, over the pivot
	next    []nextSite
	wide    wideInverse
	saved   []float64 // density and bond before a sweep that may have to be repeated
}

// load takes the poles from first on, with their weights times scale.
func (w *sweep) load(p *poles, first int, mu, scale float64) {
	w.mu = mu
	for l := range width {
		w.shift[l], w.weight[l] = p.outer, 0
		if k := first + l; k < len(p.weight) {
			w.shift[l], w.weight[l] = p.shift[k], p.weight[k]*scale
		}
	}
	w.outer = p.outer
	// The border contributes m² to an inverse. Farther on m may grow again, by
	// |β (z−H)⁻¹| < M/s at most.
	ratio := slices.Min(w.shift[:]) / p.outer
	w.faded = 1e-20 * ratio * ratio
	w.mask = 7
	if max(p.outer, slices.Max(p.shift)) > 1e15 || slices.Min(p.shift) < 1e-15 {
		w.mask = 0
	}
}

// add adds Σ_p a_p Re G_ii to density and twice Σ_p a_p Re G_{i,i+1} to bond.
func (w *sweep) add(h *Hamiltonian, density, bond []float64) {
	if !h.Ring || slices.Min(w.shift[:]) > delicate*w.outer {
		w.run(h, density, bond)
		return
	}
	w.saved = append(append(w.saved[:0], density...), bond...)
	order := w.order
	w.error = 0
	if w.run(h, density, bond); w.error <= mostError {
		return
	}
	copy(density, w.saved)
	copy(bond, w.saved[len(density):])
	w.order = order
	for l, a := range w.weight {
		if a != 0 {
			log, order := w.wide.add(h, w.mu, w.shift[l], a, density, bond)
			w.log[l] = log
			w.order += 2 * a * order
		}
	}
}

// delicate is the distance of a pole from the real axis, as a part of the band
// width, from which on a ring may lose 2⁻⁵³/delicate² to cancellation.
const delicate = 1e-3

// mostError is the largest error of a density that is let pass when it is
// noticed.
const mostError = 1e-13

// run does it in ordinary precision.
func (w *sweep) run(h *Hamiltonian, density, bond []float64) {
	w.log = [width]float64{}
	w.inverse = resize(w.inverse, len(h.Site))
	switch {
	case h.Next != 0:
		w.secondNeighbours(h, density, bond)
	case w.symmetric:
		w.balanced(h, bond)
	case h.Ring:
		w.border = resize(w.border, len(h.Site))
		w.ring(h, density, bond)
	default:
		w.open(h, density, bond)
	}
}

// miss takes note of an error of G at pole l.
func (w *sweep) miss(l int, g float64) {
	w.error = max(w.error, math.Abs(w.weight[l]*g))
}

// product gathers ln |d| of pivots or ln |d|²: the numbers are multiplied and their
// exponents set aside every few sites, which saves the logarithms.
type product struct {
	mantissa [width]float64
	exponent [width]int
}

func newProduct() (p product) {
	for l := range p.mantissa {
		p.mantissa[l] = 1
	}
	return p
}

// settle sets the exponents aside, often enough that the product neither over-
// nor underflows.
func (p *product) settle() {
	for l, v := range p.mantissa {
		f, e := math.Frexp(v)
		p.mantissa[l] = f
		p.exponent[l] += e
	}
}

// addTo adds the logarithm of the product, times power, to log.
func (p *product) addTo(log *[width]float64, power float64) {
	for l, v := range p.mantissa {
		log[l] += power * (math.Log(v) + math.Ln2*float64(p.exponent[l]))
	}
}
