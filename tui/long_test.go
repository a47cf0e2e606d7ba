package tui

import (
	"context"
	"fmt"
	"math"
	"runtime"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"example.org/twokf/model"
	"example.org/twokf/model/study"
	"example.org/twokf/tui/plot"
)

// million is the length that the bench must stay quick at.
const million = 1_000_000

// stretched returns a portrait of a chain of n sites whose lattice is made up:
// that of a short chain again and again.
func stretched(t testing.TB, short model.Chain, n int) *study.Portrait {
	t.Helper()
	p, err := study.Run(context.Background(), short, study.Settings{Levels: shownLevels})
	if err != nil {
		t.Fatal(err)
	}
	long, lattice, inner := *p, *p.Lattice, *p.Lattice.Lattice
	repeat := func(x []float64) []float64 {
		if x == nil {
			return nil
		}
		out := make([]float64, n)
		for i := range out {
			out[i] = x[i%len(x)]
		}
		return out
	}
	long.Chain.Sites = n
	inner.Displacement, inner.SiteMode = repeat(inner.Displacement), repeat(inner.SiteMode)
	inner.Electrons.Density, inner.Electrons.BondOrder = repeat(inner.Electrons.Density), repeat(inner.Electrons.BondOrder)
	lattice.Lattice, long.Lattice = &inner, &lattice
	return &long
}

// again is a portrait with a lattice of its own, as a new study brings it; what
// is changed in its site mode leaves the first one alone.
func again(p *study.Portrait) *study.Portrait {
	q, lattice, inner := *p, *p.Lattice, *p.Lattice.Lattice
	inner.SiteMode = slices.Clone(inner.SiteMode)
	lattice.Lattice = &inner
	q.Lattice = &lattice
	return &q
}

// longBench returns a bench on a made-up long chain, answered.
func longBench(t testing.TB, preset string, sites, w, h int) (*Bench, *study.Portrait) {
	t.Helper()
	p := stretched(t, chainOf(t, preset), sites)
	b := openedWith(t, Settings{Chain: p.Chain, From: preset}, w, h)
	b.Update(answeredMsg{b.inquiry.gen, p, nil})
	b.View()
	return b, p
}

func TestColumnsShareTheSitesAsTheyAreDrawn(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		width := rapid.IntRange(2, 3000).Draw(t, "sites")
		from := rapid.IntRange(0, 2_000_000).Draw(t, "from")
		canvas := plot.New(rapid.IntRange(8, 150).Draw(t, "w"), 12, plot.ASCII) // a dot is a cell
		canvas.Frame(plot.Axis{Min: float64(from), Max: float64(from + width - 1)}, plot.Axis{Min: -1, Max: 1}, inkAxis)
		c := columns{window: window{from, from + width}}
		c.count, _ = canvas.Dots()
		left, _, _ := canvas.Cell(float64(from), 0)
		next := from
		for k := range c.count {
			lo, hi := c.sites(k)
			if lo != next || hi < lo {
				t.Fatalf("column %d of %d has the sites [%d, %d) after %d", k, c.count, lo, hi, next)
			}
			next = hi
			for i := lo; i < hi; i++ {
				if col, _, ok := canvas.Cell(float64(i), 0); !ok || col != left+k || c.of(float64(i)) != k {
					t.Fatalf("site %d is drawn in column %d, it stands in %d and in %d", i, col-left, k, c.of(float64(i)))
				}
			}
		}
		if next != from+width {
			t.Fatalf("the last %d sites have no column", from+width-next)
		}
	})
}

