package layout

import (
	"context"
	"math"
	"runtime"
	"slices"
	"sync"
	"sync/atomic"

	"boughwork/ground"
	"boughwork/lp"
)

// complete finds forces for every case in the areas of t, which it strengthens a little where a case asks for it, case
// after case. It returns the design; or nil and cases that ask for too much, which are then moved to the front of the
// order: what failed once is likely to fail again. gap is that of the design.
//
// Where bars weigh, what one case adds weighs on all others. All areas are then enlarged a little, which gives every case
// more room than the weight takes, and the cases are gone through again, all of them, until what is added weighs nothing
// to speak of.
func (st *study) complete(ctx context.Context, t trimmed, gap float64) (*design, []int, error) {
	n, kept := len(t.pairs), len(st.s.Kept)
	d := &design{pairs: t.pairs, area: slices.Clone(t.sol.Area[:n]), feet: slices.Clone(t.sol.Area[n+kept:]), force: make([][]float64, len(st.s.Cases))}
	for i, k := range t.cases {
		d.force[k] = slices.Clone(t.sol.Force[i])
	}
	budget := strengthenShare * gap * t.sol.Objective
	rest := make([]int, 0, len(st.order))
	for _, k := range st.order {
		if d.force[k] == nil {
			rest = append(rest, k)
		}
	}
	for range weightPasses {
		before := st.weight(d)
		failed, err := st.pass(ctx, t, d, rest, &budget)
		if err != nil || ctx.Err() != nil {
			return nil, nil, err
		}
		if failed != nil {
			for _, k := range slices.Backward(failed) {
				i := slices.Index(st.order, k)
				st.order = append([]int{k}, slices.Delete(slices.Clone(st.order), i, i+1)...)
			}
			return nil, failed, nil
		}
		if !st.weighs() || st.weight(d)-before <= weightShare*st.topLoad() {
			st.value(d)
			return d, nil, nil
		}
		rest = st.order
		if budget -= st.enlarge(d, weightRoom*gap); budget <= 0 {
			break
		}
	}
	return nil, nil, nil
}

// strengthenShare is the share of the gap that strengthening may cost, over all cases. pass looks for one case that is
// not carried, and one more for so many that are in the program already. Cases are gone through weightPasses times at
// most, until a pass adds no more weight than weightShare of the largest load: a fifth of what the record promises. Before each
// of these passes areas grow by weightRoom of the gap.
const (
	strengthenShare = 0.4
	failedShare     = 3
	weightPasses    = 8
	weightShare     = 2e-9
	weightRoom      = 0.05
)

// enlarge multiplies all areas of a design by one and a share more, and returns what that costs.
func (st *study) enlarge(d *design, share float64) float64 {
	cost := 0.0
	for i := range d.area {
		cost += share * d.area[i] * d.pairs[i].cost
		d.area[i] *= 1 + share
	}
	for i := range d.feet {
		if !st.prog.feet.Fixed[i] {
			cost += share * d.feet[i] * st.prog.feet.Cost[i]
			d.feet[i] *= 1 + share
		}
	}
	return cost
}

// pass finds forces for the given cases in the areas of d, strengthening them within the budget. It returns the cases
// for which that does not do. Cases are tried chunk by chunk on all cores, in the areas that the chunk began with, so that
// the outcome does not depend on the number of cores; areas are then the largest that any of them asks for.
func (st *study) pass(ctx context.Context, t trimmed, d *design, cases []int, budget *float64) ([]int, error) {
	var failed []int
	for from := 0; from < len(cases); from += passChunk {
		chunk := cases[from:min(from+passChunk, len(cases))]
		st.say("cases", float64(from)/float64(len(cases)), t.solved)
		force := make([][]float64, len(chunk))
		left := *budget
		err := onAllCores(len(chunk), func(i int) (err error) {
			if d.force[chunk[i]] != nil { // carried before, in nearly the same areas
				if force[i], err = st.carry(ctx, d, chunk[i]); force[i] != nil || err != nil {
					return err
				}
			}
			force[i], err = st.strengthen(ctx, d, chunk[i], left)
			return err
		})
		if err != nil || ctx.Err() != nil {
			return nil, err
		}
		for i, k := range chunk {
			cost := st.fit(d, force[i], *budget)
			if cost < 0 {
				if failed = append(failed, k); len(failed) > len(t.cases)/failedShare {
					return failed, nil
				}
				continue
			}
			*budget -= cost
			d.force[k] = force[i]
		}
	}
	return failed, nil
}

