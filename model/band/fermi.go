package band

import "math"

// point is one pair of Fermi points ±k. Its supplement π−k is kept beside it,
// so that q = 2k and q = 2π−2k are both met exactly in floating point.
type point struct {
	k, supplement float64
	outward       float64 // +1: occupied states lie at smaller |k|, dε/dk > 0; −1: at larger |k|
}

// surface is the Fermi surface at T = 0: no point (empty, full or flat band),
// one pair or two pairs.
type surface struct {
	energy float64
	points [2]point
	count  int
}

// surface finds the Fermi points in closed form. With two pairs ±κ1, ±κ2 both
// solve one quadratic equation for cos k, so cos κ1 + cos κ2 = −t/2t2, while
// the filling fixes κ2 − κ1 = π(1−f) for t2 > 0, where the band has its top
// between them, and πf for t2 < 0, where it has its bottom there.
func (b Band) surface() surface {
	lo, hi := b.Edges()
	switch {
	case b.Filling <= 0 || lo == hi:
		return surface{energy: lo}
	case b.Filling >= float64(b.Spin):
		return surface{energy: hi}
	}
	kF := b.KF()
	if b.NextHopping != 0 {
		apart := kF
		if b.NextHopping > 0 {
			apart = math.Pi - kF
		}
		middle := math.Acos(-b.Hopping / (4 * b.NextHopping) / math.Cos(apart/2)) // NaN: there is just one pair
		if k1, k2 := middle-apart/2, middle+apart/2; k1 > 0 && k2 < math.Pi {
			s := math.Copysign(1, b.NextHopping)
			return surface{energy: b.Energy(k1), count: 2, points: [2]point{
				{k: k1, supplement: math.Pi - k1, outward: s},
				{k: k2, supplement: math.Pi - k2, outward: -s},
			}}
		}
	}
	p := point{k: kF, supplement: math.Pi - kF, outward: 1}
	if b.Hopping < 0 {
		p = point{k: math.Pi - kF, supplement: kF, outward: -1}
	}
	return surface{energy: b.Energy(p.k), count: 1, points: [2]point{p}}
}

// Edges returns the lowest and the highest energy of the band.
func (b Band) Edges() (lo, hi float64) {
	lo, hi = b.Energy(0), b.Energy(math.Pi)
	if lo > hi {
		lo, hi = hi, lo
	}
	if math.Abs(b.Hopping) < 4*math.Abs(b.NextHopping) { // ε' = 0 at cos k = −t/4t2
		inner := b.Hopping*b.Hopping/(4*b.NextHopping) + 2*b.NextHopping
		lo, hi = math.Min(lo, inner), math.Max(hi, inner)
	}
	return lo, hi
}

// FermiEnergy returns μ at T = 0: the band edge when the band is empty or full.
func (b Band) FermiEnergy() float64 { return b.surface().energy }

// FermiPoints returns every k in (0, π) with ε(k) = E_F, ascending: one, or
// two where t2 bends the band back. An empty, full or flat band has none.
func (b Band) FermiPoints() []float64 {
	var ks []float64
	s := b.surface()
	for _, p := range s.points[:s.count] {
		ks = append(ks, p.k)
	}
	return ks
}

// FermiVelocity returns |dε/dk| at the Fermi points, the smallest of them
// where there are two pairs, and 0 in an empty, full or flat band.
func (b Band) FermiVelocity() float64 {
	s := b.surface()
	if s.count == 0 {
		return 0
	}
	v := math.Inf(1)
	for _, p := range s.points[:s.count] {
		v = math.Min(v, math.Abs(b.Velocity(p.k)))
	}
	return v
}

// DensityOfStates returns (g_s/π) Σ 1/|dε/dk| over the Fermi points in (0, π),
// states per site and energy. It is +Inf at a band edge, which includes the
// empty and the full band, and in a flat band.
func (b Band) DensityOfStates() float64 {
	s := b.surface()
	if s.count == 0 {
		return math.Inf(1)
	}
	sum := 0.0
	for _, p := range s.points[:s.count] {
		sum += 1 / math.Abs(b.Velocity(p.k))
	}
	return sum * float64(b.Spin) / math.Pi
}

// EnergyPerSite returns E/N at T = 0, −(g_s/π) Σ ±(2t sin k + t2 sin 2k) over
// the Fermi points; elementary.
func (b Band) EnergyPerSite() float64 {
	return b.sumOverPoints(func(k float64) float64 {
		return -2*b.Hopping*math.Sin(k) - b.NextHopping*math.Sin(2*k)
	})
}

// sumOverPoints integrates g_s/2π over the occupied states of a function whose
// antiderivative F is odd in k and vanishes at π.
func (b Band) sumOverPoints(antiderivative func(k float64) float64) float64 {
	sum := 0.0
	s := b.surface()
	for _, p := range s.points[:s.count] {
		sum += p.outward * antiderivative(p.k)
	}
	return sum * float64(b.Spin) / math.Pi
}