func TestEnvelopesHoldEverySite(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := strand{
			values: rapid.SliceOfN(rapid.Float64Range(-1, 1), 64, 700).Draw(t, "values"),
			ring:   rapid.Bool().Draw(t, "ring"),
			filter: filter(rapid.IntRange(0, 2).Draw(t, "filter")),
		}
		n := len(s.values)
		from := rapid.IntRange(0, n-32).Draw(t, "from")
		c := columns{window{from, rapid.IntRange(from+32, n).Draw(t, "to")}, 0}
		c.count = rapid.IntRange(2, c.width()/wide).Draw(t, "columns")
		var e envelope
		e.of(&s, c)
		shown := s.append(nil, 0, n)
		for k := range c.count {
			from, to := c.sites(k)
			before, _ := c.sites(max(k-1, 0))
			_, after := c.sites(min(k+1, c.count-1))
			here, about := shown[from:to], shown[before:after]
			if e.lo[k] > slices.Min(here) || e.hi[k] < slices.Max(here) {
				t.Fatalf("column %d: %g…%g does not hold %v", k, e.lo[k], e.hi[k], here)
			}
			if e.lo[k] < slices.Min(about) || e.hi[k] > slices.Max(about) {
				t.Fatalf("column %d: %g…%g is more than there is about it, %v", k, e.lo[k], e.hi[k], about)
			}
		}
	})
}

// Whatever the ratio of its period to the columns, a regular pattern that a plot
// cannot resolve has the same envelope everywhere.
func TestEnvelopesDoNotBeat(t *testing.T) {
	const sites = 10_000
	for period := 2; period <= 40; period++ {
		s := strand{values: make([]float64, sites), ring: true}
		for i := range s.values {
			s.values[i] = math.Cos(2 * math.Pi * float64(i%period) / float64(period))
		}
		for count := 2; 2*sites/count > period && sites/count >= wide; count += 7 {
			var e envelope
			e.of(&s, columns{window{0, sites}, count})
			for k := 1; k < count-1; k++ { // the outermost columns see less
				if e.lo[k] != e.lo[1] || e.hi[k] != e.hi[1] {
					t.Fatalf("period %d in %d columns: %g…%g in one, %g…%g in another", period, count, e.lo[1], e.hi[1], e.lo[k], e.hi[k])
				}
			}
		}
	}
}

// One site out of a million must be seen where it is.
func TestASingleSiteIsSeenInAMillion(t *testing.T) {
	for _, staggered := range []bool{false, true} {
		b, p := longBench(t, "quarter", million, 120, 36)
		if staggered {
			press(t, b, "m")
		}
		before := strings.Split(b.View(), "\n")
		for _, site := range []int{0, 3, 123_456, million/2 + 1, million - 1} {
			q := again(p)
			q.Lattice.SiteMode[site] += 0.3
			b.Update(answeredMsg{b.inquiry.gen, q, nil})
			after := strings.Split(b.View(), "\n")
			panel := b.screen.panels[chainIndex]
			col, _, ok := b.screen.canvas[chainIndex].Cell(float64(site), 0)
			if !ok {
				t.Fatalf("site %d is not in the plot", site)
			}
			top := [2]string{}
			for i, rows := range [][]string{before, after} {
				for _, row := range rows[panel.row+1 : panel.row+panel.h-2] {
					cells := []rune(row)
					if at := panel.col + col; at < len(cells) {
						top[i] += string(cells[at])
					} else {
						top[i] += " "
					}
				}
			}
			if top[0] == top[1] {
				t.Errorf("site %d off by 0.3 changes nothing in its column (staggered: %t):\n%s", site, staggered, b.View())
			}
		}
	}
}

