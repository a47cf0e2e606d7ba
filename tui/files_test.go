package tui

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"

	"example.org/twokf/model"
)

// paste puts a text into the prompt in place of what is there.
func paste(t *testing.T, b *Bench, text string) {
	t.Helper()
	press(t, b, "ctrl+e", "ctrl+u")
	b.Update(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune(text), Paste: true})
}

func saveFile(t *testing.T, path string, c model.Chain) {
	t.Helper()
	if err := model.Save(path, c); err != nil {
		t.Fatal(err)
	}
}

func readBack(t *testing.T, path string) model.Chain {
	t.Helper()
	c, err := readFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

func TestOpeningAFile(t *testing.T) {
	path := filepath.Join(t.TempDir(), "mine.toml")
	want := chainOf(t, "mixed")
	saveFile(t, path, want)
	b := opened(t, "polyene", 80, 24)
	press(t, b, "up", "o")
	changed := b.work
	paste(t, b, path)
	press(t, b, "enter")
	if b.prompt != nil || b.chain != want || b.edited() {
		t.Fatalf("after opening %s the bench holds %+v", path, b.chain)
	}
	demand(t, b.View(), "Garnock", "opened mine.toml")
	press(t, b, "u")
	if b.work != changed {
		t.Error("undo does not bring the work before back, with where it is saved to")
	}
}

// After opening and undoing, s must not write the old chain over the new file.
func TestUndoingAnOpenForgetsItsFile(t *testing.T) {
	path := filepath.Join(t.TempDir(), "mine.toml")
	want := chainOf(t, "mixed")
	saveFile(t, path, want)
	b := opened(t, "polyene", 80, 24)
	press(t, b, "o")
	paste(t, b, path)
	press(t, b, "enter", "u")
	if cmd := press(t, b, "s"); b.prompt == nil {
		run(t, b, cmd)
	}
	if readBack(t, path) != want {
		t.Error("the opened file is overwritten by the chain before")
	}
}

func TestFilesThatCannotBeOpened(t *testing.T) {
	dir := t.TempDir()
	broken := filepath.Join(dir, "broken.toml")
	if err := os.WriteFile(broken, []byte("energy = \"eV\"\nsties = 3\n"), 0o600); err != nil {
		t.Fatal(err)
	}
	for _, tt := range []struct{ path, want string }{
		{filepath.Join(dir, "vanished.toml"), "no such file"},
		{dir, "is a folder"},
		{"/dev/null", "not a regular file"},
		{broken, "sties"},
		{"", "a path is needed"},
		{"  ", "a path is needed"},
	} {
		b := opened(t, "polyene", 120, 36)
		before := b.work
		press(t, b, "o")
		paste(t, b, tt.path)
		press(t, b, "enter")
		if b.prompt == nil || b.work != before {
			t.Errorf("opening %q is taken", tt.path)
			continue
		}
		demand(t, strings.ReplaceAll(footing(b, 4), "\n", " "), tt.want)
	}
}

func TestSavingUnderAName(t *testing.T) {
	path := filepath.Join(t.TempDir(), "new.toml")
	b := opened(t, "polyene", 120, 36)
	press(t, b, "up")
	press(t, b, "s")
	if got := b.prompt.input.Value(); got != "polyene.toml" {
		t.Errorf("the proposed name is %q", got)
	}
	demand(t, b.View(), "half filled * [polyene]")
	paste(t, b, path)
	run(t, b, press(t, b, "enter"))
	if b.edited() || b.origin.file != path {
		t.Errorf("after saving, edited is %t and the file %q", b.edited(), b.origin.file)
	}
	if readBack(t, path) != b.chain {
		t.Error("the file holds another chain")
	}
	demand(t, b.View(), "saved as "+path)
	press(t, b, "up")
	run(t, b, press(t, b, "s"))
	if b.prompt != nil || readBack(t, path) != b.chain {
		t.Error("the second save does not write the same file at once")
	}
}

func TestOverwritingIsConfirmed(t *testing.T) {
	path := filepath.Join(t.TempDir(), "old.toml")
	old := chainOf(t, "mixed")
	saveFile(t, path, old)
	b := opened(t, "polyene", 120, 36)
	press(t, b, "S")
	paste(t, b, path)
	if cmd := press(t, b, "enter"); cmd != nil || b.prompt == nil {
		t.Fatal("a file is overwritten without a question")
	}
	demand(t, strings.ReplaceAll(footing(b, 3), "\n", " "), "is there already", "Enter again")
	run(t, b, press(t, b, "enter"))
	if b.prompt != nil || readBack(t, path) != b.chain {
		t.Error("a second Enter does not write")
	}
}

func TestAFileThatVanishedIsWrittenAgain(t *testing.T) {
	path := filepath.Join(t.TempDir(), "mine.toml")
	b := openedWith(t, Settings{Chain: chainOf(t, "polyene"), From: "mine.toml", File: path}, 80, 24)
	run(t, b, press(t, b, "s"))
	if readBack(t, path) != b.chain {
		t.Error("the file holds another chain")
	}
}

func TestASaveThatFailsAsksForAnotherPlace(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "no such folder", "mine.toml")
	b := openedWith(t, Settings{Chain: chainOf(t, "polyene"), From: "mine.toml", File: path}, 120, 36)
	press(t, b, "up")
	run(t, b, press(t, b, "s"))
	if b.prompt == nil || !b.edited() {
		t.Fatal("a save that failed leaves no question")
	}
	demand(t, strings.ReplaceAll(footing(b, 3), "\n", " "), "no such file", path)
	better := filepath.Join(dir, "mine.toml")
	paste(t, b, better)
	run(t, b, press(t, b, "enter"))
	if b.edited() || b.origin.file != better {
		t.Error("the better path is not taken")
	}
}

