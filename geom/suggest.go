package geom

import (
	"slices"
	"strings"
)

// nearest returns the word that a misspelt one most likely means, or "" if none is near: the smallest edit distance, at
// most two and less than half of the word; or the word without its unit. Of equals the first.
func nearest(word string, known []string) string {
	w := plainKey(word)
	best, found := 3, ""
	for _, k := range known {
		p := plainKey(k)
		if unit, ok := strings.CutPrefix(p, w+"-"); p == w || ok && slices.Contains(units, unit) {
			return k
		}
		if d := editDistance(w, p); d < best && 2*d < len(p) && 2*d < len(w)+1 {
			best, found = d, k
		}
	}
	return found
}

// units are the endings of keys that name a unit.
var units = []string{"m", "kn", "m2", "cm2", "m3-per-kn"}

// plainKey lowers the case and makes separators alike.
func plainKey(s string) string {
	return strings.Map(func(r rune) rune {
		if r == '_' || r == ' ' {
			return '-'
		}
		return r
	}, strings.ToLower(strings.TrimSpace(s)))
}

// longestWord bounds the words that are compared, in bytes: no key of ours is nearly as long.
const longestWord = 40

// editDistance counts insertions, deletions, replacements and swaps of neighbours (Damerau 1964, each letter moved once).
func editDistance(a, b string) int {
	if len(a) > longestWord || len(b) > longestWord {
		return longestWord
	}
	var d [longestWord + 1][longestWord + 1]int
	for i := 0; i <= len(a); i++ {
		d[i][0] = i
	}
	for j := 0; j <= len(b); j++ {
		d[0][j] = j
	}
	for i := 1; i <= len(a); i++ {
		for j := 1; j <= len(b); j++ {
			cost := 1
			if a[i-1] == b[j-1] {
				cost = 0
			}
			d[i][j] = min(d[i-1][j]+1, d[i][j-1]+1, d[i-1][j-1]+cost)
			if i > 1 && j > 1 && a[i-1] == b[j-2] && a[i-2] == b[j-1] {
				d[i][j] = min(d[i][j], d[i-2][j-2]+1)
			}
		}
	}
	return d[len(a)][len(b)]
}
