package plot

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

func placed(lo, hi float64, n int, as numbering, ascii bool) *ticks {
	t := new(ticks)
	t.place(lo, hi, n, as, ascii)
	return t
}

func (t *ticks) String() string {
	var s []string
	for i := range t.list {
		s = append(s, string(t.label(i)))
	}
	return strings.Join(s, " ")
}

func TestTicksAreRoundNumbers(t *testing.T) {
	for _, tt := range []struct {
		lo, hi float64
		n      int
		as     numbering
		want   string
	}{
		{0, 1, 6, decimals, "0 0.2 0.4 0.6 0.8 1.0"},
		{-2, 2, 5, decimals, "−2 −1 0 1 2"},
		{-1.9999999999999996, 1.9999999999999996, 5, decimals, "−2 −1 0 1 2"}, // a cosine band's computed edges
		{0.8, 1.2, 3, decimals, "0.8 1.0 1.2"},
		{0, 199, 5, decimals, "0 50 100 150"},
		{0, 10000, 3, decimals, "0 5000 10000"},
		{0, 250000, 4, decimals, "0 1e5 2e5"},
		{0, 3.7e-6, 4, decimals, "0 1e−6 2e−6 3e−6"},
		{0, 1.6e-6, 4, decimals, "0 0.5e−6 1.0e−6 1.5e−6"},
		{1.5, 1.5000001, 3, decimals, "1.50000000 1.50000005 1.50000010"},
		{0.05, 1.95, 3, decimals, "0.5 1.0 1.5"},
		{6, 12, 3, decimals, "6 8 10 12"}, // one more than asked for rather than 10 alone
		{-1.5e308, 1.5e308, 3, decimals, "−1e308 0 1e308"},
		{0, 2e-322, 3, decimals, "0"}, // a subnormal step has too few digits
		{0, 2e-306, 3, decimals, "0 1e−306 2e−306"},
		{0, 250000, 4, wholes, "0 100000 200000"},
		{500000, 500976, 5, wholes, "500000 500200 500400 500600 500800"},
		{3, 6, 20, wholes, "3 4 5 6"},
		{0.2, 0.8, 5, wholes, ""},
		{0, math.Pi, 3, multiplesOfPi, "0 π/2 π"},
		{0, math.Pi, 5, multiplesOfPi, "0 π/4 π/2 3π/4 π"},
		{-math.Pi, math.Pi, 3, multiplesOfPi, "−π 0 π"},
		{-math.Pi, math.Pi, 5, multiplesOfPi, "−π −π/2 0 π/2 π"},
		{0, 2 * math.Pi, 5, multiplesOfPi, "0 π/2 π 3π/2 2π"},
		{0, 100, 4, multiplesOfPi, "0 10π 20π 30π"},
		{0, 0.3, 4, multiplesOfPi, "0 0.05π"},
		{1.5, 1.6, 4, multiplesOfPi, "0.48π 0.49π 0.50π"},
	} {
		if got := placed(tt.lo, tt.hi, tt.n, tt.as, false).String(); got != tt.want {
			t.Errorf("[%g, %g], at most %d: ticks %q, want %q", tt.lo, tt.hi, tt.n, got, tt.want)
		}
	}
}

func TestNoTicksWithoutARange(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	for _, r := range [][2]float64{{nan, 1}, {0, nan}, {-inf, 0}, {0, inf}, {1, 1}, {2, 1}, {nan, nan}, {inf, inf}} {
		for _, as := range []numbering{decimals, wholes, multiplesOfPi} {
			if got := placed(r[0], r[1], 5, as, false); len(got.list) != 0 {
				t.Errorf("[%g, %g]: ticks %q, want none", r[0], r[1], got)
			}
		}
	}
}

// parse reads a label back: value, and half a unit of its last digit.
func parse(label string) (value, half float64, err error) {
	s := strings.NewReplacer("−", "-", "π", "pi").Replace(label)
	unit, den := 1.0, 1.0
	if before, after, found := strings.Cut(s, "pi"); found {
		unit = math.Pi
		if after != "" {
			if den, err = strconv.ParseFloat(after[1:], 64); err != nil {
				return 0, 0, err
			}
		}
		if s = before; s == "" || s == "-" {
			s += "1"
		}
	}
	if value, err = strconv.ParseFloat(s, 64); err != nil {
		return 0, 0, err
	}
	digits, exponent, _ := strings.Cut(s, "e")
	if exponent == "" {
		exponent = "0"
	}
	e, err := strconv.Atoi(exponent)
	if err != nil {
		return 0, 0, err
	}
	if _, decimals, found := strings.Cut(digits, "."); found {
		e -= len(decimals)
	}
	half, _ = strconv.ParseFloat(fmt.Sprintf("5e%d", e-1), 64)
	return value * unit / den, half * unit / den, nil
}

