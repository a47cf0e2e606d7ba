package tui

import (
	"context"
	"fmt"
	"runtime/debug"
	"time"

	tea "github.com/charmbracelet/bubbletea"

	"example.org/twokf/model"
	"example.org/twokf/model/study"
)

// update is what a study under way has to say: the newest portrait, how far it
// is, or both.
type update struct {
	portrait *study.Portrait
	progress *study.Progress
}

// Messages of a study. They carry the generation that asked, or the lag that
// they are about; older ones are dropped.
type (
	startMsg  struct{ gen int }
	updateMsg struct {
		gen  int
		news update
		from <-chan update
	}
	answeredMsg struct {
		gen      int
		portrait *study.Portrait
		err      error
	}
	slowMsg struct{ lag int } // the picture has lagged behind the knobs for long enough to show it
)

const (
	// shownLevels are about as many as the widest plot can tell apart.
	shownLevels = 160
	// settle is how long a burst of key presses is gathered before a study is
	// started, when one is under way already.
	settle = 15 * time.Millisecond
	// patience is how long the plots may lag behind the knobs before they are
	// drawn as stale and the progress is shown.
	patience = 100 * time.Millisecond
)

// inquiry is the bench's side of the studies: the newest change wins.
type inquiry struct {
	run    func(context.Context, model.Chain, study.Settings) (*study.Portrait, error)
	gen    int // of the present study
	lag    int // how often the picture has fallen behind the knobs
	cancel context.CancelFunc
	busy   bool // a study is under way or about to start
	slow   bool // and the picture has lagged for longer than patience
	last   *study.Portrait
	fresh  *study.Portrait // of the present generation, nil before its first part
	stage  study.Progress
	err    error // why the present generation has no answer
}

// lags reports whether what is older than the knobs must be seen to be so.
func (q *inquiry) lags() bool { return q.slow || q.err != nil }

// ask announces a study and cancels the one before.
func (q *inquiry) ask() tea.Cmd {
	wait, lagging := settle, tea.Cmd(nil)
	if !q.busy {
		q.lag++
		lag := q.lag
		wait, lagging = 0, tea.Tick(patience, func(time.Time) tea.Msg { return slowMsg{lag} })
	}
	if q.cancel != nil {
		q.cancel()
		q.cancel = nil
	}
	q.gen++
	q.busy, q.fresh, q.err, q.stage = true, nil, nil, study.Progress{}
	gen := q.gen
	return tea.Batch(tea.Tick(wait, func(time.Time) tea.Msg { return startMsg{gen} }), lagging)
}

// start runs the study that ask announced.
func (q *inquiry) start(ctx context.Context, c model.Chain, jobs int) tea.Cmd {
	ctx, q.cancel = context.WithCancel(ctx)
	gen, previous, solve := q.gen, q.last, q.run
	news := make(chan update, 1)
	tell := func(u update) {
		select { // only the newest is kept, but a portrait is not lost to a mere progress
		case old := <-news:
			if u.portrait == nil {
				u.portrait = old.portrait
			}
		default:
		}
		news <- u
	}
	run := func() (msg tea.Msg) {
		defer close(news)
		defer func() {
			if r := recover(); r != nil {
				msg = answeredMsg{gen, nil, fmt.Errorf("the study failed: %v\n%s", r, debug.Stack())}
			}
		}()
		p, err := solve(ctx, c, study.Settings{
			Previous: previous,
			Jobs:     jobs,
			Levels:   shownLevels,
			Publish:  func(p *study.Portrait) { tell(update{portrait: p}) },
			Progress: func(p study.Progress) { tell(update{progress: &p}) },
		})
		return answeredMsg{gen, p, err}
	}
	return tea.Batch(run, listen(gen, news))
}

func listen(gen int, from <-chan update) tea.Cmd {
	return func() tea.Msg {
		u, ok := <-from
		if !ok {
			return nil
		}
		return updateMsg{gen, u, from}
	}
}

// onUpdate takes news of a study in; it reports whether they were current.
func (q *inquiry) onUpdate(m updateMsg) (current bool) {
	if m.gen != q.gen || !q.busy {
		return false
	}
	if m.news.portrait != nil {
		q.fresh = m.news.portrait
	}
	if m.news.progress != nil {
		q.stage = *m.news.progress
	}
	return true
}

// onAnswer takes the end of a study in.
func (q *inquiry) onAnswer(m answeredMsg) (current bool) {
	if m.gen != q.gen {
		return false
	}
	q.busy, q.slow = false, false
	q.err = m.err
	if m.err == nil {
		q.fresh, q.last = m.portrait, m.portrait
	}
	return true
}

// onSlow notes that the picture has lagged for long.
func (q *inquiry) onSlow(m slowMsg) {
	if m.lag == q.lag && q.busy {
		q.slow = true
	}
}

// picture is what the plots show: the newest part of everything, and which
// parts are older than the knobs.
type picture struct {
	study.Portrait
	stale struct{ band, response, ring, phonon, lattice, levels, doubts bool }
}

// picture merges the present study's parts with the last one's. Energies in
// another unit than the present chain's are not mixed in.
func (q *inquiry) picture() picture {
	var p picture
	old := q.last
	switch {
	case q.fresh == nil && old == nil:
		return p
	case q.fresh == nil:
		p.Chain = old.Chain
	default:
		p.Portrait = *q.fresh
		if q.fresh.Complete || old == nil || old.Chain.Energy != q.fresh.Chain.Energy {
			return p
		}
	}
	if p.Band == nil {
		p.Band, p.stale.band = old.Band, true
	}
	if p.Response == nil {
		p.Response, p.stale.response = old.Response, true
	}
	if p.Ring == nil && p.Chain.Boundary == model.Ring {
		p.Ring, p.stale.ring = old.Ring, true
	}
	if p.Phonon == nil {
		p.Phonon, p.stale.phonon = old.Phonon, true
	}
	if p.Lattice == nil {
		p.Lattice, p.stale.lattice = old.Lattice, true
	}
	if p.Levels == nil {
		p.Levels, p.stale.levels = old.Levels, true
	}
	if p.Transition == nil {
		p.Transition = old.Transition
	}
	if p.Doubts == nil {
		p.Doubts, p.stale.doubts = old.Doubts, true
	}
	return p
}
