package interior_test

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"

	"boughwork/lp"
	"boughwork/lp/interior"
)

// grid is a program over nx x ny x nz nodes 1 m apart, the lowest layer held, with cases of random loads on the highest and
// a bar between any two nodes no farther than reach.
func grid(seed uint64, nx, ny, nz, cases int, reach float64) *lp.Problem {
	p := &lp.Problem{Block: []int32{0}}
	var at [][3]float64
	var first []int32
	for z := range nz {
		for y := range ny {
			for x := range nx {
				at = append(at, [3]float64{float64(x), float64(y), float64(z)})
				if z == 0 {
					first = append(first, -1)
					continue
				}
				first = append(first, int32(p.Rows))
				p.Rows += 3
				p.Block, p.At = append(p.Block, int32(p.Rows)), append(p.At, at[len(at)-1])
			}
		}
	}
	for j := range at {
		for i := range j {
			addBar(p, at, first, i, j, reach)
		}
	}
	rng := rand.New(rand.NewPCG(seed, 11))
	for range cases {
		c := lp.Case{Load: make([]float64, p.Rows)}
		for r := p.Rows - 3*nx*ny; r < p.Rows; r++ {
			c.Load[r] = rng.NormFloat64()
		}
		p.Cases = append(p.Cases, c)
	}
	return p
}

func addBar(p *lp.Problem, at [][3]float64, first []int32, i, j int, reach float64) {
	l := math.Sqrt(squared(at[i], at[j]))
	if l > reach || first[i] < 0 && first[j] < 0 {
		return
	}
	var row []int32
	var b []float64
	for end, n := range [2]int{i, j} {
		for d := range 3 {
			if first[n] >= 0 {
				row, b = append(row, first[n]+int32(d)), append(b, (1-2*float64(end))*(at[j][d]-at[i][d])/l)
			}
		}
	}
	p.Bars.Add(row, b, make([]float64, len(row)), 1.5, 1, l, math.Inf(1), false)
}

func squared(a, b [3]float64) float64 {
	s := 0.0
	for d := range 3 {
		s += (a[d] - b[d]) * (a[d] - b[d])
	}
	return s
}

// three is a load of two directions on three bars: one straight up from the node, two at 45 degrees to either side.
func three(loads ...[2]float64) *lp.Problem {
	p := &lp.Problem{Rows: 2, Block: []int32{0, 2}, At: [][3]float64{{}}}
	for _, n := range [][2]float64{{0, 1}, {-math.Sqrt2 / 2, math.Sqrt2 / 2}, {math.Sqrt2 / 2, math.Sqrt2 / 2}} {
		p.Bars.Add([]int32{0, 1}, n[:], []float64{0, 0}, 1, 1, 1, math.Inf(1), false)
	}
	for _, f := range loads {
		p.Cases = append(p.Cases, lp.Case{Load: f[:]})
	}
	return p
}

// Three bars by hand: a load P down moves the node by P/(k1 + k2), where k1 is the stiffness of the bar straight up and k2
// that of each bar at 45 degrees; a push H to the right moves it by H/k2. If signs, stiffnesses or cases were mixed up, cases
// would be ranked wrongly and the first to be looked at would be any.
func TestElasticThreeBars(t *testing.T) {
	const k1, k2 = 3.0, 5.0
	const down, push = 7.0, 2.0
	got, err := interior.Elastic(context.Background(), three([2]float64{0, -down}, [2]float64{push, 0}, [2]float64{push, -down}), []float64{k1, k2, k2})
	if err != nil {
		t.Fatal(err)
	}
	hangs := []float64{down * k1 / (k1 + k2), down / (k1 + k2) * k2 / math.Sqrt2, down / (k1 + k2) * k2 / math.Sqrt2}
	pushed := []float64{0, push / math.Sqrt2, -push / math.Sqrt2} // tension on the left
	for i := range 3 {
		for k, want := range []float64{hangs[i], pushed[i], hangs[i] + pushed[i]} {
			if math.Abs(got[k][i]-want) > 1e-12*down {
				t.Errorf("case %d, bar %d: %.15g, by hand %.15g", k, i, got[k][i], want)
			}
		}
	}
}

