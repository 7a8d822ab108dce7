package lptest

import (
	"fmt"
	"math"
	"math/rand/v2"

	"boughwork/lp"
)

func newRand(seed uint64) *rand.Rand { return rand.New(rand.NewPCG(seed, 0x626f756768)) }

// randomProblem returns a problem that has an equilibrium: every free node has unlimited bars to feet in general
// position. Everything else is by chance: two or three dimensions, one to four cases, strengths, joint cost, weight,
// loads that are missing; if trimmings, also bars that only pull or only push, limited and kept bars, and reactions.
func randomProblem(seed uint64, nodes int, trimmings bool) *lp.Problem {
	r := newRand(seed)
	dim := 2 + r.IntN(2)
	t := newTruss(dim, 0.2+r.Float64(), 0.2+r.Float64())
	if r.IntN(2) == 0 {
		t.joint = 0.3 * r.Float64()
	}
	if r.IntN(2) == 0 {
		t.weight = 0.02 * r.Float64()
	}
	corners := [][]float64{{0, 0}, {4, 0}}
	if dim == 3 {
		corners = [][]float64{{0, 0, 0}, {4, 0, 0}, {0, 4, 0}, {4, 4, 0}}
	}
	for _, c := range corners {
		t.foot(c...)
	}
	for range nodes {
		x := []float64{4 * r.Float64(), 4 * r.Float64(), 4 * r.Float64()}[:dim]
		x[dim-1] = 1 + 0.5*x[dim-1]
		t.node(x...)
	}
	bars(t, r, trimmings)
	for range 1 + r.IntN(4) {
		var loads []load
		for n := len(corners); n < len(t.at); n++ {
			if r.IntN(3) > 0 {
				loads = append(loads, on(n, r.NormFloat64(), r.NormFloat64(), r.NormFloat64()))
			}
		}
		t.with(float64(r.IntN(3)), loads...)
	}
	return t.p
}

// bars adds all bars: unlimited ones to the feet, and others between nodes.
func bars(t *truss, r *rand.Rand, trimmings bool) {
	st, sc := t.st, t.sc
	for j := range t.at {
		for i := range j {
			if t.row[j][0] < 0 { // both feet
				continue
			}
			if t.row[i][0] < 0 || !trimmings {
				t.bar(i, j)
				continue
			}
			switch r.IntN(8) {
			case 0:
				t.st = 0
				t.bar(i, j)
			case 1:
				t.sc = 0
				t.bar(i, j)
			case 2:
				t.limited(i, j, r.Float64())
			case 3:
				t.kept(i, j, r.Float64())
			case 4: // twice, as a bar is that stands already and may be strengthened
				t.kept(i, j, r.Float64())
				t.bar(i, j)
			default:
				t.bar(i, j)
			}
			t.st, t.sc = st, sc
		}
	}
	if !trimmings {
		return
	}
	for n := range t.at { // a prop or a hold here and there
		if t.row[n][0] < 0 {
			continue
		}
		switch r.IntN(6) {
		case 0:
			t.stand(n, 0, math.Inf(1), 0, 1, true)
		case 1:
			t.stand(n, 0.5*r.Float64(), r.Float64(), 0, 1, true)
		case 2:
			t.stand(n, 1, 1, 3*r.Float64()+0.1, math.Inf(1), false)
		}
	}
}

// How many random problems, and how many nodes the largest has.
const (
	randomProblems = 40
	mostNodes      = 9
)

// random are problems by chance, and the laws that hold for any.
func random() []check {
	var out []check
	for seed := range uint64(randomProblems) {
		p := randomProblem(seed, 1+int(seed)%mostNodes, seed%3 > 0)
		out = append(out, check{fmt.Sprintf("random %d", seed), func(s lp.Solver) error { return laws(s, p, seed) }})
	}
	return out
}

