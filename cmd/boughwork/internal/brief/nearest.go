package brief

import (
	"fmt"
	"slices"
	"strings"
)

// children returns the names that may stand in the section with the pattern path prefix ("" is the top), in the order
// of the table, without repetition.
func children(prefix string) []string {
	var names []string
	seen := map[string]bool{}
	for _, k := range Table {
		rest, ok := below(k.Path, prefix)
		if !ok {
			continue
		}
		name := rest
		if i := strings.IndexAny(rest, ".["); i >= 0 {
			name = rest[:i]
		}
		if !seen[name] {
			seen[name] = true
			names = append(names, name)
		}
	}
	return names
}

// below returns what follows prefix in path.
func below(path, prefix string) (string, bool) {
	if prefix == "" {
		return path, true
	}
	return strings.CutPrefix(path, prefix+".")
}

// distance is the number of letters to insert, drop or change to turn a into b (Levenshtein 1966), with a swap of
// neighbours counted as one.
func distance(a, b string) int {
	x, y := []rune(a), []rune(b)
	d := make([][]int, len(x)+1)
	for i := range d {
		d[i] = make([]int, len(y)+1)
		d[i][0] = i
	}
	for j := range d[0] {
		d[0][j] = j
	}
	for i := 1; i <= len(x); i++ {
		for j := 1; j <= len(y); j++ {
			change := 1
			if x[i-1] == y[j-1] {
				change = 0
			}
			d[i][j] = min(d[i-1][j]+1, d[i][j-1]+1, d[i-1][j-1]+change)
			if i > 1 && j > 1 && x[i-1] == y[j-2] && x[i-2] == y[j-1] {
				d[i][j] = min(d[i][j], d[i-2][j-2]+1)
			}
		}
	}
	return d[len(x)][len(y)]
}

// longestName is the length above which a name is not compared: no key is near it, and the comparison grows with the
// square of the length.
const longestName = 64

// nearest returns the name nearest to word if it is near enough to be a slip: two letters, or a third of the word.
func nearest(word string, names []string) (string, bool) {
	if len(word) > longestName {
		return "", false
	}
	best, at := "", max(2, len(word)/3)+1
	for _, n := range names {
		if d := distance(word, n); d < at {
			best, at = n, d
		}
	}
	return best, best != ""
}

// remedyForKey says what to do about the unknown key name in the section with pattern path prefix.
func remedyForKey(name, prefix string) string {
	siblings := children(prefix)
	for _, k := range Table {
		// A whole key that stands in the wrong section is a better guess than one that is spelt alike.
		if last := k.Path[strings.LastIndexByte(k.Path, '.')+1:]; last == name {
			return fmt.Sprintf("did you mean %q?", k.Path)
		}
	}
	if near, ok := nearest(name, siblings); ok {
		return fmt.Sprintf("did you mean %q?", near)
	}
	slices.Sort(siblings)
	where := "a brief has"
	if prefix != "" {
		where = "this section has"
	}
	return fmt.Sprintf("%s the keys %s", where, strings.Join(siblings, ", "))
}
