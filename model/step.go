package model

import (
	"math"
	"strconv"
)

// stepper does a number of turns of a knob. What it returns may lie outside the
// parameter's range; Step sees to that.
type stepper func(p Param, c Chain, turns int, fine bool) Chain

// Turns reports whether the parameter can be turned like a knob.
func (p Param) Turns() bool { return p.step != nil }

// Step returns the chain after the parameter's knob was turned by so many
// notches, up or down, and is never an invalid chain if c is valid.
//
//   - A number moves by one unit in its second significant digit (4.1 → 4.2,
//     21 → 22), or in its third if fine; close to zero in equal steps through
//     zero, whose size follows the hopping. It stops at its limits.
//   - sites moves by the smallest even number that keeps a ring's filling a
//     whole number of closed shells (by 4 at half filling with spin), else by 2;
//     by 1 if fine.
//   - filling and electrons move from closed shell to closed shell: on a ring by
//     two electrons per spin state, on an open chain by one; by one electron if
//     fine. A filling that asks for part of an electron first becomes whole.
//   - boundary and spin toggle. Spin keeps the band filling, and so 2kF, unless
//     the electrons are given by number.
//
// Turning up and down again gives the same chain back unless a limit was hit (a
// number of more than twelve digits comes back to twelve). A parameter of a
// phonon branch that is not there, text and the energy unit do not turn.
func (p Param) Step(c Chain, turns int, fine bool) Chain {
	if p.step == nil || turns == 0 || (p.derived == nil && !p.Given(c)) {
		return c
	}
	next := p.step(p, c, turns, fine)
	if next.Validate() != nil {
		return c
	}
	return next
}

// linearSteps is the number of coarse notches from zero to where the notches
// begin to grow with the number.
const linearSteps = 10

// stepNumber turns a real number along a scale that is linear up to start and
// then has 90 equal notches in each decade, so that a number with two digits
// keeps two digits. Where scaled, start is meant for a hopping near 1.
func stepNumber(start float64, scaled bool) stepper {
	return func(p Param, c Chain, turns int, fine bool) Chain {
		start := start
		if scaled && c.Hopping > 0 {
			start *= math.Pow(10, math.Round(math.Log10(c.Hopping)))
		}
		start = math.Max(start, MinMagnitude)
		notch := 1.0
		if fine {
			notch = 0.1
		}
		v := fromNotch(toNotch(p.Get(c)/start)+float64(turns)*notch) * start
		v = twelveDigits(v, start)
		least := 0.0
		switch {
		case p.positive:
			least = MinMagnitude
		case p.signed:
			least = -MaxMagnitude
		}
		_ = p.assign(&c, math.Min(math.Max(v, least), MaxMagnitude)) // finite, so it cannot fail
		return c
	}
}

// toNotch maps a number, in units of where the linear part of its scale ends,
// to its notch: odd, continuous and increasing.
func toNotch(y float64) float64 {
	size := math.Abs(y)
	if size <= 1 {
		return y * linearSteps
	}
	decade := math.Floor(math.Log10(size))
	mantissa := size / math.Pow(10, decade)
	return math.Copysign(linearSteps+90*decade+10*(mantissa-1), y)
}

// fromNotch is the inverse of toNotch.
func fromNotch(x float64) float64 {
	size := math.Abs(x)
	if size <= linearSteps {
		return x / linearSteps
	}
	decade := math.Floor((size - linearSteps) / 90)
	mantissa := 1 + (size-linearSteps-90*decade)/10
	return math.Copysign(mantissa*math.Pow(10, decade), x)
}

// twelveDigits rounds v, or v as part of a larger scale, to twelve significant
// decimal digits, so that rounding errors of a turn do not pile up behind the
// digits that were set.
func twelveDigits(v, scale float64) float64 {
	decimals := 11 - int(math.Floor(math.Log10(math.Max(math.Abs(v), scale))))
	r, err := strconv.ParseFloat(strconv.FormatFloat(v, 'f', max(decimals, 0), 64), 64)
	if err != nil {
		return v
	}
	return r + 0 // no negative zero
}

// whole moves n by turns of step, or by fewer where that would leave [least, most].
func whole(n, turns, step, least, most int) int {
	room := most - n
	if turns < 0 {
		room = n - least
	}
	steps := min(max(turns, -turns), max(room, 0)/step)
	if turns < 0 {
		steps = -steps
	}
	return n + steps*step
}

func stepSites(_ Param, c Chain, turns int, fine bool) Chain {
	step := 2
	switch {
	case fine:
		step = 1
	case c.Boundary == Ring && !c.ByNumber:
		step = closedShellSites(c)
	}
	least := 1
	if c.ByNumber {
		least = max(least, (c.Electrons+c.Spin-1)/c.Spin)
	}
	c.Sites = whole(c.Sites, turns, step, least, MaxSites)
	return c
}

// closedShellSites returns the smallest even number of sites, up to 24, that
// holds whole shells of a ring at its filling, else 2.
func closedShellSites(c Chain) int {
	for step := 2; step <= 24; step += 2 {
		shells := c.Filling * float64(step) / float64(2*c.Spin)
		if math.Abs(shells-math.Round(shells)) < 1e-9 {
			return step
		}
	}
	return 2
}

func stepFilling(_ Param, c Chain, turns int, fine bool) Chain {
	n := stepCount(c, turns, fine)
	c.ByNumber, c.Electrons = false, 0
	c.Filling = float64(n) / float64(c.Sites)
	return c
}

func stepElectrons(_ Param, c Chain, turns int, fine bool) Chain {
	n := stepCount(c, turns, fine)
	c.ByNumber, c.Filling = true, 0
	c.Electrons = n
	return c
}

// stepCount turns the number of electrons.
func stepCount(c Chain, turns int, fine bool) int {
	step := c.Spin
	switch {
	case fine:
		step = 1
	case c.Boundary == Ring:
		step = 2 * c.Spin
	}
	n, _ := c.Count()
	return whole(n, turns, step, 0, c.Spin*c.Sites)
}

func stepBoundary(_ Param, c Chain, turns int, _ bool) Chain {
	if turns%2 != 0 {
		c.Boundary = Ring + Open - c.Boundary
	}
	return c
}

func stepSpin(_ Param, c Chain, turns int, _ bool) Chain {
	if turns%2 == 0 {
		return c
	}
	from := c.Spin
	c.Spin = 3 - from
	c.Filling *= float64(c.Spin) / float64(from)
	return c
}
