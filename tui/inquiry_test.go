package tui

import (
	"context"
	"errors"
	"io"
	"strings"
	"sync/atomic"
	"testing"
	"testing/synctest"
	"time"

	tea "github.com/charmbracelet/bubbletea"

	"example.org/twokf/model"
	"example.org/twokf/model/study"
)

// watched is a bench in a running program, which alone may touch it: a message
// that is a function is called with it, and so is each after every message.
type watched struct {
	*Bench
	each func(*Bench)
}

func (w watched) Update(msg tea.Msg) (tea.Model, tea.Cmd) {
	switch do := msg.(type) {
	case func(*Bench):
		do(w.Bench)
		return w, nil
	case func(*Bench) tea.Cmd:
		return w, do(w.Bench)
	}
	_, cmd := w.Bench.Update(msg)
	if w.each != nil {
		w.each(w.Bench)
	}
	return w, cmd
}

// inside looks at the bench in a running program.
func inside(p *tea.Program, look func(*Bench)) {
	done := make(chan struct{})
	p.Send(func(b *Bench) {
		defer close(done)
		look(b)
	})
	<-done
}

// session runs a whole program on a bench, on synctest's clock, with a study of
// the test's own. It returns the program and a channel that closes at its end.
func session(t *testing.T, b *Bench, run func(context.Context, model.Chain, study.Settings) (*study.Portrait, error), each func(*Bench)) (*tea.Program, <-chan struct{}) {
	t.Helper()
	b.inquiry.run = run
	p := tea.NewProgram(watched{b, each}, tea.WithInput(nil), tea.WithOutput(io.Discard), tea.WithoutSignalHandler())
	over := make(chan struct{})
	go func() {
		defer close(over)
		if _, err := p.Run(); err != nil {
			t.Error(err)
		}
	}()
	p.Send(tea.WindowSizeMsg{Width: 80, Height: 24})
	synctest.Wait()
	return p, over
}

// pause lets time pass and everything happen that falls into it.
func pause(d time.Duration) {
	time.Sleep(d)
	synctest.Wait()
}

// leave quits a session and waits for its end, and for that of its commands,
// which cannot be called back.
func leave(p *tea.Program, over <-chan struct{}) {
	p.Quit()
	<-over
	time.Sleep(time.Minute)
}

// takes is a study that takes some time unless it is cancelled.
func takes(d time.Duration) func(context.Context, model.Chain, study.Settings) (*study.Portrait, error) {
	return func(ctx context.Context, c model.Chain, _ study.Settings) (*study.Portrait, error) {
		select {
		case <-time.After(d):
			return &study.Portrait{Chain: c, Complete: true}, nil
		case <-ctx.Done():
			return &study.Portrait{Chain: c}, context.Cause(ctx)
		}
	}
}

func TestOfManyChangesOnlyTheLastIsAnswered(t *testing.T) {
	synctest.Test(t, func(t *testing.T) {
		b := opened(t, "polyene", 80, 24)
		var started, finished atomic.Int32
		slow := takes(200 * time.Millisecond)
		study := func(ctx context.Context, c model.Chain, set study.Settings) (*study.Portrait, error) {
			started.Add(1)
			defer finished.Add(1)
			set.Publish(&study.Portrait{Chain: c})
			p, err := slow(ctx, c, set)
			set.Publish(&study.Portrait{Chain: c, Troubles: []study.Trouble{{Stage: "late", Err: err}}}) // even if cancelled
			return p, err
		}
		var answers []model.Chain
		p, over := session(t, b, study, func(b *Bench) {
			if fresh := b.inquiry.fresh; fresh != nil && fresh.Chain != b.chain {
				t.Errorf("T = %g is shown as fresh while the knobs say %g", fresh.Chain.Temperature, b.chain.Temperature)
			}
			if last := b.inquiry.last; last != nil && (len(answers) == 0 || answers[len(answers)-1] != last.Chain) {
				answers = append(answers, last.Chain)
			}
		})
		const turns = 100
		for range turns {
			p.Send(keyNames["up"])
			time.Sleep(10 * time.Millisecond)
		}
		pause(time.Second)
		inside(p, func(b *Bench) {
			if n := len(b.trail.past); n != turns {
				t.Errorf("%d of %d turns arrived", n, turns)
			}
			if len(answers) != 1 || answers[0] != b.chain {
				t.Errorf("%d answers were shown, the last for T = %g with the knob at %g", len(answers), b.inquiry.last.Chain.Temperature, b.chain.Temperature)
			}
		})
		if s, f := started.Load(), finished.Load(); s != f || s > 3 {
			t.Errorf("%d studies were started and %d ended; a burst of keys needs three at most", s, f)
		}
		leave(p, over)
	})
}

