package model

import (
	"errors"
	"io/fs"
	"os"
	"path/filepath"
	"testing"
)

// load reads what was saved.
func load(t *testing.T, path string) Chain {
	t.Helper()
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	c, err := Decode(data, path)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// names lists a directory.
func names(t *testing.T, dir string) []string {
	t.Helper()
	entries, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	var list []string
	for _, e := range entries {
		list = append(list, e.Name())
	}
	return list
}

func TestSaveReplacesAFileAndKeepsItsPermissions(t *testing.T) {
	path := filepath.Join(t.TempDir(), "chain.toml")
	if err := Save(path, polyacetylene); err != nil {
		t.Fatal(err)
	}
	plainFile := filepath.Join(filepath.Dir(path), "plain")
	if err := os.WriteFile(plainFile, nil, 0o666); err != nil {
		t.Fatal(err)
	}
	if got, want := permissionsOf(t, path), permissionsOf(t, plainFile); got != want {
		t.Errorf("a new chain file has permissions %v, any new file %v", got, want)
	}
	if err := os.Chmod(path, 0o640); err != nil {
		t.Fatal(err)
	}
	changed := polyacetylene
	changed.Sites = 302
	if err := Save(path, changed); err != nil {
		t.Fatal(err)
	}
	if got := permissionsOf(t, path); got != 0o640 {
		t.Errorf("permissions became %v", got)
	}
	if got := load(t, path); got != changed {
		t.Errorf("saved %+v, found %+v", changed, got)
	}
	if list := names(t, filepath.Dir(path)); len(list) != 2 {
		t.Errorf("left behind: %q", list)
	}
}

func permissionsOf(t *testing.T, path string) fs.FileMode {
	t.Helper()
	info, err := os.Stat(path)
	if err != nil {
		t.Fatal(err)
	}
	return info.Mode().Perm()
}

func TestSaveFollowsSymbolicLinks(t *testing.T) {
	dir := t.TempDir()
	far := filepath.Join(dir, "far")
	if err := os.Mkdir(far, 0o755); err != nil {
		t.Fatal(err)
	}
	for link, target := range map[string]string{
		"near":           "far",                           // a directory
		"far/one":        "two",                           // relative to the link
		"far/two":        filepath.Join(far, "real.toml"), // absolute, not there yet
		"far/up":         "../near/real.toml",             // through the linked directory
		"far/circle":     "far-circle",
		"far/far-circle": "circle",
	} {
		if err := os.Symlink(target, filepath.Join(dir, link)); err != nil {
			t.Skipf("this system has no symbolic links: %v", err)
		}
	}
	for i, link := range []string{"near/one", "far/two", "near/up"} {
		c := polyacetylene
		c.Sites += 4 * i
		if err := Save(filepath.Join(dir, link), c); err != nil {
			t.Fatal(err)
		}
		if got := load(t, filepath.Join(far, "real.toml")); got != c {
			t.Errorf("saved through %s: found %+v", link, got)
		}
		if info, err := os.Lstat(filepath.Join(dir, link)); err != nil || info.Mode()&fs.ModeSymlink == 0 {
			t.Errorf("%s is no link any more", link)
		}
	}
	if err := Save(filepath.Join(far, "circle"), polyacetylene); err == nil {
		t.Error("saved through a circle of links")
	}
	if list := names(t, far); len(list) != 6 {
		t.Errorf("left behind: %q", list)
	}
}

func TestSaveLeavesEverythingAloneWhenItFails(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "chain.toml")
	if err := Save(path, polyacetylene); err != nil {
		t.Fatal(err)
	}
	var bad *ParamError
	if err := Save(path, Chain{}); !errors.As(err, &bad) {
		t.Errorf("saving an invalid chain: %v", err)
	}
	if err := os.Mkdir(filepath.Join(dir, "folder"), 0o755); err != nil {
		t.Fatal(err)
	}
	var refused *fs.PathError
	if err := Save(filepath.Join(dir, "folder"), polyacetylene); !errors.As(err, &refused) {
		t.Errorf("saving over a directory: %v", err)
	}
	if err := Save(os.DevNull, polyacetylene); !errors.As(err, &refused) {
		t.Errorf("saving over a device: %v", err)
	}
	if err := Save(filepath.Join(dir, "absent", "chain.toml"), polyacetylene); !errors.Is(err, fs.ErrNotExist) {
		t.Errorf("saving into a directory that is not there: %v", err)
	}
	if err := Save("", polyacetylene); err == nil {
		t.Error("saved to no name at all")
	}
	if got := load(t, path); got != polyacetylene {
		t.Errorf("the old file became %+v", got)
	}
	if list := names(t, dir); len(list) != 2 {
		t.Errorf("left behind: %q", list)
	}
}

func TestSaveRespectsWriteProtection(t *testing.T) {
	if os.Geteuid() == 0 {
		t.Skip("nothing is protected from root")
	}
	path := filepath.Join(t.TempDir(), "chain.toml")
	if err := Save(path, polyacetylene); err != nil {
		t.Fatal(err)
	}
	if err := os.Chmod(path, 0o444); err != nil {
		t.Fatal(err)
	}
	if err := Save(path, polyacetylene); !errors.Is(err, fs.ErrPermission) {
		t.Errorf("saving over a protected file: %v", err)
	}
	if err := os.Chmod(filepath.Dir(path), 0o555); err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { _ = os.Chmod(filepath.Dir(path), 0o755) })
	if err := Save(filepath.Join(filepath.Dir(path), "new.toml"), polyacetylene); !errors.Is(err, fs.ErrPermission) {
		t.Errorf("saving into a protected directory: %v", err)
	}
}

func TestSaveUnderTheLongestName(t *testing.T) {
	name := make([]byte, 255) // the limit of most file systems
	for i := range name {
		name[i] = 'n'
	}
	path := filepath.Join(t.TempDir(), string(name))
	if err := os.WriteFile(path, nil, 0o644); err != nil {
		t.Skipf("no such name here: %v", err)
	}
	if err := Save(path, polyacetylene); err != nil {
		t.Error(err)
	}
}
