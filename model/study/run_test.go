package study_test

import (
	"context"
	"errors"
	"reflect"
	"testing"
	"time"

	"pgregory.net/rapid"

	"example.org/twokf/model"
	"example.org/twokf/model/study"
	"example.org/twokf/presets"
)

// The parts of the portrait appear in the order of the stages, each published
// portrait has what the one before it had, and just the last one is complete.
func TestPartsAppearInOrder(t *testing.T) {
	var seen []*study.Portrait
	last, err := study.Run(context.Background(), mixed(t), study.Settings{Publish: func(p *study.Portrait) { seen = append(seen, p) }})
	if err != nil {
		t.Fatal(err)
	}
	stages := study.Stages()
	if len(seen) != len(stages) {
		t.Fatalf("%d portraits for %d stages", len(seen), len(stages))
	}
	for i, p := range seen {
		if p.Complete != (i == len(seen)-1) {
			t.Errorf("after %s: complete %v", stages[i], p.Complete)
		}
		for j, stage := range stages[:len(stages)-1] {
			part := onlyPart(p, stage)
			if (part != nil) != (j <= i) {
				t.Errorf("after %s: part of %s there: %v", stages[i], stage, part != nil)
			}
			if part != nil && part != onlyPart(last, stage) {
				t.Errorf("after %s: the part of %s is not the final one", stages[i], stage)
			}
		}
		if i > 0 && p.Seconds < seen[i-1].Seconds {
			t.Errorf("after %s: time runs backwards", stages[i])
		}
	}
	if len(last.Doubts) == 0 {
		t.Error("no doubts")
	}
}

// A published portrait never changes, neither by the rest of its study nor by
// studies that build on it.
func TestPublishedPortraitsNeverChange(t *testing.T) {
	c := mixed(t)
	c.Sites = 60
	var seen, copies []*study.Portrait
	keep := study.Settings{Publish: func(p *study.Portrait) {
		seen = append(seen, p)
		copies = append(copies, clone(p))
	}}
	p, err := study.Run(context.Background(), c, keep)
	for _, assignment := range []string{"conditions.temperature=0.002", "chain.sites=64", "bond_phonon.coupling=0.7", "conditions.temperature=0"} {
		if err != nil {
			t.Fatal(err)
		}
		if c, err = model.Set(c, assignment); err != nil {
			t.Fatal(err)
		}
		keep.Previous = p
		p, err = study.Run(context.Background(), c, keep)
	}
	if err != nil {
		t.Fatal(err)
	}
	for i := range seen {
		if d := difference(copies[i], seen[i]); d != "" {
			t.Errorf("portrait %d has changed: %s", i, d)
		}
	}
}

// clone copies all exported parts of a portrait.
func clone(p *study.Portrait) *study.Portrait {
	return deepCopy(reflect.ValueOf(p)).Interface().(*study.Portrait)
}

func deepCopy(v reflect.Value) reflect.Value {
	out := reflect.New(v.Type()).Elem()
	switch v.Kind() {
	case reflect.Pointer:
		if !v.IsNil() {
			out.Set(reflect.New(v.Type().Elem()))
			out.Elem().Set(deepCopy(v.Elem()))
		}
	case reflect.Slice:
		if !v.IsNil() {
			out.Set(reflect.MakeSlice(v.Type(), v.Len(), v.Len()))
		}
		for i := range v.Len() {
			out.Index(i).Set(deepCopy(v.Index(i)))
		}
	case reflect.Struct:
		for i := range v.NumField() {
			if v.Type().Field(i).IsExported() {
				out.Field(i).Set(deepCopy(v.Field(i)))
			}
		}
	default:
		out.Set(v)
	}
	return out
}

// A study that is cancelled while stage k is published publishes nothing more,
// gives back what it has with the context's error, and a later study goes on
// from there.
func TestCancelBetweenStages(t *testing.T) {
	c := mixed(t)
	fresh := portraitOf(t, c)
	for k, name := range study.Stages() {
		ctx, cancel := context.WithCancel(context.Background())
		published := 0
		p, err := study.Run(ctx, c, study.Settings{Publish: func(*study.Portrait) {
			if published++; published == k+1 {
				cancel()
			}
		}})
		if published != k+1 {
			t.Errorf("cancelled after %s: %d portraits", name, published)
		}
		if last := k == len(study.Stages())-1; last != (err == nil) || (!last && !errors.Is(err, context.Canceled)) {
			t.Errorf("cancelled after %s: %v", name, err)
		}
		if p.Chain != c || (p.Complete && err != nil) {
			t.Errorf("cancelled after %s: complete %v", name, p.Complete)
		}
		rest, err := study.Run(context.Background(), c, study.Settings{Previous: p})
		if err != nil {
			t.Fatal(err)
		}
		for j, stage := range study.Stages()[:len(study.Stages())-1] {
			if taken := onlyPart(p, stage) == onlyPart(rest, stage); taken != (j <= k) {
				t.Errorf("cancelled after %s: part of %s taken over: %v", name, stage, taken)
			}
			if d := difference(study.PartOf(stage, fresh), study.PartOf(stage, rest)); d != "" {
				t.Errorf("cancelled after %s and taken up again: %s", name, d)
			}
		}
	}
}

