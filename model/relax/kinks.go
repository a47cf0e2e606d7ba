package relax

import (
	"math"

	"example.org/twokf/model"
)

const (
	// nearHalf is how far a band filling may be from 1/2 for the pattern to be a
	// period-2 one with kinks.
	nearHalf = 0.08
	// kinkFloor is the part of the largest order parameter below which its sign
	// is not trusted: it stands near a kink's centre.
	kinkFloor = 0.02
)

// Kinks counts the sign changes of the period-2 order parameter along the
// relaxed chain, where the filling is near one half and there is an order to
// speak of; ok is false elsewhere. demanded is how many the electrons and the
// length of the ring ask for: |2N_e/g_s − N|, one for each electron that spin
// ½ electrons are away from half filling (W. P. Su, J. R. Schrieffer, A. J.
// Heeger, Phys. Rev. B 22, 2099 (1980)), one more where the parity of N needs it.
func Kinks(c model.Chain, l *Lattice) (found, demanded int, ok bool) {
	n, _ := c.Count()
	if c.Sites < 4 || math.Abs(float64(n)/float64(c.Spin*c.Sites)-0.5) > nearHalf {
		return 0, 0, false
	}
	order := periodTwo(l.Stretch)
	if weight(l.SiteMode)*c.Site.Coupling > weight(l.Stretch)*c.Bond.Coupling {
		order = periodTwo(l.SiteMode)
	}
	floor := kinkFloor * maxAbs(order)
	if floor == 0 || maxAbs(order)*max(c.Bond.Coupling, c.Site.Coupling) < 1e-6*c.Hopping {
		return 0, 0, false
	}
	last, first := 0.0, 0.0
	for _, v := range order {
		if math.Abs(v) < floor {
			continue
		}
		if last == 0 {
			first = v
		} else if v*last < 0 {
			found++
		}
		last = v
	}
	demanded = int(math.Abs(math.Round(2*float64(n)/float64(c.Spin)) - float64(c.Sites)))
	if demanded%2 != c.Sites%2 { // an odd chain has strong bonds at both ends, an odd ring no way round
		demanded++
	}
	// across the seam of an odd ring (−1)^i changes its sign
	if c.Boundary == model.Ring && (last*first < 0) != (c.Sites%2 == 1) {
		found++
	}
	return found, demanded, true
}

// periodTwo returns (−1)^i (x_i − x_{i+1})/2, the local amplitude of a period-2
// pattern.
func periodTwo(x []float64) []float64 {
	if len(x) < 2 {
		return nil
	}
	out := make([]float64, len(x)-1)
	for i := range out {
		out[i] = (x[i] - x[i+1]) / 2
		if i%2 == 1 {
			out[i] = -out[i]
		}
	}
	return out
}

func weight(x []float64) float64 { return math.Sqrt(dot(x, x)) }
