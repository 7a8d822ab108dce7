package ground

// asce7 returns the strength combinations of ASCE 7-16, section 2.3.1 (from memory), for a roof: no floor live load, so
// L is 0, and of the roof live load Lr (kind Imposed) and snow S at most one acts:
//
//	1  1.4 D
//	2  1.2 D + 0.5 (Lr or S)           lies between 1 and 3, left out
//	3  1.2 D + 1.6 (Lr or S) + 0.5 W
//	4  1.2 D + 1.0 W + 0.5 (Lr or S)
//	5  0.9 D + 1.0 W
//
// Snow and roof live load of several groups act together with the same factor. Psi0 plays no part. In 5 the dead load
// also stays at 0.9 with any other action that acts upwards or sideways.
func (b *builder) asce7(sets [][]int, effects []effect) []combo {
	var full, light []combo
	for _, set := range sets {
		roof, wind := 0, 0
		for _, i := range set {
			if b.spec.Actions[i].Kind == Wind {
				wind++
			} else {
				roof++
			}
		}
		if len(set) == 0 {
			full = append(full, combo{1.4, b.asce7Factors(set, 0, 0)})
			continue
		}
		if roof > 0 {
			full = append(full, combo{1.2, b.asce7Factors(set, 1.6, 0.5)})
		}
		if wind > 0 {
			full = append(full, combo{1.2, b.asce7Factors(set, 0.5, 1.0)})
		}
		switch {
		case roof == 0:
			light = append(light, combo{0.9, b.asce7Factors(set, 0, 1.0)})
		case wind == 0 && b.light(set, effects):
			light = append(light, combo{0.9, b.asce7Factors(set, 1.6, 0)})
		}
	}
	return append(full, light...)
}

// asce7Factors returns the factors of a set of variable actions: one for roof live load and snow, one for wind.
func (b *builder) asce7Factors(set []int, roof, wind float64) []float64 {
	f := make([]float64, len(b.spec.Actions))
	for _, i := range set {
		f[i] = roof
		if b.spec.Actions[i].Kind == Wind {
			f[i] = wind
		}
	}
	return f
}