// A study that is cancelled inside a stage does not publish that stage.
func TestCancelInsideTheRelaxation(t *testing.T) {
	c := mixed(t)
	c.Sites = 1900
	ctx, cancel := context.WithCancel(context.Background())
	published, steps := 0, 0
	p, err := study.Run(ctx, c, study.Settings{
		Publish: func(*study.Portrait) { published++ },
		Progress: func(pr study.Progress) {
			if pr.Stage == "lattice" {
				steps++
				cancel()
			}
		},
	})
	if !errors.Is(err, context.Canceled) || p.Lattice != nil || p.Complete {
		t.Errorf("error %v, lattice %v, complete %v", err, p.Lattice, p.Complete)
	}
	if published != 3 { // band, response, phonon
		t.Errorf("%d portraits published", published)
	}
	if steps > 1 {
		t.Errorf("%d further steps after the end of the context", steps-1)
	}
}

// However early or late the end comes, an unfinished study says so, and what it
// has published is all that there is.
func TestCancelAtAnyTime(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := anyChain(60).Draw(t, "chain")
		ctx, cancel := context.WithTimeout(context.Background(), time.Duration(rapid.IntRange(0, 3000).Draw(t, "µs"))*time.Microsecond)
		defer cancel()
		var last *study.Portrait
		p, err := study.Run(ctx, c, study.Settings{Publish: func(p *study.Portrait) { last = p }})
		switch {
		case err == nil && (!p.Complete || last == nil || !last.Complete):
			t.Error("no error, but not complete")
		case err != nil && !errors.Is(err, context.DeadlineExceeded):
			t.Errorf("error %v", err)
		case err != nil && (p.Complete || (last != nil && last.Complete)):
			t.Error("complete, but with an error")
		}
	})
}

// The error is the one that ended the context.
func TestErrorIsTheContexts(t *testing.T) {
	reason := errors.New("a newer chain")
	caused, cancel := context.WithCancelCause(context.Background())
	cancel(reason)
	late, stop := context.WithDeadline(context.Background(), time.Now().Add(-time.Second))
	defer stop()
	for _, end := range []struct {
		ctx  context.Context
		want error
	}{{caused, reason}, {late, context.DeadlineExceeded}} {
		p, err := study.Run(end.ctx, mixed(t), study.Settings{Publish: func(*study.Portrait) { t.Error("published after the end") }})
		if !errors.Is(err, end.want) {
			t.Errorf("error %v, expected %v", err, end.want)
		}
		if p == nil || p.Band != nil || p.Chain != mixed(t) {
			t.Error("expected a portrait with just the chain")
		}
	}
}

// An invalid chain is refused with the parameter to blame.
func TestInvalidChainIsRefused(t *testing.T) {
	c := mixed(t)
	c.Temperature = -1
	p, err := study.Run(context.Background(), c, study.Settings{Publish: func(*study.Portrait) { t.Error("published") }})
	var blamed *model.ParamError
	if !errors.As(err, &blamed) || blamed.Key != "conditions.temperature" || p != nil {
		t.Errorf("portrait %v, error %v", p, err)
	}
}

// Progress is a part between 0 and 1 of a stage that has a name.
func TestProgressMakesSense(t *testing.T) {
	calls := 0
	_, err := study.Run(context.Background(), mixed(t), study.Settings{Progress: func(p study.Progress) {
		calls++
		if !(p.Done >= 0 && p.Done <= 1) || p.Stage == "" || p.Detail == "" || p.Elapsed < 0 {
			t.Errorf("%+v", p)
		}
	}})
	if err != nil || calls == 0 {
		t.Errorf("%d calls, error %v", calls, err)
	}
}

// Every preset can be answered for without trouble, and its lattice converges to
// a minimum.
func TestPresetsAreSolved(t *testing.T) {
	for _, preset := range presets.List() {
		t.Run(preset.Name, func(t *testing.T) {
			p := portraitOf(t, preset.Chain)
			for _, stage := range study.Stages()[:len(study.Stages())-1] {
				if onlyPart(p, stage) == nil && !(stage == "ring" && preset.Chain.Boundary == model.Open) {
					t.Errorf("no part of %s", stage)
				}
			}
			l := p.Lattice
			if !l.Converged || l.Residual > l.Tolerance || l.Curvature < -1e-5 {
				t.Errorf("converged %v, residual %g of %g, curvature %g", l.Converged, l.Residual, l.Tolerance, l.Curvature)
			}
			if l.FreeEnergy > l.Undistorted+1e-9 {
				t.Errorf("the relaxed chain lies %g above the undistorted one", l.FreeEnergy-l.Undistorted)
			}
			nothingOdd(t, p)
		})
	}
}
