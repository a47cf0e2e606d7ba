package report_test

import (
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"

	"example.org/twokf/model/report"
	"example.org/twokf/model/response"
	"example.org/twokf/model/study"
)

// csvOf writes a portrait and reads every file back: file → column → cells.
func csvOf(t *testing.T, p *study.Portrait) map[string]map[string][]string {
	t.Helper()
	dir := filepath.Join(t.TempDir(), "made", "on the way")
	files, err := report.CSV(dir, p)
	if err != nil {
		t.Fatal(err)
	}
	out := map[string]map[string][]string{}
	for _, path := range files {
		if filepath.Dir(path) != dir {
			t.Errorf("%s lies elsewhere", path)
		}
		f, err := os.Open(path)
		if err != nil {
			t.Fatal(err)
		}
		defer f.Close()
		rows, err := csv.NewReader(f).ReadAll() // refuses rows of different lengths
		if err != nil {
			t.Fatalf("%s: %v", path, err)
		}
		columns := map[string][]string{}
		for i, name := range rows[0] {
			for _, row := range rows[1:] {
				columns[name] = append(columns[name], row[i])
			}
		}
		out[filepath.Base(path)] = columns
	}
	entries, err := os.ReadDir(dir)
	if err != nil || len(entries) != len(files) {
		t.Errorf("%d files in the folder, %d reported: %v", len(entries), len(files), err)
	}
	return out
}

// sameNumbers holds cells against numbers, to the last bit; what is not finite,
// and what an open chain does not have, is an empty cell.
func sameNumbers(t *testing.T, what string, cells []string, numbers []float64) {
	t.Helper()
	if len(cells) < len(numbers) {
		t.Errorf("%s: %d cells for %d numbers", what, len(cells), len(numbers))
		return
	}
	for i, cell := range cells {
		if i >= len(numbers) || math.IsInf(numbers[i], 0) || math.IsNaN(numbers[i]) {
			if cell != "" {
				t.Errorf("%s[%d] is %q, expected nothing", what, i, cell)
			}
			continue
		}
		if v, err := strconv.ParseFloat(cell, 64); err != nil || v != numbers[i] {
			t.Errorf("%s[%d] is %q, expected %v", what, i, cell, numbers[i])
		}
	}
}

func TestCSVRoundTrip(t *testing.T) {
	for _, name := range allNames() {
		t.Run(name, func(t *testing.T) {
			p := studied(t, name)
			files := csvOf(t, p)
			of := func(file, column string) []string { return files[file][column] }

			var names, units []string
			var values []float64
			for _, a := range report.Answers(p) {
				names, units, values = append(names, a.Name), append(units, a.Unit), append(values, a.Value)
			}
			if !slices.Equal(of("answers.csv", "name"), names) || !slices.Equal(of("answers.csv", "unit"), units) {
				t.Error("names and units differ")
			}
			sameNumbers(t, "answers", of("answers.csv", "value"), values)

			var doubted []float64
			for i, d := range p.Doubts {
				doubted = append(doubted, d.Value)
				if of("doubts.csv", "name")[i] != d.Name || of("doubts.csv", "verdict")[i] != d.Verdict.String() || of("doubts.csv", "why")[i] != d.Why || of("doubts.csv", "source")[i] != d.Source {
					t.Errorf("doubt %d differs", i)
				}
			}
			sameNumbers(t, "doubts", of("doubts.csv", "value"), doubted)

			sameNumbers(t, "k", of("bands.csv", "wavevector"), p.Band.K)
			sameNumbers(t, "ε", of("bands.csv", "energy"), p.Band.Energy)
			sameNumbers(t, "levels", of("levels.csv", "level"), p.Levels.Energy)
			sameNumbers(t, "level places", of("levels.csv", "level_wavevector"), p.Levels.K)
			sameNumbers(t, "q", of("susceptibility.csv", "wavevector"), p.Response.Q)
			sameNumbers(t, "χ0", of("susceptibility.csv", "site"), sites(p.Response.Chi))
			sameNumbers(t, "density", of("sites.csv", "density"), p.Lattice.Electrons.Density)
			sameNumbers(t, "bond order", of("sites.csv", "bond_order"), p.Lattice.Electrons.BondOrder)
			for i, cell := range of("sites.csv", "site") {
				if cell != strconv.Itoa(i) {
					t.Errorf("site %d is called %q", i, cell)
				}
			}
			if _, there := files["susceptibility_ring.csv"]; there != (p.Ring != nil) {
				t.Errorf("χ of the ring there: %v", there)
			}
			if p.Ring != nil {
				sameNumbers(t, "χ0 of the ring", of("susceptibility_ring.csv", "ring_site"), sites(p.Ring.Chi))
			}
			if _, there := files["softening.csv"]; there != (p.Phonon != nil) {
				t.Errorf("softening there: %v", there)
			}
			if p.Phonon != nil {
				var ratio []float64
				for _, b := range p.Phonon.Branch {
					ratio = append(ratio, b.Ratio)
				}
				sameNumbers(t, "Ω²/ω²", of("softening.csv", "ratio"), ratio)
			}
			_, displaced := files["sites.csv"]["displacement"]
			if displaced != (p.Lattice.Displacement != nil) {
				t.Errorf("displacements there: %v", displaced)
			}
			sameNumbers(t, "u", of("sites.csv", "displacement"), p.Lattice.Displacement)
			sameNumbers(t, "q", of("sites.csv", "site_mode"), p.Lattice.SiteMode)
		})
	}
}

