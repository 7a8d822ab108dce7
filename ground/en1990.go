package ground

import "slices"

// Partial factors of EN 1990:2002, table A1.2(B), recommended values (from memory): permanent actions unfavourable and
// favourable, variable actions, and the reduction xi of expression 6.10b.
const (
	en1990Permanent  = 1.35
	en1990Favourable = 1.0
	en1990Variable   = 1.5
	en1990Xi         = 0.85
)

// en1990Psi0 returns the combination factor psi0 of EN 1990:2002, table A1.1 (from memory): snow below 1000 m 0.5, wind
// 0.6, imposed load on roofs (category H) 0.
func en1990Psi0(k ActionKind) float64 {
	switch k {
	case Snow:
		return 0.5
	case Wind:
		return 0.6
	}
	return 0
}

// psi0 returns the combination factor of an action.
func (a Action) psi0() float64 {
	if a.Psi0 != nil {
		return *a.Psi0
	}
	return en1990Psi0(a.Kind)
}

// en1990 returns the combinations of EN 1990:2002, 6.4.3.2: expression 6.10,
//
//	gammaG G + 1.5 Q1 + sum 1.5 psi0i Qi,
//
// with each action of a set leading in turn; or, with ab, both 6.10a (no action leads, all take psi0) and 6.10b (6.10
// with xi = 0.85 on unfavourable permanent actions). Favourable variable actions are left out by way of the smaller sets.
func (b *builder) en1990(sets [][]int, effects []effect, ab bool) []combo {
	unfavourable := en1990Permanent
	if ab {
		unfavourable = product(en1990Xi, en1990Permanent)
	}
	var full, light []combo
	for _, set := range sets {
		if ab || len(set) == 0 {
			// 6.10a; without variable actions it is also what is left of 6.10.
			full = append(full, combo{en1990Permanent, b.en1990Factors(set, -1)})
		}
		for _, lead := range set {
			f := b.en1990Factors(set, lead)
			full = append(full, combo{unfavourable, f})
			if b.light(acting(f), effects) {
				light = append(light, combo{en1990Favourable, f})
			}
		}
	}
	return append(full, light...)
}

// en1990Factors returns the factors of a set of variable actions of which one leads (-1: none).
func (b *builder) en1990Factors(set []int, lead int) []float64 {
	f := make([]float64, len(b.spec.Actions))
	for _, i := range set {
		f[i] = en1990Variable
		if i != lead {
			f[i] = product(en1990Variable, b.spec.Actions[i].psi0())
		}
	}
	return f
}

// acting returns the actions whose factor is not 0.
func acting(f []float64) []int {
	var out []int
	for i, v := range f {
		if v != 0 {
			out = append(out, i)
		}
	}
	return slices.Clip(out)
}
