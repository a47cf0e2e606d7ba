package tui

import (
	"bytes"
	"context"
	"fmt"
	"os"
	"slices"
	"strings"
	"testing"
	"testing/synctest"
	"time"
	"unicode/utf8"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/x/ansi"
	"github.com/muesli/termenv"
	"pgregory.net/rapid"

	"example.org/twokf/model"
	"example.org/twokf/model/study"
	"example.org/twokf/presets"
	"example.org/twokf/tui/plot"
)

func TestAnIdleScreenSendsNothing(t *testing.T) {
	b := opened(t, "quarter", 120, 36)
	answer(t, b)
	before := b.View()
	for _, msg := range []tea.Msg{nil, startMsg{-1}, slowMsg{-1}, answeredMsg{gen: -1}, draftMsg{-1},
		tea.WindowSizeMsg{Width: 120, Height: 36}, tea.MouseMsg{X: 40, Y: 10, Action: tea.MouseActionMotion}, tea.FocusMsg{}} {
		b.Update(msg)
		if b.View() != before {
			t.Errorf("%T changes the screen:\n%s", msg, difference(before, b.View()))
		}
	}
	b.Update(tea.WindowSizeMsg{Width: 80, Height: 24})
	b.View()
	b.Update(tea.WindowSizeMsg{Width: 120, Height: 36})
	if b.View() != before {
		t.Errorf("a window made smaller and larger again shows another screen:\n%s", difference(before, b.View()))
	}
}

// sent counts the bytes that a renderer sends which compares lines: a changed
// one whole, with an escape sequence to clear its rest, of an unchanged one the
// newline.
func sent(before, after string, width int) int {
	old, rows := strings.Split(before, "\n"), strings.Split(after, "\n")
	n := len(ansi.CursorHomePosition) + len(ansi.CursorPosition(0, len(rows))) - len("\r\n")
	for i, row := range rows {
		switch {
		case old[i] == row:
			n += len("\n")
			if i == len(rows)-1 {
				n++
			}
		case ansi.StringWidth(row) < width:
			n += len(row) + len(ansi.EraseLineRight) + len("\r\n")
		default:
			n += len(row) + len("\r\n")
		}
	}
	return n
}

// shows is a program that shows the text that it is sent.
type shows string

func (shows) Init() tea.Cmd { return nil }
func (s shows) Update(msg tea.Msg) (tea.Model, tea.Cmd) {
	if text, ok := msg.(string); ok {
		s = shows(text)
	}
	return s, nil
}
func (s shows) View() string { return string(s) }

func TestBytesAreCountedAsBubbleTeaSendsThem(t *testing.T) {
	_, screens := turns(t)
	synctest.Test(t, func(t *testing.T) {
		var out bytes.Buffer
		p := tea.NewProgram(shows(""), tea.WithInput(nil), tea.WithOutput(&out), tea.WithAltScreen(), tea.WithoutSignalHandler())
		over := make(chan struct{})
		go func() { defer close(over); p.Run() }()
		p.Send(tea.WindowSizeMsg{Width: 120, Height: 36})
		p.Send(screens[0])
		pause(time.Second)
		for i, after := range screens[1:] {
			before := out.Len()
			p.Send(after)
			pause(time.Second)
			if got, want := out.Len()-before, sent(screens[i], after, 120); got != want {
				t.Errorf("turn %d sends %d bytes, counted are %d", i+1, got, want)
			}
		}
		leave(p, over)
	})
}

// turns returns a bench with colours after some turns of the temperature, and
// its screens before the first and after each.
func turns(t testing.TB) (b *Bench, screens []string) {
	colours := termenv.ANSI256
	b = openedWith(t, Settings{Chain: chainOf(t, "quarter"), From: "quarter", Profile: &colours}, 120, 36)
	answer(t, b)
	screens = append(screens, b.View())
	for range 5 {
		press(t, b, "up")
		answer(t, b)
		screens = append(screens, b.View())
	}
	return b, screens
}

// A turn of a knob must not cost a slow line more than a moment: 4 kB are a
// third of a second at 115200 baud.
func TestATurnOfAKnobSendsLittle(t *testing.T) {
	const most = 5000
	_, screens := turns(t)
	for i, after := range screens[1:] {
		if n := sent(screens[i], after, 120); n > most {
			t.Errorf("turn %d sends %d bytes, more than %d", i+1, n, most)
		}
	}
}