func TestMessagesOfOlderStudiesAreDropped(t *testing.T) {
	b := opened(t, "polyene", 80, 24)
	answer(t, b)
	last := b.inquiry.last
	press(t, b, "up", "up")
	old := &study.Portrait{Chain: b.chain, Complete: true}
	for _, msg := range []tea.Msg{
		slowMsg{b.inquiry.lag - 1}, updateMsg{gen: b.inquiry.gen - 1, news: update{portrait: old}},
		answeredMsg{b.inquiry.gen - 1, old, nil}, answeredMsg{b.inquiry.gen - 1, nil, errors.New("cancelled")},
	} {
		b.Update(msg)
		if q := b.inquiry; q.fresh != nil || q.last != last || q.err != nil || q.slow || !q.busy {
			t.Errorf("%T of an older study has an effect", msg)
		}
	}
	if _, cmd := b.Update(startMsg{b.inquiry.gen - 1}); cmd != nil {
		t.Error("an older study is started")
	}
}

func TestProgressShowsOnlyAfterPatience(t *testing.T) {
	synctest.Test(t, func(t *testing.T) {
		b := opened(t, "half", 80, 24)
		answer(t, b)
		p, over := session(t, b, func(ctx context.Context, c model.Chain, set study.Settings) (*study.Portrait, error) {
			set.Progress(study.Progress{Stage: "lattice", Done: 0.5, Detail: "on its way"})
			return takes(time.Second)(ctx, c, set)
		}, nil)
		pause(2 * time.Second) // the study that Init asks for
		p.Send(keyNames["up"])
		pause(patience - time.Millisecond)
		inside(p, func(b *Bench) {
			if strings.Contains(b.View(), "on its way") || strings.Contains(b.View(), "(2Δ") {
				t.Errorf("a study of less than %v shows its progress or stale numbers", patience)
			}
		})
		pause(2 * time.Millisecond)
		inside(p, func(b *Bench) { demand(t, b.View(), "lattice 50 %, on its way") })
		pause(time.Second)
		inside(p, func(b *Bench) {
			if strings.Contains(b.View(), "on its way") {
				t.Error("the progress of a finished study stays")
			}
		})
		leave(p, over)
	})
}

func TestALongWaitSaysWhenItEnds(t *testing.T) {
	b := opened(t, "half", 80, 24)
	answer(t, b)
	press(t, b, "up")
	b.Update(slowMsg{b.inquiry.lag})
	for _, tt := range []struct {
		left time.Duration
		want string
	}{
		{0, "lattice 50 %, on its way"},
		{2*time.Second - 1, "lattice 50 %, on its way"},
		{2 * time.Second, "lattice 50 %, about 2 s left, on its way"},
		{12400 * time.Millisecond, "lattice 50 %, about 12 s left"},
		{89 * time.Second, "lattice 50 %, about 89 s left"},
		{150 * time.Second, "lattice 50 %, about 2 min left"},
		{3 * time.Hour, "lattice 50 %, about 3 h left"},
	} {
		stage := study.Progress{Stage: "lattice", Done: 0.5, Detail: "on its way", Left: tt.left}
		b.Update(updateMsg{gen: b.inquiry.gen, news: update{progress: &stage}})
		headline, _, _ := strings.Cut(b.View(), "\n")
		demand(t, headline, tt.want)
	}
}

// A held key asks for ever new studies; the picture lags all the while.
func TestAHeldKeyDoesNotHideTheLag(t *testing.T) {
	synctest.Test(t, func(t *testing.T) {
		b := opened(t, "half", 80, 24)
		answer(t, b)
		p, over := session(t, b, takes(time.Second), nil)
		pause(2 * time.Second)
		for range 10 {
			p.Send(keyNames["up"])
			pause(patience / 3)
		}
		inside(p, func(b *Bench) {
			if !b.inquiry.lags() {
				t.Error("the numbers have been out of date for longer than patience and do not show it")
			}
		})
		pause(2 * time.Second)
		inside(p, func(b *Bench) {
			if b.inquiry.lags() {
				t.Error("the last answer does not end the lag")
			}
		})
		leave(p, over)
	})
}

