package model_test

import (
	"go/parser"
	"go/token"
	"io/fs"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
)

// arrows says which of our packages each one may import (the plan of the house,
// DEVELOPERS.md); physics never imports the terminal.
var arrows = map[string][]string{
	".":              {"model", "model/report", "model/study", "presets", "tui", "tui/background"},
	"presets":        {"model"},
	"model":          {},
	"model/band":     {"model"},
	"model/fermi":    {},
	"model/relax":    {"model", "model/fermi"},
	"model/response": {"model", "model/band"},
	"model/doubt":    {"model", "model/relax"},
	"model/study":    {"model", "model/band", "model/doubt", "model/fermi", "model/relax", "model/response"},
	"model/report":   {"model", "model/doubt", "model/response", "model/study"},
	"tui":            {"model", "model/doubt", "model/report", "model/response", "model/study", "presets", "tui/plot"},
	"tui/plot":       {},
	"tui/background": {},
}

// TestArrows holds every import of the program against the plan.
func TestArrows(t *testing.T) {
	const module = "example.org/twokf"
	seen := map[string]bool{}
	err := filepath.WalkDir("..", func(path string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		if d.IsDir() && strings.HasPrefix(d.Name(), ".") && d.Name() != ".." {
			return filepath.SkipDir
		}
		if !strings.HasSuffix(path, ".go") || strings.HasSuffix(path, "_test.go") {
			return nil
		}
		from, err := filepath.Rel("..", filepath.Dir(path))
		if err != nil {
			return err
		}
		from = filepath.ToSlash(from)
		seen[from] = true
		allowed, known := arrows[from]
		if !known {
			t.Errorf("package %s is not in the plan of the house", from)
		}
		file, err := parser.ParseFile(token.NewFileSet(), path, nil, parser.ImportsOnly)
		if err != nil {
			return err
		}
		for _, spec := range file.Imports {
			to, err := strconv.Unquote(spec.Path.Value)
			if err != nil {
				return err
			}
			if to, ours := strings.CutPrefix(to, module+"/"); ours && !slices.Contains(allowed, to) {
				t.Errorf("%s imports %s, against the plan of the house", path, to)
			}
			terminal := strings.Contains(to, "charmbracelet") || strings.Contains(to, "termenv") || strings.Contains(to, "x/term")
			if terminal && strings.HasPrefix(from, "model") {
				t.Errorf("%s imports the terminal: %s", path, to)
			}
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	for name := range arrows {
		if !seen[name] {
			t.Errorf("package %s of the plan is not there", name)
		}
	}
}
