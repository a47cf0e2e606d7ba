package report_test

import (
	"context"
	"flag"
	"sync"
	"testing"

	"example.org/twokf/model"
	"example.org/twokf/model/study"
	"example.org/twokf/presets"
)

var renew = flag.Bool("renew", false, "write the golden texts anew")

// studied answers for a chain once in a test run.
func studied(t *testing.T, name string) *study.Portrait {
	t.Helper()
	lock.Lock()
	defer lock.Unlock()
	if p, ok := portraits[name]; ok {
		return p
	}
	c, ok := chains[name]
	if !ok {
		var err error
		if c, err = presets.Get(name); err != nil {
			t.Fatal(err)
		}
	}
	p, err := study.Run(context.Background(), c, study.Settings{})
	if err != nil {
		t.Fatal(err)
	}
	portraits[name] = p
	return p
}

var (
	lock      sync.Mutex
	portraits = map[string]*study.Portrait{}

	// chains beside the presets.
	chains = map[string]model.Chain{
		"no phonon":          {Sites: 10, Hopping: 1, Spin: 2, Filling: 0.6, Temperature: 0.1},
		"phonon not coupled": {Sites: 10, Boundary: model.Open, Hopping: 1, Spin: 2, Filling: 1, Site: model.Phonon{Present: true, Stiffness: 1, Frequency: 0.1}},
		"empty":              {Sites: 10, Hopping: 1, Spin: 2, Site: model.Phonon{Present: true, Coupling: 1, Stiffness: 1}},
		"two pairs":          {Sites: 12, Boundary: model.Open, Hopping: 1, NextHopping: -2, Spin: 2, Filling: 0.5, Bond: model.Phonon{Present: true, Coupling: 1, Stiffness: 3}},
		"one open site":      {Sites: 1, Boundary: model.Open, Hopping: 1, Spin: 1, Filling: 1, Energy: model.UnitEV},
	}
)

func presetNames() []string {
	var names []string
	for _, p := range presets.List() {
		names = append(names, p.Name)
	}
	return names
}

func allNames() []string {
	names := presetNames()
	for name := range chains {
		names = append(names, name)
	}
	return names
}
