// Package study asks the whole question: one Chain in, one Portrait out, in
// stages that publish as they finish and can be cancelled. The terminal, the
// command line and the tests all ask through Run; there is no second path.
package study

import (
	"context"
	"fmt"
	"time"

	"example.org/twokf/model"
	"example.org/twokf/model/fermi"
)

// Settings adjusts a study. The zero value asks for the defaults.
type Settings struct {
	Previous *Portrait       // an earlier answer; parts that the change leaves alone are taken over
	Publish  func(*Portrait) // if not nil, called after each stage, on the caller's goroutine
	Progress func(Progress)  // if not nil, called now and then inside long stages, never concurrently
	Jobs     int             // cores to use; 0 or 1 means one
	Levels   int             // if > 0, what a screen can show: about so many levels, to a plot's accuracy; else all that a file asks for
}

// stage is one part of the question.
type stage struct {
	name string
	// inputs returns a chain that holds just what the stage depends on: two
	// chains with equal inputs have the same answer. This is the one place where
	// the dependence is written down.
	inputs func(model.Chain) model.Chain
	holds  func(prev *Portrait, set Settings) bool // whether it fits these settings too; nil: always
	run    func(context.Context, *inquiry) error
	keep   func(to, from *Portrait) // takes the stage's part over
}

// stages in the order in which they are done: what is quick and shows the
// infinite chain first, the relaxed chain next.
var stages = []stage{bandStage, responseStage, phononStage, latticeStage, levelStage, transitionStage, ringStage, doubtStage}

// inquiry is a study under way.
type inquiry struct {
	chain    model.Chain
	settings Settings
	started  time.Time
	solver   fermi.Solver
	portrait Portrait // filled stage by stage; copied when published

	stageStarted time.Time
	furthest     float64 // progress of the relaxation
}

// Run answers every question about chain c. The chain must be valid; if not,
// its validation error is returned. A stage that fails leaves its part nil and
// a Trouble in the portrait; the others go on. When ctx ends, what has been
// done so far is returned with the context's error and nothing more is
// published.
func Run(ctx context.Context, c model.Chain, set Settings) (*Portrait, error) {
	if err := c.Validate(); err != nil {
		return nil, err
	}
	in := &inquiry{chain: c, settings: set, started: time.Now()}
	in.portrait.Chain, in.portrait.levels = c, set.Levels
	in.portrait.finished = make(map[string]bool, len(stages))
	todo := in.takeOver()
	for _, st := range todo {
		if err := in.do(ctx, st); err != nil {
			return in.snapshot(), err
		}
		if st.name == todo[len(todo)-1].name {
			in.portrait.Complete = true
		}
		if set.Publish != nil {
			set.Publish(in.snapshot())
		}
	}
	return in.snapshot(), nil
}

// takeOver keeps the parts of the previous portrait that still hold and
// returns the stages that are left to do. The last stage is always done.
func (in *inquiry) takeOver() (todo []stage) {
	prev := in.settings.Previous
	last := len(stages) - 1
	for i, st := range stages {
		if i < last && prev != nil && prev.finished[st.name] && prev.trouble(st.name) == nil &&
			st.inputs(prev.Chain) == st.inputs(in.chain) && (st.holds == nil || st.holds(prev, in.settings)) {
			st.keep(&in.portrait, prev)
			in.portrait.finished[st.name] = true
			continue
		}
		todo = append(todo, st)
	}
	return todo
}

// do runs one stage. Only the end of the context is an error here.
func (in *inquiry) do(ctx context.Context, st stage) error {
	err := ctx.Err()
	if err == nil {
		in.stageStarted = time.Now()
		in.progress(st.name, 0, "under way")
		err = st.run(ctx, in)
	}
	if ctx.Err() != nil {
		return context.Cause(ctx)
	}
	if err != nil {
		in.portrait.Troubles = append(in.portrait.Troubles, Trouble{st.name, err})
	}
	in.portrait.finished[st.name] = true
	return nil
}

// snapshot returns a copy that later stages do not touch.
func (in *inquiry) snapshot() *Portrait {
	p := in.portrait
	p.Seconds = time.Since(in.started).Seconds()
	p.Troubles = append([]Trouble(nil), p.Troubles...)
	p.finished = make(map[string]bool, len(in.portrait.finished))
	for name := range in.portrait.finished {
		p.finished[name] = true
	}
	return &p
}

func (in *inquiry) progress(stage string, done float64, format string, args ...any) {
	if in.settings.Progress == nil {
		return
	}
	p := Progress{Stage: stage, Done: done, Detail: fmt.Sprintf(format, args...), Elapsed: time.Since(in.started)}
	if spent := time.Since(in.stageStarted); done >= enoughDone && done < 1 {
		p.Left = time.Duration(float64(spent) * (1 - done) / done)
	}
	in.settings.Progress(p)
}

// enoughDone is the part of a stage from which the time left can be told.
const enoughDone = 0.05

// trouble returns why a stage failed, or nil.
func (p *Portrait) trouble(stage string) error {
	for _, t := range p.Troubles {
		if t.Stage == stage {
			return t.Err
		}
	}
	return nil
}

// bulkOf keeps what the infinite uniform chain depends on.
func bulkOf(c model.Chain) model.Chain {
	return model.Chain{Sites: 1, Hopping: c.Hopping, NextHopping: c.NextHopping, Spin: c.Spin, Filling: c.ElectronsPerSite()}
}