func TestWhatIsNotRecomputedIsSeenToBeStale(t *testing.T) {
	b := opened(t, "half", 120, 36)
	answer(t, b)
	clean := b.View()
	hotter(t, b)
	stale := b.View()
	demand(t, stale, "(2Δ 0.1512 eV)", "(A[n] 0.3122)", "Ω²/ω²")
	for i, d := range b.screen.drawn {
		want := i == bandIndex || i == chainIndex // of the finite chain
		if d.key.stale != want {
			t.Errorf("%s is stale: %t", views[i].name(), d.key.stale)
		}
	}
	b.Update(answeredMsg{b.inquiry.gen, b.inquiry.last, nil})
	if strings.Contains(b.View(), "(2Δ") || b.screen.drawn[chainIndex].key.stale {
		t.Error("an answer stays stale")
	}
	if clean == stale {
		t.Error("stale and fresh look the same")
	}
}

func TestKeysAreFreeWhileAStudyRuns(t *testing.T) {
	synctest.Test(t, func(t *testing.T) {
		b := opened(t, "polyene", 80, 24)
		p, over := session(t, b, takes(time.Hour), nil)
		pause(time.Second)
		var before model.Chain
		inside(p, func(b *Bench) { before = b.chain })
		p.Send(keyNames["up"])
		p.Send(keyOf(t, "?"))
		inside(p, func(b *Bench) { // no time has passed: the study is still running
			if b.chain == before || b.page == nil || !b.inquiry.busy {
				t.Error("keys wait for the study")
			}
		})
		leave(p, over)
	})
}

func TestUpdateLeavesTheStudyToItsCommand(t *testing.T) {
	b := opened(t, "polyene", 80, 24)
	asked := false
	b.inquiry.run = func(context.Context, model.Chain, study.Settings) (*study.Portrait, error) {
		asked = true
		return nil, nil
	}
	_, cmd := b.Update(startMsg{b.inquiry.gen})
	if asked || cmd == nil {
		t.Errorf("Update runs the study itself (%t) or not at all (%t)", asked, cmd == nil)
	}
}

func TestQuittingCancelsTheStudy(t *testing.T) {
	synctest.Test(t, func(t *testing.T) {
		b := opened(t, "polyene", 80, 24)
		var cause error
		done := make(chan struct{})
		p, over := session(t, b, func(ctx context.Context, _ model.Chain, _ study.Settings) (*study.Portrait, error) {
			defer close(done)
			<-ctx.Done()
			cause = context.Cause(ctx)
			return nil, cause
		}, nil)
		pause(time.Second)
		p.Send(keyOf(t, "q"))
		<-over
		<-done
		time.Sleep(time.Minute)
		if !errors.Is(cause, context.Canceled) {
			t.Errorf("the study ended with %v", cause)
		}
	})
}

func TestAPanicInAStudyIsAMessage(t *testing.T) {
	synctest.Test(t, func(t *testing.T) {
		b := opened(t, "half", 80, 24)
		answer(t, b)
		before := b.inquiry.last
		p, over := session(t, b, func(_ context.Context, c model.Chain, set study.Settings) (*study.Portrait, error) {
			set.Publish(&study.Portrait{Chain: c, Band: before.Band})
			panic("index out of range")
		}, nil)
		pause(time.Second)
		var chain model.Chain
		inside(p, func(b *Bench) {
			demand(t, b.View(), "the study failed: index out of range", "not computed", "(2Δ 0.1512 eV)")
			if !b.inquiry.lags() {
				t.Error("what a failed study left undone is not stale")
			}
			chain = b.chain
		})
		p.Send(keyNames["up"])
		pause(time.Second)
		inside(p, func(b *Bench) {
			if b.chain == chain {
				t.Error("the bench does not go on after a panic in a study")
			}
		})
		leave(p, over)
	})
}

func TestAStudysErrorIsAMessage(t *testing.T) {
	b := opened(t, "half", 80, 24)
	b.Update(answeredMsg{b.inquiry.gen, nil, errors.New("no such luck\x1b[2J")})
	demand(t, b.View(), "no such luck")
}

func TestOtherEnergyUnitsAreNotMixed(t *testing.T) {
	b := opened(t, "polyene", 80, 24)
	answer(t, b)
	c := chainOf(t, "spinless")
	b.take(c, origin{from: "spinless", saved: c})
	b.Update(updateMsg{gen: b.inquiry.gen, news: update{portrait: &study.Portrait{Chain: c}}})
	if p := b.inquiry.picture(); p.Band != nil || p.Lattice != nil {
		t.Error("a band in eV stands on a bench in units of t")
	}
}
