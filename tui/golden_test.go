package tui

import (
	"context"
	"flag"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"

	"github.com/muesli/termenv"

	"example.org/twokf/model"
	"example.org/twokf/model/doubt"
	"example.org/twokf/model/study"
)

// The screens in testdata were approved by looking at them. Their numbers come
// from this program's own solvers: they are regression values, not checks.
var renew = flag.Bool("renew", false, "write the golden screens anew")

var goldenScreens = []struct {
	name   string
	preset string
	w, h   int
	ascii  bool
	colour bool
	keys   []string
	then   func(*testing.T, *Bench)
}{
	{name: "bench-80x24", preset: "polyene", w: 80, h: 24},
	{name: "bench-80x24-ascii", preset: "polyene", w: 80, h: 24, ascii: true},
	{name: "bench-120x36", preset: "quarter", w: 120, h: 36},
	{name: "bench-120x36-ascii", preset: "quarter", w: 120, h: 36, ascii: true},
	{name: "bench-120x36-colours", preset: "quarter", w: 120, h: 36, colour: true},
	{name: "bench-200x60", preset: "trimer", w: 200, h: 60},
	{name: "bench-200x60-ascii", preset: "trimer", w: 200, h: 60, ascii: true},
	{name: "bench-60x20", preset: "spinless", w: 60, h: 20},
	{name: "bench-60x20-ascii", preset: "spinless", w: 60, h: 20, ascii: true},
	{name: "too-small", preset: "spinless", w: 59, h: 20},
	{name: "bands-enlarged", preset: "polyene", w: 100, h: 30, keys: []string{"1", "v"}},
	{name: "chain-enlarged", preset: "trimer", w: 100, h: 30, keys: []string{"2", "w", "w"}},
	{name: "chi-enlarged", preset: "trimer", w: 100, h: 30, keys: []string{"3"}},
	{name: "phonon-enlarged", preset: "quarter", w: 100, h: 30, keys: []string{"4"}},
	{name: "keys", preset: "polyene", w: 80, h: 24, keys: []string{"?"}},
	{name: "keys-wide", preset: "polyene", w: 160, h: 45, keys: []string{"?"}},
	{name: "doubts", preset: "polyene", w: 100, h: 30, keys: []string{"d"}},
	{name: "answers", preset: "polyene", w: 100, h: 36, keys: []string{"a"}},
	{name: "presets", preset: "polyene", w: 80, h: 24, keys: []string{"p", "down"}},
	{name: "prompt-error", preset: "polyene", w: 80, h: 24, then: func(t *testing.T, b *Bench) {
		press(t, b, "enter")
		enter(t, b, "300 Km")
	}},
	{name: "stale", preset: "half", w: 120, h: 36, then: hotter},
}

// hotter turns the temperature up and shows the study of that, slow, as it is
// before the lattice is relaxed.
func hotter(t *testing.T, b *Bench) {
	press(t, b, "up")
	var part *study.Portrait
	_, err := study.Run(context.Background(), b.chain, study.Settings{Previous: b.inquiry.last, Levels: shownLevels, Publish: func(p *study.Portrait) {
		if p.Phonon != nil && p.Lattice == nil {
			part = p
		}
	}})
	if err != nil || part == nil {
		t.Fatal("no part of the study without a lattice: ", err)
	}
	news := update{part, &study.Progress{Stage: "lattice", Done: 0.4, Detail: `start "2kF": residual 1e-4 of 1e-9`}}
	b.Update(updateMsg{gen: b.inquiry.gen, news: news})
	b.Update(slowMsg{b.inquiry.lag})
}

func TestScreensAreAsApproved(t *testing.T) {
	portraits := map[string]*study.Portrait{}
	for _, tt := range goldenScreens {
		if portraits[tt.preset] == nil {
			b := opened(t, tt.preset, 80, 24)
			answer(t, b)
			portraits[tt.preset] = calm(b.inquiry.last)
		}
		draw := func(p *study.Portrait) string {
			set := Settings{Chain: p.Chain, From: tt.preset, ASCII: tt.ascii}
			if tt.colour {
				colours := termenv.ANSI256
				set.Profile = &colours
			}
			b := openedWith(t, set, tt.w, tt.h)
			b.Update(answeredMsg{b.inquiry.gen, p, nil})
			press(t, b, tt.keys...)
			if tt.then != nil {
				tt.then(t, b)
			}
			rows := strings.Split(b.View(), "\n")
			for i := range rows {
				rows[i] = strings.TrimRight(rows[i], " ")
			}
			return strings.Join(rows, "\n") + "\n"
		}
		got := draw(portraits[tt.preset])
		checkGolden(t, tt.name, got)
		for seed := range uint64(3) {
			if shaken := draw(shake(portraits[tt.preset], seed)); shaken != got {
				t.Errorf("%s depends on rounding: choose a view that does not\n%s", tt.name, difference(got, shaken))
			}
		}
	}
}

