package model

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
)

// Kind is the kind of value that a parameter takes.
type Kind int

const (
	Number Kind = iota // a real number, often with a unit
	Whole              // a whole number
	Word               // one of Param.Words
	Text               // free text
)

// Param is one parameter of a chain: how the file, an assignment on the
// command line and a knob name it, read it and change it. The table behind
// Params is the only place where parameters are listed.
type Param struct {
	Key    string   // as in a chain file, such as "electrons.hopping"
	Symbol string   // the trade's letter for it
	ASCII  string   // Symbol for terminals without Unicode
	Kind   Kind     // what it takes
	Words  []string // the choices of a Word, in the order that Get numbers them
	Doc    string   // what it is

	dim      dimension
	field    func(*Chain) any // pointer to the field that holds the value
	given    func(Chain) bool // whether this chain has the field; nil: always
	choose   func(*Chain)     // makes the chain have the field; nil: nothing to do
	derived  func(Chain) float64
	step     stepper
	required bool // a file must say it (for a phonon: if its table is there)

	least    float64             // with upper: the lowest value
	upper    func(Chain) float64 // the highest value; nil: zero or MinMagnitude..MaxMagnitude
	positive bool                // zero is not accepted
	signed   bool                // negative numbers are accepted
	sign     string              // why a negative number is not
}

// Params returns every parameter, in the order of a chain file.
func Params() []Param { return slices.Clone(params) }

// FindParam returns the parameter with the given key: the full one
// ("electrons.hopping") or its last part where only one parameter has it
// ("hopping"). The error is a *KeyError.
func FindParam(key string) (Param, error) {
	var named []Param
	for _, p := range params {
		if p.Key == key {
			return p, nil
		}
		if p.name() == key {
			named = append(named, p)
		}
	}
	if len(named) == 1 {
		return named[0], nil
	}
	return Param{}, unknownKey(key, named)
}

// table returns the part of the key before the dot, "" at the top of a file.
func (p Param) table() string {
	if table, _, dotted := strings.Cut(p.Key, "."); dotted {
		return table
	}
	return ""
}

// name returns the part of the key after the dot.
func (p Param) name() string { return p.Key[strings.LastIndexByte(p.Key, '.')+1:] }

// Given reports whether the chain states this parameter itself. It is false for
// a phonon branch that is not there, and for the one of filling and electrons
// that follows from the other.
func (p Param) Given(c Chain) bool { return p.given == nil || p.given(c) }

// Get returns the value in Unit(c): the number, or the position in Words of a
// word. What is not there, and text, is 0.
func (p Param) Get(c Chain) float64 {
	if p.derived != nil && !p.Given(c) {
		return p.derived(c)
	}
	switch v := p.field(&c).(type) {
	case *float64:
		return *v
	case *int:
		return float64(*v)
	case *EnergyUnit:
		return float64(*v)
	case *Boundary:
		return float64(*v)
	}
	return 0
}

// With returns the chain with this parameter set to v, in Unit(c). A parameter
// of a phonon branch that is not there brings the branch; filling and electrons
// replace each other. If the outcome is not a valid chain, c comes back with a
// *ParamError.
func (p Param) With(c Chain, v float64) (Chain, error) {
	next := c
	err := p.assign(&next, v)
	if err == nil {
		err = next.Validate()
	}
	if err != nil {
		return c, err
	}
	return next, nil
}

// Parse is With for a value as a person types it, with or without a unit. All
// that Format writes is read back as it was.
func (p Param) Parse(c Chain, text string) (Chain, error) {
	next := c
	err := p.assignText(&next, text)
	if err == nil {
		err = next.Validate()
	}
	if err != nil {
		return c, err
	}
	return next, nil
}

// Format returns the value as text without its unit, with as many digits as it
// takes to read the same value back. What is not there is "".
func (p Param) Format(c Chain) string {
	if p.derived == nil && !p.Given(c) {
		return ""
	}
	switch v := p.Get(c); p.Kind {
	case Text:
		return *p.field(&c).(*string)
	case Word:
		return p.word(v)
	default:
		return plain(v)
	}
}

