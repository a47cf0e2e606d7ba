package tui

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"unicode/utf8"

	tea "github.com/charmbracelet/bubbletea"

	"example.org/twokf/model"
)

// savedMsg is the end of a save.
type savedMsg struct {
	path   string
	chain  model.Chain
	origin *origin // of the chain that was saved
	err    error
}

var errNoPath = errors.New("a path is needed, such as chain.toml")

func (b *Bench) askOpen() tea.Cmd {
	b.prompt = newPrompt("open the chain file ", "", "Tab completes, Enter opens it, Esc leaves it")
	b.prompt.complete = completePath
	b.prompt.enter = func(b *Bench, path string) (tea.Cmd, error) {
		path = expandHome(strings.TrimSpace(path))
		c, err := readFile(path)
		if err != nil {
			return nil, err
		}
		return b.take(c, origin{from: filepath.Base(path), file: path, saved: c}), nil
	}
	return nil
}

// readFile reads a chain from a regular file; others could wait forever.
func readFile(path string) (model.Chain, error) {
	if path == "" {
		return model.Chain{}, errNoPath
	}
	info, err := os.Stat(path)
	var failed *fs.PathError
	switch {
	case errors.As(err, &failed):
		return model.Chain{}, fmt.Errorf("%s: %w", failed.Path, failed.Err) // without the system call's name
	case err != nil:
		return model.Chain{}, err
	case info.IsDir():
		return model.Chain{}, fmt.Errorf("%s is a folder", path)
	case !info.Mode().IsRegular():
		return model.Chain{}, fmt.Errorf("%s is not a regular file", path)
	}
	f, err := os.Open(path)
	if err != nil {
		return model.Chain{}, err
	}
	defer f.Close()
	return model.Read(f, path)
}

func (b *Bench) save() tea.Cmd {
	if b.origin.file == "" {
		return b.askSave()
	}
	return b.saveTo(b.origin.file)
}

// askSave asks for a path; one that is taken must be confirmed by a second Enter.
func (b *Bench) askSave() tea.Cmd {
	name := b.origin.file
	if name == "" {
		name = strings.TrimSuffix(filepath.Base(b.origin.from), ".toml") + ".toml"
		if b.origin.from == "" || strings.Contains(b.origin.from, " ") {
			name = "chain.toml"
		}
	}
	b.prompt = newPrompt("save the chain as ", name, "Tab completes, Enter saves it, Esc leaves it")
	b.prompt.fresh = false
	b.prompt.complete = completePath
	warned := ""
	b.prompt.enter = func(b *Bench, path string) (tea.Cmd, error) {
		path = expandHome(strings.TrimSpace(path))
		info, err := os.Stat(path)
		switch {
		case path == "":
			return nil, errNoPath
		case err == nil && info.IsDir():
			return nil, fmt.Errorf("%s is a folder", path)
		case err == nil && path != b.origin.file && path != warned:
			warned = path
			return nil, fmt.Errorf("%s is there already; Enter again writes over it", path)
		}
		return b.saveTo(path), nil
	}
	return nil
}

func (b *Bench) saveTo(path string) tea.Cmd {
	b.saving++
	w := b.work
	return func() tea.Msg { return savedMsg{path, w.chain, w.origin, model.Save(path, w.chain)} }
}

// onSaved takes the end of a save in. After one that failed, and unless
// something else is being asked, another path is asked for.
func (b *Bench) onSaved(m savedMsg) tea.Cmd {
	b.saving--
	if m.err != nil {
		b.leaving = false
		b.complain(m.err)
		if b.prompt == nil && b.page == nil && m.origin == b.origin {
			b.askSave()
			b.prompt.input.SetValue(m.path)
			b.prompt.input.CursorEnd()
			b.prompt.err = m.err.Error()
		}
		return nil
	}
	m.origin.saved, m.origin.file, m.origin.from = m.chain, m.path, filepath.Base(m.path)
	b.say("saved as " + m.path)
	if b.leaving && b.saving == 0 {
		return b.quit()
	}
	return b.drafts.soon()
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

// completePath makes a path longer as far as there is just one way on, and
// names the ways where there are several.
func completePath(path string) (longer, ways string) {
	expanded := expandHome(path)
	if strings.HasSuffix(path, "/") && !strings.HasSuffix(expanded, "/") {
		expanded += "/"
	}
	found, err := filepath.Glob(escapeGlob(expanded) + "*")
	if err != nil || len(found) == 0 {
		return path, "nothing there begins like this"
	}
	common := found[0]
	for _, f := range found[1:] {
		for !strings.HasPrefix(f, common) {
			common = common[:len(common)-1]
		}
	}
	for !utf8.ValidString(common) && common != "" { // cut inside a character
		common = common[:len(common)-1]
	}
	if len(common) < len(expanded) {
		common = path
	}
	if len(found) > 1 {
		for i, f := range found {
			found[i] = filepath.Base(f)
		}
		return common, strings.Join(found, "  ")
	}
	if info, err := os.Stat(common); err == nil && info.IsDir() && !strings.HasSuffix(common, "/") {
		common += string(filepath.Separator)
	}
	return common, "Enter takes it, Esc leaves it"
}

func escapeGlob(s string) string {
	return strings.NewReplacer(`\`, `\\`, `*`, `\*`, `?`, `\?`, `[`, `\[`).Replace(s)
}
