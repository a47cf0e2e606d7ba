package model

import (
	"bytes"
	"fmt"
	"strconv"
	"strings"

	"github.com/pelletier/go-toml/v2"
)

// Encode writes a valid chain as a file from which Decode reads the same chain,
// bit for bit. Every line has a comment with its unit.
func Encode(c Chain) []byte {
	var out bytes.Buffer
	table := ""
	for _, p := range params {
		if !p.Given(c) || p.leftOut(c) {
			continue
		}
		if p.table() != table {
			table = p.table()
			writeHeading(&out, table)
		}
		switch p.Kind {
		case Text:
			fmt.Fprintf(&out, "%s = %s\n", p.name(), encodeText(p.Format(c)))
			continue
		case Word:
			fmt.Fprintf(&out, "%s = %q", p.name(), p.Format(c))
		case Whole:
			fmt.Fprintf(&out, "%s = %s", p.name(), p.Format(c))
		case Number:
			fmt.Fprintf(&out, "%s = %s", p.name(), encodeFloat(p.Format(c)))
		}
		comment := p.Doc
		if unit := p.Unit(c); unit != "" {
			comment = unit + "; " + comment
		}
		fmt.Fprintf(&out, " # %s\n", comment)
	}
	return out.Bytes()
}

// leftOut reports whether a zero says that the number is not given.
func (p Param) leftOut(c Chain) bool {
	return (p.name() == "spacing" || p.name() == "frequency") && p.Get(c) == 0
}

func writeHeading(out *bytes.Buffer, table string) {
	fmt.Fprintf(out, "\n[%s]", table)
	for _, t := range tableDocs {
		if t.name == table && t.doc != "" {
			fmt.Fprintf(out, " # %s", t.doc)
		}
	}
	out.WriteByte('\n')
}

// encodeFloat marks a whole number as a real one, which also keeps the sign of −0.
func encodeFloat(s string) string {
	if strings.ContainsAny(s, ".e") {
		return s
	}
	return s + ".0"
}

// encodeText writes a TOML string, in double quotes where it needs no escapes.
func encodeText(s string) string {
	if quoted := `"` + s + `"`; quoted == strconv.Quote(s) {
		return quoted
	}
	line, err := toml.Marshal(map[string]string{"x": s})
	if err != nil {
		panic(err) // a string always has a form
	}
	return strings.TrimSuffix(strings.TrimPrefix(string(line), "x = "), "\n")
}
