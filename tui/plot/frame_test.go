package plot

import (
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// Labels are complete, apart from each other, and over their ticks.
func TestXLabelsAreWholeAndApart(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		lo := rapid.Float64Range(-1000, 1000).Draw(t, "lo")
		width := rapid.Float64Range(0.001, 1000).Draw(t, "width")
		pi := rapid.Bool().Draw(t, "pi")
		c := New(rapid.IntRange(labelCols, 200).Draw(t, "w"), rapid.IntRange(labelRows, 50).Draw(t, "h"), ASCII)
		c.Frame(Axis{Min: lo, Max: lo + width, Pi: pi}, unit, 1)
		labels := row(c, c.h-1)
		end := -labelGap
		for i := range c.xt.list {
			col, label := c.xLabel(i), string(c.xt.label(i))
			if col < end+labelGap || col+len(label) > c.w || labels[col:col+len(label)] != label {
				t.Fatalf("label %q at column %d of %q", label, col, labels)
			}
			end = col + len(label)
		}
		if got, want := len(strings.Fields(labels)), len(c.xt.list); got != want {
			t.Fatalf("%d labels in %q, want %d", got, labels, want)
		}
	})
}

// A tick goes without its label only where the row is taken by another's,
// which does not happen from 10 rows on.
func TestYLabelsHaveARowEach(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		lo := rapid.Float64Range(-100, 100).Draw(t, "lo")
		width := rapid.Float64Range(0.01, 100).Draw(t, "width")
		c := New(60, rapid.IntRange(6, 60).Draw(t, "h"), ASCII)
		c.Frame(unit, Axis{Min: lo, Max: lo + width}, 1)
		if len(c.yt.list) < 2 {
			t.Fatalf("%d ticks on [%g, %g]\n%s", len(c.yt.list), lo, lo+width, c)
		}
		last := -1
		for i := range c.yt.list {
			_, at, ok := c.Cell(0, c.yt.list[i].value)
			label := string(c.yt.label(i))
			got, _, _ := strings.Cut(row(c, at), " +")
			if taken := i > 0 && at == last && c.h < 10; !ok || strings.TrimSpace(got) != label && !taken {
				t.Fatalf("row %d of tick %q begins %q\n%s", at, label, got, c)
			}
			last = at
		}
	})
}

func TestLittleRoomCostsLabelsFirstThenRulers(t *testing.T) {
	for _, tt := range []struct {
		w, h           int
		labels, rulers bool
	}{
		{40, 10, true, true},
		{11, 3, false, true},
		{5, 2, false, false},
		{1, 1, false, false},
	} {
		c := New(tt.w, tt.h, ASCII)
		c.Frame(unit, unit, 1)
		empty := c.String()
		if got := strings.ContainsAny(empty, "01"); got != tt.labels {
			t.Errorf("%d×%d: labels %v, want %v\n%s", tt.w, tt.h, got, tt.labels, empty)
		}
		if got := strings.ContainsAny(empty, "|+-"); got != tt.rulers {
			t.Errorf("%d×%d: rulers %v, want %v\n%s", tt.w, tt.h, got, tt.rulers, empty)
		}
		c.Line([]float64{0, 1}, []float64{0, 1}, 2, Heavy)
		if !strings.Contains(c.String(), "#") {
			t.Errorf("%d×%d: no curve\n%s", tt.w, tt.h, c)
		}
	}
}

func TestRangesInAnyOrder(t *testing.T) {
	for _, tt := range []struct{ in, want Axis }{
		{Axis{Min: 1, Max: 0}, Axis{Min: 0, Max: 1}},
		{Axis{Min: 2, Max: 2}, Axis{Min: 1, Max: 3}},
		{Axis{}, Axis{Min: -1, Max: 1}},
	} {
		got, want := New(40, 10, Braille), New(40, 10, Braille)
		got.Frame(tt.in, tt.in, 1)
		want.Frame(tt.want, tt.want, 1)
		if got.String() != want.String() {
			t.Errorf("%v:\n%swant\n%s", tt.in, got, want)
		}
	}
}
