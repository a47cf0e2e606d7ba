package relax

import (
	"math"

	"example.org/twokf/model"
	"example.org/twokf/model/fermi"
)

// problem is the chain seen as a function of its lattice coordinates. They are
// scaled by the root of the spring constant, x = (√K b, √K_s q), so that
// without electrons every second derivative is 1.
type problem struct {
	sites        int
	bonds, modes int // coordinates of each branch; 0 where no electron feels it
	ring         bool
	hopping      float64
	next         float64
	occupation   fermi.Occupation

	bondCoupling, siteCoupling float64 // α/√K, g/√K_s
	bondRoot, siteRoot         float64 // √K, √K_s
}

func newProblem(c model.Chain) *problem {
	n, _ := c.Count()
	p := &problem{
		sites:      c.Sites,
		ring:       c.Boundary == model.Ring,
		hopping:    c.Hopping,
		next:       c.NextHopping,
		occupation: fermi.Occupation{Electrons: float64(n), Spin: c.Spin, Temperature: c.Temperature},
		bondRoot:   1,
		siteRoot:   1,
	}
	if c.Bond.Active() {
		p.bonds = p.bondCount()
		p.bondRoot = math.Sqrt(c.Bond.Stiffness)
		p.bondCoupling = c.Bond.Coupling / p.bondRoot
	}
	if c.Site.Active() {
		p.modes = p.sites
		p.siteRoot = math.Sqrt(c.Site.Stiffness)
		p.siteCoupling = c.Site.Coupling / p.siteRoot
	}
	return p
}

func (p *problem) bondCount() int {
	if p.ring {
		return p.sites
	}
	return p.sites - 1
}

// size is the number of lattice coordinates.
func (p *problem) size() int { return p.bonds + p.modes }

// scale is an energy that is never zero: the largest of the band's and the
// phonons' own (polaron-like) scales.
func (p *problem) scale() float64 {
	s := max(p.hopping, math.Abs(p.next), p.bondCoupling*p.bondCoupling, p.siteCoupling*p.siteCoupling)
	if s == 0 {
		return 1
	}
	return s
}

// hamiltonian writes the electrons' matrix for lattice x into h.
func (p *problem) hamiltonian(x []float64, h *fermi.Hamiltonian) {
	h.Ring, h.Next = p.ring, p.next
	if h.Bond == nil {
		h.Bond, h.Site = make([]float64, p.bondCount()), make([]float64, p.sites)
		for i := range h.Bond {
			h.Bond[i] = p.hopping
		}
	}
	for i, b := range x[:p.bonds] {
		h.Bond[i] = p.hopping - p.bondCoupling*b
	}
	for i, q := range x[p.bonds:] {
		h.Site[i] = p.siteCoupling * q
	}
}

// gradient writes ∂F/∂x into g, projected on patterns of zero sum, and returns
// the residual in electrons: a bond order or a density.
func (p *problem) gradient(x []float64, st *fermi.State, g []float64) (residual float64) {
	if p.bonds > 0 {
		for i, b := range x[:p.bonds] {
			g[i] = b + p.bondCoupling*st.BondOrder[i]
		}
		removeMean(g[:p.bonds])
		residual = maxAbs(g[:p.bonds]) / p.bondCoupling
	}
	if p.modes > 0 {
		for i, q := range x[p.bonds:] {
			g[p.bonds+i] = q + p.siteCoupling*st.Density[i]
		}
		removeMean(g[p.bonds:])
		residual = max(residual, maxAbs(g[p.bonds:])/p.siteCoupling)
	}
	return residual
}

// project takes the uniform parts out of x.
func (p *problem) project(x []float64) {
	removeMean(x[:p.bonds])
	removeMean(x[p.bonds:])
}

// vector turns a seed into coordinates; patterns that are missing are 0.
func (p *problem) vector(s Seed) []float64 {
	x := make([]float64, p.size())
	if len(s.Stretch) == p.bonds {
		for i, b := range s.Stretch {
			x[i] = b * p.bondRoot
		}
	}
	if len(s.SiteMode) == p.modes {
		for i, q := range s.SiteMode {
			x[p.bonds+i] = q * p.siteRoot
		}
	}
	p.project(x)
	return x
}

// patterns turns coordinates into stretches and local modes.
func (p *problem) patterns(x []float64) (stretch, mode []float64) {
	if p.bonds > 0 {
		stretch = make([]float64, p.bonds)
		for i := range stretch {
			stretch[i] = x[i] / p.bondRoot
		}
	}
	if p.modes > 0 {
		mode = make([]float64, p.modes)
		for i := range mode {
			mode[i] = x[p.bonds+i] / p.siteRoot
		}
	}
	return stretch, mode
}

func removeMean(x []float64) {
	if len(x) == 0 {
		return
	}
	var mean float64
	for _, v := range x {
		mean += v
	}
	mean /= float64(len(x))
	for i := range x {
		x[i] -= mean
	}
}