func sites(chi []response.Static) []float64 {
	var x []float64
	for _, s := range chi {
		x = append(x, s.Site)
	}
	return x
}

// A folder that cannot be made or written is an error that names it.
func TestCSVInBadPlaces(t *testing.T) {
	p := studied(t, "no phonon")
	dir := t.TempDir()
	file := filepath.Join(dir, "file")
	if err := os.WriteFile(file, []byte("mine"), 0o600); err != nil {
		t.Fatal(err)
	}
	taken := filepath.Join(dir, "taken")
	if err := os.MkdirAll(filepath.Join(taken, "bands.csv"), 0o755); err != nil { // a folder where a file should go
		t.Fatal(err)
	}
	for place, named := range map[string]string{file: file, filepath.Join(file, "below"): file, taken: filepath.Join(taken, "bands.csv"), "\x00": "\x00"} {
		if _, err := report.CSV(place, p); err == nil || !strings.Contains(err.Error(), named) {
			t.Errorf("%q: error %v", place, err)
		}
	}
	if data, err := os.ReadFile(file); err != nil || string(data) != "mine" {
		t.Errorf("the file that was in the way: %q, %v", data, err)
	}
	entries, err := os.ReadDir(taken)
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range entries {
		if strings.HasPrefix(e.Name(), ".") {
			t.Errorf("%s was left behind", e.Name())
		}
	}
}

// What an earlier chain left in the folder and this one does not have is removed,
// and nothing else.
func TestCSVOfAnotherChain(t *testing.T) {
	dir := t.TempDir()
	if _, err := report.CSV(dir, studied(t, "mixed")); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(filepath.Join(dir, "notes.csv"), nil, 0o600); err != nil {
		t.Fatal(err)
	}
	files, err := report.CSV(dir, studied(t, "one open site")) // no ring, no phonon
	if err != nil {
		t.Fatal(err)
	}
	entries, err := os.ReadDir(dir)
	if err != nil || len(entries) != len(files)+1 {
		t.Errorf("%d entries for %d files and some notes: %v", len(entries), len(files), err)
	}
}

// The files have the permissions that any new file gets.
func TestCSVPermissions(t *testing.T) {
	dir := t.TempDir()
	files, err := report.CSV(dir, studied(t, "no phonon"))
	if err != nil {
		t.Fatal(err)
	}
	f, err := os.Create(filepath.Join(dir, "other"))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	want, err := f.Stat()
	if err != nil {
		t.Fatal(err)
	}
	for _, path := range files {
		if got, err := os.Stat(path); err != nil || got.Mode() != want.Mode() {
			t.Errorf("%s: %v, expected %v: %v", path, got.Mode(), want.Mode(), err)
		}
	}
}

// Writing twice gives the same files.
func TestCSVTwice(t *testing.T) {
	p := studied(t, "no phonon")
	dir := t.TempDir()
	first, err := report.CSV(dir, p)
	if err != nil {
		t.Fatal(err)
	}
	before := map[string]string{}
	for _, path := range first {
		data, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		before[path] = string(data)
	}
	second, err := report.CSV(dir, p)
	if err != nil || !slices.Equal(first, second) {
		t.Errorf("%v and %v: %v", first, second, err)
	}
	for path, want := range before {
		if data, err := os.ReadFile(path); err != nil || string(data) != want {
			t.Errorf("%s has changed: %v", path, err)
		}
	}
}