// What a frame of a million sites allocates does not grow with the chain: one
// number for each site would be 8 MB.
func TestFramesOfAMillionSitesTakeLittleMemory(t *testing.T) {
	for _, preset := range []string{"polyene", "quarter"} {
		b, p := longBench(t, preset, million, 120, 36)
		frames := [2]*study.Portrait{p, again(p)}
		used := func(f func()) uint64 {
			var before, after runtime.MemStats
			runtime.ReadMemStats(&before)
			f()
			runtime.ReadMemStats(&after)
			return after.TotalAlloc - before.TotalAlloc
		}
		for what, f := range map[string]func(){
			"a new lattice": func() {
				b.Update(answeredMsg{b.inquiry.gen, frames[1], nil})
				b.View()
			},
			"reading": func() { press(t, b, "v", "v", ".", ","); b.View(); press(t, b, "esc") },
			"a click": func() { click(b, 90, 8); b.View(); press(t, b, "esc") },
			"zooming": func() { press(t, b, "w", "]"); b.View(); press(t, b, "w", "w"); b.View(); press(t, b, "W", "W", "W") },
		} {
			if n := used(f); n > 1<<20 {
				t.Errorf("%s, %s: %d bytes", preset, what, n)
			}
		}
	}
}

func TestPlotsAreDrawnOnlyWhenTheirPartsChange(t *testing.T) {
	b, p := longBench(t, "quarter", 5000, 120, 36)
	drawn := func() (rows [4]*string) {
		b.View()
		for i := range rows {
			rows[i] = &b.screen.drawn[i].rows[0]
		}
		return rows
	}
	before := drawn()
	press(t, b, "up") // nothing is computed yet
	if drawn() != before {
		t.Errorf("a key alone draws plots anew: %+v", b.screen.drawn)
	}
	q := *p
	response := *p.Response
	q.Response = &response
	b.Update(answeredMsg{b.inquiry.gen, &q, nil})
	after := drawn()
	for i := range after {
		if anew := after[i] != before[i]; anew != (i == chiIndex) {
			t.Errorf("another χ(q) draws %s anew: %t", views[i].name(), anew)
		}
	}
}

func TestTheWindowOnAMillionSites(t *testing.T) {
	b, _ := longBench(t, "quarter", million, 120, 36)
	var widths []int
	for range 4 {
		press(t, b, "w")
		widths = append(widths, b.sites.width())
	}
	if widths[0] > million/4 || widths[3] > 1000 || widths[3] < 200 {
		t.Errorf("w shows %v sites, one after the other", widths)
	}
	if middle := (b.sites.from + b.sites.to) / 2; middle != million/2 {
		t.Errorf("the window closes in on %d", middle)
	}
	demand(t, b.View(), "500000", "500200") // site numbers in full
	for _, want := range []int{widths[2], widths[1], widths[0], 0} {
		press(t, b, "W")
		if got := b.sites.width(); math.Abs(float64(got-want)) > 0.01*float64(want) {
			t.Errorf("W goes back to %d sites, w came from %d", got, want)
		}
	}
	press(t, b, "w", "w", "w", "w")
	before := b.sites
	press(t, b, "]")
	if b.sites.from-before.from != before.width()/4 || b.sites.width() != before.width() {
		t.Errorf("] moves %v to %v", before, b.sites)
	}
	press(t, b, "[")
	if b.sites != before {
		t.Errorf("[ moves back to %v, not %v", b.sites, before)
	}
	for range 10 {
		press(t, b, "[")
	}
	for b.sites.to < million { // to the end and not beyond
		from := b.sites.from
		press(t, b, "]", "]", "]", "]", "]", "]", "]", "]", "W")
		if b.sites.width() == 0 || b.sites.from == from {
			break
		}
	}
	if b.sites.to > million {
		t.Errorf("the window %v reaches beyond the chain", b.sites)
	}
}

func TestTheWindowSurvivesKnobs(t *testing.T) {
	b, _ := longBench(t, "quarter", 5000, 120, 36)
	press(t, b, "w", "w", "w", "]")
	before := b.sites
	for _, knob := range []string{"conditions.temperature", "site_phonon.coupling", "electrons.filling", "chain.sites"} {
		choose(t, b, knob)
		press(t, b, "up")
		if b.sites != before {
			t.Errorf("a turn of %s moves the window from %v to %v", knob, before, b.sites)
		}
		press(t, b, "u")
	}
	choose(t, b, "chain.sites")
	press(t, b, "enter")
	enter(t, b, "2000")
	if want := (window{2000 - before.width(), 2000}); b.sites != want {
		t.Errorf("on a shorter chain the window is %v, not %v", b.sites, want)
	}
	press(t, b, "enter")
	enter(t, b, "100")
	if b.sites.width() != 0 {
		t.Errorf("a chain shorter than the window is shown at %v, not whole", b.sites)
	}
	press(t, b, "w", "p", "down", "enter")
	if b.sites.width() != 0 {
		t.Errorf("another chain is shown at %v", b.sites)
	}
}