func TestAFolderThatMayNotBeWritten(t *testing.T) {
	if os.Geteuid() == 0 {
		t.Skip("root may write anywhere")
	}
	dir := t.TempDir()
	if err := os.Chmod(dir, 0o500); err != nil {
		t.Fatal(err)
	}
	b := opened(t, "polyene", 120, 36)
	press(t, b, "S")
	paste(t, b, filepath.Join(dir, "mine.toml"))
	run(t, b, press(t, b, "enter"))
	if b.prompt == nil {
		t.Fatal("a save that failed leaves no question")
	}
	demand(t, strings.ReplaceAll(footing(b, 3), "\n", " "), "permission denied")
}

// A save that ends after another chain was opened belongs to the one that was saved.
func TestALateSaveMarksItsOwnChain(t *testing.T) {
	path := filepath.Join(t.TempDir(), "mine.toml")
	b := openedWith(t, Settings{Chain: chainOf(t, "polyene"), From: "mine.toml", File: path}, 80, 24)
	press(t, b, "up")
	cmd := press(t, b, "s")
	other := chainOf(t, "mixed")
	b.take(other, origin{from: "mixed", saved: other})
	run(t, b, cmd)
	if b.origin.file != "" || b.edited() {
		t.Errorf("the preset is now said to be in %q", b.origin.file)
	}
	press(t, b, "u")
	if b.edited() || b.origin.file != path {
		t.Error("the chain that was saved does not know it")
	}
}

func TestQuittingWaitsForASave(t *testing.T) {
	path := filepath.Join(t.TempDir(), "mine.toml")
	b := openedWith(t, Settings{Chain: chainOf(t, "polyene"), From: "mine.toml", File: path}, 80, 24)
	press(t, b, "up")
	save := press(t, b, "s")
	if press(t, b, "q") != nil {
		t.Fatal("the program ends before the file is written")
	}
	_, cmd := b.Update(save())
	if cmd == nil || cmd() != tea.Quit() {
		t.Error("the end of the save does not end the program")
	}
	again := openedWith(t, Settings{Chain: chainOf(t, "polyene"), From: "mine.toml", File: path}, 80, 24)
	press(t, again, "s", "q")
	if cmd := press(t, again, "q"); cmd == nil || cmd() != tea.Quit() {
		t.Error("a second q does not leave at once")
	}
}

func TestTabCompletesPaths(t *testing.T) {
	dir := t.TempDir()
	for _, name := range []string{"chains/long.toml", "chains/longer.toml", "chains/été.toml", "chains/êté.toml", "odd[1]*.toml", "only/deep/x.toml"} {
		path := filepath.Join(dir, name)
		if err := os.MkdirAll(filepath.Dir(path), 0o700); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, nil, 0o600); err != nil {
			t.Fatal(err)
		}
	}
	for _, tt := range []struct{ typed, want, ways string }{
		{"ch", "chains/", ""},
		{"chains/lo", "chains/long", "long.toml  longer.toml"},
		{"chains/longe", "chains/longer.toml", ""},
		{"chains/", "chains/", "été.toml"},
		{"odd[", "odd[1]*.toml", ""},
		{"only/", "only/deep/", ""},
		{"nothing", "nothing", "nothing there"},
	} {
		b := opened(t, "polyene", 120, 36)
		press(t, b, "o")
		paste(t, b, filepath.Join(dir, "x")[:len(dir)+1]+tt.typed)
		press(t, b, "tab")
		if got := strings.TrimPrefix(b.prompt.input.Value(), dir+"/"); got != tt.want || !strings.Contains(b.prompt.hint, tt.ways) {
			t.Errorf("Tab makes %q of %q and says %q", got, tt.typed, b.prompt.hint)
		}
	}
	t.Setenv("HOME", dir)
	if got, _ := completePath("~/onl"); got != dir+"/only/" {
		t.Errorf("Tab makes %q of ~/onl", got)
	}
}