// assign sets the field to v without asking whether the chain is then valid.
func (p Param) assign(c *Chain, v float64) error {
	whole := v == math.Trunc(v) && math.Abs(v) <= math.MaxInt32
	if p.Kind == Text || math.IsNaN(v) || math.IsInf(v, 0) || (p.Kind != Number && !whole) {
		return p.refuse(*c, plain(v))
	}
	if p.choose != nil {
		p.choose(c)
	}
	switch f := p.field(c).(type) {
	case *float64:
		*f = v
	case *int:
		*f = int(v)
	case *EnergyUnit:
		*f = EnergyUnit(v)
	case *Boundary:
		*f = Boundary(v)
	}
	return nil
}

// assignText is assign for text.
func (p Param) assignText(c *Chain, text string) error {
	switch p.Kind {
	case Text:
		*p.field(c).(*string) = text
		return nil
	case Word:
		text = strings.TrimSpace(text)
		i := slices.Index(p.Words, text)
		if i < 0 {
			return p.refuse(*c, quote(text))
		}
		return p.assign(c, float64(i))
	}
	v, err := p.read(*c, text)
	if err != nil {
		return err
	}
	fixed := p.upper == nil // the range does not depend on what else will be set
	if (p.Kind == Whole && v != math.Trunc(v)) || (fixed && !p.accepts(*c, v)) {
		e := p.refuse(*c, quote(text))
		if v < 0 {
			e.Why = p.sign
		}
		return e
	}
	return p.assign(c, v)
}

// word returns the choice with the given number.
func (p Param) word(v float64) string {
	if v < 0 || v >= float64(len(p.Words)) {
		return plain(v)
	}
	return p.Words[int(v)]
}

// Unit returns what the number is in for this chain, "" for a plain number.
func (p Param) Unit(c Chain) string { return p.dim.unit(c) }

// Range returns what this chain accepts, as a phrase that fits behind "must be".
func (p Param) Range(c Chain) string {
	switch {
	case p.Kind == Text:
		return fmt.Sprintf("text in UTF-8 of at most %d bytes", MaxText)
	case p.Kind == Word:
		return `"` + strings.Join(p.Words, `" or "`) + `"`
	case p.upper != nil && p.upper(c) == p.least+1 && p.Kind == Whole:
		return plain(p.least) + " or " + plain(p.upper(c))
	case p.Kind == Whole:
		return fmt.Sprintf("a whole number from %s to %s", plain(p.least), plain(p.upper(c)))
	case p.upper != nil:
		return fmt.Sprintf("a number from %s to %s", plain(p.least), plain(p.upper(c)))
	}
	unit := p.Unit(c)
	if unit != "" {
		unit = " " + unit
	}
	span := plain(MinMagnitude) + " to " + plain(MaxMagnitude) + unit
	switch {
	case p.positive:
		return "a number from " + span
	case p.signed:
		return "0 or a number of size " + span + " with either sign"
	}
	return "0 or a number from " + span
}

// accepts reports whether v is in Range.
func (p Param) accepts(c Chain, v float64) bool {
	size := math.Abs(v)
	switch {
	case math.IsNaN(v):
		return false
	case p.Kind == Word:
		return v >= 0 && v < float64(len(p.Words))
	case p.upper != nil:
		return v >= p.least && v <= p.upper(c)
	case v == 0:
		return !p.positive
	case v < 0 && !p.signed:
		return false
	}
	return size >= MinMagnitude && size <= MaxMagnitude
}

// refuse returns the error for a value that is not in Range.
func (p Param) refuse(c Chain, value string) *ParamError {
	return &ParamError{Key: p.Key, Value: value, Want: p.Range(c)}
}

// plain writes a number with as few characters as read the same number back.
func plain(v float64) string {
	if v == math.Trunc(v) && math.Abs(v) < 1e8 {
		return strconv.FormatFloat(v, 'f', -1, 64)
	}
	return shortExponent.Replace(strconv.FormatFloat(v, 'g', -1, 64))
}

var shortExponent = strings.NewReplacer("e+0", "e", "e-0", "e-", "e+", "e")
