// Package doubt says how far an answer can be trusted, and why.
package doubt

// Verdict of one check.
type Verdict int

const (
	Clear  Verdict = iota // nothing to hold against the answer
	Raised                // the answer should be read with this in mind
)

// String returns the verdict as the JSON report writes it.
func (v Verdict) String() string {
	if v == Raised {
		return "raised"
	}
	return "clear"
}

// Doubt is one reason to hesitate, with its number and its limit.
type Doubt struct {
	Name    string // snake_case, as in the JSON report
	Verdict Verdict
	Value   float64
	Limit   float64
	Why     string // one plain sentence
	Source  string // publication, or "common practice"
}
