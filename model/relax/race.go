package relax

import (
	"context"
	"errors"
	"fmt"
	"math"
	"runtime/debug"
	"sync"
	"sync/atomic"
)

// scouting is how many iterations every start is given. A good one has
// converged by then (12 to 30 are usual); one that has not goes on only if it
// stands below all that have.
const scouting = 60

// race relaxes the starts side by side, one walker each, and returns their ends
// in the order of the starts. What each does depends on nothing that finishes in
// between, so the outcome is the same to the last bit for any number of
// walkers. A start for which the electrons cannot be solved is left out; if that
// is all of them, their errors are returned.
func race(ctx context.Context, walkers []*walker, starts []Seed, set Settings) ([]*end, error) {
	ends := make([]*end, len(starts))
	finished := 0
	var lock sync.Mutex
	walk := func(w *walker, i int, iterations int) error {
		name, before := starts[i].Name, 0
		var x []float64
		if ends[i] == nil {
			x = w.vector(starts[i])
			starts[i].Stretch, starts[i].SiteMode = nil, nil // as long as the chain
		} else { // go on
			x, before = ends[i].x, ends[i].iterations
		}
		if err := w.stand(ctx, x); err != nil {
			return err
		}
		n, err := w.minimise(ctx, set.Tolerance, iterations, func(iteration int, residual float64) {
			if set.Progress != nil {
				lock.Lock()
				defer lock.Unlock()
				set.Progress(Progress{name, finished, len(starts), before + iteration, residual, set.Tolerance})
			}
		})
		if err != nil {
			return err
		}
		ends[i] = w.at(name, before+n)
		return nil
	}

	errs := sideBySide(len(walkers), len(starts), func(worker, i int) error {
		err := walk(walkers[worker], i, min(scouting, set.MaxIterations))
		lock.Lock()
		finished++
		lock.Unlock()
		return err
	})
	if ctx.Err() != nil {
		return nil, context.Cause(ctx)
	}
	forgetWorse(ends, set.Tolerance)
	var hopeful []int
	for i, e := range ends {
		if e != nil && e.residual > set.Tolerance && !aboveConverged(e, ends, set.Tolerance) {
			hopeful = append(hopeful, i)
		}
	}
	sideBySide(len(walkers), len(hopeful), func(worker, i int) error {
		return walk(walkers[worker], hopeful[i], set.MaxIterations-scouting) // on error its end so far stands
	})
	if ctx.Err() != nil {
		return nil, context.Cause(ctx)
	}
	forgetWorse(ends, set.Tolerance)
	var good []*end
	for _, e := range ends {
		if e != nil {
			good = append(good, e)
		}
	}
	if len(good) == 0 && len(starts) > 0 {
		return nil, errors.Join(errs...)
	}
	return good, nil
}

// aboveConverged reports whether some end has converged below this one.
func aboveConverged(one *end, all []*end, tolerance float64) bool {
	for _, other := range all {
		if other != nil && other.residual <= tolerance && other.free < one.free {
			return true
		}
	}
	return false
}

// forgetWorse lets go of where the ends lie that cannot win any more: those above
// one that has converged, unless by so little that it may be a tie.
func forgetWorse(ends []*end, tolerance float64) {
	for _, e := range ends {
		if e == nil {
			continue
		}
		for _, other := range ends {
			if other != nil && other.x != nil && other.residual <= tolerance && other.free < e.free-1e-9*(1+math.Abs(e.free)) {
				e.x = nil
			}
		}
	}
}

// sideBySide calls do(worker, 0) … do(worker, n−1) on so many workers and
// returns the errors. A panic becomes an error: in a goroutine it would leave the
// user's terminal raw.
func sideBySide(workers, n int, do func(worker, i int) error) []error {
	errs := make([]error, n)
	safely := func(worker, i int) {
		defer func() {
			if r := recover(); r != nil {
				errs[i] = fmt.Errorf("relax: %v\n%s", r, debug.Stack())
			}
		}()
		errs[i] = do(worker, i)
	}
	var next atomic.Int64
	var wait sync.WaitGroup
	for worker := range min(workers, n) {
		wait.Go(func() {
			for i := int(next.Add(1)) - 1; i < n; i = int(next.Add(1)) - 1 {
				safely(worker, i)
			}
		})
	}
	wait.Wait()
	return errs
}
