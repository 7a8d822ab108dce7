//go:build glpk && cgo

package glpk

import (
	"context"
	"errors"
	"math"
	"math/rand/v2"
	"sync"
	"testing"

	"boughwork/lp"
)

// wall is a grid of nx by ny fields, fixed along one side, with all bars up to reach.
func wall(nx, ny, cases int, reach float64) *lp.Problem {
	p := &lp.Problem{Block: []int32{0}}
	var at [][2]float64
	var row []int32
	for i := range nx + 1 {
		for j := range ny + 1 {
			at, row = append(at, [2]float64{float64(i), float64(j)}), append(row, int32(p.Rows))
			if i == 0 {
				row[len(row)-1] = -1
				continue
			}
			p.Rows += 2
			p.Block = append(p.Block, int32(p.Rows))
			p.At = append(p.At, [3]float64{float64(i), float64(j)})
		}
	}
	for a := range at {
		for b := range a {
			dx, dy := at[b][0]-at[a][0], at[b][1]-at[a][1]
			l := math.Hypot(dx, dy)
			var rows []int32
			var col []float64
			if row[a] >= 0 {
				rows, col = append(rows, row[a], row[a]+1), append(col, dx/l, dy/l)
			}
			if row[b] >= 0 {
				rows, col = append(rows, row[b], row[b]+1), append(col, -dx/l, -dy/l)
			}
			if l <= reach && len(rows) > 0 {
				p.Bars.Add(rows, col, make([]float64, len(rows)), 1, 0.7, l, math.Inf(1), false)
			}
		}
	}
	r := rand.New(rand.NewPCG(1, 2))
	for range cases {
		f := make([]float64, p.Rows)
		for range 6 {
			f[r.IntN(p.Rows)] = r.NormFloat64()
		}
		p.Cases = append(p.Cases, lp.Case{Load: f})
	}
	return p
}

// A solve of several seconds must notice at the next look that its context has ended, and the bound that it has by then
// must be one that its displacements prove.
func TestCancelledBetweenSlices(t *testing.T) {
	p := wall(8, 5, 4, 20)
	ctx, cancel := context.WithCancel(context.Background())
	defer cancel()
	looks := 0
	sol, err := Solver{}.Solve(ctx, p, nil, lp.Settings{Progress: func(lp.Iteration) { looks++; cancel() }})
	if err != nil {
		t.Fatal(err)
	}
	if sol.Status != lp.Cancelled || looks != 1 || !sol.Raw || sol.Iterations == 0 {
		t.Errorf("status %v after %d looks, raw %v, %d pivots", sol.Status, looks, sol.Raw, sol.Iterations)
	}
	// The bound is computed on the scaled problem: it may differ in the last digits.
	if bound, _ := lp.Bound(p, sol.Displacement); !(math.Abs(bound-sol.Bound) <= 1e-12*math.Abs(bound)) {
		t.Errorf("bound %v, displacements prove %v", sol.Bound, bound)
	}
}

func TestPivotLimit(t *testing.T) {
	p := wall(6, 4, 3, 20)
	sol, err := Solver{}.Solve(context.Background(), p, nil, lp.Settings{Iterations: 1})
	if err != nil {
		t.Fatal(err)
	}
	m := newModel(p, false)
	if sol.Status != lp.IterationLimit || sol.Iterations != len(m.rowLow)-1 || !sol.Raw {
		t.Errorf("status %v after %d pivots, want the limit after %d", sol.Status, sol.Iterations, len(m.rowLow)-1)
	}
}

// Slices of a solve go on from where the last one ended: the answer is the optimum.
func TestSlicesAddUp(t *testing.T) {
	p := wall(6, 4, 3, 20)
	looks := 0
	sol, err := Solver{}.Solve(context.Background(), p, nil, lp.Settings{Gap: 1e-9, Progress: func(lp.Iteration) { looks++ }})
	if err != nil {
		t.Fatal(err)
	}
	if err := lp.Check(p, sol).Err(1e-9, 1e-9, 1e-9); err != nil || sol.Status != lp.Optimal {
		t.Errorf("status %v after %d looks: %v", sol.Status, looks, err)
	}
}

// GLPK ends the process when memory runs out, unless it is kept from it; and the next solve must be as good as new.
func TestOutOfMemoryIsAnError(t *testing.T) {
	p := wall(8, 5, 2, 20)
	memoryLimit = 1
	_, err := Solver{}.Solve(context.Background(), p, nil, lp.Settings{})
	memoryLimit = 0
	if !errors.Is(err, errMemory) {
		t.Fatalf("got %v, want %v", err, errMemory)
	}
	sol, err := Solver{}.Solve(context.Background(), wall(4, 3, 1, 20), nil, lp.Settings{})
	if err != nil || sol.Status != lp.Optimal {
		t.Errorf("after it: %v, %v", sol, err)
	}
}

// Threads must not share GLPK's environment.
func TestManyAtOnce(t *testing.T) {
	p := wall(5, 3, 1, 20)
	want, err := Solver{}.Solve(context.Background(), p, nil, lp.Settings{})
	if err != nil {
		t.Fatal(err)
	}
	var wg sync.WaitGroup
	for range 24 {
		wg.Go(func() {
			sol, err := Solver{}.Solve(context.Background(), p, nil, lp.Settings{})
			if err != nil || sol.Objective != want.Objective {
				t.Errorf("got %v, %v; want objective %v", sol, err, want.Objective)
			}
		})
	}
	wg.Wait()
}
