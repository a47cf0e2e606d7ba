package fermi

import (
	"math"
	"testing"
)

// f(x) must be 1 below and 0 above a gap of ±m, to the tolerance, all over
// m ≤ |x| ≤ M (on a logarithmic grid), and ω(x) = min(x, 0).
func TestZolotarevStep(t *testing.T) {
	const M = 2
	for _, m := range []float64{2, 1.9, 1, 0.3, 1e-2, 1e-4, 1e-6, 1e-9} {
		for _, tol := range []float64{1e-6, poleTolerance} {
			var p poles
			if !p.zolotarev(m, M, tol) {
				t.Errorf("gap ±%g: no poles", m)
				continue
			}
			for j := range 2001 {
				x := m * math.Pow(M/m, float64(j)/2000)
				if e := math.Abs(1-p.odd(x)) / 2; e > tol+1e-15 {
					t.Errorf("gap ±%g: error %g of f(%g), want at most %g", m, e, x, tol)
					break
				}
				if e := math.Abs(p.grand(x)); e > tol*M {
					t.Errorf("gap ±%g: error %g of ω(%g)", m, e, x)
					break
				}
			}
		}
	}
}

// grand returns ω(x), x > 0, as the poles have it.
func (p *poles) grand(x float64) float64 {
	w := 0.5*x - p.constant
	for k, a := range p.weight {
		w -= 0.25 * a * math.Log(x*x+p.shift[k]*p.shift[k])
	}
	return w
}

// The nodes of Zolotarev's problem lie between 0 and ∞ with sc²(K/2) = 1/k' in
// the middle (closed form) and increase.
func TestNodesOfZolotarevsProblem(t *testing.T) {
	for _, dual := range []float64{1e-12, 1e-3, 0.5, 0.9999} {
		for _, r := range []int{1, 2, 7, 60} {
			node := nodes(dual, r)
			if math.Abs(node[r]*dual-1) > 1e-13 {
				t.Errorf("k' = %g, r = %d: middle %.16g, want %.16g", dual, r, node[r], 1/dual)
			}
			for l := 2; l < 2*r; l++ {
				if node[l] <= node[l-1] {
					t.Errorf("k' = %g, r = %d: node %d is %g after %g", dual, r, l, node[l], node[l-1])
				}
			}
		}
	}
}

// The poles of the Fermi function against the function itself, and ω against
// −T ln(1 + e^{−x/T}).
func TestFermiDiracPoles(t *testing.T) {
	const M = 2
	for _, temperature := range []float64{1e-8, 1e-5, 1e-3, 0.02, 0.3, 5, 1e6} {
		var p poles
		if !p.fermiDirac(temperature, M, poleTolerance) {
			t.Errorf("T = %g: no poles", temperature)
			continue
		}
		tol := max(1.5*poleTolerance, 0x1p-52*M/temperature) // see fermiDirac
		least := min(1e-3*temperature, 1)
		for j := range 2001 {
			x := least * math.Pow(M/least, float64(j)/2000)
			if e := math.Abs(p.odd(x)-math.Tanh(x/2/temperature)) / 2; e > tol {
				t.Errorf("T = %g: error %g of f(%g), want at most %g", temperature, e, x, tol)
				break
			}
			want := -temperature * math.Log1p(math.Exp(-x/temperature))
			if e := math.Abs(p.grand(x) - want); e > tol*max(M, temperature) {
				t.Errorf("T = %g: error %g of ω(%g)", temperature, e, x)
				break
			}
		}
	}
}

// The shortened Matsubara sum still is tanh(x/2)/x (closed form).
func TestShortenedMatsubaraSum(t *testing.T) {
	for _, ratio := range []float64{1e-6, 1, 1e3, 1e8} {
		frequency, root := matsubara(ratio)
		for _, part := range []float64{1e-3, 0.1, 0.5, 1} {
			x := part * ratio
			var sum float64
			for k, w := range frequency {
				sum += root[k] * root[k] / (x*x + w*w)
			}
			if want := math.Tanh(x/2) / x; math.Abs(sum-want) > 1e-13*want {
				t.Errorf("x = %g of %g: %.16g, want %.16g", x, ratio, sum, want)
			}
		}
	}
}
