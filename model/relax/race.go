package relax

import (
	"context"
	"errors"
	"fmt"
	"runtime/debug"
	"slices"
	"sync"
)

// scouting is how many iterations every start is given. A good one has
// converged by then (12 to 30 are usual); one that has not goes on only if it
// stands below all that have.
const scouting = 60

// race relaxes the starts, Jobs at a time, and returns their ends in the order
// of the starts. What each does depends on nothing that finishes in between, so
// the outcome is the same to the last bit for any number of cores. A start for
// which the electrons cannot be solved is left out; if that is all of them, its
// error is returned.
func (p *problem) race(ctx context.Context, starts []Seed, set Settings) ([]*path, error) {
	paths := make([]*path, len(starts))
	finished := 0
	var lock sync.Mutex
	report := func(one *path) {
		if set.Progress == nil {
			return
		}
		lock.Lock()
		defer lock.Unlock()
		set.Progress(Progress{one.name, finished, len(starts), one.iterations, one.residual, set.Tolerance})
	}
	errs := sideBySide(len(starts), set.Jobs, func(i int) error {
		paths[i] = newPath(p, starts[i].Name)
		err := paths[i].evaluate(ctx, p.vector(starts[i]))
		if err == nil {
			err = paths[i].minimise(ctx, set.Tolerance, min(scouting, set.MaxIterations), report)
		}
		lock.Lock()
		finished++
		lock.Unlock()
		return err
	})

	good := solved(paths, errs)
	if ctx.Err() != nil || len(good) == 0 && len(starts) > 0 {
		return nil, errors.Join(errs...)
	}
	hopeful := good[:0:0]
	for _, one := range good {
		if one.residual > set.Tolerance && !aboveConverged(one, good, set.Tolerance) {
			hopeful = append(hopeful, one)
		}
	}
	errs = sideBySide(len(hopeful), set.Jobs, func(i int) error {
		return hopeful[i].minimise(ctx, set.Tolerance, set.MaxIterations, report)
	})
	if ctx.Err() != nil || len(good) == len(hopeful) && len(solved(hopeful, errs)) == 0 {
		return nil, errors.Join(errs...)
	}
	for i, err := range errs {
		if err != nil {
			good = slices.DeleteFunc(good, func(one *path) bool { return one == hopeful[i] })
		}
	}
	return good, nil
}

// solved returns the paths without an error.
func solved(paths []*path, errs []error) (good []*path) {
	for i, one := range paths {
		if errs[i] == nil {
			good = append(good, one)
		}
	}
	return good
}

// aboveConverged reports whether some path has converged below this one.
func aboveConverged(one *path, all []*path, tolerance float64) bool {
	for _, other := range all {
		if other.residual <= tolerance && other.free < one.free {
			return true
		}
	}
	return false
}

// sideBySide calls do(0) … do(n−1), so many at a time, and returns their errors.
// A panic becomes an error: in here it would leave the user's terminal raw.
func sideBySide(n, atATime int, do func(int) error) []error {
	errs := make([]error, n)
	seats := make(chan struct{}, max(1, atATime))
	var wait sync.WaitGroup
	for i := range n {
		seats <- struct{}{}
		wait.Add(1)
		go func() {
			defer wait.Done()
			defer func() { <-seats }()
			defer func() {
				if r := recover(); r != nil {
					errs[i] = fmt.Errorf("relax: %v\n%s", r, debug.Stack())
				}
			}()
			errs[i] = do(i)
		}()
	}
	wait.Wait()
	return errs
}
