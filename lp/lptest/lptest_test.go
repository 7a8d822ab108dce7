package lptest

import (
	"context"
	"math"
	"strings"
	"testing"

	"boughwork/lp"
)

// scripted solves the bracket, by hand, and nothing else; spoil makes it a wrong solver.
type scripted struct {
	spoil func(p *lp.Problem, s *lp.Solution)
}

func (scripted) Name() string { return "scripted" }

// Solve returns the hand-made solution of bracket(1, 1, 1): tie 3/4 over 3, strut 5/4 over 5; both bars at their cost under
// the displacements (3, -8.5).
func (c scripted) Solve(_ context.Context, p *lp.Problem, _ *lp.Start, _ lp.Settings) (*lp.Solution, error) {
	s := &lp.Solution{Area: []float64{0.75, 1.25}, Force: [][]float64{{0.75, -1.25}}, Displacement: [][]float64{{3, -8.5}},
		Objective: 8.5, Bound: 8.5}
	if c.spoil != nil {
		c.spoil(p, s)
	}
	return s, nil
}

func find(t *testing.T, name string) check {
	t.Helper()
	for _, c := range checks() {
		if c.name == name {
			return c
		}
	}
	t.Fatalf("no check %q", name)
	return check{}
}

// A suite that lets a wrong answer pass is worth nothing: each of these must be caught, for the reason given.
func TestWrongAnswersAreCaught(t *testing.T) {
	honest := find(t, "two bars under one load")
	if err := honest.run(scripted{}); err != nil {
		t.Fatalf("the right answer: %v", err)
	}
	for _, c := range []struct {
		name, want string
		spoil      func(*lp.Problem, *lp.Solution)
	}{
		{"areas perturbed downwards", "beyond strength", func(_ *lp.Problem, s *lp.Solution) { s.Area[0] *= 1 - 1e-7 }},
		{"areas perturbed upwards", "gap", func(_ *lp.Problem, s *lp.Solution) { s.Area[1] *= 1 + 1e-6; s.Objective += 1.25e-6 * 5 }},
		{"forces perturbed", "unbalanced", func(_ *lp.Problem, s *lp.Solution) { s.Force[0][0] *= 1 - 1e-6 }},
		{"compression positive", "unbalanced", func(_ *lp.Problem, s *lp.Solution) { s.Force[0][0] *= -1; s.Force[0][1] *= -1 }},
		{"displacement of the wrong sign", "gap", func(p *lp.Problem, s *lp.Solution) {
			s.Displacement[0][0], s.Displacement[0][1] = -3, 8.5
			s.Bound, _ = lp.Bound(p, s.Displacement)
		}},
		{"displacement of the wrong sign, bound claimed", "gap", func(_ *lp.Problem, s *lp.Solution) {
			s.Displacement[0][0], s.Displacement[0][1] = -3, 8.5
		}},
		{"displacement in units of its own", "gap", func(_ *lp.Problem, s *lp.Solution) { s.Displacement[0][0] *= 1e-3 }},
		{"no displacement", "cases", func(_ *lp.Problem, s *lp.Solution) { s.Displacement = nil }},
		{"objective claimed too low", "objective said", func(_ *lp.Problem, s *lp.Solution) { s.Objective = 8.4 }},
		{"bound claimed too high", "bound said", func(_ *lp.Problem, s *lp.Solution) { s.Bound = 8.6 }},
		{"not a number", "NaN", func(_ *lp.Problem, s *lp.Solution) { s.Area[0] = math.NaN() }},
		{"raw", "raw", func(_ *lp.Problem, s *lp.Solution) { s.Raw = true }},
		{"no status", "status", func(_ *lp.Problem, s *lp.Solution) { s.Status = lp.Trouble }},
	} {
		err := honest.run(scripted{c.spoil})
		if err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want %q", c.name, err, c.want)
		}
	}
}