// Reading goes by sites where they can be told apart, and by columns of dots
// where they cannot.
func TestReadingAMillionSites(t *testing.T) {
	b, p := longBench(t, "quarter", million, 120, 36)
	press(t, b, "v", "v")
	first := b.reading.x
	if first < million/2-10_000 || first > million/2+10_000 {
		t.Errorf("reading begins at %g", first)
	}
	dots, _ := b.screen.canvas[chainIndex].Dots()
	step := float64(million-1) / float64(dots-1)
	for range 10 {
		before := b.reading.x
		press(t, b, ".")
		if d := b.reading.x - before; math.Abs(d-step) > 1 {
			t.Errorf(". goes %g sites on, a column is %g", d, step)
		}
	}
	for range 10 {
		press(t, b, ",")
	}
	if b.reading.x != first {
		t.Errorf("and back to %g, not %g", b.reading.x, first)
	}
	q := again(p)
	odd := int(first) + 17
	q.Lattice.SiteMode[odd] = 0.4321
	b.Update(answeredMsg{b.inquiry.gen, q, nil})
	demand(t, footing(b, 1), "sites ", "…0.4321") // the range of all sites there
	for range 5 {
		press(t, b, "w")
	}
	demand(t, footing(b, 1), fmt.Sprintf("site %.0f  n ", first))
	before := b.reading.x
	press(t, b, ".")
	if b.reading.x != before+1 {
		t.Errorf("zoomed, . goes from site %g to %g", before, b.reading.x)
	}
	for range 16 {
		press(t, b, ".")
	}
	demand(t, footing(b, 1), fmt.Sprintf("site %d  n ", odd), "0.4321")
}

// The mouse reads what is under it, and the mark stands where it clicked.
func TestTheMouseReadsAMillionSites(t *testing.T) {
	b, _ := longBench(t, "quarter", million, 120, 36)
	for _, zoom := range []int{0, 1, 4} {
		for range zoom {
			press(t, b, "w")
		}
		b.View()
		panel, canvas := b.screen.panels[chainIndex], b.screen.canvas[chainIndex]
		w := b.shownSites()
		left, _, _ := canvas.Cell(float64(w.from), 0)
		right, _, _ := canvas.Cell(float64(w.to-1), 0)
		for _, col := range []int{left, left + 1, (left + right) / 2, right - 1, right} {
			click(b, panel.col+col, panel.row+panel.h/2)
			if got, _, ok := canvas.Cell(b.reading.x, 0); !ok || got != col {
				t.Errorf("a click into column %d of %d reads site %g in column %d", col, right, b.reading.x, got)
			}
		}
		press(t, b, "esc")
	}
}

// BenchmarkLongFrame draws the bench after a new lattice of a long chain.
func BenchmarkLongFrame(b *testing.B) {
	for _, preset := range []string{"polyene", "quarter"} {
		for _, n := range []int{200_000, million} {
			b.Run(fmt.Sprintf("%s-%d", preset, n), func(b *testing.B) {
				bench, p := longBench(b, preset, n, 120, 36)
				frames := [2]*study.Portrait{p, again(p)}
				b.ReportAllocs()
				for i := 0; b.Loop(); i++ {
					bench.Update(answeredMsg{bench.inquiry.gen, frames[(i+1)%2], nil})
					bench.View()
				}
			})
		}
	}
}
