package study

import (
	"context"
	"fmt"
	"math"
	"os"
	"os/exec"
	"strings"
	"testing"
	"time"

	"example.org/twokf/model"
	"example.org/twokf/model/relax"
	"example.org/twokf/model/response"
)

// plain runs the yardstick, testdata/plain.py, and returns its CPU seconds and
// its result. Without a Python that has numpy the benchmark is skipped.
func plain(b *testing.B, work string, sites int) (seconds, result float64) {
	b.Helper()
	for _, python := range []string{os.Getenv("TWOKF_PYTHON"), "python3", "/usr/bin/python3"} {
		if python == "" || exec.Command(python, "-c", "import numpy").Run() != nil {
			continue
		}
		cmd := exec.Command(python, "testdata/plain.py", work, fmt.Sprint(sites))
		for _, v := range os.Environ() { // let its linear algebra choose the best kernel for this processor
			if !strings.HasPrefix(v, "OPENBLAS_") {
				cmd.Env = append(cmd.Env, v)
			}
		}
		out, err := cmd.Output()
		if err != nil {
			b.Fatal(err)
		}
		if _, err := fmt.Sscan(string(out), &seconds, &result); err != nil {
			b.Fatal(err)
		}
		return seconds, result
	}
	b.Skip("no Python with numpy here (TWOKF_PYTHON names one)")
	return 0, 0
}

// compare reports how many times faster than the yardstick the loop was, on one
// core, both measured in this run, and that they agree.
func compare(b *testing.B, work string, sites int, once func() float64) {
	seconds, want := plain(b, work, sites)
	b.ResetTimer()
	began := time.Now()
	var got float64
	n := 0
	for b.Loop() {
		got = once()
		n++
	}
	each := time.Since(began).Seconds() / float64(n)
	if math.Abs(got-want) > 1e-7*math.Abs(want) {
		b.Errorf("this program gets %.12g, the yardstick %.12g", got, want)
	}
	b.ReportMetric(seconds/each, "times-faster")
}

// BenchmarkAgainstPlain prints the ratios to what a numpy user would write.
func BenchmarkAgainstPlain(b *testing.B) {
	ctx := context.Background()
	relaxed := func(b *testing.B, c model.Chain) float64 {
		l, err := relax.Run(ctx, c, relax.Settings{})
		if err != nil || !l.Converged {
			b.Fatal("not relaxed: ", err)
		}
		return l.FreeEnergy / float64(c.Sites)
	}
	for _, n := range []int{200, 400, 1000, 2000} {
		b.Run(fmt.Sprintf("bond/%d", n), func(b *testing.B) {
			if n > 1000 && os.Getenv("TWOKF_LONG") != "1" {
				b.Skip("the yardstick takes minutes here; TWOKF_LONG=1 does it")
			}
			c := model.Chain{Energy: model.UnitEV, Sites: n, Hopping: 2.5, Spin: 2, ByNumber: true, Electrons: n,
				Bond: model.Phonon{Present: true, Coupling: 4.1, Stiffness: 21}}
			compare(b, "bond", n, func() float64 { return relaxed(b, c) })
		})
	}
	for _, n := range []int{400, 1000} {
		b.Run(fmt.Sprintf("site/%d", n), func(b *testing.B) {
			electrons := int(math.Round(0.37 * float64(n)))
			electrons += (electrons + 1) % 2
			c := model.Chain{Sites: n, Hopping: 1, Spin: 1, ByNumber: true, Electrons: electrons,
				Site: model.Phonon{Present: true, Coupling: 1, Stiffness: 0.25}}
			compare(b, "site", n, func() float64 { return relaxed(b, c) })
		})
	}
	b.Run("chi/2000", func(b *testing.B) {
		chi := make([]response.Static, 1001)
		compare(b, "chi", 2000, func() float64 {
			ring, err := response.NewRing(2000, 740, 1, 1, 0, 0.02)
			if err != nil {
				b.Fatal(err)
			}
			if err := ring.Curve(ctx, chi); err != nil {
				b.Fatal(err)
			}
			most := 0.0
			for _, x := range chi {
				most = max(most, x.Site)
			}
			return most
		})
	})
}

// BenchmarkTurn is one turn of the temperature or of the coupling knob, all parts
// of the portrait converged, as the bench asks for it.
func BenchmarkTurn(b *testing.B) {
	for _, n := range []int{200, 2000, 20_000, 200_000} {
		turn := func(b *testing.B, change func(*model.Chain)) {
			c := model.Chain{Energy: model.UnitEV, Sites: n, Hopping: 2.5, Spin: 2, Filling: 1, Temperature: 0.02,
				Bond: model.Phonon{Present: true, Coupling: 4.1, Stiffness: 21, Frequency: 0.16}}
			set := Settings{Levels: 160, Jobs: 2}
			p, err := Run(context.Background(), c, set)
			if err != nil {
				b.Fatal(err)
			}
			var first time.Duration
			b.ReportAllocs()
			for b.Loop() {
				change(&c)
				began, seen := time.Now(), false
				set.Previous = p
				set.Publish = func(*Portrait) {
					if !seen {
						seen = true
						first += time.Since(began)
					}
				}
				if p, err = Run(context.Background(), c, set); err != nil || !p.Complete {
					b.Fatal(err)
				}
			}
			b.ReportMetric(float64(first.Microseconds())/float64(b.N)/1000, "ms-to-first")
		}
		b.Run(fmt.Sprintf("temperature/%d", n), func(b *testing.B) {
			turn(b, func(c *model.Chain) { c.Temperature = 0.045 - c.Temperature }) // 0.02, 0.025, 0.02, …
		})
		b.Run(fmt.Sprintf("coupling/%d", n), func(b *testing.B) {
			turn(b, func(c *model.Chain) { c.Bond.Coupling = 8.3 - c.Bond.Coupling }) // 4.1, 4.2, 4.1, …
		})
	}
}
