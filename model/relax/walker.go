package relax

import (
	"context"
	"math"

	"example.org/twokf/model/fermi"
)

const (
	// memory is how many steps the quasi-Newton method remembers, and
	// smallMemory how many on chains of more than manyCoordinates, where the
	// remembered steps would be most of what is kept.
	memory          = 10
	smallMemory     = 4
	manyCoordinates = 200_000
)

// walker walks from starts to stationary points, one after the other, with a
// limited-memory quasi-Newton method (J. Nocedal, Math. Comp. 35, 773 (1980)) in
// the scaled coordinates, where the unit matrix is the bare springs' second
// derivative. It owns all that is as long as the chain and serves one goroutine.
type walker struct {
	*problem
	solver fermi.Solver
	matrix fermi.Hamiltonian

	// the present point
	x, g      []float64
	electrons fermi.State
	free      float64 // electrons plus springs
	springs   float64
	residual  float64

	fromX, fromG, direction []float64 // where the present step began, and its direction
	steps, spare            []step    // remembered moves, oldest first; moves to be used again
}

// step is one remembered move: displacement, change of gradient, 1/(s·y).
type step struct {
	s, y []float64
	rho  float64
}

// end is where a start has led so far.
type end struct {
	name       string
	x          []float64 // nil: undistorted, or let go of
	free       float64
	residual   float64
	iterations int
	curvature  float64   // along the softest 2kF pattern, once tested
	downhill   []float64 // that pattern
}

func newWalker(p *problem) *walker {
	n := p.size()
	return &walker{
		problem: p, solver: fermi.Solver{RoughEdges: true},
		x: make([]float64, n), g: make([]float64, n),
	}
}

// stand puts the walker at x (nil: the undistorted chain), which it does not
// keep, knowing nothing of where it was before: what it finds there depends on x
// alone.
func (w *walker) stand(ctx context.Context, x []float64) error {
	w.solver.Forget()
	w.spare = append(w.spare, w.steps...)
	w.steps = w.steps[:0]
	if x == nil {
		clear(w.x)
	}
	copy(w.x, x)
	return w.evaluate(ctx)
}

// evaluate computes energy, gradient and residual at w.x.
func (w *walker) evaluate(ctx context.Context) error {
	w.hamiltonian(w.x, &w.matrix)
	if err := w.solver.Solve(ctx, &w.matrix, w.occupation, &w.electrons); err != nil {
		return err
	}
	w.springs = dot(w.x, w.x) / 2
	w.free = w.electrons.FreeEnergy + w.springs
	w.residual = w.gradient(w.x, &w.electrons, w.g)
	return nil
}

// at returns where the walker stands.
func (w *walker) at(name string, iterations int) *end {
	return &end{name: name, x: append([]float64(nil), w.x...), free: w.free, residual: w.residual, iterations: iterations, curvature: 1}
}

const (
	armijo = 1e-4 // part of the promised descent that a step must deliver
	// flat is the change of the free energy, for each site and in units of the
	// scale, below which it is the electron solver's rounding and the descent is
	// judged by the slopes at both ends instead.
	flat = 2e-12
	// longest step, as a change of a matrix element in units of the scale.
	longest      = 0.5
	mostHalvings = 30
)

// minimise walks until the residual is within tolerance, no step goes down any
// more, or the iterations are used up. It returns the iterations.
func (w *walker) minimise(ctx context.Context, tolerance float64, iterations int, report func(iteration int, residual float64)) (int, error) {
	if w.direction == nil {
		n := w.size()
		w.direction, w.fromX, w.fromG = make([]float64, n), make([]float64, n), make([]float64, n)
	}
	for i := range iterations {
		if w.residual <= tolerance {
			return i, nil
		}
		if report != nil {
			report(i, w.residual)
		}
		w.newtonDirection()
		if !(dot(w.direction, w.g) < 0) { // the memory misleads
			w.forget()
			w.newtonDirection()
		}
		gone, err := w.search(ctx)
		if err != nil {
			return i, err
		}
		if gone {
			w.remember()
			continue
		}
		copy(w.x, w.fromX)
		if err := w.evaluate(ctx); err != nil {
			return i, err
		}
		if len(w.steps) == 0 {
			return i + 1, nil // not even straight down
		}
		w.forget()
	}
	return iterations, nil
}

