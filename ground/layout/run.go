package layout

import (
	"context"
	"fmt"
	"math"

	"boughwork/geom"
	"boughwork/ground"
	"boughwork/lp"
	"boughwork/lp/interior"
)

// Solve finds the least-volume layout of s for all its cases. It returns an error only for a structure that makes no
// sense; that no layout exists, that the context ended or that a limit was reached is the Status of the result, which
// then holds the best layout found so far, if any.
func Solve(ctx context.Context, s *ground.Structure, opt Options) (*Result, error) {
	err := validate(s)
	if err != nil {
		return nil, err
	}
	if opt.Gap == 0 {
		opt.Gap = 1e-3
	}
	if opt.MaxRounds == 0 {
		opt.MaxRounds = 200
	}
	if opt.Solver == nil {
		opt.Solver = interior.Solver{}
	}
	if !(opt.Gap > 0 && opt.Gap < 1) {
		return nil, fmt.Errorf("layout: gap %g: want a number between 0 and 1, such as 0.001", opt.Gap)
	}
	can := ground.NewCandidates(s)
	st := &study{s: s, prog: newProgram(s), can: can, pricer: pricer{s, can}, opt: opt, letGo: map[int]bool{}, plane: planar(s),
		result: &Result{Solver: opt.Solver.Name()}}
	st.say("candidates", 0, nil)
	if st.result.Candidates, err = can.CountUntil(ctx); err != nil {
		st.result.Status, st.result.Candidates = lp.Cancelled, uncounted
		return st.result, nil
	}
	st.say("layout", 0, nil)
	st.active = newActive(s, can)
	v, d, err := st.allCases(ctx)
	switch {
	case err != nil:
		return nil, err
	case v == nil && ctx.Err() != nil:
		st.result.Status = lp.Cancelled
		return st.result, nil
	case v == nil: // no loads
		st.result.Displacement = zeroMotion(s)
		st.result.Governs = make([]bool, len(s.Cases))
		return st.result, nil
	}
	st.finish(v, d)
	return st.result, nil
}

// uncounted stands for the number of candidates in a study that ended before they were counted.
const uncounted = -1

func validate(s *ground.Structure) error {
	switch m := s.Material; {
	case len(s.Nodes) < 2:
		return fmt.Errorf("layout: %d nodes: a structure has two at least", len(s.Nodes))
	case !(m.Tension >= 0 && m.Compression >= 0 && m.Tension+m.Compression > 0) || math.IsInf(m.Tension+m.Compression, 0):
		return fmt.Errorf("layout: strengths %g Pa in tension and %g Pa in compression: want positive numbers", m.Tension, m.Compression)
	case !(m.Density >= 0):
		return fmt.Errorf("layout: density %g kg/m3: want a positive number, or 0", m.Density)
	case !(s.JointCost >= 0):
		return fmt.Errorf("layout: joint cost %g m: want a positive number, or 0", s.JointCost)
	}
	for i, n := range s.Nodes {
		if !n.At.Finite() {
			return fmt.Errorf("layout: node %d is at %v", i, n.At)
		}
	}
	for _, c := range s.Cases {
		for _, l := range c.Loads {
			if l.Node < 0 || l.Node >= len(s.Nodes) || !l.Force.Finite() {
				return fmt.Errorf("layout: case %q: load %v on node %d of %d", c.Name, l.Force, l.Node, len(s.Nodes))
			}
		}
	}
	for _, k := range s.Kept {
		if k.A == k.B || min(k.A, k.B) < 0 || max(k.A, k.B) >= len(s.Nodes) || !(k.Area > 0) {
			return fmt.Errorf("layout: kept member between nodes %d and %d with area %g m2", k.A, k.B, k.Area)
		}
	}
	return nil
}

func zeroMotion(s *ground.Structure) [][]geom.Vec {
	u := make([][]geom.Vec, len(s.Cases))
	for k := range u {
		u[k] = make([]geom.Vec, len(s.Nodes))
	}
	return u
}

// say reports a stage.
func (st *study) say(stage string, done float64, v *solved) {
	if st.opt.Progress == nil {
		return
	}
	p := Progress{Stage: stage, Done: done, Round: st.rounds, Iterations: st.iterations, AllOf: len(st.s.Cases)}
	if st.active != nil {
		p.Bars = len(st.active.pairs)
	}
	if v != nil && v.sol != nil {
		p.Cases, p.Volume, p.Bound, p.Gap = len(v.cases), v.sol.Objective, math.Max(v.bestBound, 0), v.gap()
	}
	st.opt.Progress(p)
}

