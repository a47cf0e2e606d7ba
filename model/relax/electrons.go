package relax

import (
	"example.org/twokf/model"
	"example.org/twokf/model/fermi"
)

// Hamiltonian returns the electrons' matrix on a relaxed lattice of chain c.
func Hamiltonian(c model.Chain, l *Lattice) *fermi.Hamiltonian {
	p := newProblem(c)
	h := new(fermi.Hamiltonian)
	p.hamiltonian(p.vector(Seed{Stretch: l.Stretch, SiteMode: l.SiteMode}), h)
	return h
}
