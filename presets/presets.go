// Package presets holds ready-made chains, each a chain file as a person would
// write it: with its source, and with comments on what it shows and which doubts
// its answers will carry. Polyacetylene has published values. The others are
// invented: a family of chain compounds which a group compares before a beam time.
package presets

import (
	"embed"
	"fmt"
	"strings"

	"example.org/twokf/model"
)

//go:embed *.toml
var files embed.FS

// order is that of List: from the plainest case to the awkward ones.
var order = []string{
	"polyene", "half", "quarter", "trimer", "tetramer", "sliding",
	"spinless", "mixed", "doped", "soliton", "weak",
}

// Preset is a ready-made chain.
type Preset struct {
	Name  string // one short word, to ask for it
	Title string // the chain's own title
	Chain model.Chain
	About string // one sentence on what it shows
}

// List returns all presets, always in the same order.
func List() []Preset {
	list := make([]Preset, len(order))
	for i, name := range order {
		c, err := Get(name)
		if err != nil {
			panic(err) // a file in this package is broken
		}
		list[i] = Preset{Name: name, Title: c.Title, Chain: c, About: about(name)}
	}
	return list
}

// Get returns the chain of a preset. The error for an unknown name says which
// name is nearest.
func Get(name string) (model.Chain, error) {
	file, err := Raw(name)
	if err != nil {
		return model.Chain{}, err
	}
	return model.Decode(file, name+".toml")
}

// Raw returns the file of a preset as it was written, with its comments.
func Raw(name string) ([]byte, error) {
	for _, known := range order {
		if name == known {
			return files.ReadFile(name + ".toml")
		}
	}
	return nil, fmt.Errorf("there is no preset %q; the nearest is %s, and all are %s",
		name, model.Nearest(name, order), strings.Join(order, ", "))
}

// about returns the first comment of a preset's file.
func about(name string) string {
	file, err := Raw(name)
	if err != nil {
		panic(err) // only called with names in order
	}
	first, _, _ := strings.Cut(string(file), "\n#\n")
	return strings.ReplaceAll(strings.TrimPrefix(first, "# "), "\n# ", " ")
}
