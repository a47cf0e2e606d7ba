package plot

import (
	"math"
	"strconv"
)

// tick is one labelled place on an axis.
type tick struct {
	value    float64
	from, to int // its label is ticks.text[from:to]
	width    int // columns of the label
}

// ticks are the labelled places of an axis, ascending. The memory is reused.
type ticks struct {
	list  []tick
	text  []byte
	ascii bool
}

func (t *ticks) label(i int) []byte { return t.text[t.list[i].from:t.list[i].to] }

// widest returns the columns of the longest label.
func (t *ticks) widest() int {
	n := 0
	for _, k := range t.list {
		n = max(n, k.width)
	}
	return n
}

// slop is how far, in steps or ranges, whichever is shorter, a tick may lie
// outside: a computed bound such as 1.9999999999999996 still gets its tick. The
// value is then moved to the bound, which no raster can tell apart.
const slop = 1e-6

// countable bounds the multiples of a step, so that they stay exact integers
// and the step stays above the rounding of the values.
const countable = 1e15

// multiples returns the integers i with lo ≤ i·step ≤ hi as first and last;
// none (last < first) if they could not be told apart in floating point.
func multiples(lo, hi, step float64) (first, last float64) {
	lo, hi = lo/step, hi/step
	out := slop * min(1, hi-lo)
	first, last = math.Ceil(lo-out), math.Floor(hi+out)
	if !finite(step) || !(math.Abs(first) <= countable && math.Abs(last) <= countable) {
		return 0, -1
	}
	return first, last
}

// numbering is which multiples are ticks and how they are written.
type numbering uint8

const (
	decimals numbering = iota
	wholes             // whole numbers, in full
	multiplesOfPi
)

// place fills t with at most n ticks of [lo, hi] and prefers as many of them
// as possible. If that leaves a single one, it takes the next finer step, with
// at most n+3. Steps are 1, 2 or 5 times a power of ten or, for multiples of π, π
// times those and its halves, quarters and eighths. Anything but finite
// lo < hi, or n < 1, gives no ticks.
func (t *ticks) place(lo, hi float64, n int, as numbering, ascii bool) {
	t.list, t.text, t.ascii = t.list[:0], t.text[:0], ascii
	least := minExponent
	switch {
	case !(lo < hi) || !finite(lo) || !finite(hi) || n < 1:
		return
	case as == multiplesOfPi:
		t.placePi(lo, hi, n)
		return
	case as == wholes:
		least = 0
	}
	if m, e, ok := decimalStep(lo, hi, n, least); ok {
		t.decimal(lo, hi, m, e, as == wholes, "")
	}
}

// placePi is place for a step of π/8, π/4, π/2 or π. A shorter range gets
// decimal fractions of π, a longer one multiples.
func (t *ticks) placePi(lo, hi float64, n int) {
	ulo, uhi := lo/math.Pi, hi/math.Pi
	count := func(den int) int {
		first, last := multiples(ulo, uhi, 1/float64(den))
		return int(last - first + 1)
	}
	const finest = 8
	den := finest
	for den > 0 && count(den) > n {
		den /= 2
	}
	if den == 0 || den == finest && count(den) < 2 {
		least := 0
		if den > 0 {
			least = minExponent
		}
		if m, e, ok := decimalStep(ulo, uhi, n, least); ok {
			t.decimal(ulo, uhi, m, e, false, t.pi())
		}
		for i := range t.list {
			k := &t.list[i]
			k.value = min(max(k.value*math.Pi, lo), hi)
		}
		return
	}
	if n > 1 && den < finest && count(den) < 2 {
		den *= 2
	}
	first, last := multiples(ulo, uhi, 1/float64(den))
	for i := first; i <= last; i++ {
		t.add(min(max(i/float64(den)*math.Pi, lo), hi))
		t.fraction(int64(i), int64(den))
		t.end()
	}
}

func (t *ticks) pi() string {
	if t.ascii {
		return "pi"
	}
	return "π"
}

// minExponent is the smallest power of ten that a float64 holds in full precision.
const minExponent = -307

