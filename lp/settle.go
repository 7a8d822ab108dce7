package lp

import "math"

// Settle moves displacements so that every bar of unlimited strength lengthens or shortens the way it must for a bound
// to hold at all: a bar that cannot be torn must not lengthen, one that cannot be crushed must not shorten. Only the
// first row of such a bar is moved, the last bars first, so that a reaction that stands on another is settled after it.
func (p *Problem) Settle(u [][]float64) {
	b := &p.Bars
	for i := b.Len() - 1; i >= 0; i-- {
		if !math.IsInf(b.Tension[i], 1) && !math.IsInf(b.Compression[i], 1) || b.Ptr[i] == b.Ptr[i+1] {
			continue
		}
		j := b.Ptr[i]
		for k := range u {
			for try := 0; try < 4; try++ {
				e := b.Elongation(i, u[k])
				if !(math.IsInf(b.Tension[i], 1) && e > 0 || math.IsInf(b.Compression[i], 1) && e < 0) {
					break
				}
				u[k][b.Row[j]] += (1 + 1e-15*float64(try)) * e / b.B[j]
			}
		}
	}
}