func checkGolden(t *testing.T, name, got string) {
	t.Helper()
	path := filepath.Join("testdata", name+".golden")
	if *renew {
		if err := os.MkdirAll("testdata", 0o777); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, []byte(got), 0o666); err != nil {
			t.Fatal(err)
		}
		return
	}
	want, err := os.ReadFile(path)
	if err != nil {
		t.Fatalf("%v (go test -renew writes it)", err)
	}
	if got != string(want) {
		t.Errorf("%s has changed (look at it, then go test -renew):\n%s", path, difference(string(want), got))
	}
}

// difference lists the lines that differ.
func difference(want, got string) string {
	w, g := strings.Split(want, "\n"), strings.Split(got, "\n")
	var out strings.Builder
	for i := range max(len(w), len(g)) {
		var l, r string
		if i < len(w) {
			l = w[i]
		}
		if i < len(g) {
			r = g[i]
		}
		if l != r {
			out.WriteString("was " + l + "\nis  " + r + "\n")
		}
	}
	return out.String()
}

// goldenDoubts stand for those that a chain really has, whose words are not the
// bench's.
var goldenDoubts = []doubt.Doubt{
	{Name: "unstable_region", Verdict: doubt.Raised, Value: math.Inf(-1), Limit: 0, Source: "invented",
		Why: "lowest Ω²/ω² of the undistorted chain; below zero the uniform chain's response is carried past its own instability"},
	{Name: "one_dimension", Verdict: doubt.Raised, Value: 1, Limit: 0, Source: "invented",
		Why: "a single chain is ordered only at T = 0"},
	{Name: "not_converged", Verdict: doubt.Clear, Value: 1e-10, Limit: 1e-9, Source: "invented",
		Why: "largest mismatch left between the lattice and the electrons' own density or bond order"},
}

// calm masks what differs from run to run and from machine to machine: times,
// and how close to zero a converged residual came.
func calm(p *study.Portrait) *study.Portrait {
	q := *p
	q.Seconds = 0
	lattice := *p.Lattice
	inner := *lattice.Lattice
	inner.Iterations, inner.Residual = 10, 1e-10
	inner.Tried = nil
	lattice.Lattice = &inner
	q.Lattice = &lattice
	q.Doubts = goldenDoubts
	return &q
}

// shaking is more than two machines differ by: what the relaxation is done to.
const shaking = 1e-9

// shake returns a portrait whose numbers are all moved at random by shaking,
// relative to their size or that of their curve.
func shake(p *study.Portrait, seed uint64) *study.Portrait {
	rng := rand.New(rand.NewPCG(seed, 1))
	return shaken(reflect.ValueOf(p), rng).Interface().(*study.Portrait)
}

func shaken(v reflect.Value, rng *rand.Rand) reflect.Value {
	move := func(x, by float64) float64 {
		if math.IsInf(x, 0) {
			return x
		}
		return x + (2*rng.Float64()-1)*by
	}
	if v.Type() == reflect.TypeFor[model.Chain]() { // as it was typed
		return v
	}
	out := reflect.New(v.Type()).Elem()
	out.Set(v)
	switch v.Kind() {
	case reflect.Pointer:
		if !v.IsNil() {
			out.Set(reflect.New(v.Type().Elem()))
			out.Elem().Set(shaken(v.Elem(), rng))
		}
	case reflect.Struct:
		for i := range v.NumField() {
			switch f := v.Type().Field(i); {
			case !f.IsExported():
			case strings.HasSuffix(f.Name, "Energy") && f.Type.Kind() == reflect.Float64, f.Name == "Undistorted":
				// a minimum: second order in what the lattice is off
				out.Field(i).SetFloat(move(v.Field(i).Float(), 1e-13*math.Abs(v.Field(i).Float())))
			default:
				out.Field(i).Set(shaken(v.Field(i), rng))
			}
		}
	case reflect.Slice:
		if v.IsNil() {
			break
		}
		out.Set(reflect.MakeSlice(v.Type(), v.Len(), v.Len()))
		scale := 0.0
		xs, numbers := v.Interface().([]float64)
		for _, x := range xs {
			if a := math.Abs(x); !math.IsInf(a, 0) {
				scale = max(scale, a)
			}
		}
		for i := range v.Len() {
			if numbers {
				out.Index(i).SetFloat(move(xs[i], shaking*scale+1e-12))
			} else {
				out.Index(i).Set(shaken(v.Index(i), rng))
			}
		}
	case reflect.Float64:
		out.SetFloat(move(v.Float(), shaking*math.Abs(v.Float())))
	}
	return out
}