// The forces of an elastic structure balance the loads and minimise the elastic energy among all that do: adding any
// forces in balance with nothing raises it.
func TestElasticIsLeastEnergy(t *testing.T) {
	p := grid(1, 3, 3, 3, 2, 1.8)
	rng := rand.New(rand.NewPCG(4, 4))
	stiff := make([]float64, p.Bars.Len())
	for i := range stiff {
		stiff[i] = math.Exp(2 * rng.NormFloat64())
	}
	q, err := interior.Elastic(context.Background(), p, stiff)
	if err != nil {
		t.Fatal(err)
	}
	other := make([]float64, len(stiff))
	for i := range other {
		other[i] = 1
	}
	r, err := interior.Elastic(context.Background(), p, other)
	if err != nil {
		t.Fatal(err)
	}
	b := &p.Bars
	for k, c := range p.Cases {
		left := append([]float64(nil), c.Load...)
		cross, energy := 0.0, 0.0
		for i := range stiff {
			for j := b.Ptr[i]; j < b.Ptr[i+1]; j++ {
				left[b.Row[j]] += b.B[j] * q[k][i]
			}
			cross += q[k][i] * (r[k][i] - q[k][i]) / stiff[i] // r - q is in balance with nothing
			energy += q[k][i] * q[k][i] / stiff[i]
		}
		for row, v := range left {
			if math.Abs(v) > 1e-10 {
				t.Errorf("case %d: row %d is off balance by %g", k, row, v)
			}
		}
		if math.Abs(cross) > 1e-9*energy {
			t.Errorf("case %d: the energy changes by %g of %g along forces that balance nothing", k, cross, energy)
		}
	}
}

// A start must not change the answer: member adding would else stop at a volume that depends on
// the way it came.
func TestWarmStartFindsTheSameLayout(t *testing.T) {
	const gap, same = 1e-10, 1e-9
	solver := interior.Solver{}
	ctx := context.Background()
	for seed := range uint64(4) {
		few, all := grid(seed, 3, 3, 3, 2, 1.5), grid(seed, 3, 3, 3, 2, 2.3)
		loose, err := solver.Solve(ctx, few, nil, lp.Settings{Gap: 1e-2})
		if err != nil || loose.Status != lp.Optimal || loose.Warm == nil {
			t.Fatalf("seed %d: status %v, %v", seed, loose.Status, err)
		}
		for _, c := range []struct {
			name  string
			p     *lp.Problem
			start *lp.Start
		}{
			{"the same program", few, loose.Warm},
			{"with more bars", all, widened(few, all, loose.Warm)},
		} {
			set := lp.Settings{Gap: gap}
			cold, err := solver.Solve(ctx, c.p, nil, set)
			if err != nil {
				t.Fatal(err)
			}
			warm, err := solver.Solve(ctx, c.p, c.start, set)
			if err != nil {
				t.Fatal(err)
			}
			if cold.Status != lp.Optimal || warm.Status != lp.Optimal || math.Abs(warm.Objective/cold.Objective-1) > same {
				t.Errorf("seed %d, %s: cold %v %.12g, warm %v %.12g", seed, c.name, cold.Status, cold.Objective, warm.Status, warm.Objective)
			}
			if r := lp.Check(c.p, warm); r.Shape != nil || !(r.Strength <= 1e-9) || !(r.Bound <= cold.Objective*(1+same)) {
				t.Errorf("seed %d, %s: %+v", seed, c.name, r)
			}
		}
	}
}

