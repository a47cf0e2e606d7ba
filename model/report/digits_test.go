package report_test

import (
	"math"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"example.org/twokf/model/report"
)

func TestDigits(t *testing.T) {
	inf := math.Inf(1)
	for _, x := range []struct {
		v, grain float64
		sig      int
		want     string
	}{
		{math.Pi, 0, 6, "3.14159"},
		{math.Pi, 0, 1, "3"},
		{math.Pi, 0.01, 6, "3.14"},
		{math.Pi, 0.02, 6, "3.14"},
		{math.Pi, 0.5, 6, "3.1"},
		{math.Pi, 1, 6, "3"},
		{math.Pi, 10, 6, "0"},
		{6, 10, 6, "10"}, // rounds to one grain
		{-6, 10, 6, "−10"},
		{4.9, 10, 6, "0"},
		{0.06, 0.1, 6, "0.1"},
		{-math.E, 0, 4, "−2.718"},
		{1, 0, 6, "1"},
		{1, 1e-10, 6, "1"},
		{0.5, 0, 6, "0.5"},
		{0, 0, 6, "0"},
		{0, 1, 6, "0"},
		{math.Copysign(0, -1), 0, 6, "0"},
		{1e-13, 1e-10, 6, "0"},
		{-1e-13, 1e-10, 6, "0"},
		{1e-13, 0, 6, "1e−13"},
		{1.6e-10, 1e-10, 6, "2e−10"},
		{6e-11, 1e-10, 6, "1e−10"},
		{-1.2345e-9, 1e-12, 6, "−1.235e−9"},
		{-1.2345e-9, 1e-11, 6, "−1.23e−9"},
		{0.00012345678, 0, 6, "0.000123457"},
		{0.000012345678, 0, 6, "1.23457e−5"},
		{0.00009999999, 0, 3, "0.0001"}, // rounding carries it across the border
		{9.99999, 0, 3, "10"},
		{0.999, 0, 2, "1"},
		{1234.5678, 0, 6, "1234.57"},
		{1234.5678, 0, 2, "1200"}, // two digits, not four
		{1234.5678, 100, 6, "1200"},
		{1000, 1, 6, "1000"},
		{1234567, 0, 6, "1234570"},
		{9999999, 0, 6, "1e7"},
		{12345678, 0, 6, "1.23457e7"},
		{-1e300, 0, 6, "−1e300"},
		{5e-324, 0, 6, "4.94066e−324"},
		{inf, 0, 6, "∞"},
		{inf, 1, 6, "∞"},
		{-inf, 0, 6, "−∞"},
		{math.NaN(), 0, 6, "–"},
	} {
		if got := report.Digits(x.v, x.grain, x.sig); got != x.want {
			t.Errorf("Digits(%v, %v, %d) = %q, expected %q", x.v, x.grain, x.sig, got, x.want)
		}
	}
}

// What is printed is the number to within half a unit of its last digit, with no
// more digits than asked for and none below the grain's first.
func TestDigitsAreTheNumber(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		size := rapid.Map(rapid.Float64Range(-20, 20), func(e float64) float64 { return math.Pow(10, e) })
		v := size.Draw(t, "size") * rapid.SampledFrom([]float64{1, -1}).Draw(t, "sign")
		grain := rapid.OneOf(rapid.Just(0.0), rapid.Map(rapid.Float64Range(-12, 3), func(e float64) float64 { return math.Abs(v) * math.Pow(10, e) })).Draw(t, "grain")
		sig := rapid.IntRange(1, 12).Draw(t, "digits")
		text := report.Digits(v, grain, sig)
		plain := strings.ReplaceAll(text, "−", "-")
		got, err := strconv.ParseFloat(plain, 64)
		if err != nil {
			t.Fatal(err)
		}
		mantissa, _, _ := strings.Cut(strings.TrimPrefix(plain, "-"), "e")
		digits := strings.Trim(strings.Replace(mantissa, ".", "", 1), "0")
		if len(digits) > sig {
			t.Errorf("%s has %d digits, %d asked for", text, len(digits), sig)
		}
		unit := math.Pow(10, math.Floor(math.Log10(math.Abs(v)))-float64(sig)+1)
		if unit < grain {
			unit = math.Pow(10, math.Floor(math.Log10(grain)*(1+1e-15))) * 10 // the decade of the grain, wherever rounding puts it
		}
		if math.Abs(got-v) > 0.5*unit*(1+1e-9) {
			t.Errorf("%s stands for %v, known to %v", text, v, grain)
		}
		if math.Abs(v) < grain/2 != (got == 0) {
			t.Errorf("%s stands for %v, known to %v", text, v, grain)
		}
	})
}
