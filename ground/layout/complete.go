package layout

import (
	"context"
	"math"
	"slices"

	"boughwork/lp"
)

// complete checks every case that v was not solved for against its areas, and returns a design that carries all cases
// and the cost of strengthening for each. The design is nil if a case cannot be carried by the bars of the program; its
// cost is then infinite.
func (st *study) complete(ctx context.Context, v *solved, rank []int) (*design, map[int]float64, error) {
	n, kept := len(st.active.pairs), len(st.s.Kept)
	d := &design{pairs: slices.Clone(st.active.pairs), area: slices.Clone(v.sol.Area[:n]), feet: slices.Clone(v.sol.Area[n+kept:]),
		force: make([][]float64, len(st.s.Cases))}
	for i, k := range v.cases {
		d.force[k] = v.sol.Force[i]
	}
	cost := map[int]float64{}
	area, feet := slices.Clone(d.area), slices.Clone(d.feet)
	for done, k := range rank {
		if d.force[k] != nil {
			continue
		}
		st.say("cases", float64(done)/float64(len(rank)), v)
		r, err := st.strengthen(ctx, v, d, k)
		switch {
		case err != nil || ctx.Err() != nil:
			return nil, cost, err
		case r == nil:
			return nil, map[int]float64{k: math.Inf(1)}, nil
		}
		d.force[k], cost[k] = r.force, r.cost
		for i := range area {
			area[i] = math.Max(area[i], r.area[i])
		}
		for i := range feet {
			feet[i] = math.Max(feet[i], r.feet[i])
		}
	}
	d.area, d.feet = area, feet
	if len(cost) > 0 && st.weighs() {
		if ok, err := st.balanceWeight(ctx, d, rank); err != nil || !ok {
			return nil, cost, err
		}
	}
	st.value(d)
	return d, cost, nil
}

// value sums the objective and the volume of a design.
func (st *study) value(d *design) {
	d.volume, d.objective = 0, 0
	for i, a := range d.area {
		d.volume += a * st.length(d.pairs[i])
		d.objective += a * d.pairs[i].cost
	}
	for i, a := range d.feet {
		if !st.prog.feet.Fixed[i] {
			d.objective += a * st.prog.feet.Cost[i]
		}
	}
}

// stronger is what one case asks: its forces over pairs, kept members and feet, and the areas that carry them.
type stronger struct {
	cost       float64
	force      []float64
	area, feet []float64
}

// Bars below this share of the largest area are not worth a twin.
const freeArea = 1e-6

// strengthen finds the cheapest areas to add to d so that case k is carried too: minimise sum c s subject to
// equilibrium and -sc (a + s) <= q <= st (a + s). Each bar is there twice, once with its area at no cost and once to be
// bought; so is each foot that costs. It returns nil if the bars cannot carry the case at any price.
func (st *study) strengthen(ctx context.Context, v *solved, d *design, k int) (*stronger, error) {
	p := st.prog.problem(st.active.pairs, []int{k})
	twin := st.twins(p, d, false)
	set := lp.Settings{Gap: 1e-2, Absolute: checkShare * st.opt.Gap * math.Max(v.sol.Objective, 1e-300)}
	sol, err := st.opt.Solver.Solve(ctx, p, nil, set)
	if err != nil {
		return nil, err
	}
	if sol.Raw || sol.Status == lp.NoEquilibrium {
		return nil, nil
	}
	r := &stronger{cost: sol.Objective, force: st.joined(p, sol, twin, 0)}
	n, kept, m := len(d.pairs), len(st.s.Kept), st.s.Material
	for i := range n {
		q := r.force[i]
		r.area = append(r.area, math.Max(d.area[i], need(q, m.Tension, m.Compression)))
	}
	for i := range d.feet {
		f := &st.prog.feet
		a := d.feet[i]
		if !f.Fixed[i] {
			a = math.Max(a, need(r.force[n+kept+i], f.Tension[i], f.Compression[i]))
		}
		r.feet = append(r.feet, a)
	}
	return r, nil
}

// need is the area that force q asks for.
func need(q, st, sc float64) float64 {
	switch {
	case q > 0 && st > 0:
		return q / st
	case q < 0 && sc > 0:
		return -q / sc
	}
	return 0
}

