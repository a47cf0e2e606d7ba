package tui

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"sort"
	"strconv"
	"strings"
	"syscall"
	"time"

	tea "github.com/charmbracelet/bubbletea"

	"example.org/twokf/model"
)

// drafts keeps unsaved work in the user's state folder, one file a session, so
// that a crash, a lost line or a quick q loses nothing.
type drafts struct {
	dir  string // "" where there is no place for them
	own  string // this session's file
	tick int    // latest write that was asked for
	old  []draft
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
		if dir = os.Getenv("XDG_STATE_HOME"); dir == "" {
			home, err := os.UserHomeDir()
			if err != nil {
				return drafts{}
			}
			dir = filepath.Join(home, ".local", "state")
		}
		dir = filepath.Join(dir, "twokf")
	}
	d := drafts{dir: dir, own: filepath.Join(dir, fmt.Sprintf("unsaved-%d.toml", os.Getpid()))}
	found, _ := filepath.Glob(filepath.Join(dir, "unsaved-*.toml"))
	for _, path := range found {
		info, err := os.Stat(path)
		if err != nil || inUse(path) {
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

// inUse reports whether the session that writes a draft is still running.
func inUse(path string) bool {
	text := strings.TrimSuffix(strings.TrimPrefix(filepath.Base(path), "unsaved-"), ".toml")
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

// write writes the draft unless a later change has been made; it works beside
// the keys.
func (d *drafts) write(c model.Chain, edited bool, m draftMsg) tea.Cmd {
	if m.tick != d.tick {
		return nil
	}
	own := *d
	return func() tea.Msg {
		own.keep(c, edited)
		return nil
	}
}

// keep writes the draft of an edited chain, and removes that of one that is
// safe in a file. It returns the draft's path if there is one.
func (d *drafts) keep(c model.Chain, edited bool) string {
	if d.dir == "" {
		return ""
	}
	if !edited {
		os.Remove(d.own)
		return ""
	}
	if err := os.MkdirAll(d.dir, 0o700); err != nil {
		return ""
	}
	if err := model.Save(d.own, c); err != nil {
		return ""
	}
	return d.own
}

// pickUp puts the latest draft of an earlier session on the bench.
func (b *Bench) pickUp() tea.Cmd {
	d := b.drafts.newest()
	if d == nil {
		b.say("no unsaved chain of an earlier session is kept")
		return nil
	}
	f, err := os.Open(d.path)
	if err != nil {
		b.complain(err)
		return nil
	}
	defer f.Close()
	c, err := model.Read(f, d.path)
	if err != nil {
		b.complain(err)
		return nil
	}
	cmd := b.change(c)
	b.from, b.file, b.saved = "unsaved", "", model.Chain{}
	b.drafts.keep(c, true) // it is this session's now
	os.Remove(d.path)
	b.drafts.old = b.drafts.old[1:]
	b.say("picked up the chain of " + d.when.Format("2 Jan 15:04"))
	return cmd
}