// decimalStep returns the step m·10^e, m = 1, 2 or 5 and e ≥ least, that puts
// the most ticks, but no more than n (or n+3, if otherwise there were only
// one), into [lo, hi].
func decimalStep(lo, hi float64, n, least int) (m, e int, ok bool) {
	start := minExponent
	if half := hi/2 - lo/2; half > 0 { // hi − lo could overflow
		_, binary := math.Frexp(half) // math.Log10 is wrong for subnormals
		start = int(math.Floor(float64(binary-1)*math.Log10(2)-math.Log10(float64(n)/2))) - 1
	}
	start = max(start, least)
	fm, fe, finer := 0, 0, false
	for e = start; e <= start+4 && e <= 308; e++ {
		for _, m = range [...]int{1, 2, 5} {
			first, last := multiples(lo, hi, shift(float64(m), e))
			switch count := last - first + 1; {
			case count < 1:
			case count > float64(n+3):
			case count > float64(n):
				fm, fe, finer = m, e, true
			case count == 1 && finer && n > 1:
				return fm, fe, true
			default:
				return m, e, true
			}
		}
	}
	return fm, fe, finer && n > 1
}

// shift returns v·10^e, rounded once or nearly so.
func shift(v float64, e int) float64 {
	if e >= 0 {
		return v * math.Pow10(e)
	}
	return v / math.Pow10(-e)
}

// decimal adds the multiples of m·10^e in [lo, hi], each label followed by unit;
// large and small ones are written with an exponent unless they are wanted in full.
func (t *ticks) decimal(lo, hi float64, m, e int, full bool, unit string) {
	first, last := multiples(lo, hi, shift(float64(m), e))
	most := int64(max(math.Abs(first), math.Abs(last))) * int64(m)
	exponent := e + digits(most) - 1 // of the largest label
	scientific := !full && (exponent >= 5 || exponent <= -5)
	for i := first; i <= last; i++ {
		mantissa := int64(i) * int64(m)
		t.add(min(max(shift(float64(mantissa), e), lo), hi))
		switch {
		case mantissa == 0:
			t.text = append(t.text, '0')
		case scientific:
			t.number(mantissa, e-exponent)
			t.text = append(t.text, 'e')
			t.number(int64(exponent), 0)
			t.text = append(t.text, unit...)
		case unit != "" && e == 0 && (mantissa == 1 || mantissa == -1):
			t.sign(mantissa)
			t.text = append(t.text, unit...)
		default:
			t.number(mantissa, e)
			t.text = append(t.text, unit...)
		}
		t.end()
	}
}

// fraction writes i/den of π in lowest terms; den is a power of two.
func (t *ticks) fraction(i, den int64) {
	for den > 1 && i&1 == 0 {
		i, den = i/2, den/2
	}
	switch i {
	case 0:
		t.text = append(t.text, '0')
		return
	case 1, -1:
		t.sign(i)
	default:
		t.number(i, 0)
	}
	t.text = append(t.text, t.pi()...)
	if den > 1 {
		t.text = append(t.text, '/')
		t.text = strconv.AppendInt(t.text, den, 10)
	}
}

func (t *ticks) add(v float64) {
	t.list = append(t.list, tick{value: v, from: len(t.text)})
}

func (t *ticks) end() {
	k := &t.list[len(t.list)-1]
	k.to = len(t.text)
	for _, b := range t.text[k.from:] {
		if b&0xc0 != 0x80 {
			k.width++
		}
	}
}

func (t *ticks) sign(v int64) {
	switch {
	case v >= 0:
	case t.ascii:
		t.text = append(t.text, '-')
	default:
		t.text = append(t.text, "−"...)
	}
}

// number writes mantissa·10^e in plain decimals, all of them significant.
func (t *ticks) number(mantissa int64, e int) {
	t.sign(mantissa)
	if mantissa < 0 {
		mantissa = -mantissa
	}
	for pad := max(0, -e-digits(mantissa)+1); pad > 0; pad-- {
		t.text = append(t.text, '0')
	}
	t.text = strconv.AppendInt(t.text, mantissa, 10)
	for ; e > 0; e-- {
		t.text = append(t.text, '0')
	}
	if e < 0 {
		t.text = append(t.text, 0)
		point := len(t.text) - 1 + e
		copy(t.text[point+1:], t.text[point:])
		t.text[point] = '.'
	}
}

// digits counts the decimal digits of v ≥ 0, at least one.
func digits(v int64) int {
	n := 1
	for ; v >= 10; v /= 10 {
		n++
	}
	return n
}