// widened carries a start over to a program with more bars; a new bar has no force and no area.
func widened(from, to *lp.Problem, s *lp.Start) *lp.Start {
	type ends struct {
		row  [6]int32
		cost float64
		b    float64
	}
	key := func(b *lp.Bars, i int) (e ends) {
		n := copy(e.row[:], b.Row[b.Ptr[i]:b.Ptr[i+1]])
		e.cost, e.b = b.Cost[i], 0
		for j := range n { // tells bars to different held nodes apart
			e.b += float64(j+1) * b.B[int(b.Ptr[i])+j]
		}
		return e
	}
	at := map[ends]int{}
	for i := range from.Bars.Len() {
		at[key(&from.Bars, i)] = i
	}
	pick := func(x []float64) []float64 {
		out := make([]float64, to.Bars.Len())
		for i := range out {
			if j, ok := at[key(&to.Bars, i)]; ok {
				out[i] = x[j]
			}
		}
		return out
	}
	w := &lp.Start{Area: pick(s.Area), Displacement: s.Displacement}
	for _, q := range s.Force {
		w.Force = append(w.Force, pick(q))
	}
	return w
}

// A context that ends stops the solve in the iteration that is under way: no further one is begun, whatever kind of start
// the program has. One iteration of any program of a sensible size takes less than the second that is promised.
func TestCancelStopsAtOnce(t *testing.T) {
	plain := grid(2, 4, 4, 3, 3, 2.3)
	limited := grid(2, 4, 4, 3, 3, 2.3) // begins with artificial forces
	for i := range limited.Bars.Upper {
		limited.Bars.Upper[i] = 50
	}
	for name, p := range map[string]*lp.Problem{"plain": plain, "limited": limited} {
		t.Run(name, func(t *testing.T) {
			ctx, cancel := context.WithCancel(context.Background())
			defer cancel()
			reports, after := 0, 0
			sol, err := interior.Solver{}.Solve(ctx, p, nil, lp.Settings{Gap: 1e-10, Progress: func(lp.Iteration) {
				reports++
				if ctx.Err() != nil {
					after++
				}
				if reports == 4 {
					cancel()
				}
			}})
			if err != nil {
				t.Fatal(err)
			}
			if sol.Status != lp.Cancelled || reports < 4 || after > 0 {
				t.Errorf("status %v after %d reports, %d of them after the end", sol.Status, reports, after)
			}
			if r := lp.Check(p, sol); r.Shape != nil {
				t.Error(r.Shape)
			} else if !sol.Raw && !(r.Strength <= 1e-9) {
				t.Errorf("not raw, but overloaded by %g", r.Strength)
			}
		})
	}
}

// A context that has ended before the solve gives no answer, and none that looks like one.
func TestEndedContext(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	p := grid(3, 3, 3, 3, 1, 1.8)
	sol, err := interior.Solver{}.Solve(ctx, p, nil, lp.Settings{})
	if err != nil || sol.Status != lp.Cancelled || !sol.Raw {
		t.Errorf("status %v, raw %v, %v", sol.Status, sol.Raw, err)
	}
	if _, err := interior.Elastic(ctx, p, make([]float64, p.Bars.Len())); err == nil {
		t.Error("elastic forces from a context that has ended")
	}
}

// A solve whose answer is of no use above some objective must end early and not claim an optimum; one whose answer is below
// it must not be cut short.
func TestCeilingEndsASolve(t *testing.T) {
	p := grid(3, 3, 3, 3, 2, 1.8)
	full, err := interior.Solver{}.Solve(context.Background(), p, nil, lp.Settings{})
	if err != nil || full.Status != lp.Optimal {
		t.Fatal(full, err)
	}
	low, err := interior.Solver{}.Solve(context.Background(), p, nil, lp.Settings{Ceiling: 0.5 * full.Objective})
	if err != nil || low.Status != lp.IterationLimit || low.Iterations >= full.Iterations {
		t.Errorf("ceiling below the optimum: status %v after %d iterations of %d, %v", low.Status, low.Iterations, full.Iterations, err)
	}
	high, err := interior.Solver{}.Solve(context.Background(), p, nil, lp.Settings{Ceiling: 1.01 * full.Objective})
	if err != nil || high.Status != lp.Optimal || high.Objective != full.Objective {
		t.Errorf("ceiling above the optimum: status %v, objective %v, want %v; %v", high.Status, high.Objective, full.Objective, err)
	}
}
