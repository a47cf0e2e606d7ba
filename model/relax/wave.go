package relax

import "math"

// resync is after how many sites a wave is computed afresh: rotating from site to
// site loses about a rounding each.
const resync = 32

// cosines stores amplitude·cos(q j + phase) for j = 0, 1, 2 … in dst.
func cosines(dst []float64, amplitude, q, phase float64) {
	stepS, stepC := math.Sincos(q)
	var s, c float64
	for j := range dst {
		if j%resync == 0 {
			s, c = math.Sincos(q*float64(j) + phase)
		}
		dst[j] = amplitude * c
		s, c = s*stepC+c*stepS, c*stepC-s*stepS
	}
}

// Amplitude returns |Σ_j x_j e^(−iqj)|.
func Amplitude(x []float64, q float64) float64 {
	stepS, stepC := math.Sincos(q)
	var s, c, re, im float64
	for j, v := range x {
		if j%resync == 0 {
			s, c = math.Sincos(q * float64(j))
		}
		re += v * c
		im -= v * s
		s, c = s*stepC+c*stepS, c*stepC-s*stepS
	}
	return math.Hypot(re, im)
}
