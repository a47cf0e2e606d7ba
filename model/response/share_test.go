package response

import (
	"context"
	"errors"
	"testing"
)

// TestCoresShareTheWaveVectors: any number of cores gives the same bits, and all
// of them stop when the context ends.
func TestCoresShareTheWaveVectors(t *testing.T) {
	const n = worthSharing + 2
	curve := func(jobs int) []Static {
		ring, err := NewRing(n, 300, 2, 1, 0.1, 0.02)
		if err != nil {
			t.Fatal(err)
		}
		ring.Jobs = jobs
		dst := make([]Static, n/2+1)
		if err := ring.Curve(context.Background(), dst); err != nil {
			t.Fatal(err)
		}
		ctx, cancel := context.WithCancel(context.Background())
		cancel()
		if err := ring.Curve(ctx, make([]Static, n/2+1)); !errors.Is(err, context.Canceled) {
			t.Errorf("%d cores: a cancelled curve returned %v", jobs, err)
		}
		return dst
	}
	one := curve(1)
	for _, jobs := range []int{2, 3} {
		for m, s := range curve(jobs) {
			if s != one[m] {
				t.Fatalf("%d cores: χ at %d is %v, %v on one", jobs, m, s, one[m])
			}
		}
	}
}
