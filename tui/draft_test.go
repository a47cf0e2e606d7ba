package tui

import (
	"fmt"
	"os"
	"path/filepath"
	"testing"
	"testing/synctest"
	"time"

	"example.org/twokf/model"
)

// benchIn returns a bench on polyene whose unsaved work goes to a folder.
func benchIn(t *testing.T, state string) *Bench {
	t.Helper()
	return openedWith(t, Settings{Chain: chainOf(t, "polyene"), From: "polyene", State: state}, 80, 24)
}

// kept lists the drafts in a folder.
func kept(t *testing.T, state string) []string {
	t.Helper()
	found, err := filepath.Glob(filepath.Join(state, "*"))
	if err != nil {
		t.Fatal(err)
	}
	return found
}

func TestADraftIsWrittenAfterAPause(t *testing.T) {
	synctest.Test(t, func(t *testing.T) {
		state := filepath.Join(t.TempDir(), "not there yet")
		b := benchIn(t, state)
		p, over := session(t, b, takes(time.Millisecond), nil)
		for range 3 {
			p.Send(keyNames["up"])
			pause(draftDelay - time.Millisecond)
			if found := kept(t, state); found != nil {
				t.Fatalf("%v is written before there is a pause", found)
			}
		}
		pause(2 * time.Millisecond)
		found := kept(t, state)
		if len(found) != 1 {
			t.Fatalf("after a pause there is %v", found)
		}
		inside(p, func(b *Bench) {
			if c := readBack(t, found[0]); c != b.chain {
				t.Errorf("the draft holds T = %g, the bench %g", c.Temperature, b.chain.Temperature)
			}
		})
		p.Send(keyOf(t, "u"))
		p.Send(keyOf(t, "u"))
		p.Send(keyOf(t, "u"))
		pause(2 * draftDelay)
		if found := kept(t, state); found != nil {
			t.Errorf("%v stays though nothing is unsaved", found)
		}
		leave(p, over)
	})
}

func TestADraftIsPickedUpByTheNextSession(t *testing.T) {
	state := t.TempDir()
	first := benchIn(t, state)
	press(t, first, "up", "up")
	if first.drafts.keep(first.work) == "" {
		t.Fatal("leaving keeps no draft")
	}
	next := benchIn(t, state)
	demand(t, next.View(), "D picks it up")
	press(t, next, "D")
	if next.chain != first.chain || !next.edited() || next.origin.file != "" {
		t.Errorf("picked up: T = %g, edited %t, file %q", next.chain.Temperature, next.edited(), next.origin.file)
	}
	if found := kept(t, state); len(found) != 1 || found[0] != next.origin.draft.path {
		t.Errorf("kept are now %v; the draft should be the session's own %s", found, next.origin.draft.path)
	}
	press(t, next, "u")
	if next.chain != chainOf(t, "polyene") || next.edited() {
		t.Error("undo does not bring back what was on the bench")
	}
	press(t, next, "D")
	demand(t, next.View(), "no unsaved chain")
}

func TestASavedChainLeavesNoDraft(t *testing.T) {
	state := t.TempDir()
	b := benchIn(t, state)
	press(t, b, "up")
	b.drafts.keep(b.work)
	press(t, b, "S")
	paste(t, b, filepath.Join(t.TempDir(), "mine.toml"))
	run(t, b, press(t, b, "enter"))
	_, write := b.Update(draftMsg{b.drafts.tick})
	write()
	if found := kept(t, state); found != nil {
		t.Errorf("%v stays after the chain was saved", found)
	}
}

// Unsaved work outlives another chain being opened in its place.
func TestOpeningAnotherChainKeepsUnsavedWork(t *testing.T) {
	state := t.TempDir()
	b := benchIn(t, state)
	press(t, b, "up")
	edited := b.chain
	press(t, b, "p", "down", "enter")
	found := kept(t, state)
	if b.drafts.keep(b.work) != "" || len(found) != 1 || readBack(t, found[0]) != edited {
		t.Fatalf("kept are %v", found)
	}
	press(t, b, "u", "u", "U", "U") // back to it, its beginning, and to the preset again
	if found := kept(t, state); len(found) != 1 || readBack(t, found[0]) != edited {
		t.Fatalf("after undo and redo, kept are %v", found)
	}
	press(t, b, "u", "u", "U", "u")
	b.drafts.keep(b.work)
	if found := kept(t, state); found != nil {
		t.Errorf("%v is kept though nothing is unsaved", found)
	}
}

