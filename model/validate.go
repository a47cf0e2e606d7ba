package model

import (
	"fmt"
	"unicode/utf8"
)

// Limits that keep every answer computable. They lie far outside what anybody
// would call a chain.
const (
	// MaxSites is the longest chain: a relaxation then takes minutes and under 1 GB.
	MaxSites = 1 << 21
	// MinMagnitude is the smallest number that is told from zero, MaxMagnitude
	// the largest. Products such as g²/K_s then stay within 1e-33..1e30.
	MinMagnitude = 1e-12
	MaxMagnitude = 1e9
	// MaxText is the longest title or source, in bytes.
	MaxText = 4096
)

// Validate returns nil, or a *ParamError for the first parameter, in the order
// of Params, that cannot have its value. A valid chain has one form only: the
// numbers of a branch that is not there are zero, and so is the one of Filling
// and Electrons that is not used.
func (c Chain) Validate() error {
	for _, p := range params {
		if err := p.check(c); err != nil {
			return err
		}
	}
	return nil
}

// check returns nil, or a *ParamError if the chain cannot have this value.
func (p Param) check(c Chain) error {
	if p.Kind == Text {
		return p.checkText(c)
	}
	if !p.Given(c) {
		p.derived = nil // look at the field itself
		if v := p.Get(c); v != 0 {
			return &ParamError{Key: p.Key, Value: plain(v), Want: "0 where it is not used"}
		}
		return nil
	}
	v := p.Get(c)
	if p.accepts(c, v) {
		return nil
	}
	e := p.refuse(c, plain(v))
	if unit := p.Unit(c); unit != "" {
		e.Value += " " + unit
	}
	if v < 0 {
		e.Why = p.sign
	}
	return e
}

func (p Param) checkText(c Chain) error {
	text := p.Format(c)
	switch {
	case !utf8.ValidString(text):
		return p.refuse(c, quote(text))
	case len(text) > MaxText:
		return p.refuse(c, fmt.Sprintf("%d bytes", len(text)))
	}
	return nil
}
