package tui

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"sort"
	"strconv"
	"strings"
	"sync"
	"syscall"
	"time"

	tea "github.com/charmbracelet/bubbletea"

	"example.org/twokf/model"
)

// drafts keeps unsaved work in the user's state folder, one file for each chain
// that was opened, so that a crash, a lost line or a quick q loses nothing.
type drafts struct {
	dir  string  // "" where there is no place for them
	made int     // files that this session has named
	tick int     // latest write that was asked for
	old  []draft // of earlier sessions, the latest first
}

// draftFile is where the unsaved work on one opened chain is kept. Writes of it
// run beside the keys: one that is overtaken does nothing.
type draftFile struct {
	path string
	sync.Mutex
	tick int // of the latest write
}

// draft is the unsaved chain of an earlier session.
type draft struct {
	path string
	when time.Time
}

type draftMsg struct{ tick int }

const (
	// draftDelay gathers a burst of changes into one write.
	draftDelay = time.Second
	// mostDrafts of earlier sessions are kept.
	mostDrafts = 20
)

// openDrafts finds what earlier sessions left. dir "" is the usual place
// ($XDG_STATE_HOME/twokf or ~/.local/state/twokf), "-" none.
func openDrafts(dir string) drafts {
	if dir == "-" {
		return drafts{}
	}
	if dir == "" {
		if dir = os.Getenv("XDG_STATE_HOME"); !filepath.IsAbs(dir) {
			home, err := os.UserHomeDir()
			if err != nil {
				return drafts{}
			}
			dir = filepath.Join(home, ".local", "state")
		}
		dir = filepath.Join(dir, "twokf")
	}
	d := drafts{dir: dir}
	found, _ := filepath.Glob(filepath.Join(dir, "unsaved-*.toml"))
	for _, path := range found {
		info, err := os.Lstat(path)
		if err != nil || !info.Mode().IsRegular() || inUse(path) {
			continue
		}
		d.old = append(d.old, draft{path, info.ModTime()})
	}
	sort.Slice(d.old, func(i, j int) bool { return d.old[i].when.After(d.old[j].when) })
	for len(d.old) > mostDrafts {
		os.Remove(d.old[len(d.old)-1].path)
		d.old = d.old[:len(d.old)-1]
	}
	return d
}

// inUse reports whether the session that writes a draft is still running. One
// with this process's own number is an earlier one's: it has been given again.
func inUse(path string) bool {
	text, _, _ := strings.Cut(strings.TrimPrefix(filepath.Base(path), "unsaved-"), "-")
	pid, err := strconv.Atoi(text)
	if err != nil || pid <= 0 || pid == os.Getpid() {
		return false
	}
	process, err := os.FindProcess(pid)
	if err != nil {
		return false
	}
	err = process.Signal(syscall.Signal(0)) // asks, sends nothing
	return err == nil || errors.Is(err, os.ErrPermission)
}

// newest returns the latest draft of an earlier session, nil for none.
func (d *drafts) newest() *draft {
	if len(d.old) == 0 {
		return nil
	}
	return &d.old[0]
}

// soon asks for the draft to be written once the user pauses.
func (d *drafts) soon() tea.Cmd {
	if d.dir == "" {
		return nil
	}
	d.tick++
	tick := d.tick
	return tea.Tick(draftDelay, func(time.Time) tea.Msg { return draftMsg{tick} })
}

// file names a new draft, unlike any other session's.
func (d *drafts) file() *draftFile {
	if d.dir == "" {
		return nil
	}
	d.made++
	name := fmt.Sprintf("unsaved-%d-%x-%d.toml", os.Getpid(), time.Now().UnixNano(), d.made)
	return &draftFile{path: filepath.Join(d.dir, name)}
}

// write writes the draft unless a later change has been made; it works beside
// the keys.
func (d *drafts) write(w work, m draftMsg) tea.Cmd {
	if m.tick != d.tick {
		return nil
	}
	edited := w.edited()
	return func() tea.Msg {
		w.origin.draft.keep(w.chain, edited, m.tick)
		return nil
	}
}

// keep writes the draft at once, and returns its path if there is one.
func (d *drafts) keep(w work) string { return w.origin.draft.keep(w.chain, w.edited(), d.tick) }

// keep writes the draft of an edited chain, and removes that of one that is
// safe in a file. It returns the draft's path if there is one.
func (f *draftFile) keep(c model.Chain, edited bool, tick int) string {
	if f == nil {
		return ""
	}
	f.Lock()
	defer f.Unlock()
	if tick < f.tick {
		return ""
	}
	f.tick = tick
	if !edited {
		os.Remove(f.path)
		return ""
	}
	if err := os.MkdirAll(filepath.Dir(f.path), 0o700); err != nil {
		return ""
	}
	if err := model.Save(f.path, c); err != nil {
		return ""
	}
	return f.path
}

// pickUp puts the latest draft of an earlier session on the bench.
func (b *Bench) pickUp() tea.Cmd {
	d := b.drafts.newest()
	if d == nil {
		b.say("no unsaved chain of an earlier session is kept")
		return nil
	}
	b.drafts.old = b.drafts.old[1:]
	c, err := readFile(d.path)
	if err != nil {
		b.complain(err)
		return nil
	}
	cmd := b.take(c, origin{from: "unsaved"})
	b.say("picked up the chain of " + d.when.Format("2 Jan 15:04"))
	if b.drafts.keep(b.work) != "" { // it is this session's now
		os.Remove(d.path)
	}
	return cmd
}
