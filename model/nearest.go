package model

import "strings"

// Nearest returns the known name that takes the fewest insertions, deletions,
// replacements and swaps of neighbouring letters to reach from name, capitals
// and small letters being the same; "" if none is known.
func Nearest(name string, known []string) string {
	best, least := "", -1
	for _, k := range known {
		if d := edits(strings.ToLower(name), strings.ToLower(k)); least < 0 || d < least {
			best, least = k, d
		}
	}
	return best
}

// edits returns the optimal string alignment distance (F. J. Damerau, Commun.
// ACM 7, 171 (1964), with no letter edited twice).
func edits(from, to string) int {
	a, b := []rune(from), []rune(to)
	if len(a) > maxCompared {
		a = a[:maxCompared]
	}
	rows := make([][]int, len(a)+1)
	for i := range rows {
		rows[i] = make([]int, len(b)+1)
		rows[i][0] = i
	}
	for j := range rows[0] {
		rows[0][j] = j
	}
	for i := 1; i <= len(a); i++ {
		for j := 1; j <= len(b); j++ {
			replace := rows[i-1][j-1]
			if a[i-1] != b[j-1] {
				replace++
			}
			rows[i][j] = min(replace, rows[i-1][j]+1, rows[i][j-1]+1)
			if i > 1 && j > 1 && a[i-1] == b[j-2] && a[i-2] == b[j-1] {
				rows[i][j] = min(rows[i][j], rows[i-2][j-2]+1)
			}
		}
	}
	return rows[len(a)][len(b)]
}

// maxCompared bounds the work on absurdly long names; it is longer than any key.
const maxCompared = 100
