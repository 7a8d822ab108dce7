package ground

import (
	"maps"
	"slices"

	"boughwork/geom"
)

// validateZones lets the brief's limits of footing zones replace those of the site, and checks them all.
func (b *builder) validateZones() {
	site := *b.site
	site.Footings = slices.Clone(site.Footings)
	b.site = &site
	names := mapped(site.Footings, func(z geom.Zone) string { return z.Name })
	for _, name := range slices.Sorted(maps.Keys(b.spec.Limits)) {
		if !slices.Contains(names, name) {
			b.issues.Add(geom.Error, name, "footings", "the site has no footing zone of this name%s", suggest(name, names))
		}
		for i := range site.Footings {
			if site.Footings[i].Name == name {
				site.Footings[i].Limits = b.spec.Limits[name]
			}
		}
	}
	for _, z := range site.Footings {
		l := z.Limits
		for _, v := range []struct {
			key   string
			value *float64
		}{{"vertical_kn", l.Vertical}, {"uplift_kn", l.Uplift}, {"sideways_kn", l.Sideways}, {"cost_m3_per_kn", &l.Cost}} {
			if v.value != nil && !(*v.value >= 0) {
				b.issues.Add(geom.Error, z.Name, "footings", "%s must not be below 0", v.key)
			}
		}
	}
}

// suggest returns "; did you mean ...?" with the name that takes the fewest changes of letters (Levenshtein 1966), or
// nothing if none is near.
func suggest(name string, names []string) string {
	best, at := len(name)/2+2, ""
	for _, n := range names {
		if d := editDistance(name, n); d < best {
			best, at = d, n
		}
	}
	if at == "" {
		return ""
	}
	return "; did you mean " + at + "?"
}

// editDistance returns the number of letters to insert, delete or replace to make b of a.
func editDistance(a, b string) int {
	s, t := []rune(a), []rune(b)
	row := make([]int, len(t)+1)
	for j := range row {
		row[j] = j
	}
	for i := range s {
		diagonal := row[0]
		row[0] = i + 1
		for j := range t {
			change := diagonal
			if s[i] != t[j] {
				change++
			}
			diagonal = row[j+1]
			row[j+1] = min(change, row[j+1]+1, row[j]+1)
		}
	}
	return row[len(t)]
}
