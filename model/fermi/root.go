package fermi

import "math"

// root closes in on the zero of an increasing function.
type root struct {
	lo, hi float64    // between which it is
	x, y   [3]float64 // the last three points, the newest first
	known  int
	slope  float64 // between the last two, or a guess
}

// learn takes a point. A wrong slope is kept while there is no better one.
func (r *root) learn(x, y float64) {
	if y > 0 {
		r.hi = min(r.hi, x)
	} else {
		r.lo = max(r.lo, x)
	}
	r.x = [3]float64{x, r.x[0], r.x[1]}
	r.y = [3]float64{y, r.y[0], r.y[1]}
	r.known++
	if r.known > 1 {
		if s := (r.y[0] - r.y[1]) / (r.x[0] - r.x[1]); s > 0 && !math.IsInf(s, 1) {
			r.slope = s
		}
	}
}

// next returns where to look: by the slope, then by inverse quadratic
// interpolation; after many points every second one halves the bracket (in the
// manner of R. P. Brent, Algorithms for Minimization without Derivatives, 1973).
func (r *root) next() float64 {
	const many = 12
	x := r.x[0] - r.y[0]/r.slope
	if r.known > 2 {
		p, q, s := r.y[0], r.y[1], r.y[2]
		x = r.x[0]*q*s/((p-q)*(p-s)) + r.x[1]*p*s/((q-p)*(q-s)) + r.x[2]*p*q/((s-p)*(s-q))
	}
	idle := r.known > 1 && r.y[0]/r.y[1] > 0.8 // a slope much too steep
	if !(x > r.lo && x < r.hi) || idle || r.known >= many && r.known%2 == 0 {
		return r.lo + (r.hi-r.lo)/2
	}
	return x
}

// stuck tells that the bracket cannot be divided.
func (r *root) stuck() bool {
	return !(r.hi-r.lo > 0x1p-52*max(math.Abs(r.lo), math.Abs(r.hi)))
}
