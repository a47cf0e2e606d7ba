package model

import (
	"testing"

	"pgregory.net/rapid"
)

func TestEdits(t *testing.T) {
	for _, tt := range []struct {
		from, to string
		want     int
	}{
		{"", "", 0}, {"", "abc", 3}, {"sites", "sites", 0}, {"sits", "sites", 1}, {"sties", "sites", 1},
		{"kitten", "sitting", 3}, {"ca", "abc", 3}, {"ħω", "hω", 1},
	} {
		if got := edits(tt.from, tt.to); got != tt.want {
			t.Errorf("%q to %q takes %d edits, want %d", tt.from, tt.to, got, tt.want)
		}
	}
	rapid.Check(t, func(t *rapid.T) {
		word := rapid.StringMatching(`[a-d]{0,8}`)
		a, b := word.Draw(t, "a"), word.Draw(t, "b")
		if edits(a, b) != edits(b, a) {
			t.Fatalf("%d edits from %q to %q, %d back", edits(a, b), a, b, edits(b, a))
		}
		if (edits(a, b) == 0) != (a == b) {
			t.Fatalf("%d edits from %q to %q", edits(a, b), a, b)
		}
	})
}

func TestNearest(t *testing.T) {
	known := []string{"polyene", "quarter", "weak"}
	for name, want := range map[string]string{"polyen": "polyene", "WEAK": "weak", "quater": "quarter", "waek": "weak"} {
		if got := Nearest(name, known); got != want {
			t.Errorf("nearest to %q is %q, want %q", name, got, want)
		}
	}
	if got := Nearest("x", nil); got != "" {
		t.Errorf("nearest of nothing is %q", got)
	}
}
