package model

import (
	"errors"
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"
)

// What one of each laboratory unit is in eV: k_B/e, h/e and hc/e from the values
// that define the SI (CODATA 2018, exact; BIPM, The International System of
// Units, 9th edition, 2019). A frequency in THz or cm-1 stands for hν or hc/λ.
const (
	elementaryCharge = 1.602176634e-19 // C
	planck           = 6.62607015e-34  // J s
	boltzmann        = 1.380649e-23    // J/K
	lightSpeed       = 299792458       // m/s

	kelvinInEV     = boltzmann / elementaryCharge
	terahertzInEV  = planck * 1e12 / elementaryCharge
	wavenumberInEV = planck * lightSpeed * 100 / elementaryCharge
)

// dimension is what a number measures.
type dimension int

const (
	pure   dimension = iota
	energy           // also per unit of the local mode, which has none
	force            // energy per length
	spring           // energy per length²
	length
)

// unit returns what the chain counts such numbers in.
func (d dimension) unit(c Chain) string {
	switch {
	case d == pure:
		return ""
	case d == length:
		return "Å"
	case c.Energy != UnitEV:
		return UnitHopping.String()
	}
	return UnitEV.String() + d.perLength()
}

// perLength returns what stands behind an energy unit.
func (d dimension) perLength() string {
	switch d {
	case force:
		return "/Å"
	case spring:
		return "/Å²"
	}
	return ""
}

// unit is a unit that a number may be given in, worth times/over of the chain's own.
type unit struct {
	name        string
	times, over float64
}

// units returns what this parameter may be given in.
func (p Param) units(c Chain) []unit {
	switch {
	case p.dim == pure:
		return nil
	case p.dim == length:
		return []unit{{"Å", 1, 1}}
	case c.Energy != UnitEV:
		return []unit{{"t", 1, 1}}
	}
	return p.laboratoryUnits(c)
}

// laboratoryUnits returns what an energy, or an energy per length, may be given
// in on a chain in eV. There t is the chain's hopping.
func (p Param) laboratoryUnits(c Chain) []unit {
	per := p.dim.perLength()
	us := []unit{{"eV" + per, 1, 1}, {"meV" + per, 1, 1000}}
	if p.Key != hoppingKey {
		us = append(us, unit{"t" + per, c.Hopping, 1})
	}
	if p.dim == energy {
		us = append(us, unit{"K", kelvinInEV, 1}, unit{"THz", terahertzInEV, 1}, unit{"cm-1", wavenumberInEV, 1})
	}
	return us
}

// read returns the value of a number with or without a unit, in Unit(c).
func (p Param) read(c Chain, text string) (float64, error) {
	refuse := func(why string) (float64, error) {
		return 0, &ParamError{Key: p.Key, Value: quote(text), Want: p.form(c), Why: why}
	}
	value, name, err := readQuantity(text)
	if err != nil {
		return refuse(err.Error())
	}
	if name == "" {
		return value, nil
	}
	for _, u := range p.units(c) {
		if spellUnit(u.name) == spellUnit(name) {
			return value * u.times / u.over, nil
		}
	}
	return refuse(p.wrongUnit(c, name))
}

// wrongUnit says why this parameter is not given in that unit.
func (p Param) wrongUnit(c Chain, name string) string {
	switch {
	case p.dim == pure:
		return "this number has no unit"
	case p.dim != length && c.Energy != UnitEV && isLaboratory(name):
		return "laboratory units need a chain in eV, and this one counts energies in t"
	case p.Key == hoppingKey && name == "t":
		return "t is this very number"
	}
	for _, u := range p.units(c) {
		if strings.EqualFold(spellUnit(u.name), spellUnit(name)) {
			return "small and capital letters differ, write " + u.name
		}
	}
	return "the unit " + quote(name) + " is not one of these"
}

// isLaboratory reports whether some parameter of a chain in eV may be given in
// that unit.
func isLaboratory(name string) bool {
	for _, p := range params {
		for _, u := range p.units(Chain{Energy: UnitEV}) {
			if u.name != "t" && spellUnit(u.name) == spellUnit(name) {
				return true
			}
		}
	}
	return false
}

// form returns how this parameter is written, as a phrase that fits behind "must be".
func (p Param) form(c Chain) string {
	us := p.units(c)
	switch {
	case p.Kind == Whole:
		return p.Range(c)
	case len(us) == 0:
		return "a plain number"
	}
	s := "a number in " + us[0].name
	for i, u := range us[1:] {
		if i == len(us)-2 {
			s += " or " + u.name
		} else {
			s += ", " + u.name
		}
	}
	return s
}

