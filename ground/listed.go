package ground

import (
	"fmt"
	"maps"
	"slices"

	"boughwork/geom"
)

// listed makes the user's own cases, in their order. A case without load is left out with a warning.
func (b *builder) listed(effects []effect) []Case {
	names := mapped(b.spec.Actions, func(a Action) string { return a.Name })
	var out []Case
	for i, u := range b.spec.Cases {
		path := fmt.Sprintf("combinations.cases[%d]", i)
		for _, name := range slices.Sorted(maps.Keys(u.Factors)) {
			if !slices.Contains(names, name) {
				b.issues.Add(geom.Error, u.Name, path, "there is no action %q%s", name, suggest(name, names))
			}
		}
		factors := make([]float64, len(names))
		for j, name := range names {
			factors[j] = u.Factors[name]
		}
		c := Case{Name: u.Name}
		if b.spec.SelfWeight {
			c.Gravity = u.Gravity
		}
		if c.Factors, c.Loads = b.sum(factors, effects); len(c.Loads) == 0 {
			b.issues.Add(geom.Warning, u.Name, path, "the case has no load on any node and is left out")
			continue
		}
		if c.Name == "" {
			c.Name = fmt.Sprintf("case %d", i+1)
		}
		out = append(out, c)
	}
	combos := make([]combo, len(out))
	for k, c := range out {
		combos[k].factor = make([]float64, len(names))
		for _, f := range c.Factors {
			if j := slices.Index(names, f.Action); j >= 0 {
				combos[k].factor[j] = f.Factor
			}
		}
	}
	return b.addSideways(out, combos)
}
