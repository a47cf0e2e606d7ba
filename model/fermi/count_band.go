package fermi

import "math"

// A front is the window of a band matrix H − E in which its pivots are
// eliminated: first the rows that are complete, then the block of rows after
// them. A row none of whose pivots is large enough against what it couples to
// is delayed until the next block has been added, so that no energy inside the
// band makes the elimination unstable (I. S. Duff, J. K. Reid, ACM Trans. Math.
// Softw. 9, 302 (1983)).
type front struct {
	m [12][12]float64 // three times the largest half-bandwidth
}

// relativePivot is the least size of a pivot against its row.
const relativePivot = 0.01

// below counts the levels of b below e.
func (f *front) below(b *band, e float64) (number int) {
	w := max(b.width, 1)
	f.load(b, 0, 0, e)
	for from, delayed := 0, 0; from < b.n; from += w {
		ready := delayed + w
		f.load(b, ready, from+w, e)
		for d := range w {
			for k := range delayed {
				f.set(k, ready+d, 0)
			}
			for k := range w {
				f.set(delayed+k, ready+d, b.at(from+k, w+d-k))
			}
		}
		done, minus := f.eliminate(ready, ready+w, w)
		number += minus
		for i := done; i < ready+w; i++ {
			copy(f.m[i-done][:], f.m[i][done:ready+w])
		}
		delayed = ready - done
	}
	return number
}

func (f *front) set(i, j int, v float64) { f.m[i][j], f.m[j][i] = v, v }

// load puts the diagonal block of H − E that starts at row from at the place at
// of the window. Beyond the end of the matrix there are levels above every
// energy, coupled to nothing.
func (f *front) load(b *band, at, from int, e float64) {
	w := max(b.width, 1)
	for k := range w {
		for d := 0; k+d < w; d++ {
			f.set(at+k, at+k+d, b.at(from+k, d))
		}
		if from+k < b.n {
			f.m[at+k][at+k] -= e
		} else {
			f.m[at+k][at+k] = 1
		}
	}
}

// eliminate removes complete rows (the first ready of size) until the largest
// pivot of size one or two (J. R. Bunch, B. N. Parlett, SIAM J. Numer. Anal. 8,
// 639 (1971)) is too small and at most `most` rows are left. It returns how
// many are gone and how many of their pivots were negative. One triangle is
// computed and mirrored: an antisymmetric rounding error would grow from block
// to block.
func (f *front) eliminate(ready, size, most int) (done, minus int) {
	const alpha = 0.6403882032022076 // (1+√17)/8 bounds the growth of the elements
	m := &f.m
	for k := 0; k < ready; {
		i, p, q := k, k, k
		var diagonal, off float64
		for s := k; s < ready; s++ {
			if v := math.Abs(m[s][s]); v > diagonal {
				i, diagonal = s, v
			}
			for t := s + 1; t < ready; t++ {
				if v := math.Abs(m[s][t]); v > off {
					p, q, off = s, t, v
				}
			}
		}
		single := diagonal >= alpha*off
		if ready-k <= most {
			row := f.largest(i, ready, size)
			if !single {
				row = max(f.largest(p, ready, size), f.largest(q, ready, size))
			}
			if max(diagonal, off) < relativePivot*row {
				return k, minus
			}
		}
		if single {
			f.swap(k, i, size)
			d := m[k][k]
			if d == 0 {
				d = leastPivot
			}
			minus += negative(d)
			for s := k + 1; s < size; s++ {
				g := m[s][k] / d
				for t := s; t < size; t++ {
					m[s][t] -= g * m[k][t]
					m[t][s] = m[s][t]
				}
			}
			k++
			done = k
			continue
		}
		f.swap(k, p, size)
		f.swap(k+1, q, size)
		minus++ // the off-diagonal element outweighs the diagonal ones: one of each sign
		a, b, d := m[k][k], m[k][k+1], m[k+1][k+1]
		det := a*d - b*b
		for s := k + 2; s < size; s++ {
			g := (d*m[s][k] - b*m[s][k+1]) / det
			h := (a*m[s][k+1] - b*m[s][k]) / det
			for t := s; t < size; t++ {
				m[s][t] -= g*m[k][t] + h*m[k+1][t]
				m[t][s] = m[s][t]
			}
		}
		k += 2
		done = k
	}
	return ready, minus
}

// largest returns the largest element of row i that couples to rows that are
// not complete.
func (f *front) largest(i, ready, size int) (v float64) {
	for t := ready; t < size; t++ {
		v = max(v, math.Abs(f.m[i][t]))
	}
	return v
}

// swap exchanges rows and columns i and j of the window.
func (f *front) swap(i, j, size int) {
	if i == j {
		return
	}
	m := &f.m
	m[i], m[j] = m[j], m[i]
	for k := range size {
		m[k][i], m[k][j] = m[k][j], m[k][i]
	}
}
