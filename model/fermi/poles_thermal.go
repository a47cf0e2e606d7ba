package fermi

import (
	"math"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/mat"
)

// fermiDirac sets the poles of the Fermi function at temperature T for
// |x| ≤ M: the Matsubara sum
//
//	tanh(x/2T)/x = Σ_k 4T/(x² + ω_k²),   ω_k = (2k+1)πT,
//
// is bᵀ(x² + Ω²)⁻¹b with Ω = diag ω_k and b_k = 2√T, and its projection on the
// space spanned by (ξ_j + Ω²)⁻¹b, j = 1..r, is a sum over r poles again, with
// positive weights, that agrees at ξ_j to second order. The best ξ_j are those
// of Zolotarev's problem on the interval that x² + π²T² covers (rational
// Krylov spaces: A. Ruhe, Linear Algebra Appl. 58, 391 (1984); the choice of
// ξ_j was found by trial). It reports whether f is as good as tolerance, or as
// good as it gets: at low T a level is blurred by the rounding of H, which
// changes f by some 2⁻⁵³M/T, and making the poles costs a part of that.
func (p *poles) fermiDirac(temperature, M, tolerance float64) bool {
	ratio := M / temperature
	tolerance = max(tolerance, 0x1p-59*ratio)
	frequency, root := matsubara(ratio)
	r := max(1, int(math.Log(2/tolerance)*math.Log(4*max(1, ratio/math.Pi))/(math.Pi*math.Pi)))
	for ; r <= mostPoles; r++ {
		if p.project(frequency, root, ratio, r) && p.thermalError(ratio) <= tolerance {
			for k := range p.weight {
				p.weight[k] *= temperature
				p.shift[k] *= temperature
			}
			p.inner, p.outer = 0, M
			p.match(func(x float64) float64 { return -temperature * math.Log1p(math.Exp(-x/temperature)) })
			return true
		}
	}
	*p = poles{}
	return false
}

// thermalError samples the error of f for T = 1, |x| ≤ ratio.
func (p *poles) thermalError(ratio float64) (worst float64) {
	const points = 300
	least := min(0.1, ratio/10)
	for j := range points {
		x := least * math.Pow(ratio/least, float64(j)/(points-1))
		worst = max(worst, math.Abs(p.odd(x)-math.Tanh(x/2))/2)
	}
	return worst
}

// project sets r poles for T = 1, |x| ≤ ratio out of the Matsubara sum with
// frequencies ω and weights root².
func (p *poles) project(frequency, root []float64, ratio float64, r int) bool {
	n := len(frequency)
	first := math.Pi * math.Pi
	dual := min(math.Pi/math.Hypot(ratio, math.Pi), 1-1e-9)
	node := nodes(dual, r)
	basis := mat.NewDense(n, r, nil)
	column := make([]float64, n)
	for j := range r {
		t := node[2*j+1]
		xi := first*(1+t)/(1+dual*dual*t) - first
		for k, w := range frequency {
			column[k] = root[k] / (xi + w*w)
		}
		if !orthonormalise(basis, column, j) {
			return false
		}
		basis.SetCol(j, column)
	}
	projection := make([]float64, r)
	for j := range r {
		for k, b := range root {
			projection[j] += basis.At(k, j) * b
		}
	}
	for k, w := range frequency {
		for j := range r {
			basis.Set(k, j, basis.At(k, j)*w)
		}
	}
	var svd mat.SVD
	if !svd.Factorize(basis, mat.SVDThinV) {
		return false
	}
	p.shift = svd.Values(resize(p.shift, r))
	p.weight = resize(p.weight, r)
	var v mat.Dense
	svd.VTo(&v)
	for l := range r {
		var dot float64
		for j := range r {
			dot += v.At(j, l) * projection[j]
		}
		p.weight[l] = dot * dot
	}
	return true
}

// orthonormalise makes column orthogonal to the first j columns of basis,
// twice, as once is not enough, and of unit length. It reports false when
// nothing is left.
func orthonormalise(basis *mat.Dense, column []float64, j int) bool {
	unit := func() bool {
		var sum float64
		for _, v := range column {
			sum += v * v
		}
		sum = math.Sqrt(sum)
		for k := range column {
			column[k] /= sum
		}
		return sum > 0
	}
	if !unit() {
		return false
	}
	for range 2 {
		for l := range j {
			var dot float64
			for k, v := range column {
				dot += basis.At(k, l) * v
			}
			for k := range column {
				column[k] -= dot * basis.At(k, l)
			}
		}
		if !unit() {
			return false
		}
	}
	return true
}

// matsubara returns a sum with few terms, Σ root²/(x² + frequency²), that
// equals the Matsubara sum of T = 1 for |x| ≤ ratio to rounding: the first
// terms as they are; panels of twice as many terms each as the last, each
// replaced by a Gauss rule for equally spaced points; the rest, which has
// become smooth, by an integral over 1/ω.
func matsubara(ratio float64) (frequency, root []float64) {
	const (
		exact = 32
		rest  = 10
		far   = 1e3 // times the largest |x|
		many  = 1e8
	)
	add := func(w, c float64) {
		frequency = append(frequency, w)
		root = append(root, math.Sqrt(c))
	}
	for k := range exact {
		add(float64(2*k+1)*math.Pi, 4)
	}
	first, length := float64(exact), float64(exact)
	for panel := 0; first < many || 2*math.Pi*first < far*ratio; panel++ {
		x, w := gramRule(length)
		for j := range x {
			add((2*(first+x[j])+1)*math.Pi, 4*w[j])
		}
		first += length
		length *= 2
	}
	var u, w [rest]float64
	quad.Legendre{}.FixedLocations(u[:], w[:], 0, 1/(2*math.Pi*first))
	for j, v := range u {
		add(1/v, 2/math.Pi*w[j]/(v*v))
	}
	return frequency, root
}

// gramPoints is the size of a panel's Gauss rule. The distance of a panel from
// the origin equals its length, so the error falls as (3+√8)^(−2·16) ≈ 1e-24.
const gramPoints = 16

// gramRule returns the Gauss rule for a sum over k = 0..length−1, whose
// orthogonal polynomials (J. P. Gram; from memory) have the recurrence
// coefficients α = (length−1)/2, β_n = n²(length²−n²)/(4(4n²−1)), from the
// eigenvalues of their tridiagonal matrix (G. H. Golub, J. H. Welsch, Math.
// Comp. 23, 221 (1969)).
func gramRule(length float64) (x, w []float64) {
	jacobi := mat.NewSymDense(gramPoints, nil)
	for n := 1; n < gramPoints; n++ {
		m := float64(n)
		jacobi.SetSym(n-1, n, m/2*math.Sqrt((1-m*m/(length*length))/(4*m*m-1)))
	}
	var e mat.EigenSym
	if !e.Factorize(jacobi, true) {
		panic("fermi: a Gauss rule did not converge")
	}
	x = e.Values(nil)
	w = make([]float64, gramPoints)
	var v mat.Dense
	e.VectorsTo(&v)
	for j := range x {
		x[j] = (length-1)/2 + x[j]*length
		w[j] = length * v.At(0, j) * v.At(0, j)
	}
	return x, w
}