// laws solves p and changes of it whose effect is known.
func laws(s lp.Solver, p *lp.Problem, seed uint64) error {
	v, err := optimal(s, p)
	if err != nil {
		return err
	}
	unit := costUnit(p)
	for _, l := range []struct {
		name   string
		change func(*lp.Problem) *lp.Problem
		lawful func(w float64) bool
	}{
		{"taking a bar away must not lower the objective", withoutOneBar, func(w float64) bool { return w > v || near(v, w, unit) }},
		{"taking a case away must not raise it", withoutOneCase, func(w float64) bool { return w < v || near(v, w, unit) }},
		{"loads x 3.5 make it x 3.5", func(p *lp.Problem) *lp.Problem { return scaled(p, 3.5, 1, 1) }, func(w float64) bool { return near(v, w/3.5, unit) }},
		{"loads x 1e5, strengths x 1e8", func(p *lp.Problem) *lp.Problem { return scaled(p, 1e5, 1e8, 1) }, func(w float64) bool { return near(v, w*1e3, unit) }},
		{"costs x 70 make it x 70", func(p *lp.Problem) *lp.Problem { return scaled(p, 1, 1, 70) }, func(w float64) bool { return near(v, w/70, unit) }},
		{"upside down it is the same", upsideDown, func(w float64) bool { return near(v, w, unit) }},
		{"in another order it is the same", func(p *lp.Problem) *lp.Problem { return shuffled(p, seed) }, func(w float64) bool { return near(v, w, unit) }},
	} {
		w, err := optimal(s, l.change(p))
		if err != nil {
			return fmt.Errorf("%s: %w", l.name, err)
		}
		if !l.lawful(w) {
			return fmt.Errorf("%s: %.12g became %.12g", l.name, v, w)
		}
	}
	return nil
}

// withoutOneBar drops the last bar between two free nodes, or the last reaction; not a kept bar, whose weight would go too.
func withoutOneBar(p *lp.Problem) *lp.Problem {
	q := clone(p)
	q.Bars = lp.Bars{}
	drop := -1
	for i := range p.Bars.Len() {
		if !p.Bars.Fixed[i] && (p.Bars.Ptr[i+1]-p.Bars.Ptr[i] > 3 || p.Bars.Ptr[i+1]-p.Bars.Ptr[i] == 1) {
			drop = i
		}
	}
	for i := range p.Bars.Len() {
		if i != drop {
			addBar(q, p, i)
		}
	}
	return q
}

func withoutOneCase(p *lp.Problem) *lp.Problem {
	q := clone(p)
	q.Cases = q.Cases[:len(q.Cases)-1]
	return q
}

// scaled multiplies loads, strengths and costs. Limits, kept areas and weights go with them so that the layout's areas are
// multiplied by loads / strengths.
func scaled(p *lp.Problem, loads, strengths, costs float64) *lp.Problem {
	q := clone(p)
	b := &q.Bars
	for i := range b.Len() {
		b.Tension[i] *= strengths
		b.Compression[i] *= strengths
		b.Upper[i] *= loads / strengths
		b.Cost[i] *= costs
	}
	for j := range b.H {
		b.H[j] *= strengths
	}
	for _, c := range q.Cases {
		for r := range c.Load {
			c.Load[r] *= loads
		}
	}
	return q
}

// upsideDown turns loads and weights round and swaps tension and compression.
func upsideDown(p *lp.Problem) *lp.Problem {
	q := scaled(p, 1, 1, 1)
	q.Bars.Tension, q.Bars.Compression = q.Bars.Compression, q.Bars.Tension
	for j := range q.Bars.H {
		q.Bars.H[j] *= -1
	}
	for _, c := range q.Cases {
		for r := range c.Load {
			c.Load[r] *= -1
		}
	}
	return q
}

// shuffled puts bars, cases and blocks in another order.
func shuffled(p *lp.Problem, seed uint64) *lp.Problem {
	r := newRand(seed + 1000)
	q := &lp.Problem{Rows: p.Rows, Block: []int32{0}}
	to := make([]int32, p.Rows)
	next := int32(0)
	for _, v := range r.Perm(len(p.At)) {
		for row := p.Block[v]; row < p.Block[v+1]; row++ {
			to[row] = next
			next++
		}
		q.Block, q.At = append(q.Block, next), append(q.At, p.At[v])
	}
	for _, i := range r.Perm(p.Bars.Len()) {
		addBar(q, p, i)
	}
	for j, row := range q.Bars.Row {
		q.Bars.Row[j] = to[row]
	}
	for _, k := range r.Perm(len(p.Cases)) {
		c := lp.Case{Gravity: p.Cases[k].Gravity, Load: make([]float64, p.Rows)}
		for row, f := range p.Cases[k].Load {
			c.Load[to[row]] = f
		}
		q.Cases = append(q.Cases, c)
	}
	return q
}
