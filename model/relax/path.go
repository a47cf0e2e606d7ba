package relax

import (
	"context"
	"math"

	"example.org/twokf/model/fermi"
)

// memory is how many steps the quasi-Newton method remembers.
const memory = 10

// path walks from one start to a stationary point with a limited-memory
// quasi-Newton method (J. Nocedal, Math. Comp. 35, 773 (1980)) in the scaled
// coordinates, where the unit matrix is the bare springs' second derivative.
type path struct {
	*problem
	name string

	solver fermi.Solver
	matrix fermi.Hamiltonian

	// the present point
	x, g      []float64
	electrons fermi.State
	free      float64 // electrons plus springs
	springs   float64
	residual  float64

	iterations int
	curvature  float64   // along the softest 2kF pattern, once tested
	downhill   []float64 // that pattern

	steps []step // oldest first
}

// step is one remembered move: displacement, change of gradient, 1/(s·y).
type step struct {
	s, y []float64
	rho  float64
}

func newPath(p *problem, name string) *path {
	return &path{problem: p, name: name, residual: math.Inf(1), solver: fermi.Solver{RoughEdges: true}}
}

// evaluate moves the path to x.
func (one *path) evaluate(ctx context.Context, x []float64) error {
	one.hamiltonian(x, &one.matrix)
	if err := one.solver.Solve(ctx, &one.matrix, one.occupation, &one.electrons); err != nil {
		return err
	}
	if one.x == nil {
		one.x, one.g = make([]float64, len(x)), make([]float64, len(x))
	}
	copy(one.x, x)
	one.springs = dot(x, x) / 2
	one.free = one.electrons.FreeEnergy + one.springs
	one.residual = one.gradient(x, &one.electrons, one.g)
	return nil
}

const (
	armijo = 1e-4 // part of the promised descent that a step must deliver
	// flat is the relative change of the free energy below which it is rounding
	// and the descent is judged by the slopes at both ends instead.
	flat = 3e-13
	// longest step, as a change of a matrix element in units of the scale.
	longest      = 0.5
	mostHalvings = 30
)

// minimise walks until the residual is within tolerance, no step goes down any
// more, or that many iterations are used up, earlier ones included. The path must
// have been evaluated.
func (one *path) minimise(ctx context.Context, tolerance float64, iterations int, report func(*path)) error {
	n := one.size()
	direction, next, oldX, oldG := make([]float64, n), make([]float64, n), make([]float64, n), make([]float64, n)
	for one.residual > tolerance && one.iterations < iterations {
		if report != nil {
			report(one)
		}
		one.newtonDirection(direction)
		slope := dot(direction, one.g)
		if !(slope < 0) {
			if len(one.steps) == 0 {
				return nil
			}
			one.steps = one.steps[:0]
			continue
		}
		copy(oldX, one.x)
		copy(oldG, one.g)
		oldFree := one.free
		length := min(1, one.reach(direction, longest))
		gone := false
		for halving := 0; halving < mostHalvings; halving++ {
			for i := range next {
				next[i] = oldX[i] + length*direction[i]
			}
			if err := one.evaluate(ctx, next); err != nil {
				return err
			}
			endSlope := dot(direction, one.g)
			change := one.free - oldFree
			if math.Abs(change) < flat*math.Abs(oldFree) {
				change = length * (slope + endSlope) / 2
			}
			if change <= armijo*length*slope {
				gone = true
				break
			}
			length *= shorten(length, slope, change)
		}
		one.iterations++
		if !gone {
			if len(one.steps) > 0 { // the memory may be what misleads: forget it once
				one.steps = one.steps[:0]
				if err := one.evaluate(ctx, oldX); err != nil {
					return err
				}
				continue
			}
			return one.evaluate(ctx, oldX)
		}
		one.remember(oldX, oldG)
	}
	return nil
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

// newtonDirection writes −H·g by the two-loop recursion.
func (one *path) newtonDirection(d []float64) {
	copy(d, one.g)
	var weight [memory]float64
	for k := len(one.steps) - 1; k >= 0; k-- {
		st := &one.steps[k]
		weight[k] = st.rho * dot(st.s, d)
		addScaled(d, -weight[k], st.y)
	}
	if k := len(one.steps); k > 0 {
		last := &one.steps[k-1]
		scale(d, 1/(last.rho*dot(last.y, last.y)))
	}
	for k := range one.steps {
		st := &one.steps[k]
		addScaled(d, weight[k]-st.rho*dot(st.y, d), st.s)
	}
	scale(d, -1)
	one.project(d)
}

// remember keeps the move from the old point, if the energy curves upwards
// along it.
func (one *path) remember(oldX, oldG []float64) {
	var st step
	if len(one.steps) == memory {
		st = one.steps[0]
		copy(one.steps, one.steps[1:])
		one.steps = one.steps[:memory-1]
	} else {
		st = step{s: make([]float64, len(oldX)), y: make([]float64, len(oldX))}
	}
	for i := range oldX {
		st.s[i], st.y[i] = one.x[i]-oldX[i], one.g[i]-oldG[i]
	}
	sy := dot(st.s, st.y)
	if sy <= 1e-10*math.Sqrt(dot(st.s, st.s)*dot(st.y, st.y)) {
		return
	}
	st.rho = 1 / sy
	one.steps = append(one.steps, st)
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