// twins adds to p a bar of fixed area beside every bar and costed foot that d gives an area, and returns which they
// belong to. With only, the bars that could be bought are priced out of p: none is added to begin with.
func (st *study) twins(p *lp.Problem, d *design, only bool) []int {
	top := 0.0
	for _, a := range d.area {
		top = math.Max(top, a)
	}
	n, kept := len(d.pairs), len(st.s.Kept)
	var twin []int
	b := &p.Bars
	add := func(i int, area float64) {
		lo, hi := b.Ptr[i], b.Ptr[i+1]
		b.Add(b.Row[lo:hi], b.B[lo:hi], b.H[lo:hi], b.Tension[i], b.Compression[i], 0, area, true)
		twin = append(twin, i)
	}
	for i, a := range d.area {
		if a > freeArea*top || only && a > 0 {
			add(i, a)
		}
	}
	for i, a := range d.feet {
		if !st.prog.feet.Fixed[i] && a > 0 {
			add(n+kept+i, a)
		}
	}
	return twin
}

// joined returns the forces of case c with those of twins added to their bars.
func (st *study) joined(p *lp.Problem, sol *lp.Solution, twin []int, c int) []float64 {
	base := p.Bars.Len() - len(twin)
	q := slices.Clone(sol.Force[c][:base])
	for t, i := range twin {
		q[i] += sol.Force[c][base+t]
	}
	return q
}

func (st *study) weighs() bool {
	for _, c := range st.s.Cases {
		if c.Gravity != 0 && st.s.Material.Density > 0 {
			return true
		}
	}
	return false
}

// balanceWeight finds forces for every case under the weight of the final areas: strengthening for one case weighs on
// all others. Areas grow by marginSteps, in turn, until all cases are carried.
func (st *study) balanceWeight(ctx context.Context, d *design, rank []int) (bool, error) {
	for _, margin := range marginSteps {
		trial := &design{pairs: d.pairs, area: slices.Clone(d.area), feet: slices.Clone(d.feet), force: make([][]float64, len(d.force))}
		for i := range trial.area {
			trial.area[i] *= 1 + margin
		}
		for i := range trial.feet {
			if !st.prog.feet.Fixed[i] {
				trial.feet[i] *= 1 + margin
			}
		}
		ok := true
		for _, k := range rank {
			q, err := st.carry(ctx, trial, k)
			if err != nil {
				return false, err
			}
			if ok = q != nil; !ok {
				break
			}
			trial.force[k] = q
		}
		if ok {
			*d = *trial
			return true, nil
		}
		if ctx.Err() != nil {
			return false, nil
		}
	}
	return false, nil
}

// marginSteps are the shares by which areas grow until their own weight is carried as well.
var marginSteps = []float64{2e-5, 1e-4, 5e-4, 2e-3, 1e-2}

// carry returns forces for case k in a design of given areas, or nil if there are none: the bars to be bought are
// priced so that buying none is best, and none is bought.
func (st *study) carry(ctx context.Context, d *design, k int) ([]float64, error) {
	p := st.prog.problem(nil, []int{k})
	n, kept := len(d.pairs), len(st.s.Kept)
	q := &lp.Problem{Rows: p.Rows, Block: p.Block, At: p.At, Cases: p.Cases}
	var at []int
	for i, a := range d.area {
		if a > 0 {
			c, _ := st.prog.column(int(d.pairs[i].i), int(d.pairs[i].j))
			q.Bars.Add(c.row, c.b, c.h, st.s.Material.Tension, st.s.Material.Compression, 0, a, true)
			at = append(at, i)
		}
	}
	for i := range p.Bars.Len() {
		lo, hi := p.Bars.Ptr[i], p.Bars.Ptr[i+1]
		upper := p.Bars.Upper[i]
		if f := i - kept; f >= 0 && !p.Bars.Fixed[i] {
			if upper = d.feet[f]; upper <= 0 {
				continue
			}
		}
		q.Bars.Add(p.Bars.Row[lo:hi], p.Bars.B[lo:hi], p.Bars.H[lo:hi], p.Bars.Tension[i], p.Bars.Compression[i], 0, upper, true)
		at = append(at, n+i)
	}
	sol, err := st.opt.Solver.Solve(ctx, q, nil, lp.Settings{Gap: 1e-2, Absolute: math.Inf(1)})
	if err != nil || sol.Raw || sol.Status != lp.Optimal {
		return nil, err
	}
	force := make([]float64, n+kept+len(d.feet))
	for j, i := range at {
		force[i] = sol.Force[0][j]
	}
	return force, nil
}
