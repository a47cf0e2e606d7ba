package model

import (
	"errors"
	"fmt"
	"io"
	"strconv"
	"strings"
)

// MaxFile is the largest chain file that is read, in bytes; the longest titles
// with every byte escaped fit in.
const MaxFile = 1 << 16

// maxKeys bounds the work of finding the places of keys; it is more than params has.
const maxKeys = 100

var (
	errTooLong    = fmt.Errorf("this is longer than %d bytes, while a chain file takes about two thousand", MaxFile)
	errEmpty      = errors.New("there is nothing in it; a chain file needs at least energy, chain.sites, electrons.hopping and electrons.filling")
	errBothCounts = errors.New("electrons.filling and electrons.electrons exclude each other; give one of them")
	errNoCount    = errors.New("the number of electrons is missing; give electrons.filling (electrons per site) or electrons.electrons (a whole number)")
)

// Read reads a chain file from r; name is what errors call it.
func Read(r io.Reader, name string) (Chain, error) {
	data, err := io.ReadAll(io.LimitReader(r, MaxFile+1))
	if err != nil {
		return Chain{}, fmt.Errorf("%s: %w", name, err)
	}
	return Decode(data, name)
}

// Decode reads a chain file: TOML 1.0 with the keys of Params, in which a number
// may also be text with a unit. All keys are optional but energy, chain.sites,
// electrons.hopping, one of electrons.filling and electrons.electrons, and the
// coupling and stiffness of a phonon whose table is there. The chain is valid.
// Errors are *FileError: one sentence with the place, around a *ParamError or
// *KeyError where a parameter is to blame.
func Decode(data []byte, name string) (Chain, error) {
	doc, err := readDocument(data, name)
	if err != nil {
		return Chain{}, err
	}
	for _, e := range doc.entries {
		if err := e.known(); err != nil {
			return Chain{}, doc.fail(e.key, err)
		}
	}
	c := Chain{Spin: 2}
	if doc.value("energy") == nil {
		return Chain{}, doc.complete(c) // before units are read that depend on it
	}
	for _, key := range append([]string{"energy", hoppingKey}, doc.keys()...) { // the units eV and t first
		if err := doc.assign(&c, key); err != nil {
			return Chain{}, err
		}
	}
	if err := doc.complete(c); err != nil {
		return Chain{}, err
	}
	if err := c.Validate(); err != nil {
		var bad *ParamError
		errors.As(err, &bad)
		return Chain{}, doc.fail(bad.Key, err)
	}
	return c, nil
}

// known returns nil, or the error for a key that no parameter has.
func (e entry) known() error {
	for _, p := range params {
		if p.Key == e.key {
			return nil
		}
	}
	if _, isTable := e.value.(map[string]any); isTable {
		var names []string
		for _, t := range tableDocs {
			names = append(names, t.name)
		}
		return fmt.Errorf("there is no table [%s]; the nearest is [%s]", strings.Trim(quote(e.key), `"`), Nearest(e.key, names))
	}
	return unknownKey(e.key, nil)
}

// assign sets the parameter with that key if the document has it.
func (doc *document) assign(c *Chain, key string) error {
	v := doc.value(key)
	if v == nil {
		return nil
	}
	p, err := FindParam(key)
	if err == nil {
		err = p.assignValue(c, v)
	}
	if err != nil {
		return doc.fail(key, err)
	}
	return nil
}

// complete returns nil, or the error for what is missing or given twice over.
func (doc *document) complete(c Chain) error {
	for _, p := range params {
		isPhonon := phononByTable(&c, p.table()) != nil
		if !p.required || doc.value(p.Key) != nil || (isPhonon && !doc.tables[p.table()]) {
			continue
		}
		err := &ParamError{Key: p.Key, Want: p.Range(c)}
		if isPhonon {
			err.Why = "a phonon has a coupling and a stiffness, or no table"
		}
		return doc.missing(p.table(), err)
	}
	filling, electrons := doc.value("electrons.filling"), doc.value("electrons.electrons")
	switch {
	case filling != nil && electrons != nil:
		return doc.fail("electrons.electrons", errBothCounts)
	case filling == nil && electrons == nil:
		return doc.missing("electrons", errNoCount)
	}
	return nil
}

// assignValue sets the field to what a file holds.
func (p Param) assignValue(c *Chain, value any) error {
	text, isText := value.(string)
	switch v := value.(type) {
	case int64:
		if p.Kind == Number || p.Kind == Whole {
			return p.assign(c, float64(v))
		}
	case float64:
		if p.Kind == Number || p.Kind == Whole {
			return p.assign(c, v)
		}
	}
	if !isText {
		return p.refuse(*c, describe(value))
	}
	return p.assignText(c, text)
}

// describe names a value in a message.
func describe(value any) string {
	switch v := value.(type) {
	case string:
		return quote(v)
	case int64:
		return strconv.FormatInt(v, 10)
	case float64:
		return plain(v)
	case bool:
		return strconv.FormatBool(v)
	case []any:
		return "a list"
	case map[string]any:
		return "a table"
	}
	return "a date or time"
}
