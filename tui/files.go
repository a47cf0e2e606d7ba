package tui

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"example.org/twokf/model"
)

// savedMsg is the end of a save.
type savedMsg struct {
	path  string
	chain model.Chain
	err   error
}

// take puts another chain on the bench; the one before can be undone to.
func (b *Bench) take(c model.Chain, from, file string) tea.Cmd {
	b.from, b.file, b.saved = from, file, c
	b.say("opened " + from)
	return b.change(c)
}

func (b *Bench) askOpen() tea.Cmd {
	b.prompt = newPrompt("open the chain file", "", "Tab completes, Enter opens it, Esc leaves it")
	b.prompt.complete = completePath
	b.prompt.enter = func(b *Bench, path string) (tea.Cmd, error) {
		path = expandHome(strings.TrimSpace(path))
		if path == "" {
			return nil, errors.New("a path is needed, such as chain.toml")
		}
		f, err := os.Open(path)
		if err != nil {
			return nil, err
		}
		defer f.Close()
		c, err := model.Read(f, path)
		if err != nil {
			return nil, err
		}
		return b.take(c, filepath.Base(path), path), nil
	}
	return nil
}

func (b *Bench) save() tea.Cmd {
	if b.file == "" {
		return b.askSave()
	}
	return b.saveTo(b.file)
}

func (b *Bench) askSave() tea.Cmd {
	name := b.file
	if name == "" {
		name = strings.TrimSuffix(filepath.Base(b.from), ".toml") + ".toml"
		if b.from == "" || strings.ContainsAny(b.from, " ") {
			name = "chain.toml"
		}
	}
	b.prompt = newPrompt("save the chain as", name, "Tab completes, Enter saves it, Esc leaves it")
	b.prompt.fresh = false
	b.prompt.complete = completePath
	warned := ""
	b.prompt.enter = func(b *Bench, path string) (tea.Cmd, error) {
		path = expandHome(strings.TrimSpace(path))
		if path == "" {
			return nil, errors.New("a path is needed, such as chain.toml")
		}
		if _, err := os.Stat(path); err == nil && path != b.file && path != warned {
			warned = path
			return nil, fmt.Errorf("%s is there already; Enter again writes over it", path)
		}
		return b.saveTo(path), nil
	}
	return nil
}

func (b *Bench) saveTo(path string) tea.Cmd {
	c := b.chain
	return func() tea.Msg { return savedMsg{path, c, model.Save(path, c)} }
}

func (b *Bench) onSaved(m savedMsg) {
	if m.err != nil {
		b.complain(m.err)
		return
	}
	b.saved, b.file, b.from = m.chain, m.path, filepath.Base(m.path)
	b.say("saved as " + m.path)
}

// expandHome replaces a leading ~/ by the home folder.
func expandHome(path string) string {
	if rest, ok := strings.CutPrefix(path, "~/"); ok {
		if home, err := os.UserHomeDir(); err == nil {
			return filepath.Join(home, rest)
		}
	}
	return path
}

// completePath makes a path longer as far as there is just one way on.
func completePath(path string) string {
	expanded := expandHome(path)
	found, err := filepath.Glob(escapeGlob(expanded) + "*")
	if err != nil || len(found) == 0 {
		return path
	}
	common := found[0]
	for _, f := range found[1:] {
		for !strings.HasPrefix(f, common) {
			common = common[:len(common)-1]
		}
	}
	if info, err := os.Stat(common); err == nil && info.IsDir() && len(found) == 1 && !strings.HasSuffix(common, "/") {
		common += string(filepath.Separator)
	}
	if len(common) < len(expanded) {
		return path
	}
	return common
}

func escapeGlob(s string) string {
	return strings.NewReplacer(`\`, `\\`, `*`, `\*`, `?`, `\?`, `[`, `\[`).Replace(s)
}
