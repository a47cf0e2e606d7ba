package relax

import (
	"context"
	"math"

	"gonum.org/v1/gonum/mat"
)

const (
	// probe is how far the curvature test moves a matrix element, in units of
	// the scale: large against the electrons' rounding (1e-10), small against
	// any gap that a chain of a few thousand sites can resolve.
	probe = 1e-4
	// push is how far a path is moved off a saddle, likewise.
	push = 2e-2
)

// testCurvature finds the lowest second derivative of the free energy in the
// space of the 2kF patterns of all branches (two phases each), by central
// differences of the exact gradient. Units: the bare spring is 1.
func (one *path) testCurvature(ctx context.Context) error {
	one.curvature = 1
	basis := one.waves()
	k := len(basis)
	if k == 0 {
		return nil
	}
	at := append([]float64(nil), one.x...)
	h := mat.NewSymDense(k, nil)
	x, up := make([]float64, len(at)), make([]float64, len(at))
	for j, d := range basis {
		eps := one.reach(d, probe)
		copy(x, at)
		addScaled(x, eps, d)
		if err := one.evaluate(ctx, x); err != nil {
			return err
		}
		copy(up, one.g)
		addScaled(x, -2*eps, d)
		if err := one.evaluate(ctx, x); err != nil {
			return err
		}
		for i := 0; i <= j; i++ {
			h.SetSym(i, j, (dot(basis[i], up)-dot(basis[i], one.g))/(2*eps))
		}
	}
	if err := one.evaluate(ctx, at); err != nil {
		return err
	}
	var eig mat.EigenSym
	if !eig.Factorize(h, true) {
		one.curvature = math.NaN()
		return nil
	}
	one.curvature = eig.Values(nil)[0]
	var vectors mat.Dense
	eig.VectorsTo(&vectors)
	one.downhill = make([]float64, len(at))
	for i, d := range basis {
		addScaled(one.downhill, vectors.At(i, 0), d)
	}
	return nil
}

// offSaddle returns a new path that stands a little way down the direction that
// testCurvature found.
func (one *path) offSaddle(ctx context.Context) (*path, error) {
	down := newPath(one.problem, one.name+", off a saddle")
	x := append([]float64(nil), one.x...)
	addScaled(x, one.reach(one.downhill, push), one.downhill)
	return down, down.evaluate(ctx, x)
}

// reach returns the multiple of d that changes its largest matrix element by
// part of the scale.
func (one *path) reach(d []float64, part float64) float64 {
	most := max(one.bondCoupling*maxAbs(d[:one.bonds]), one.siteCoupling*maxAbs(d[one.bonds:]))
	return part * one.scale() / most
}

// waves returns an orthonormal basis of the 2kF patterns.
func (one *path) waves() [][]float64 {
	q := 2 * math.Pi * one.occupation.Electrons / float64(one.occupation.Spin*one.sites)
	var basis [][]float64
	add := func(from, n int, phase float64) {
		d := make([]float64, one.size())
		for i := range n {
			d[from+i] = math.Cos(q*float64(i) + phase)
		}
		one.project(d)
		before := math.Sqrt(dot(d, d))
		for _, b := range basis {
			addScaled(d, -dot(b, d), b)
		}
		if norm := math.Sqrt(dot(d, d)); norm > 1e-6*before && norm > 1e-6 {
			scale(d, 1/norm)
			basis = append(basis, d)
		}
	}
	for _, phase := range []float64{0, math.Pi / 2} {
		add(0, one.bonds, phase)
		add(one.bonds, one.modes, phase)
	}
	return basis
}
