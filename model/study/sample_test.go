package study_test

import (
	"context"
	"math"
	"testing"

	"example.org/twokf/model/study"
)

// TestSampledLevelsAreLevels: what the bench shows of a long chain's levels are
// levels of it, to the tolerance that is stated, and the gap edges exactly.
func TestSampledLevelsAreLevels(t *testing.T) {
	c := mixed(t)
	all, err := study.Run(context.Background(), c, study.Settings{})
	if err != nil {
		t.Fatal(err)
	}
	few, err := study.Run(context.Background(), c, study.Settings{Levels: 60})
	if err != nil {
		t.Fatal(err)
	}
	if n := len(few.Levels.Energy); n > 60 || n < 40 || few.Levels.Tolerance <= 0 || all.Levels.Tolerance != 0 {
		t.Fatalf("%d levels to %g, all to %g", n, few.Levels.Tolerance, all.Levels.Tolerance)
	}
	edges := 0
	for i, e := range few.Levels.Energy {
		near := math.Inf(1)
		for j, exact := range all.Levels.Energy {
			if math.Abs(all.Levels.K[j]-few.Levels.K[i]) < 1e-12 {
				near = min(near, math.Abs(exact-e))
			}
		}
		if near > few.Levels.Tolerance {
			t.Errorf("level %d at k = %g is %g off", i, few.Levels.K[i], near)
		}
		if e == few.Lattice.Electrons.Highest || e == few.Lattice.Electrons.Lowest {
			edges++
		}
	}
	if edges != 2 {
		t.Errorf("%d gap edges in the sample, want 2", edges)
	}
}
