package report

import (
	"math"
	"strconv"
	"strings"
)

// Digits prints v rounded to at most sig ≥ 1 significant digits, none of them
// finer than the first digit of grain; what is smaller than half the grain is
// "0". Very large and very small numbers get an exponent. It never prints NaN
// ("–"); ±Inf is "∞".
func Digits(v, grain float64, sig int) string {
	switch {
	case math.IsNaN(v):
		return "–"
	case math.IsInf(v, 1):
		return "∞"
	case math.IsInf(v, -1):
		return "−∞"
	case v == 0 || math.Abs(v) < grain/2:
		return "0"
	}
	if grain > 0 {
		_, first := scientific(grain, 1)
		_, leading := scientific(v, 17)
		if leading < first { // above half the grain: it rounds to one of it
			v, leading = math.Copysign(math.Pow10(first), v), first
		}
		sig = min(sig, leading-first+1)
	}
	mantissa, exponent := scientific(v, sig)
	if exponent < -4 || exponent > 6 {
		return minus(trimZeros(mantissa) + "e" + strconv.Itoa(exponent))
	}
	rounded, _ := strconv.ParseFloat(mantissa+"e"+strconv.Itoa(exponent), 64) // no digits left before the point either
	return minus(trimZeros(strconv.FormatFloat(rounded, 'f', max(0, sig-1-exponent), 64)))
}

// scientific rounds v to sig digits and returns mantissa and decimal exponent.
func scientific(v float64, sig int) (mantissa string, exponent int) {
	mantissa, e, _ := strings.Cut(strconv.FormatFloat(v, 'e', sig-1, 64), "e")
	exponent, _ = strconv.Atoi(e)
	return mantissa, exponent
}

func minus(s string) string { return strings.ReplaceAll(s, "-", "−") }

func trimZeros(s string) string {
	if !strings.Contains(s, ".") {
		return s
	}
	return strings.TrimRight(strings.TrimRight(s, "0"), ".")
}
