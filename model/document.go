package model

import (
	"bytes"
	"cmp"
	"errors"
	"fmt"
	"slices"
	"strings"

	"github.com/pelletier/go-toml/v2"
)

// document is a chain file in the order in which it is written.
type document struct {
	name    string
	data    []byte
	entries []entry
	tables  map[string]bool // headings of Params that are there
}

// entry is one key with its value and its place, line 0 where that is not known.
type entry struct {
	key    string // with its table
	value  any    // as go-toml decodes it
	line   int
	column int
}

// readDocument takes a chain file apart. It knows the tables of Params, not
// their keys.
func readDocument(data []byte, name string) (*document, error) {
	if len(data) > MaxFile {
		return nil, &FileError{Name: name, Err: errTooLong}
	}
	data = bytes.TrimPrefix(data, []byte("\ufeff"))
	doc := &document{name: name, data: data, tables: map[string]bool{}}
	if err := checkText(data, name); err != nil {
		return nil, err
	}
	var values map[string]any
	if err := toml.Unmarshal(data, &values); err != nil {
		return nil, syntaxError(data, name, err)
	}
	switch n := countKeys(values); {
	case n == 0:
		return nil, &FileError{Name: name, Err: errEmpty}
	case n > maxKeys:
		return nil, &FileError{Name: name, Err: fmt.Errorf("this has %d keys and list items, while a chain file has at most %d", n, len(params)-1+len(tableDocs))}
	}
	places, err := doc.places(values)
	if err != nil {
		return nil, err
	}
	for key, v := range values {
		if !isTableName(key) {
			doc.entries = append(doc.entries, entry{key: key, value: v})
			continue
		}
		doc.tables[key] = true
		for name, v := range v.(map[string]any) { // the outline fitted
			doc.entries = append(doc.entries, entry{key: key + "." + name, value: v})
		}
	}
	for i := range doc.entries {
		e := &doc.entries[i]
		if found := e.find(places); found != nil {
			e.line, e.column = place(data, found)
		}
	}
	slices.SortFunc(doc.entries, func(a, b entry) int {
		return cmp.Or(cmp.Compare(a.line, b.line), cmp.Compare(a.column, b.column), cmp.Compare(a.key, b.key))
	})
	return doc, nil
}

// outline has the tables of a chain file without their keys.
type outline struct {
	Chain      struct{} `toml:"chain"`
	Electrons  struct{} `toml:"electrons"`
	BondPhonon struct{} `toml:"bond_phonon"`
	SitePhonon struct{} `toml:"site_phonon"`
	Conditions struct{} `toml:"conditions"`
}

// strict decodes the document into a value that has no room for some of it: the
// decoder then reports everything that does not fit, with its place.
func (doc *document) strict(into any) error {
	return toml.NewDecoder(bytes.NewReader(doc.data)).DisallowUnknownFields().Decode(into)
}

// places returns a report with the place of every key in the document, or the
// error for the first table of the outline that is something else.
func (doc *document) places(values map[string]any) ([]toml.DecodeError, error) {
	err := doc.strict(&outline{})
	var unknown *toml.StrictMissingError
	if errors.As(err, &unknown) {
		return unknown.Errors, nil
	}
	var misfit *toml.DecodeError
	if errors.As(err, &misfit) {
		key := misfit.Key()[0]
		table := strings.ToLower(key) // the decoder takes capitals for small letters
		line, column := place(doc.data, misfit)
		return nil, &FileError{doc.name, line, column, &ParamError{
			Key: table, Value: describe(values[key]),
			Want: "a table, written [" + table + "] on a line of its own with its keys below",
		}}
	}
	return nil, nil
}

// find returns the report on this entry's key or on the first key below it. In a
// table written as { … } the decoder leaves out the table's name.
func (e entry) find(reports []toml.DecodeError) *toml.DecodeError {
	for i, r := range reports {
		if key := strings.Join(r.Key(), "."); key == e.key || strings.HasPrefix(key, e.key+".") {
			return &reports[i]
		}
	}
	_, name, inTable := strings.Cut(e.key, ".")
	for i, r := range reports {
		if inTable && len(r.Key()) == 1 && r.Key()[0] == name {
			return &reports[i]
		}
	}
	return nil
}

// keys returns the keys in the order of the file.
func (doc *document) keys() []string {
	keys := make([]string, len(doc.entries))
	for i, e := range doc.entries {
		keys[i] = e.key
	}
	return keys
}

// value returns the value of a key, nil if the document does not have it.
func (doc *document) value(key string) any {
	for _, e := range doc.entries {
		if e.key == key {
			return e.value
		}
	}
	return nil
}

// fail wraps err with the place of a key.
func (doc *document) fail(key string, err error) error {
	e := &FileError{Name: doc.name, Err: err}
	for _, found := range doc.entries {
		if found.key == key {
			e.Line, e.Column = found.line, found.column
		}
	}
	return e
}

// missing wraps err with the place where a table begins, if it is there.
func (doc *document) missing(table string, err error) error {
	e := &FileError{Name: doc.name, Err: err}
	var all *toml.StrictMissingError
	if errors.As(doc.strict(&struct{}{}), &all) {
		for i, r := range all.Errors {
			if r.Key()[0] == table {
				e.Line, e.Column = place(doc.data, &all.Errors[i])
				break
			}
		}
	}
	return e
}

// countKeys counts the keys in a value and in the tables below it, headings included.
func countKeys(value any) int {
	n := 0
	switch v := value.(type) {
	case map[string]any:
		for _, below := range v {
			n += 1 + countKeys(below)
		}
	case []any:
		for _, below := range v {
			n += 1 + countKeys(below)
		}
	}
	return n
}

func isTableName(key string) bool {
	return slices.ContainsFunc(params, func(p Param) bool { return p.table() == key && key != "" })
}
