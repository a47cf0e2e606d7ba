// Package band is the infinite uniform chain: its dispersion, how electrons
// fill it, the Fermi points, and sums over it at any temperature.
package band

import (
	"math"

	"example.org/twokf/model"
)

// Band is the band of a uniform chain and its filling,
//
//	ε(k) = −2t cos k − 2 t2 cos 2k,   k in 1/a.
//
// It is a comparable value. Every sum is per site and includes all spins.
type Band struct {
	Hopping     float64 // t
	NextHopping float64 // t2
	Spin        int     // g_s, spin states per level
	Filling     float64 // ν, electrons per site, 0..Spin
}

// Of returns the band of the chain c without its distortions.
func Of(c model.Chain) Band {
	return Band{Hopping: c.Hopping, NextHopping: c.NextHopping, Spin: c.Spin, Filling: c.ElectronsPerSite()}
}

// Energy returns ε(k).
func (b Band) Energy(k float64) float64 {
	return -2*b.Hopping*math.Cos(k) - 2*b.NextHopping*math.Cos(2*k)
}

// Velocity returns dε/dk = 2t sin k + 4 t2 sin 2k.
func (b Band) Velocity(k float64) float64 {
	return 2*b.Hopping*math.Sin(k) + 4*b.NextHopping*math.Sin(2*k)
}

// KF returns k_F = πν/g_s. It is a Fermi point as long as there is just one
// pair of them and t > 0.
func (b Band) KF() float64 { return math.Pi * b.Filling / float64(b.Spin) }

// Ordering returns 2k_F folded into [0, π].
func (b Band) Ordering() float64 {
	kF := b.KF()
	return 2 * math.Min(kF, math.Pi-kF)
}
