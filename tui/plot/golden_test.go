package plot

import (
	"flag"
	"math"
	"os"
	"path/filepath"
	"testing"
)

var renew = flag.Bool("renew", false, "write the golden pictures anew")

// gappedBand draws −2t cos k with a gap opened at kF, the level of the
// electrons and the states of a finite ring: invented numbers.
func gappedBand(c *Canvas) {
	const n, gap = 201, 0.4
	kF, mu := 3*math.Pi/8, -2*math.Cos(3*math.Pi/8)
	var k, free, low, high []float64
	for i := range n {
		q := math.Pi * float64(i) / (n - 1)
		e := -2 * math.Cos(q)
		split := math.Hypot(e-mu, gap)
		k, free = append(k, q), append(free, e)
		if q <= kF {
			low, high = append(low, mu-split), append(high, math.NaN())
		} else {
			low, high = append(low, math.NaN()), append(high, mu+split)
		}
	}
	var lk, le []float64
	for i := range 17 {
		q := math.Pi * float64(i) / 16
		lk, le = append(lk, q), append(le, -2*math.Cos(q))
	}
	c.Heading("energy (t)", 1)
	c.Frame(Axis{Max: math.Pi, Pi: true, Name: "k"}, Axis{Min: -2.1, Max: 2.8}, 2)
	c.Line(k, free, 3, Dotted)
	c.Name("uniform")
	c.Line(k, low, 4, Solid)
	c.Line(k, high, 4, Solid)
	c.Name("relaxed")
	c.Points(lk, le, 5, Heavy)
	c.Name("levels")
	c.HMark(mu, "EF", 6)
	c.VMark(kF, "kF", 7)
}

// sites draws a modulated density and a slow envelope over 40 sites.
func sites(c *Canvas) {
	var x, density, envelope []float64
	for i := range 40 {
		s := float64(i)
		slow := 0.2 * math.Cos(math.Pi*s/39)
		x, density = append(x, s), append(density, 1+slow*math.Cos(2*math.Pi*s/4))
		envelope = append(envelope, 1+math.Abs(slow))
	}
	c.Heading("density (electrons per site)", 1)
	c.Frame(Axis{Max: 39, Name: "site"}, Axis{Min: 0.8, Max: 1.2}, 2)
	c.Stems(x, density, 1, 3, Solid)
	c.Name("density")
	c.Line(x, envelope, 4, Dashed)
	c.Name("envelope")
}

// peaks draws two peaked curves above a shaded region.
func peaks(c *Canvas) {
	const q0 = 2.2
	var q, cold, warm, soft []float64
	for i := range 401 {
		x := math.Pi * float64(i) / 400
		log := func(width float64) float64 {
			return 1e-6 * (1 + 0.5*math.Log((x+q0)/math.Hypot(x-q0, width)))
		}
		q, cold, warm = append(q, x), append(cold, log(0.02)), append(warm, log(0.3))
		soft = append(soft, 0.8e-6*math.Exp(-8*(x-q0)*(x-q0)))
	}
	c.Heading("response (invented)", 1)
	c.Frame(Axis{Max: math.Pi, Pi: true, Name: "q"}, Axis{Max: 3.7e-6}, 2)
	c.Area(q, soft, 0, 6)
	c.Name("loss")
	c.Line(q, soft, 5, Heavy)
	c.Line(q, warm, 4, Dashed)
	c.Name("T = 0.1")
	c.Line(q, cold, 3, Solid)
	c.Name("T = 0.01")
	c.VMark(q0/2, "kF", 7)
	c.VMark(q0, "2kF", 7)
}

func TestPicturesAreAsApproved(t *testing.T) {
	for _, tt := range []struct {
		name  string
		w, h  int
		stale bool
		draw  func(*Canvas)
	}{
		{"band", 58, 12, false, gappedBand},
		{"band-small", 38, 9, false, gappedBand},
		{"sites", 58, 12, false, sites},
		{"peaks", 100, 28, false, peaks},
		{"peaks-small", 38, 9, false, peaks},
		{"peaks-stale", 58, 12, true, peaks},
	} {
		for set, cs := range charsets {
			c := New(tt.w, tt.h, cs)
			c.Stale, c.Trim = tt.stale, true
			tt.draw(c)
			got := c.String()
			path := filepath.Join("testdata", tt.name+"."+set+".golden")
			if *renew {
				if err := os.MkdirAll("testdata", 0o777); err != nil {
					t.Fatal(err)
				}
				if err := os.WriteFile(path, []byte(got), 0o666); err != nil {
					t.Fatal(err)
				}
				continue
			}
			want, err := os.ReadFile(path)
			if err != nil {
				t.Fatalf("%v (go test -renew writes it)", err)
			}
			if got != string(want) {
				t.Errorf("%s has changed; it was\n%s\nand is\n%s", path, want, got)
			}
		}
	}
}