// Writes run beside the keys and may be overtaken.
func TestALateWriteDoesNotOverwriteANewerDraft(t *testing.T) {
	b := benchIn(t, t.TempDir())
	press(t, b, "up")
	late := b.drafts.write(b.work, draftMsg{b.drafts.tick})
	press(t, b, "up")
	b.drafts.keep(b.work)
	late()
	if c := readBack(t, b.origin.draft.path); c != b.chain {
		t.Errorf("the draft holds T = %g, the bench %g", c.Temperature, b.chain.Temperature)
	}
	if b.drafts.write(b.work, draftMsg{b.drafts.tick - 1}) != nil {
		t.Error("a draft is written while the knob is still being turned")
	}
}

func TestDraftsOfLiveSessionsAreLeftAlone(t *testing.T) {
	state := t.TempDir()
	live := filepath.Join(state, fmt.Sprintf("unsaved-%d-1.toml", os.Getppid()))
	dead := filepath.Join(state, "unsaved-2147483646-1.toml") // beyond any process number
	saveFile(t, live, chainOf(t, "mixed"))
	saveFile(t, dead, chainOf(t, "weak"))
	if err := os.Mkdir(filepath.Join(state, "unsaved-2147483646-2.toml"), 0o700); err != nil {
		t.Fatal(err)
	}
	b := benchIn(t, state)
	press(t, b, "D")
	if b.chain != chainOf(t, "weak") {
		t.Errorf("D picks up %q", b.chain.Title)
	}
	if len(b.drafts.old) != 0 || readBack(t, live) != chainOf(t, "mixed") {
		t.Error("the draft of a session that is still running is offered or gone")
	}
}

// In a container every session may have the same process number.
func TestADraftOfTheSameProcessNumberIsNotOverwritten(t *testing.T) {
	state := t.TempDir()
	first := benchIn(t, state)
	press(t, first, "up")
	first.drafts.keep(first.work)
	second := benchIn(t, state)
	press(t, second, "down", "up", "up", "up")
	second.drafts.keep(second.work)
	if c := readBack(t, first.origin.draft.path); c != first.chain {
		t.Error("the second session's draft replaces the first's")
	}
}

func TestOnlySoManyDraftsAreKept(t *testing.T) {
	state := t.TempDir()
	for i := range mostDrafts + 5 {
		path := filepath.Join(state, fmt.Sprintf("unsaved-%d-1.toml", 2147483000+i))
		saveFile(t, path, model.Chain{Sites: i + 1, Hopping: 1, Spin: 2})
		when := time.Now().Add(time.Duration(i-100) * time.Hour)
		if err := os.Chtimes(path, when, when); err != nil {
			t.Fatal(err)
		}
	}
	b := benchIn(t, state)
	if n := len(kept(t, state)); n != mostDrafts {
		t.Errorf("%d drafts are kept", n)
	}
	press(t, b, "D")
	if b.chain.Sites != mostDrafts+5 {
		t.Errorf("the chain picked up is number %d, not the latest", b.chain.Sites)
	}
}

func TestNoPlaceForDraftsIsNoError(t *testing.T) {
	file := filepath.Join(t.TempDir(), "a file")
	if err := os.WriteFile(file, nil, 0o600); err != nil {
		t.Fatal(err)
	}
	for _, state := range []string{"-", file, filepath.Join(file, "below")} {
		b := benchIn(t, state)
		press(t, b, "up")
		if path := b.drafts.keep(b.work); path != "" {
			t.Errorf("%s: a draft is said to be in %s", state, path)
		}
		press(t, b, "D")
		if b.isError {
			t.Errorf("%s: %s", state, b.message)
		}
	}
}

func TestABrokenDraftIsPassedOver(t *testing.T) {
	state := t.TempDir()
	if err := os.WriteFile(filepath.Join(state, "unsaved-2147483646-1.toml"), []byte("?"), 0o600); err != nil {
		t.Fatal(err)
	}
	b := benchIn(t, state)
	before := b.work
	press(t, b, "D")
	if b.work != before || !b.isError {
		t.Error("a broken draft is taken, or no word is said")
	}
	press(t, b, "D")
	demand(t, b.View(), "no unsaved chain")
}

func TestTheUsualPlaceForDrafts(t *testing.T) {
	home := t.TempDir()
	t.Setenv("HOME", home)
	for _, tt := range []struct{ xdg, want string }{
		{"", filepath.Join(home, ".local", "state", "twokf")},
		{"relative/paths/do/not/count", filepath.Join(home, ".local", "state", "twokf")},
		{filepath.Join(home, "elsewhere"), filepath.Join(home, "elsewhere", "twokf")},
	} {
		t.Setenv("XDG_STATE_HOME", tt.xdg)
		if d := openDrafts(""); d.dir != tt.want {
			t.Errorf("XDG_STATE_HOME=%q: drafts go to %s", tt.xdg, d.dir)
		}
	}
}