// spellUnit brings the spellings of a unit to one: Å as U+00C5, U+212B, A with a
// combining ring, A, Ang or angstrom; powers as ², ^2 or 2.
func spellUnit(name string) string {
	name = unitSpelling.Replace(name)
	over, under, _ := strings.Cut(name, "/")
	return spellLength(over) + "/" + spellLength(under)
}

var unitSpelling = strings.NewReplacer("\u212b", "Å", "A\u030a", "Å", "²", "2", "⁻¹", "-1", "^", "", " ", "")

func spellLength(s string) string {
	for _, long := range []string{"angstrom", "Ang", "A"} {
		if power, found := strings.CutPrefix(s, long); found {
			return "Å" + power
		}
	}
	return s
}

// maxQuantity is the longest text that is read as a number.
const maxQuantity = 200

var (
	decimal          = regexp.MustCompile(`^(\d+\.?\d*|\.\d+)([eE][+-]?\d+)?`)
	quantitySpelling = strings.NewReplacer("−", "-", "π", "pi", "·", "*", "×", "*", "\u00a0", " ", "\u202f", " ")

	errTooLarge = errors.New("the number is too large")
	errTooSmall = errors.New("the number is too small to be told from zero")
)

// readQuantity splits text into a number and the unit behind it, "" if there is
// none. The number is
//
//	[sign] ( decimal [[*] pi] | pi ) [/ decimal]
//
// and always finite; the unit is whatever follows.
func readQuantity(text string) (value float64, unit string, err error) {
	if len(text) > maxQuantity {
		return 0, "", fmt.Errorf("a number has at most %d characters", maxQuantity)
	}
	s := strings.TrimSpace(quantitySpelling.Replace(text))
	sign := 1.0
	if rest, minus := strings.CutPrefix(s, "-"); minus {
		sign, s = -1, strings.TrimSpace(rest)
	} else {
		s = strings.TrimSpace(strings.TrimPrefix(s, "+"))
	}
	rest, isPi := cutPi(s)
	if isPi {
		value, s = math.Pi, rest
	} else {
		if value, s, err = readDecimal(s); err != nil {
			return 0, "", err
		}
		after, times := strings.CutPrefix(strings.TrimSpace(s), "*")
		if rest, isPi = cutPi(strings.TrimSpace(after)); isPi {
			value, s = value*math.Pi, rest
		} else if times {
			return 0, "", errors.New("only pi may follow a *")
		}
	}
	if under, fraction := strings.CutPrefix(strings.TrimSpace(s), "/"); fraction {
		var divisor float64
		if divisor, s, err = readDecimal(strings.TrimSpace(under)); err != nil {
			return 0, "", err
		}
		if divisor == 0 {
			return 0, "", errors.New("nothing can be divided by zero")
		}
		if value != 0 && value/divisor == 0 {
			return 0, "", errTooSmall
		}
		value /= divisor
	}
	switch {
	case math.IsInf(value, 0):
		return 0, "", errTooLarge
	case strings.HasPrefix(s, ","):
		return 0, "", errors.New("decimals are written with a point")
	}
	return sign * value, strings.TrimSpace(s), nil
}

// cutPi removes a pi that is not the beginning of a longer word.
func cutPi(s string) (rest string, found bool) {
	rest, found = strings.CutPrefix(s, "pi")
	if !found || (rest != "" && !strings.ContainsAny(rest[:1], " /*")) {
		return s, false
	}
	return rest, true
}

// readDecimal reads the decimal number that s begins with.
func readDecimal(s string) (value float64, rest string, err error) {
	digits := decimal.FindString(s)
	if digits == "" {
		lower := strings.ToLower(s)
		switch {
		case s == "":
			return 0, s, errors.New("there is no number")
		case strings.HasPrefix(lower, "inf"), strings.HasPrefix(lower, "nan"):
			return 0, s, errors.New("only finite numbers are accepted")
		}
		return 0, s, fmt.Errorf("%s is not a number", quote(s))
	}
	value, err = strconv.ParseFloat(digits, 64)
	if err != nil {
		return 0, s, errTooLarge
	}
	mantissa, _, _ := strings.Cut(strings.ToLower(digits), "e")
	if value == 0 && strings.ContainsAny(mantissa, "123456789") {
		return 0, s, errTooSmall
	}
	return value, s[len(digits):], nil
}
