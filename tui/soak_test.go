package tui

import (
	"context"
	"math/rand/v2"
	"os"
	"runtime"
	"sync/atomic"
	"testing"
	"testing/synctest"
	"time"

	tea "github.com/charmbracelet/bubbletea"

	"example.org/twokf/model"
	"example.org/twokf/model/study"
)

// shortest and longest bound the chain of a long session: its studies are quick.
const shortest, longest = 6, 40

// A long session on one bench, its studies really done or cancelled on the way,
// must not gather memory or goroutines. The program runs on synctest's clock:
// nothing waits for real time to pass.
func TestALongSessionHoldsItsMemory(t *testing.T) {
	events := 500
	if os.Getenv("TWOKF_LONG") == "1" {
		events = 10_000
	}
	const warmUp, most = 200, 4 << 20 // events; bytes
	synctest.Test(t, func(t *testing.T) {
		c, err := model.SetAll(chainOf(t, "spinless"), []string{"sites=22"})
		if err != nil {
			t.Fatal(err)
		}
		b := openedWith(t, Settings{Chain: c, From: "spinless", Jobs: 2}, 80, 24)
		var ended, cancelled atomic.Int32
		p, over := session(t, b, func(ctx context.Context, c model.Chain, set study.Settings) (*study.Portrait, error) {
			publish := set.Publish
			set.Publish = func(p *study.Portrait) {
				publish(p)
				time.Sleep(settle / 3) // each stage takes a while, for keys to fall into
			}
			portrait, err := study.Run(ctx, c, set)
			if ended.Add(1); err != nil {
				cancelled.Add(1)
			}
			return portrait, err
		}, nil)
		rng := rand.New(rand.NewPCG(1, 2))
		happen := func(events int) {
			for range events {
				p.Send(anything(t, rng))
				p.Send(func(b *Bench) tea.Cmd {
					if wrong := checkBench(b); wrong != "" {
						t.Error(wrong)
					}
					if n := b.chain.Sites; n < shortest || n > longest {
						return b.undo()
					}
					return nil
				})
				if rng.IntN(2) == 0 {
					time.Sleep(time.Duration(rng.IntN(int(2 * settle))))
				}
			}
			pause(time.Minute) // until all that was asked for is answered
		}
		held := func() (heap int64, goroutines int) {
			var m runtime.MemStats
			runtime.GC()
			runtime.GC() // what finalizers held
			runtime.ReadMemStats(&m)
			return int64(m.HeapAlloc), runtime.NumGoroutine()
		}
		happen(warmUp)
		heap, goroutines := held()
		happen(events)
		heapAfter, goroutinesAfter := held()
		t.Logf("%d studies, %d of them cancelled; heap %d kB before and %d kB after; %d and %d goroutines",
			ended.Load(), cancelled.Load(), heap>>10, heapAfter>>10, goroutines, goroutinesAfter)
		if heapAfter > heap+most {
			t.Errorf("%d events leave %d bytes more on the heap", events, heapAfter-heap)
		}
		if goroutinesAfter > goroutines {
			t.Errorf("%d goroutines have become %d", goroutines, goroutinesAfter)
		}
		if n := cancelled.Load(); n < 10 || ended.Load()-n < 10 {
			t.Errorf("of %d studies %d were cancelled: that is no test of both", ended.Load(), n)
		}
		leave(p, over)
	})
}

// sessionKeys are pressed in a long session: all but those that leave the bench
// or ask for a line.
var sessionKeys = func() (turns, others []string) {
	for _, a := range keyTable() {
		for _, k := range a.binding.Keys() {
			switch k {
			case "q", "ctrl+c", "enter", "o", "s", "S", "D":
			case "up", "down", "+", "-", "shift+up", "shift+down", "(", ")", "pgup", "pgdown", "left", "right", "tab", "shift+tab":
				turns = append(turns, k)
			default:
				others = append(others, k)
			}
		}
	}
	return turns, others
}

// anything draws what somebody does: mostly turning knobs.
func anything(t testing.TB, rng *rand.Rand) tea.Msg {
	turns, others := sessionKeys()
	switch n := rng.IntN(20); {
	case n < 13:
		return keyOf(t, turns[rng.IntN(len(turns))])
	case n < 15:
		return keyOf(t, others[rng.IntN(len(others))])
	case n < 18:
		return keyNames["esc"]
	case n < 19:
		return tea.WindowSizeMsg{Width: 50 + rng.IntN(150), Height: 15 + rng.IntN(45)}
	}
	return tea.MouseMsg{X: rng.IntN(120), Y: rng.IntN(40), Action: tea.MouseActionPress,
		Button: []tea.MouseButton{tea.MouseButtonLeft, tea.MouseButtonWheelUp, tea.MouseButtonWheelDown}[rng.IntN(3)]}
}
