package tui

import (
	"context"
	"fmt"
	"runtime"
	"slices"
	"testing"
	"time"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/muesli/termenv"

	"example.org/twokf/model"
	"example.org/twokf/model/study"
)

// BenchmarkKeyToFrame goes from a key press to the converged frame: the turn of
// a knob, the study on all cores, a frame after all that it publishes; 120×36
// with 256 colours, without a terminal. The ticks that gather bursts of keys are
// passed over: messages are handed on at once. Reported are medians of the whole
// (ms-median), of the time to the first frame that shows anything of the new
// study (ms-first), and of the parts of the study in the order in which they
// end.
func BenchmarkKeyToFrame(b *testing.B) {
	for _, knob := range []string{"conditions.temperature", "bond_phonon.coupling"} {
		for _, sites := range []int{202, 2002, 20002, 200002} {
			b.Run(fmt.Sprintf("%s/%d", knob, sites), func(b *testing.B) { keyToFrame(b, knob, sites) })
		}
	}
}

func keyToFrame(b *testing.B, knob string, sites int) {
	c, err := model.SetAll(chainOf(b, "polyene"), []string{fmt.Sprint("sites=", sites), "temperature=25 meV"})
	if err != nil {
		b.Fatal(err)
	}
	colours := termenv.ANSI256
	bench := openedWith(b, Settings{Chain: c, From: "polyene", Profile: &colours, Jobs: runtime.NumCPU()}, 120, 36)
	watch := &stopwatch{bench: bench, took: map[string][]time.Duration{}}
	watch.answer(b)
	bench.inquiry.run = watch.study
	choose(b, bench, knob)
	var whole, first []time.Duration
	for i := 0; b.Loop(); i++ {
		key := keyNames[[]string{"up", "down"}[i%2]]
		watch.pressed = time.Now()
		bench.Update(key)
		f := watch.answer(b)
		whole, first = append(whole, time.Since(watch.pressed)), append(first, f)
	}
	b.ReportMetric(0, "ns/op")
	b.ReportMetric(median(whole), "ms-median")
	b.ReportMetric(median(first), "ms-first")
	for _, part := range watch.parts {
		b.ReportMetric(median(watch.took[part]), "ms-"+part)
	}
}

func median(ds []time.Duration) float64 {
	slices.Sort(ds)
	return float64(ds[len(ds)/2].Microseconds()) / 1000
}

// stopwatch times a bench whose messages are handed on at once.
type stopwatch struct {
	bench   *Bench
	pressed time.Time
	parts   []string // in the order of their ends
	took    map[string][]time.Duration
}

// study is study.Run, its parts timed: each says when it begins and publishes
// when it ends.
func (w *stopwatch) study(ctx context.Context, c model.Chain, set study.Settings) (*study.Portrait, error) {
	part, then := "", time.Now()
	publish, progress := set.Publish, set.Progress
	set.Progress = func(p study.Progress) {
		part = p.Stage
		progress(p)
	}
	set.Publish = func(p *study.Portrait) {
		now := time.Now()
		if w.took[part] == nil {
			w.parts = append(w.parts, part)
		}
		w.took[part] = append(w.took[part], now.Sub(then))
		then = now
		publish(p)
	}
	return study.Run(ctx, c, set)
}

// answer starts the study that the bench waits for, draws a frame after each of
// its messages, and returns when the first one came that shows a part of it.
func (w *stopwatch) answer(t testing.TB) (first time.Duration) {
	before := w.bench.View()
	_, cmd := w.bench.Update(startMsg{w.bench.inquiry.gen})
	commands, ok := cmd().(tea.BatchMsg)
	if !ok || len(commands) != 2 {
		t.Fatal("a study is a run and what listens to it")
	}
	show := func(msg tea.Msg) tea.Cmd {
		_, next := w.bench.Update(msg)
		if w.bench.View() != before && first == 0 {
			first = time.Since(w.pressed)
		}
		return next
	}
	end := make(chan tea.Msg, 1)
	go func() { end <- commands[0]() }()
	for listen := commands[1]; listen != nil; {
		msg := listen()
		if msg == nil {
			break
		}
		listen = show(msg)
	}
	show(<-end)
	if w.bench.inquiry.err != nil || w.bench.inquiry.busy {
		t.Fatal("no answer: ", w.bench.inquiry.err)
	}
	return first
}
