package report

import (
	"math"
	"strconv"
	"strings"
)

// Digits prints v with at most sig significant digits and none finer than
// grain: what is smaller than half the grain is "0". It never prints NaN; ±Inf
// is "∞".
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
		sig = max(1, min(sig, int(math.Floor(math.Log10(math.Abs(v)/grain)))+1))
	}
	s := strconv.FormatFloat(v, 'e', sig-1, 64)
	mantissa, exp, _ := strings.Cut(s, "e")
	e, _ := strconv.Atoi(exp)
	if e < -4 || e > 6 {
		return strings.Replace(trimZeros(mantissa), "-", "−", 1) + "e" + strings.Replace(strconv.Itoa(e), "-", "−", 1)
	}
	return strings.Replace(trimZeros(strconv.FormatFloat(v, 'f', max(0, sig-1-e), 64)), "-", "−", 1)
}

func trimZeros(s string) string {
	if !strings.Contains(s, ".") {
		return s
	}
	return strings.TrimRight(strings.TrimRight(s, "0"), ".")
}