// search goes along the direction until the free energy has fallen enough;
// where no length will do, gone is false and the walker stands anywhere.
func (w *walker) search(ctx context.Context) (gone bool, err error) {
	copy(w.fromX, w.x)
	copy(w.fromG, w.g)
	free, slope := w.free, dot(w.direction, w.g)
	length := min(1, w.reach(w.direction, longest))
	for range mostHalvings {
		for i, d := range w.direction {
			w.x[i] = w.fromX[i] + length*d
		}
		if err := w.evaluate(ctx); err != nil {
			return false, err
		}
		change := w.free - free
		if math.Abs(change) < flat*w.scale()*float64(w.sites) {
			change = length * (slope + dot(w.direction, w.g)) / 2
		}
		if change <= armijo*length*slope {
			return true, nil
		}
		length *= shorten(length, slope, change)
	}
	return false, nil
}

// shorten returns the factor by which a refused step is cut: the minimum of the
// parabola through both energies and the first slope, kept within 0.1..0.5.
func shorten(length, slope, change float64) float64 {
	t := -slope * length / (2 * (change - slope*length))
	if !(t > 0.1) {
		return 0.1
	}
	return min(t, 0.5)
}

// newtonDirection writes −H·g into the direction by the two-loop recursion.
func (w *walker) newtonDirection() {
	d := w.direction
	copy(d, w.g)
	var weight [memory]float64
	for k := len(w.steps) - 1; k >= 0; k-- {
		st := &w.steps[k]
		weight[k] = st.rho * dot(st.s, d)
		addScaled(d, -weight[k], st.y)
	}
	if k := len(w.steps); k > 0 {
		last := &w.steps[k-1]
		scale(d, 1/(last.rho*dot(last.y, last.y)))
	}
	for k := range w.steps {
		st := &w.steps[k]
		addScaled(d, weight[k]-st.rho*dot(st.y, d), st.s)
	}
	scale(d, -1)
	w.project(d)
}

// remember keeps the move just made, if the energy curves upwards along it.
func (w *walker) remember() {
	most := memory
	if len(w.x) > manyCoordinates {
		most = smallMemory
	}
	if len(w.steps) == most {
		oldest := w.steps[0]
		copy(w.steps, w.steps[1:])
		w.steps = w.steps[:most-1]
		w.spare = append(w.spare, oldest)
	}
	var st step
	if k := len(w.spare); k > 0 {
		st, w.spare = w.spare[k-1], w.spare[:k-1]
	} else {
		st = step{s: make([]float64, len(w.x)), y: make([]float64, len(w.x))}
	}
	for i := range w.x {
		st.s[i], st.y[i] = w.x[i]-w.fromX[i], w.g[i]-w.fromG[i]
	}
	sy := dot(st.s, st.y)
	if sy <= 1e-10*math.Sqrt(dot(st.s, st.s)*dot(st.y, st.y)) {
		w.spare = append(w.spare, st)
		return
	}
	st.rho = 1 / sy
	w.steps = append(w.steps, st)
}

// release gives back what only minimise needs, where it is long.
func (w *walker) release() {
	if len(w.x) > manyCoordinates {
		w.steps, w.spare, w.direction, w.fromX, w.fromG = nil, nil, nil, nil, nil
	}
}

// forget empties the memory.
func (w *walker) forget() {
	w.spare = append(w.spare, w.steps...)
	w.steps = w.steps[:0]
}

func dot(a, b []float64) float64 {
	var s float64
	for i, v := range a {
		s += v * b[i]
	}
	return s
}

func addScaled(x []float64, f float64, y []float64) {
	for i, v := range y {
		x[i] += f * v
	}
}

func scale(x []float64, f float64) {
	for i := range x {
		x[i] *= f
	}
}