// fit enlarges the areas of d to what the forces q need and returns what that costs; -1, and d as it was, if it costs more
// than the budget or if there are no forces.
func (st *study) fit(d *design, q []float64, budget float64) float64 {
	if q == nil {
		return -1
	}
	n, kept, m, feet := len(d.pairs), len(st.s.Kept), st.s.Material, &st.prog.feet
	cost := 0.0
	for i, a := range d.area {
		cost += d.pairs[i].cost * math.Max(0, need(q[i], m.Tension, m.Compression)-a)
	}
	for i, a := range d.feet {
		if !feet.Fixed[i] {
			cost += feet.Cost[i] * math.Max(0, need(q[n+kept+i], feet.Tension[i], feet.Compression[i])-a)
		}
	}
	if cost > budget {
		return -1
	}
	for i, a := range d.area {
		d.area[i] = math.Max(a, need(q[i], m.Tension, m.Compression))
	}
	for i, a := range d.feet {
		if !feet.Fixed[i] {
			d.feet[i] = math.Max(a, need(q[n+kept+i], feet.Tension[i], feet.Compression[i]))
		}
	}
	return cost
}

// passChunk is how many cases are tried at once.
const passChunk = 8

// onAllCores calls f for 0 to n-1 from several goroutines and returns the first error by number.
func onAllCores(n int, f func(i int) error) error {
	errs := make([]error, n)
	var next atomic.Int64
	var wg sync.WaitGroup
	for range min(n, runtime.GOMAXPROCS(0)) {
		wg.Go(func() {
			for i := int(next.Add(1)) - 1; i < n; i = int(next.Add(1)) - 1 {
				errs[i] = f(i)
			}
		})
	}
	wg.Wait()
	for _, err := range errs {
		if err != nil {
			return err
		}
	}
	return nil
}

// weight returns the weight of the bars of a design at gravity factor 1, N.
func (st *study) weight(d *design) float64 {
	w := 0.0
	for i, a := range d.area {
		w += a * st.length(d.pairs[i]) * st.s.Material.Density * ground.Gravity
	}
	return w
}

// topLoad returns the largest nodal load of any case, N.
func (st *study) topLoad() float64 {
	top := 0.0
	for _, c := range st.s.Cases {
		for _, l := range c.Loads {
			top = math.Max(top, l.Force.Norm())
		}
	}
	return top
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

func (st *study) length(p pair) float64 {
	return st.s.Nodes[p.j].At.Sub(st.s.Nodes[p.i].At).Norm()
}

// carry returns forces for case k in a design of given areas, over its pairs, kept members and feet; nil if there are
// none.
func (st *study) carry(ctx context.Context, d *design, k int) ([]float64, error) {
	p := st.prog.problem(d.pairs, []int{k})
	b := &p.Bars
	n, kept := len(d.pairs), len(st.s.Kept)
	for i := range b.Len() {
		switch f := i - n - kept; {
		case i < n:
			b.Fixed[i], b.Upper[i] = true, d.area[i]
		case f >= 0 && !b.Fixed[i]:
			b.Fixed[i], b.Upper[i] = true, d.feet[f]
		}
	}
	sol, err := st.opt.Solver.Solve(ctx, p, nil, lp.Settings{Gap: 1e-2, Iterations: carryIterations})
	if err != nil || sol.Raw || sol.Status != lp.Optimal {
		return nil, err
	}
	return sol.Force[0], nil
}

// carryIterations is enough for any case that given areas carry with a little to spare; one that they carry just so is
// better made to govern.
const carryIterations = 14

// weighs reports whether bars weigh in some case.
func (st *study) weighs() bool {
	for _, c := range st.s.Cases {
		if c.Gravity != 0 && st.s.Material.Density > 0 {
			return true
		}
	}
	return false
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
