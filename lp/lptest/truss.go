package lptest

import (
	"math"

	"boughwork/lp"
)

// truss makes pin-jointed problems in two or three dimensions. The last axis points up.
type truss struct {
	dim    int
	st, sc float64 // strengths of bars to come
	weight float64 // weight of a unit of volume
	joint  float64 // joint cost as a length, at each end
	at     [][3]float64
	row    [][3]int32 // row of every direction of every node, -1 where it is held
	p      *lp.Problem
}

func newTruss(dim int, st, sc float64) *truss {
	return &truss{dim: dim, st: st, sc: sc, p: &lp.Problem{Block: []int32{0}}}
}

// node adds a free node and returns its index.
func (t *truss) node(at ...float64) int { return t.nodeHeld([3]bool{}, at...) }

// foot adds a node that is held in every direction.
func (t *truss) foot(at ...float64) int { return t.nodeHeld([3]bool{true, true, true}, at...) }

func (t *truss) nodeHeld(held [3]bool, at ...float64) int {
	var x [3]float64
	copy(x[:], at)
	row := [3]int32{-1, -1, -1}
	for d := range t.dim {
		if !held[d] {
			row[d] = int32(t.p.Rows)
			t.p.Rows++
		}
	}
	if last := t.p.Block[len(t.p.Block)-1]; int(last) != t.p.Rows {
		t.p.Block = append(t.p.Block, int32(t.p.Rows))
		t.p.At = append(t.p.At, x)
	}
	t.at, t.row = append(t.at, x), append(t.row, row)
	return len(t.at) - 1
}

func (t *truss) length(i, j int) float64 {
	s := 0.0
	for d := range 3 {
		s += (t.at[j][d] - t.at[i][d]) * (t.at[j][d] - t.at[i][d])
	}
	return math.Sqrt(s)
}

// column returns the rows, b and h of the bar from node i to node j.
func (t *truss) column(i, j int) (row []int32, b, h []float64) {
	l := t.length(i, j)
	for e, n := range [2]int{i, j} {
		sign := 1 - 2*float64(e)
		for d := range t.dim {
			if r := t.row[n][d]; r >= 0 {
				w := 0.0
				if d == t.dim-1 {
					w = t.weight * l / 2
				}
				row, b, h = append(row, r), append(b, sign*(t.at[j][d]-t.at[i][d])/l), append(h, w)
			}
		}
	}
	return row, b, h
}

// bar adds a bar between two nodes.
func (t *truss) bar(i, j int) int { return t.limited(i, j, math.Inf(1)) }

// limited adds a bar whose area may not exceed upper.
func (t *truss) limited(i, j int, upper float64) int {
	row, b, h := t.column(i, j)
	return t.p.Bars.Add(row, b, h, t.st, t.sc, t.length(i, j)+2*t.joint, upper, false)
}

// kept adds a bar that stands already.
func (t *truss) kept(i, j int, area float64) int {
	row, b, h := t.column(i, j)
	return t.p.Bars.Add(row, b, h, t.st, t.sc, 0, area, true)
}

// all adds a bar between every two nodes that are not both held, no longer than reach.
func (t *truss) all(reach float64) {
	for j := range t.at {
		for i := range j {
			if row, _, _ := t.column(i, j); len(row) > 0 && t.length(i, j) <= reach {
				t.bar(i, j)
			}
		}
	}
}

// stand adds a reaction under the vertical of node n: compression pushes the node up.
func (t *truss) stand(n int, tension, compression, cost, upper float64, fixed bool) {
	t.p.Bars.Add([]int32{t.row[n][t.dim-1]}, []float64{-1}, []float64{0}, tension, compression, cost, upper, fixed)
}

// load is a force on a node.
type load struct {
	node  int
	force [3]float64
}

func on(node int, force ...float64) load {
	l := load{node: node}
	copy(l.force[:], force)
	return l
}

// with adds a case; nodes come first.
func (t *truss) with(gravity float64, loads ...load) *truss {
	f := make([]float64, t.p.Rows)
	for _, l := range loads {
		for d := range t.dim {
			if r := t.row[l.node][d]; r >= 0 {
				f[r] += l.force[d]
			}
		}
	}
	t.p.Cases = append(t.p.Cases, lp.Case{Gravity: gravity, Load: f})
	return t
}

// clone returns a deep copy.
func clone(p *lp.Problem) *lp.Problem {
	q := &lp.Problem{Rows: p.Rows, Block: append([]int32(nil), p.Block...), At: append([][3]float64(nil), p.At...)}
	for i := range p.Bars.Len() {
		addBar(q, p, i)
	}
	for _, c := range p.Cases {
		q.Cases = append(q.Cases, lp.Case{Name: c.Name, Gravity: c.Gravity, Load: append([]float64(nil), c.Load...)})
	}
	return q
}

// addBar appends bar i of p to q.
func addBar(q, p *lp.Problem, i int) {
	b := &p.Bars
	lo, hi := b.Ptr[i], b.Ptr[i+1]
	q.Bars.Add(b.Row[lo:hi], b.B[lo:hi], b.H[lo:hi], b.Tension[i], b.Compression[i], b.Cost[i], b.Upper[i], b.Fixed[i])
}
