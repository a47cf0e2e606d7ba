package model

import (
	"fmt"
	"strings"
)

// Set returns the chain after one assignment such as "temperature=300 K",
// "electrons.filling=1/3" or "bond_phonon=off". See SetAll.
func Set(c Chain, assignment string) (Chain, error) { return SetAll(c, []string{assignment}) }

// SetAll makes assignments "key=value" in turn and then asks whether the chain
// is valid, so that numbers which depend on each other can be set together. Keys
// are those of FindParam. "bond_phonon=off" and "site_phonon=off" take a branch
// away; "on" brings one with a stiffness of 1 in the chain's own unit and no
// coupling; setting one of its numbers brings it as well. A unit t means the
// hopping at that point. On error c comes back, with a *KeyError or *ParamError
// where a parameter is to blame.
func SetAll(c Chain, assignments []string) (Chain, error) {
	next := c
	counts := map[string]bool{}
	for _, a := range assignments {
		key, value, found := strings.Cut(a, "=")
		if !found {
			return c, fmt.Errorf("%s is not an assignment; write key=value, such as temperature=0.1", quote(a))
		}
		key = strings.TrimSpace(key)
		if branch := phononByTable(&next, key); branch != nil {
			if err := switchPhonon(branch, key, strings.TrimSpace(value)); err != nil {
				return c, err
			}
			continue
		}
		p, err := FindParam(key)
		if err != nil {
			return c, err
		}
		if p.derived != nil {
			counts[p.Key] = true
		}
		if len(counts) > 1 {
			return c, errBothCounts
		}
		if err := p.assignText(&next, value); err != nil {
			return c, err
		}
	}
	if err := next.Validate(); err != nil {
		return c, err
	}
	return next, nil
}

// phononByTable returns the branch that the table of a chain file describes, or nil.
func phononByTable(c *Chain, table string) *Phonon {
	switch table {
	case "bond_phonon":
		return &c.Bond
	case "site_phonon":
		return &c.Site
	}
	return nil
}

// switchPhonon takes a branch away or brings it.
func switchPhonon(branch *Phonon, key, value string) error {
	switch {
	case value == "off":
		*branch = Phonon{}
	case value == "on" && !branch.Present:
		*branch = Phonon{Present: true, Stiffness: 1}
	case value != "on":
		return &ParamError{Key: key, Value: quote(value), Want: `"on" or "off"`, Why: "its numbers are " + key + ".coupling, .stiffness and .frequency"}
	}
	return nil
}
