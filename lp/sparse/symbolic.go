package sparse

import (
	"math"
	"slices"
)

// Symbolic is what is known of the factor from the pattern alone: order, supernodes and their tree. It does not change
// and may be shared.
type Symbolic struct {
	graph *Graph
	order []int32 // order[position] = block
	place []int32 // place[block] = position
	node  []supernode
	of    []int32 // of[position] = supernode that eliminates it
	root  []int32 // supernodes without a parent
	rows  int     // of the whole matrix

	// Nonzeros is the number of entries of the factor, Flops the multiplications and additions of one factorisation.
	Nonzeros int64
	Flops    float64
}

// supernode is a run of positions that are eliminated together as one dense front. Its rows are those of its own blocks
// followed by those of the blocks in below, in elimination order.
type supernode struct {
	first, last int32   // positions first..last-1
	below       []int32 // positions that its columns reach, ascending
	parent      int32   // -1 for a root
	child       []int32
	cols, rows  int     // scalar columns eliminated, scalar rows of the front
	flops       float64 // of this front
	subtree     float64 // of this front and all below it in the tree
}

// Analyse orders the blocks and finds the structure of the factor.
func Analyse(g *Graph) (*Symbolic, error) {
	adj, err := g.adjacency()
	if err != nil {
		return nil, err
	}
	s := &Symbolic{graph: g, order: order(g, adj)}
	n := len(s.order)
	s.place = make([]int32, n)
	for p, v := range s.order {
		s.place[v] = int32(p)
	}
	for _, size := range g.Size {
		s.rows += size
	}
	s.node = amalgamate(g, s.order, s.columns(adj))
	s.finish()
	return s, nil
}

// columns returns, for every position, the later positions that its column of the factor reaches. The first of them is
// its parent in the elimination tree (Liu 1990).
func (s *Symbolic) columns(adj [][]int32) [][]int32 {
	n := len(s.order)
	below := make([][]int32, n)
	children := make([][]int32, n)
	mark := make([]int32, n)
	for p := range n {
		mark[p] = int32(p) + 1
		var col []int32
		visit := func(q int32) {
			if int(q) > p && mark[q] != int32(p)+1 {
				mark[q] = int32(p) + 1
				col = append(col, q)
			}
		}
		for _, w := range adj[s.order[p]] {
			visit(s.place[w])
		}
		for _, c := range children[p] {
			for _, q := range below[c] {
				visit(q)
			}
		}
		slices.Sort(col)
		below[p] = col
		if len(col) > 0 {
			children[col[0]] = append(children[col[0]], int32(p))
		}
	}
	return below
}

// finish fills what follows from the supernodes: scalar sizes, children, flops.
func (s *Symbolic) finish() {
	s.of = make([]int32, len(s.order))
	for i := range s.node {
		t := &s.node[i]
		for p := t.first; p < t.last; p++ {
			t.cols += s.graph.Size[s.order[p]]
			s.of[p] = int32(i)
		}
		t.rows = t.cols
		for _, p := range t.below {
			t.rows += s.graph.Size[s.order[p]]
		}
		c, r := float64(t.cols), float64(t.rows)
		t.flops = c*r*r - c*c*r + c*c*c/3
		s.Nonzeros += int64(t.cols)*int64(t.rows) - int64(t.cols)*int64(t.cols-1)/2
		s.Flops += t.flops
	}
	for i := range s.node {
		t := &s.node[i]
		t.parent = -1
		if len(t.below) > 0 {
			t.parent = s.of[t.below[0]]
			s.node[t.parent].child = append(s.node[t.parent].child, int32(i))
		} else {
			s.root = append(s.root, int32(i))
		}
	}
	for i := range s.node { // children come before their parents
		t := &s.node[i]
		t.subtree += t.flops
		if t.parent >= 0 {
			s.node[t.parent].subtree += t.subtree
		}
	}
}

// Relaxed amalgamation: a child joins its parent if the zeros that this stores are at most so many entries, or at most
// this share of the joined front. Wider fronts run faster than the zeros cost.
const (
	relaxedEntries = 4000
	relaxedShare   = 0.25
)

// amalgamate groups positions into supernodes: first the fundamental ones, then relaxed ones.
func amalgamate(g *Graph, order []int32, below [][]int32) []supernode {
	n := len(order)
	size := func(p int32) float64 { return float64(g.Size[order[p]]) }
	rows := func(ps []int32) (r float64) {
		for _, p := range ps {
			r += size(p)
		}
		return r
	}
	var stack []supernode
	for p := range int32(n) {
		stack = append(stack, supernode{first: p, last: p + 1, below: below[p]})
		below[p] = nil
		for len(stack) > 1 {
			child, top := &stack[len(stack)-2], &stack[len(stack)-1]
			if len(child.below) == 0 || child.below[0] != top.first {
				break
			}
			// Joined, the child's columns reach the rest of top's columns and all below top.
			cc, tc := 0.0, 0.0
			for q := child.first; q < child.last; q++ {
				cc += size(q)
			}
			for q := top.first; q < top.last; q++ {
				tc += size(q)
			}
			tb := rows(top.below)
			zeros := cc * (tc + tb - rows(child.below))
			entries := (cc+tc)*(cc+tc)/2 + (cc+tc)*tb
			if zeros > math.Max(relaxedEntries, relaxedShare*entries) {
				break
			}
			top.first = child.first
			stack[len(stack)-2] = *top
			stack = stack[:len(stack)-1]
		}
	}
	return stack
}
