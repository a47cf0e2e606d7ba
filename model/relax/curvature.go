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

// testCurvature finds the lowest second derivative of the free energy at an end
// in the space of the 2kF patterns of all branches (two phases each), by central
// differences of the exact gradient. Units: the bare spring is 1.
func (w *walker) testCurvature(ctx context.Context, e *end) error {
	e.curvature, e.downhill = 1, nil
	w.solver.Forget()
	w.release()
	basis := w.waves()
	k := len(basis)
	if k == 0 {
		return nil
	}
	h := mat.NewSymDense(k, nil)
	up := make([]float64, k)
	for j, d := range basis {
		eps := w.reach(d, probe)
		for sign := 1.0; sign >= -1; sign -= 2 {
			w.goTo(e)
			addScaled(w.x, sign*eps, d)
			if err := w.evaluate(ctx); err != nil {
				return err
			}
			for i := 0; i <= j; i++ {
				slope := dot(basis[i], w.g)
				if sign > 0 {
					up[i] = slope
				} else {
					h.SetSym(i, j, (up[i]-slope)/(2*eps))
				}
			}
		}
	}
	var eig mat.EigenSym
	if !eig.Factorize(h, true) {
		e.curvature = math.NaN()
		return nil
	}
	e.curvature = eig.Values(nil)[0]
	var vectors mat.Dense
	eig.VectorsTo(&vectors)
	e.downhill = make([]float64, w.size())
	for i, d := range basis {
		addScaled(e.downhill, vectors.At(i, 0), d)
	}
	return nil
}

// offSaddle walks down the direction that testCurvature found.
func (w *walker) offSaddle(ctx context.Context, e *end, set Settings) (*end, error) {
	w.goTo(e)
	addScaled(w.x, w.reach(e.downhill, push), e.downhill)
	if err := w.stand(ctx, w.x); err != nil {
		return nil, err
	}
	n, err := w.minimise(ctx, set.Tolerance, set.MaxIterations, nil)
	return w.at(e.name+", off a saddle", n), err
}

// goTo puts the coordinates where an end lies.
func (w *walker) goTo(e *end) {
	if e.x == nil {
		clear(w.x)
	}
	copy(w.x, e.x)
}

// reach returns the multiple of d that changes its largest matrix element by
// part of the scale.
func (p *problem) reach(d []float64, part float64) float64 {
	most := max(p.bondCoupling*maxAbs(d[:p.bonds]), p.siteCoupling*maxAbs(d[p.bonds:]))
	if most == 0 {
		return 1
	}
	return part * p.scale() / most
}

// waves returns an orthonormal basis of the 2kF patterns.
func (p *problem) waves() [][]float64 {
	q := 2 * math.Pi * p.occupation.Electrons / float64(p.occupation.Spin*p.sites)
	var basis [][]float64
	add := func(from, n int, phase float64) {
		if n == 0 {
			return
		}
		d := make([]float64, p.size())
		cosines(d[from:from+n], 1, q, phase)
		p.project(d)
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
		add(0, p.bonds, phase)
		add(p.bonds, p.modes, phase)
	}
	return basis
}
