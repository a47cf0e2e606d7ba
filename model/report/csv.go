package report

import (
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strconv"

	"example.org/twokf/model/study"
)

// CSV writes the portrait into a folder, which is made if it is not there:
// answers.csv, doubts.csv and one file for each set of curves. Numbers have the
// digits that read back as the same number; what is not finite is left empty.
// It returns the files written. Each appears whole or not at all, and one that
// this chain does not have is removed: it would be another chain's.
func CSV(dir string, p *study.Portrait) ([]string, error) {
	if err := os.MkdirAll(dir, 0o755); err != nil {
		return nil, err
	}
	var written []string
	for _, t := range tables(p) {
		path := filepath.Join(dir, t.file)
		if len(t.rows) == 0 {
			if err := os.Remove(path); err != nil && !errors.Is(err, fs.ErrNotExist) {
				return written, err
			}
			continue
		}
		if err := writeWhole(path, t.write); err != nil {
			return written, err
		}
		written = append(written, path)
	}
	return written, nil
}

type table struct {
	file string
	head []string
	rows [][]string
}

func (t table) write(w io.Writer) error {
	out := csv.NewWriter(w)
	if err := out.Write(t.head); err != nil {
		return err
	}
	if err := out.WriteAll(t.rows); err != nil {
		return err
	}
	return out.Error()
}

func tables(p *study.Portrait) []table {
	answers := table{file: "answers.csv", head: []string{"name", "value", "unit"}}
	for _, a := range Answers(p) {
		answers.rows = append(answers.rows, []string{a.Name, cell(a.Value), a.Unit})
	}
	doubts := table{file: "doubts.csv", head: []string{"name", "verdict", "value", "limit", "why", "source"}}
	for _, d := range p.Doubts {
		doubts.rows = append(doubts.rows, []string{d.Name, d.Verdict.String(), cell(d.Value), cell(d.Limit), d.Why, d.Source})
	}
	return []table{
		answers,
		doubts,
		tableOf("bands.csv", bandColumns(p)),
		tableOf("levels.csv", levelColumns(p)),
		tableOf("susceptibility.csv", chiColumns(p)),
		tableOf("susceptibility_ring.csv", ringColumns(p)),
		tableOf("softening.csv", phononColumns(p)),
		tableOf("sites.csv", siteColumns(p)),
	}
}

// tableOf sets columns side by side; an open chain's last bond is left empty.
func tableOf(file string, cs []column) table {
	t := table{file: file}
	if file == "sites.csv" && len(cs) > 0 {
		site := make([]float64, len(cs[0].values))
		for i := range site {
			site[i] = float64(i)
		}
		cs = append([]column{{"site", site}}, cs...)
	}
	for _, c := range cs {
		t.head = append(t.head, c.name)
	}
	if len(cs) == 0 {
		return t
	}
	for i := range cs[0].values {
		row := make([]string, len(cs))
		for j, c := range cs {
			if i < len(c.values) {
				row[j] = cell(c.values[i])
			}
		}
		t.rows = append(t.rows, row)
	}
	return t
}

func cell(v float64) string {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return ""
	}
	return strconv.FormatFloat(v, 'g', -1, 64)
}

// writeWhole writes a file beside its place and then moves it there.
func writeWhole(path string, write func(io.Writer) error) (err error) {
	name := fmt.Sprintf(".%s-%08x", filepath.Base(path), rand.Uint32())
	f, err := os.OpenFile(filepath.Join(filepath.Dir(path), name), os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o666)
	if err != nil {
		return err
	}
	defer func() {
		if err != nil {
			os.Remove(f.Name())
		}
	}()
	if err = write(f); err != nil {
		f.Close()
		return fmt.Errorf("%s: %w", path, err)
	}
	err = f.Sync()
	if cerr := f.Close(); err == nil {
		err = cerr
	}
	if err == nil {
		err = os.Rename(f.Name(), path)
	}
	return err
}