type failer interface {
	Helper()
	Fatalf(format string, args ...any)
}

// checkTicks states what holds for the ticks of every range.
func checkTicks(t failer, lo, hi float64, n int, as numbering, ascii bool) {
	t.Helper()
	got := placed(lo, hi, n, as, ascii)
	if len(got.list) > max(0, n)+3 {
		t.Fatalf("[%g, %g]: %d ticks for n = %d", lo, hi, len(got.list), n)
	}
	seen := map[string]bool{}
	for i, k := range got.list {
		label := string(got.label(i))
		switch {
		case !(k.value >= lo && k.value <= hi):
			t.Fatalf("tick %g lies outside [%g, %g]", k.value, lo, hi)
		case i > 0 && !(k.value > got.list[i-1].value):
			t.Fatalf("[%g, %g]: tick %g follows %g", lo, hi, k.value, got.list[i-1].value)
		case seen[label]:
			t.Fatalf("[%g, %g]: label %q twice in %q", lo, hi, label, got)
		case k.width != len([]rune(label)):
			t.Fatalf("label %q: width %d", label, k.width)
		case as == wholes && strings.ContainsAny(label, ".e"):
			t.Fatalf("[%g, %g]: %q is not a whole number in full", lo, hi, label)
		case ascii && k.width != len(label):
			t.Fatalf("label %q is not ASCII", label)
		}
		seen[label] = true
		value, half, err := parse(label)
		if err != nil {
			t.Fatalf("label %q: %v", label, err)
		}
		rounding := 1e-15 * math.Abs(k.value)
		if k.value-lo <= rounding || hi-k.value <= rounding { // moved to the bound, perhaps
			half += slop * 2 * (hi/2 - lo/2)
		}
		if math.Abs(value-k.value) > half+rounding {
			t.Fatalf("[%g, %g]: label %q stands at %v", lo, hi, label, k.value)
		}
	}
}

// anyFloat draws numbers of all sizes, special ones among them.
func anyFloat() *rapid.Generator[float64] {
	return rapid.OneOf(
		rapid.Float64(),
		rapid.Float64Range(-10, 10),
		rapid.SampledFrom([]float64{0, 1, math.Pi, math.NaN(), math.Inf(1), math.Inf(-1), math.MaxFloat64,
			-math.MaxFloat64, math.SmallestNonzeroFloat64, -3 * math.SmallestNonzeroFloat64, 0x1p-1022}),
	)
}

func TestTicksOfAnyRange(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		lo := anyFloat().Draw(t, "lo")
		hi := anyFloat().Draw(t, "hi")
		if rapid.Bool().Draw(t, "narrow") {
			hi = lo + math.Abs(lo)*math.Pow(10, rapid.Float64Range(-17, 0).Draw(t, "log width"))
		}
		checkTicks(t, lo, hi, rapid.IntRange(-1, 20).Draw(t, "n"), numbering(rapid.IntRange(0, 2).Draw(t, "numbering")), rapid.Bool().Draw(t, "ascii"))
	})
}

// An ordinary range gets two ticks at least, without which there is no scale,
// and a third of those that were asked for.
func TestTicksUseTheRoom(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		lo := rapid.Float64Range(-100, 100).Draw(t, "lo")
		hi := lo + math.Pow(10, rapid.Float64Range(-3, 3).Draw(t, "log width"))
		n := rapid.IntRange(2, 20).Draw(t, "n")
		if got := len(placed(lo, hi, n, decimals, false).list); got < max(2, n/3) || got > n+3 {
			t.Fatalf("[%g, %g]: %d ticks, %d asked for", lo, hi, got, n)
		}
	})
}

func FuzzTicks(f *testing.F) {
	f.Add(0.0, 1.0, 5, byte(decimals))
	f.Add(0.0, math.Pi, 5, byte(multiplesOfPi))
	f.Add(math.Inf(-1), math.NaN(), 3, byte(decimals))
	f.Add(-math.MaxFloat64, math.MaxFloat64, 7, byte(multiplesOfPi))
	f.Add(0.0, math.SmallestNonzeroFloat64, 1, byte(decimals))
	f.Add(1.0, math.Nextafter(1, 2), 9, byte(multiplesOfPi))
	f.Add(0.0, 2097151.0, 9, byte(wholes))
	f.Fuzz(func(t *testing.T, lo, hi float64, n int, kind byte) {
		n = min(max(n, -1), 100)
		as := numbering(kind % 3)
		checkTicks(t, lo, hi, n, as, true)
		checkTicks(t, lo, hi, n, as, false)
	})
}
