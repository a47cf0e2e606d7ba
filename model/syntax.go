package model

import (
	"bytes"
	"errors"
	"fmt"
	"slices"
	"strings"
	"unicode/utf8"

	"github.com/pelletier/go-toml/v2"
)

// syntaxError puts what the decoder found into words for someone who wrote the file.
func syntaxError(data []byte, name string, err error) error {
	var e *toml.DecodeError
	if !errors.As(err, &e) {
		return &FileError{Name: name, Err: err}
	}
	line, column := place(data, e)
	return &FileError{name, line, column, errors.New(inWords(e))}
}

// place returns the line and column, in characters from 1, of a decoder's error.
func place(data []byte, e *toml.DecodeError) (line, column int) {
	line, column = e.Position()
	for range line - 1 {
		_, data, _ = bytes.Cut(data, []byte("\n"))
	}
	return line, utf8.RuneCount(data[:min(column-1, len(data))]) + 1
}

// inWords says what the decoder found and what would be accepted.
func inWords(e *toml.DecodeError) string {
	found := strings.TrimPrefix(e.Error(), "toml: ")
	if name, twice := strings.CutSuffix(found, " is already defined"); twice {
		name = strings.TrimPrefix(name, "key ")
		if key := e.Key(); slices.Contains(key[:len(key)-1], name) {
			return quote(name) + " is used both for a value and for a table; keep one of them"
		}
		return quote(name) + " is given twice; keep one of them"
	}
	for _, s := range sentences {
		if strings.HasPrefix(found, s.prefix) && strings.Contains(found, s.part) {
			return strings.ReplaceAll(s.say, "%s", quote(strings.Join(e.Key(), ".")))
		}
	}
	return fmt.Sprintf("this is not TOML (%s); a line holds one key = value, with text in double quotes", found)
}

// sentences say in plain words what the decoder's messages mean; the first that
// fits is taken, %s being the key.
var sentences = []struct{ prefix, part, say string }{
	{"table ", "already exists", "the table %s is begun twice; write its keys under one heading"},
	{"key ", "", "%s is used both for a value and for a table; keep one of them"},

	{"expected '=' after key", "", `after a key comes "=" and then its value`},
	{"expected newline", "' '", "only one value fits on a line"},
	{"expected newline", ",", "a number has a decimal point, not a comma"},
	{"expected newline", "", `more follows after the value; a number with a unit is text in double quotes, such as "300 K"`},
	{"strings must be quoted", "", `text stands in double quotes, such as "ring"`},
	{"unexpected character U+002E", "", "a number does not begin with a point; write 0.5"},
	{"unexpected character U+000A", "", "the value is missing after the equals sign"},
	{"unexpected character U+000D", "", "the value is missing after the equals sign"},
	{"unexpected character U+00E2", "", `typographic quotes and signs are not TOML; write text in plain " and a minus as -`},
	{"unexpected character", "", `a value is a number, or text in double quotes such as "ring"`},
	{"expected keyword", "", `this word is no value; text stands in double quotes, such as "ring"`},
	{"expected value, not end of input", "", "the file ends where a value should follow the equals sign"},

	{"basic strings cannot have new lines", "", "the text that begins on this line lacks its closing quote"},
	{"literal strings cannot have new lines", "", "the text that begins on this line lacks its closing apostrophe"},
	{"unterminated", "", "the file ends inside a text; close its quotes"},
	{"multiline", "not terminated", "the file ends inside a text of several lines; close its three quotes"},
	{"", "control characters are not allowed in comments", "a comment cannot hold a control character"},
	{"", "control characters", `a text cannot hold a control character as it is; write it as \u0001`},
	{"", "escape", `after a backslash only \b \t \n \f \r \e \" \\ \x41 \u0041 or \U00000041 may follow; for a backslash itself write two`},
	{"need a character after", "", "the file ends after a backslash; close the text with a quote"},

	{"expected ']' to close table name", "", "the heading of a table ends in ], such as [chain]"},
	{"expected ']]'", "", "a heading stands in single brackets, such as [chain]"},
	{"array is incomplete", "", "the file ends inside a list; no parameter takes a list"},
	{"inline table is incomplete", "", "the file ends inside a table; close its brace"},
	{"arrays and inline tables are nested", "", "this is nested far deeper than any chain file"},
	{"invalid character at start of key: U+003D", "", "the key is missing before the equals sign"},
	{"invalid character at start of key: U+005D", "", "a heading needs a name, such as [chain]"},
	{"invalid character at start of key", "", "a key is made of letters, digits and underscores, such as next_hopping"},

	{"integers cannot have leading zeroes", "", "a number does not begin with a zero before another digit"},
	{"number must have at least one digit between underscores", "", "an underscore in a number stands between two digits"},
	{"expected number after sign", "", "the file ends where a number should follow the sign"},
	{"expected digit", "", "after the sign comes a number"},
	{"decimal point must be followed", "", "a digit comes after the decimal point; write 1.0"},
	{"exponent must contain", "", "a digit comes after the e; write 1e3"},
	{"", "too large to fit", "this whole number is far too large for any parameter"},
	{"unable to parse float", "", "this number is far too large for any parameter"},
	{"radix prefix", "", "this number is not complete; write it in decimal digits"},
	{"impossible date", "", "this is not a date; no parameter takes one"},
	{"times are expected", "", "this is not a time; no parameter takes one"},
}

// checkText returns the error for the first byte that no text has.
func checkText(data []byte, name string) error {
	line, column := 1, 1
	for rest := data; len(rest) > 0; {
		r, size := utf8.DecodeRune(rest)
		if r == 0 || (r == utf8.RuneError && size == 1) {
			return &FileError{name, line, column, fmt.Errorf("the byte 0x%02x is not UTF-8 text, which a chain file is", rest[0])}
		}
		if column++; r == '\n' {
			line, column = line+1, 1
		}
		rest = rest[size:]
	}
	return nil
}
