package lp

import (
	"fmt"
	"math"
)

// A bar that carries less than this share of the largest load is measured against that share instead of its own
// strength, so that the rounding of a bar of no area does not count as a violation.
const smallForce = 1e-6

// Report is the judgement of a solution on the problem as it was stated, unscaled. Every figure is recomputed from
// Area, Force and Displacement; nothing that the solver says of itself is used. A figure is NaN where the solution has a
// NaN that bears on it, so compare as !(figure <= tolerance).
type Report struct {
	// Shape is not nil if the solution does not fit the problem; then nothing else is filled in.
	Shape error
	// Reference is the force that Unbalanced and Strength are relative to: the largest load on a row over all cases, the
	// weight of the fixed bars counted in; 1 if there is none.
	Reference float64
	// Unbalanced is, for every case, the largest |sum_i (b_i q_ik - g_k h_i a_i) + f_k| over the rows, relative to Reference.
	Unbalanced []float64
	// Strength is the largest excess of a force over strength x area, relative to that product, or to a millionth of
	// Reference where that is more; 0 if none is exceeded.
	Strength float64
	// Limit is the largest excess of an area over its upper limit, or difference of a fixed bar's area from its own,
	// relative to that limit (to the largest area for a limit of 0).
	Limit float64
	// Negative is the largest |a_i| of a negative area, relative to the largest area.
	Negative float64
	// Objective is sum c_i a_i over the bars that are not fixed.
	Objective float64
	// Bound is the lower bound that Displacement proves, by the function Bound; WorstPrice is the second value of it.
	Bound, WorstPrice float64
	// Gap is (Objective - Bound) / Objective, or 0 if both are 0. It may fall below zero by what the answer is out of balance.
	Gap float64
	// ObjectiveSaid and BoundSaid are the differences of the solver's own Objective and Bound from those recomputed,
	// relative to Objective (absolute where that is 0).
	ObjectiveSaid, BoundSaid float64
}

// Check judges a solution outside the solver, on the original problem. p must be valid (Problem.Validate). Sums over rows
// and over bars are compensated (Neumaier 1974), so that the figures are those of the answer and not of the order of
// summing; the few terms of one bar are summed plainly.
func Check(p *Problem, s *Solution) Report {
	if err := fits(p, s); err != nil {
		return Report{Shape: err}
	}
	r := Report{Reference: reference(p), Unbalanced: make([]float64, len(p.Cases))}
	for k := range p.Cases {
		r.Unbalanced[k] = largestOf(unbalanced(p, s.Area, s.Force[k], k)) / r.Reference
		r.Strength = math.Max(r.Strength, strengthExcess(p, s.Area, s.Force[k], r.Reference))
	}
	r.Limit, r.Negative = areaExcess(p, s.Area)
	r.Objective = objective(p, s.Area)
	r.Bound, r.WorstPrice = Bound(p, s.Displacement)
	unit := math.Abs(r.Objective)
	if unit == 0 {
		unit = 1
	}
	r.Gap = (r.Objective - r.Bound) / unit
	r.ObjectiveSaid = math.Abs(r.Objective-s.Objective) / unit
	r.BoundSaid = math.Abs(r.Bound-s.Bound) / unit
	return r
}

// Err returns nil if the solution is in equilibrium to residual, within strength and limits to strength, its gap is at
// most gap, and what the solver says of objective and bound is true to strength; all relative. Otherwise it says what
// fails and by how much.
func (r Report) Err(residual, strength, gap float64) error {
	if r.Shape != nil {
		return r.Shape
	}
	for k, v := range r.Unbalanced {
		if !(v <= residual) {
			return fmt.Errorf("lp: case %d: unbalanced force of %.3g of the largest load, more than %g", k, v, residual)
		}
	}
	for _, c := range []struct {
		what        string
		value, most float64
	}{
		{"negative area of a share of the largest of", r.Negative, 0},
		{"force beyond strength x area by a share of", r.Strength, strength},
		{"area beyond its limit by a share of", r.Limit, strength},
		{"gap of", r.Gap, gap},
		{"gap below zero by", -r.Gap, gap},
		{"objective said to be other than it is by a share of", r.ObjectiveSaid, strength},
		{"bound said to be other than it is by a share of", r.BoundSaid, strength},
	} {
		if !(c.value <= c.most) {
			return fmt.Errorf("lp: %s %.3g, more than %g", c.what, c.value, c.most)
		}
	}
	return nil
}