// report notes a round and tells of it. The share done is measured on the logarithm of the gap.
func (st *study) report(v *solved) {
	st.result.Rounds = append(st.result.Rounds, Round{Cases: len(v.cases), Bars: len(st.active.pairs), Volume: v.sol.Objective, Bound: v.bestBound})
	gap := math.Min(math.Max(v.gap(), 1e-12), 1)
	st.say("layout", math.Min(1, math.Log(gap)/math.Log(math.Min(st.opt.Gap, 0.5))), v)
}

// finish fills the result from the last solve and the best design.
func (st *study) finish(v *solved, d *design) {
	r := st.result
	r.Status = v.sol.Status
	r.Governs = make([]bool, len(st.s.Cases))
	for _, k := range v.cases {
		r.Governs[k] = true
	}
	if r.Status == lp.NoEquilibrium {
		r.Collapse = st.collapse(v)
		return
	}
	r.Bound, r.WorstViolation = math.Max(v.bestBound, 0), v.bestWorst
	r.Displacement = zeroMotion(st.s)
	if v.bestBound > 0 {
		for k, u := range v.best {
			if u != nil {
				r.Displacement[k], r.Governs[k] = u, true
			}
		}
	}
	if d == nil {
		return
	}
	r.Objective, r.Volume = d.objective, d.volume
	if d.objective > 0 {
		r.Gap = math.Max(0, (d.objective-r.Bound)/d.objective)
	}
	if r.Status == lp.Trouble && r.Gap <= st.opt.Gap {
		r.Status = lp.Optimal
	}
	st.bars(d)
}

// bars writes the bars of a design, in order of nodes, then the kept members.
func (st *study) bars(d *design) {
	force := func(i int) []float64 {
		q := make([]float64, len(st.s.Cases))
		for k := range q {
			if d.force[k] != nil {
				q[k] = d.force[k][i]
			}
		}
		return q
	}
	for i, p := range d.pairs {
		if d.area[i] > 0 {
			st.result.Bars = append(st.result.Bars, Bar{A: int(p.i), B: int(p.j), Area: d.area[i], Force: force(i)})
		}
	}
	for j, k := range st.s.Kept {
		st.result.Bars = append(st.result.Bars, Bar{A: k.A, B: k.B, Area: k.Area, Force: force(len(d.pairs) + j), Kept: true})
	}
}

// collapse turns the displacements of v into evidence: the motion of the case that asks for the most volume.
func (st *study) collapse(v *solved) *Collapse {
	var out *Collapse
	for i, k := range v.cases {
		p := st.prog.problem(nil, []int{k})
		u := v.sol.Displacement[i : i+1]
		top := 0.0
		for _, w := range v.u[i] {
			top = math.Max(top, math.Max(math.Abs(w.X), math.Max(math.Abs(w.Y), math.Abs(w.Z))))
		}
		c := &Collapse{Case: k, Work: st.dual(p, u, 1), LeastVolume: math.Inf(1)}
		if top == 0 || !(c.Work > 0) {
			continue
		}
		f := st.pricer.price(v.u[i:i+1], st.gravity([]int{k}), math.Inf(1))
		if f.worst > 0 {
			c.LeastVolume = c.Work / f.worst
		}
		c.Work /= top
		for _, w := range v.u[i] {
			c.Motion = append(c.Motion, w.Scale(1/top))
		}
		if out == nil || c.LeastVolume > out.LeastVolume {
			out = c
		}
	}
	if out != nil && len(v.cases) > 1 && out.LeastVolume < 10*beyondReason*st.naturalVolume() {
		if all := st.collapseOfAll(v); all != nil && all.LeastVolume > out.LeastVolume {
			return all
		}
	}
	return out
}

// collapseOfAll returns the motions of all cases of v as one proof, the case whose loads work most first.
func (st *study) collapseOfAll(v *solved) *Collapse {
	c := &Collapse{Case: -1, Work: st.dual(v.problem, v.sol.Displacement, 1), LeastVolume: math.Inf(1)}
	if !(c.Work > 0) {
		return nil
	}
	if f := st.pricer.price(v.u, st.gravity(v.cases), math.Inf(1)); f.worst > 0 {
		c.LeastVolume = c.Work / f.worst
	}
	top, most, first := 0.0, math.Inf(-1), 0
	for i, uk := range v.u {
		work := 0.0
		for _, l := range st.s.Cases[v.cases[i]].Loads {
			work += l.Force.Dot(uk[l.Node])
		}
		if work > most {
			most, first = work, i
		}
		for _, w := range uk {
			top = math.Max(top, math.Max(math.Abs(w.X), math.Max(math.Abs(w.Y), math.Abs(w.Z))))
		}
	}
	c.Work /= top
	for i, uk := range v.u {
		m := make([]geom.Vec, len(uk))
		for j, w := range uk {
			m[j] = w.Scale(1 / top)
		}
		if i == first {
			c.Case, c.Motion = v.cases[i], m
		} else {
			c.Others = append(c.Others, CaseMotion{v.cases[i], m})
		}
	}
	return c
}
