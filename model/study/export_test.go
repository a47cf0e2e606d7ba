package study

import (
	"slices"

	"example.org/twokf/model"
)

// What the tests of the declared dependences need to see.

// Stages returns the names of the stages, in order.
func Stages() []string {
	names := make([]string, len(stages))
	for i, st := range stages {
		names[i] = st.name
	}
	return names
}

// SameInputs reports whether a stage declares that it cannot tell a from b.
func SameInputs(name string, a, b model.Chain) bool {
	st := byName(name)
	return st.inputs(a) == st.inputs(b)
}

// PartOf returns a portrait that holds nothing but what a stage contributed.
func PartOf(name string, p *Portrait) *Portrait {
	part := new(Portrait)
	byName(name).keep(part, p)
	return part
}

func byName(name string) stage {
	return stages[slices.Index(Stages(), name)]
}

// Amplitude is A_Q[x] of a chain of so many sites.
func Amplitude(x []float64, q float64, sites int) float64 { return amplitude(x, q, sites) }