func fits(p *Problem, s *Solution) error {
	if len(s.Area) != p.Bars.Len() {
		return fmt.Errorf("lp: solution: %d areas for %d bars", len(s.Area), p.Bars.Len())
	}
	if len(s.Force) != len(p.Cases) || len(s.Displacement) != len(p.Cases) {
		return fmt.Errorf("lp: solution: forces of %d and displacements of %d cases for %d cases", len(s.Force), len(s.Displacement), len(p.Cases))
	}
	for k := range p.Cases {
		if len(s.Force[k]) != p.Bars.Len() {
			return fmt.Errorf("lp: solution, case %d: %d forces for %d bars", k, len(s.Force[k]), p.Bars.Len())
		}
		if len(s.Displacement[k]) != p.Rows {
			return fmt.Errorf("lp: solution, case %d: %d displacements for %d rows", k, len(s.Displacement[k]), p.Rows)
		}
	}
	return nil
}

// unbalanced returns sum_i (b_i q_i - g h_i a_i) + f of case k.
func unbalanced(p *Problem, area, force []float64, k int) []float64 {
	rows := make([]sum, p.Rows)
	b, g := &p.Bars, p.Cases[k].Gravity
	for i := range area {
		for j := b.Ptr[i]; j < b.Ptr[i+1]; j++ {
			rows[b.Row[j]].add(b.B[j] * force[i])
			if g != 0 {
				rows[b.Row[j]].add(-g * b.H[j] * area[i])
			}
		}
	}
	out := make([]float64, p.Rows)
	for r, f := range p.Cases[k].Load {
		rows[r].add(f)
		out[r] = rows[r].value()
	}
	return out
}

// reference returns the largest load with the weight of the fixed bars, or 1.
func reference(p *Problem) float64 {
	fixed := make([]float64, p.Bars.Len())
	for i, yes := range p.Bars.Fixed {
		if yes {
			fixed[i] = p.Bars.Upper[i]
		}
	}
	none := make([]float64, len(fixed))
	top := 0.0
	for k, c := range p.Cases {
		top = math.Max(top, math.Max(largestOf(c.Load), largestOf(unbalanced(p, fixed, none, k))))
	}
	if top == 0 {
		return 1
	}
	return top
}

func strengthExcess(p *Problem, area, force []float64, ref float64) float64 {
	b, worst := &p.Bars, 0.0
	for i, a := range area {
		for _, side := range [2]struct{ strength, q float64 }{{b.Tension[i], force[i]}, {b.Compression[i], -force[i]}} {
			if math.IsInf(side.strength, 1) {
				continue
			}
			most := side.strength * a
			worst = math.Max(worst, (side.q-most)/math.Max(most, smallForce*ref))
		}
	}
	return worst
}

func areaExcess(p *Problem, area []float64) (limit, negative float64) {
	top := largestOf(area)
	if top == 0 {
		return 0, 0
	}
	for i, a := range area {
		negative = math.Max(negative, -a/top)
		unit := p.Bars.Upper[i]
		if math.IsInf(unit, 1) {
			continue
		}
		excess := a - unit
		if p.Bars.Fixed[i] {
			excess = math.Abs(excess)
		}
		if unit == 0 {
			unit = top
		}
		limit = math.Max(limit, excess/unit)
	}
	return limit, negative
}

func objective(p *Problem, area []float64) float64 {
	var v sum
	for i, a := range area {
		if !p.Bars.Fixed[i] {
			v.add(p.Bars.Cost[i] * a)
		}
	}
	return v.value()
}

// largestOf returns the largest absolute value, NaN if there is one.
func largestOf(x []float64) float64 {
	top := 0.0
	for _, v := range x {
		top = math.Max(top, math.Abs(v))
	}
	return top
}