// A wrong solver must be caught by the promises as well.
func TestBrokenPromisesAreCaught(t *testing.T) {
	for _, c := range []struct {
		check string
		spoil func(*lp.Problem, *lp.Solution)
	}{
		{"malformed problems are errors", nil},
		{"settings out of range are errors", nil},
		{"a context that has ended", nil},
		{"a context that ends on the way", nil},
		{"an iteration limit is no error", nil},
		{"the problem is left as it was", func(p *lp.Problem, _ *lp.Solution) { p.Cases[0].Load[0]++ }},
		{"a hinge loaded across the bar", nil},
		{"a hinge loaded across the bar", collapseClaimed(0, 0)},
		{"a hinge loaded across the bar", collapseClaimed(-1, 0)},
		{"a hinge loaded across the bar", collapseClaimed(0, -1)},
		{"random 1", nil},
		{"as gonum's simplex, 0", nil},
	} {
		if err := find(t, c.check).run(scripted{c.spoil}); err == nil {
			t.Errorf("%s: a solver that breaks it passed", c.check)
		}
	}
	if err := find(t, "a hinge loaded across the bar").run(scripted{collapseClaimed(1, 0)}); err != nil {
		t.Errorf("the right motion: %v", err)
	}
}

// collapseClaimed says that one node has no equilibrium and moves.
func collapseClaimed(ux, uy float64) func(*lp.Problem, *lp.Solution) {
	return func(p *lp.Problem, s *lp.Solution) {
		s.Status, s.Raw = lp.NoEquilibrium, true
		s.Area = make([]float64, p.Bars.Len())
		s.Force = [][]float64{make([]float64, p.Bars.Len())}
		s.Displacement = [][]float64{{ux, uy}}
	}
}

// The oracle against problems whose answer is known by hand; among them dependent rows, kept and limited bars, reactions
// without limit on one side, and weight.
func TestSimplexOnHandMadeProblems(t *testing.T) {
	for _, c := range []struct {
		name string
		p    *lp.Problem
		want float64
	}{
		{"bracket", bracket(1, 1, 1), 8.5},
		{"kept bar with weight", keptWithWeight(), 8.5 / 0.75},
		{"pair with a limit, two cases", pairTwo(), 16},
		{"foot that may not lift, pulled", post(3, stand(0, math.Inf(1), 0, 1, true)), 6},
		{"foot that may not push, pulled", post(3, stand(math.Inf(1), 0, 0, 1, true)), 3},
		{"foot with a cost and a limit", post(-3, stand(1, 1, 0.5, 2, false)), 5},
		{"dependent rows", dependent(), 2},
		{"empty rows", flat(), 8.5},
		{"hanger with weight", hanging(2).p, hanging(2).want},
		{"nothing", nothingAtAll(), 0},
	} {
		got, err := Simplex(c.p)
		if err != nil || math.Abs(got-c.want) > 1e-9*math.Max(1, c.want) {
			t.Errorf("%s: %v, %v; want %v", c.name, got, err, c.want)
		}
	}
}

// The generator must make what it says: valid problems with every trimming among them.
func TestRandomProblemsHaveEveryTrimming(t *testing.T) {
	var fixed, limited, oneSided, endless, weight, joint, several, flat, spatial int
	for seed := range uint64(randomProblems) {
		p := randomProblem(seed, 1+int(seed)%mostNodes, seed%3 > 0)
		if err := p.Validate(); err != nil {
			t.Fatalf("%d: %v", seed, err)
		}
		b := &p.Bars
		for i := range b.Len() {
			count(&fixed, b.Fixed[i])
			count(&limited, !b.Fixed[i] && !math.IsInf(b.Upper[i], 1))
			count(&oneSided, b.Tension[i] == 0 || b.Compression[i] == 0)
			count(&endless, math.IsInf(b.Compression[i], 1))
		}
		for _, h := range b.H {
			count(&weight, h != 0)
		}
		count(&joint, b.Cost[0] > 0)
		count(&several, len(p.Cases) > 1)
		count(&flat, p.Block[1] == 2)
		count(&spatial, p.Block[1] == 3)
	}
	for name, n := range map[string]int{"kept": fixed, "limited": limited, "one-sided": oneSided, "endless": endless, "weight": weight,
		"joint": joint, "several cases": several, "2D": flat, "3D": spatial} {
		if n < 5 {
			t.Errorf("%s: only %d", name, n)
		}
	}
}

func count(n *int, yes bool) {
	if yes {
		*n++
	}
}
