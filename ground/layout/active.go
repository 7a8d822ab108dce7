package layout

import (
	"cmp"
	"math"
	"slices"

	"boughwork/ground"
)

// Bars that every node starts with: its nearest candidates in number, as many as a cubic grid has neighbours; in a
// plane, where the nearest 26 reach three rings, fewer.
const (
	nearestInSpace = 26
	nearestInPlane = 12
)

// active is the set of bars in the program, in order of nodes. Base bars are never dropped, so that no round is a
// mechanism that the first was not.
type active struct {
	pairs []pair
	base  map[int64]bool
	in    map[int64]bool
	once  map[int64]bool // dropped once already: not again, so that no bar comes and goes for ever
}

// newActive returns the shortest bars around every node.
func newActive(s *ground.Structure, can *ground.Candidates) *active {
	a := &active{base: map[int64]bool{}, in: map[int64]bool{}, once: map[int64]bool{}}
	number := nearestInSpace
	if planar(s) {
		number = nearestInPlane
	}
	rows := make([][]pair, len(s.Nodes))
	can.EachRow(func(i int) { rows[i] = nearest(s, can, i, number) })
	for _, r := range rows {
		for _, p := range r {
			if !a.in[p.key()] {
				a.in[p.key()], a.base[p.key()] = true, true
				a.pairs = append(a.pairs, p)
			}
		}
	}
	a.sort()
	return a
}

func (a *active) sort() {
	slices.SortFunc(a.pairs, func(p, q pair) int { return cmp.Compare(p.key(), q.key()) })
}

// planar reports whether all nodes lie in one plane of the axes.
func planar(s *ground.Structure) bool {
	for x := range 3 {
		low, high := math.Inf(1), math.Inf(-1)
		for _, n := range s.Nodes {
			v := n.At.Array()[x]
			low, high = math.Min(low, v), math.Max(high, v)
		}
		if high-low < ground.ThroughNode {
			return true
		}
	}
	return false
}

// near is a node at a distance.
type near struct {
	j int
	l float64
}

// nearest returns the shortest candidates of node i, so many of them; of equally short ones those to the first nodes.
func nearest(s *ground.Structure, can *ground.Candidates, i, number int) []pair {
	var all []near
	for j := range s.Nodes {
		if j != i && can.Plausible(i, j) {
			all = append(all, near{j, s.Nodes[j].At.Sub(s.Nodes[i].At).Norm()})
		}
	}
	for most := lookFactor * number; ; most *= lookFactor {
		var out []pair
		for _, n := range shortest(all, most) {
			if len(out) >= number {
				return out
			}
			if can.Clear(i, n.j) {
				out = append(out, newPair(s, can, i, n.j))
			}
		}
		if most >= len(all) {
			return out
		}
	}
}

// lookFactor is how many times as many nodes as wanted are looked at first, since some are not clear.
const lookFactor = 4

// shortest returns the given number of nearest nodes, and all that are as near as the last, in order of distance.
func shortest(all []near, number int) []near {
	limit := math.Inf(1)
	if number < len(all) {
		l := make([]float64, len(all))
		for i, n := range all {
			l[i] = n.l
		}
		limit = smallest(l, number)
	}
	var out []near
	for _, n := range all {
		if n.l <= limit {
			out = append(out, n)
		}
	}
	slices.SortFunc(out, func(a, b near) int { return cmp.Or(cmp.Compare(a.l, b.l), cmp.Compare(a.j, b.j)) })
	return out
}

// smallest returns the n-th smallest of x, counted from 0, and changes the order of x (Hoare 1961).
func smallest(x []float64, n int) float64 {
	lo, hi := 0, len(x)-1
	for lo < hi {
		pivot := x[(lo+hi)/2]
		i, j := lo, hi
		for i <= j {
			for x[i] < pivot {
				i++
			}
			for x[j] > pivot {
				j--
			}
			if i <= j {
				x[i], x[j] = x[j], x[i]
				i++
				j--
			}
		}
		switch {
		case n <= j:
			hi = j
		case n >= i:
			lo = i
		default:
			return x[n]
		}
	}
	return x[n]
}

func newPair(s *ground.Structure, can *ground.Candidates, i, j int) pair {
	if i > j {
		i, j = j, i
	}
	l := s.Nodes[j].At.Sub(s.Nodes[i].At).Norm()
	return pair{i: int32(i), j: int32(j), cost: (l + 2*s.JointCost) * can.Factor(i, j)}
}

// add adds the most promising violators, at most limit of them, and returns how many: those that violate most for their
// length, since long bars fill the factor.
func (a *active) add(s *ground.Structure, pairs []pair, limit int) int {
	type ranked struct {
		pair
		rank float64
	}
	var list []ranked
	for _, p := range pairs {
		if !a.in[p.key()] {
			l := s.Nodes[p.j].At.Sub(s.Nodes[p.i].At).Norm()
			list = append(list, ranked{p, (p.ratio - 0.98) / l})
		}
	}
	slices.SortFunc(list, func(p, q ranked) int {
		return cmp.Or(cmp.Compare(q.rank, p.rank), cmp.Compare(p.key(), q.key()))
	})
	added := 0
	for _, p := range list {
		if added == limit {
			break
		}
		a.in[p.key()] = true
		a.pairs = append(a.pairs, p.pair)
		added++
	}
	a.sort()
	return added
}

// drop takes out the bars that carry nothing and whose price is far from their cost. areas and prices are in the order
// of a.pairs.
func (a *active) drop(area []float64, price func(i int) float64) {
	top := 0.0
	for _, v := range area {
		top = math.Max(top, v)
	}
	kept := a.pairs[:0:0]
	for i, p := range a.pairs {
		if !a.base[p.key()] && !a.once[p.key()] && area[i] < dropArea*top && price(i) < dropPrice {
			delete(a.in, p.key())
			a.once[p.key()] = true
			continue
		}
		kept = append(kept, p)
	}
	a.pairs = kept
}

// A bar is dropped below this share of the largest area and this share of its cost.
const (
	dropArea  = 1e-4
	dropPrice = 0.9
)