// everyTurn returns what one turn of each numeric knob of each ready-made chain
// sends, in ascending order.
func everyTurn(t testing.TB) (bytes []int) {
	colours := termenv.ANSI256
	for _, p := range presets.List() {
		for i, k := range knobs {
			if k.Kind == model.Word || absent(k, p.Chain) || k.Step(p.Chain, +1, false) == p.Chain {
				continue
			}
			b := openedWith(t, Settings{Chain: p.Chain, From: p.Name, Profile: &colours}, 120, 36)
			answer(t, b)
			b.knob = i
			b.message = ""
			b.Update(nil)
			before := b.View()
			press(t, b, "up")
			answer(t, b)
			bytes = append(bytes, sent(before, b.View(), 120))
		}
	}
	slices.Sort(bytes)
	return bytes
}

func TestHalfOfAllTurnsSendLittle(t *testing.T) {
	if os.Getenv("TWOKF_LONG") != "1" {
		t.Skip("more than a hundred studies")
	}
	const most = 4000
	bytes := everyTurn(t)
	if median := bytes[len(bytes)/2]; median > most || len(bytes) < 100 {
		t.Errorf("the median of %d turns sends %d bytes, more than %d", len(bytes), median, most)
	}
}

// BenchmarkTurnBytes reports what the turns of all knobs send.
func BenchmarkTurnBytes(b *testing.B) {
	var bytes []int
	for b.Loop() {
		bytes = everyTurn(b)
	}
	b.ReportMetric(0, "ns/op")
	b.ReportMetric(float64(bytes[len(bytes)/2]), "median-B")
	b.ReportMetric(float64(bytes[len(bytes)*9/10]), "nine-of-ten-B")
	b.ReportMetric(float64(len(bytes)), "turns")
}

// BenchmarkView draws the screen after a turn: all four plots anew.
func BenchmarkView(b *testing.B) {
	bench, _ := turns(b)
	var answers [2]*study.Portrait
	for i := range answers {
		c := bench.chain
		c.Temperature += 0.001 * float64(i)
		p, err := study.Run(context.Background(), c, study.Settings{})
		if err != nil {
			b.Fatal(err)
		}
		answers[i] = p
	}
	b.ReportAllocs()
	i := 0
	for b.Loop() {
		bench.Update(answeredMsg{bench.inquiry.gen, answers[i%2], nil})
		bench.View()
		i++
	}
}

func TestLeanRowsLookTheSame(t *testing.T) {
	colours := termenv.ANSI256
	l := newLook(colours)
	red, grey := l[inkRaised], l[inkAxis]
	for _, tt := range []struct{ row, want string }{
		{"plain", "plain"},
		{l.paint(inkRaised, "a") + "b", red + "a" + resetStyle + "b"},
		{l.paint(inkRaised, "a") + " b", red + "a" + resetStyle + " b"},
		{l.paint(inkRaised, "a") + "  " + l.paint(inkAxis, "b"), red + "a  " + grey + "b" + resetStyle},
		{l.paint(inkRaised, "a") + " " + l.paint(inkRaised, "b"), red + "a b" + resetStyle},
		{l.paint(inkRaised, "a") + l.paint(inkHeading, "b"), red + "a" + resetStyle + bold + "b" + resetStyle},
		{l.paint(inkChosen, "a") + " " + l.paint(inkRaised, "b"), l[inkChosen] + "a" + resetStyle + " " + red + "b" + resetStyle},
	} {
		if got := lean(tt.row); got != tt.want {
			t.Errorf("%q becomes %q, want %q", tt.row, got, tt.want)
		}
	}
	rapid.Check(t, func(t *rapid.T) {
		row := ""
		for range rapid.IntRange(0, 8).Draw(t, "runs") {
			text := rapid.StringOfN(rapid.RuneFrom([]rune("a ▸")), 0, 3, -1).Draw(t, "text")
			row += l.paint(plot.Ink(rapid.IntRange(0, int(inkCount)-1).Draw(t, "ink")), text)
		}
		if got := lean(row); appearance(got) != appearance(row) || len(got) > len(row) {
			t.Fatalf("%q becomes %q", row, got)
		}
	})
}

// appearance spells each character of a row that is not blank with the style in
// which it is seen, and how the row leaves the terminal.
func appearance(row string) string {
	var out strings.Builder
	style := map[string]string{}
	for row != "" {
		if row[0] == '\x1b' {
			end := strings.IndexByte(row, 'm') + 1
			switch sequence := row[:end]; sequence {
			case resetStyle:
				clear(style)
			case bold:
				style["weight"] = sequence
			default:
				style["colour"] = sequence
			}
			row = row[end:]
			continue
		}
		r, size := utf8.DecodeRuneInString(row)
		row = row[size:]
		if r == ' ' {
			out.WriteRune(r)
		} else {
			fmt.Fprintf(&out, "%q in %q;", r, style)
		}
	}
	return fmt.Sprint(out.String(), style)
}
