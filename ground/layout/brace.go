package layout

import (
	"cmp"
	"slices"

	"boughwork/geom"
)

// A bar holds a node in a new direction if it is off the line or plane of those that hold it already by this sine.
const bracingSine = 0.1

// bracing adds bars to a set so that no node of it is loose.
type bracing struct {
	st   *study
	all  trimmed
	at   [][]int      // bars of all by node
	in   []bool       // bars of all that are in the set
	used []bool       // nodes that bars of the set reach
	next []int32      // used nodes still to be looked at
	fast [][]geom.Vec // directions of what holds a node whatever the bars: supports, deck, kept members
}

// braced returns the pairs of t that are given by number, and the fewest others that hold every node of them in all directions, those with the
// highest price first: where bars weigh, and in the middle of a straight row of struts, a bar with next to no force is
// needed all the same. It looks at every node by itself; that the whole is no mechanism is left to the solver.
func (st *study) braced(t trimmed, kept []int) []pair {
	b := &bracing{st: st, all: t, at: make([][]int, len(st.s.Nodes)), in: make([]bool, len(t.pairs)), used: make([]bool, len(st.s.Nodes))}
	b.hold()
	for i, p := range t.pairs {
		b.at[p.i], b.at[p.j] = append(b.at[p.i], i), append(b.at[p.j], i)
	}
	for _, i := range kept {
		b.add(i)
	}
	for len(b.next) > 0 {
		v := b.next[0]
		b.next = b.next[1:]
		b.brace(v)
	}
	var out []pair
	for i, p := range t.pairs {
		if b.in[i] {
			out = append(out, p)
		}
	}
	return out
}

// hold fills in what holds nodes whatever the bars.
func (b *bracing) hold() {
	s := b.st.s
	axes := [3]geom.Vec{{X: 1}, {Y: 1}, {Z: 1}}
	b.fast = make([][]geom.Vec, len(s.Nodes))
	for v, n := range s.Nodes {
		for x, fixed := range n.Fixed {
			if fixed {
				b.fast[v] = append(b.fast[v], axes[x])
			}
		}
	}
	for _, deck := range s.Diaphragms {
		for _, v := range deck {
			b.fast[v] = append(b.fast[v], axes[0], axes[1])
		}
	}
	for _, k := range s.Kept {
		d := s.Nodes[k.B].At.Sub(s.Nodes[k.A].At)
		b.fast[k.A], b.fast[k.B] = append(b.fast[k.A], d), append(b.fast[k.B], d)
	}
}

// add puts a bar into the set.
func (b *bracing) add(i int) {
	b.in[i] = true
	for _, v := range []int32{b.all.pairs[i].i, b.all.pairs[i].j} {
		if !b.used[v] {
			b.used[v] = true
			b.next = append(b.next, v)
		}
	}
}

// brace adds bars at node v until it is held in three directions, or no bar holds it in a new one. Bars to nodes that are
// used come first.
func (b *bracing) brace(v int32) {
	var span []geom.Vec
	for _, d := range b.fast[v] {
		span = widen(span, d)
	}
	var rest []int
	for _, i := range b.at[v] {
		if b.in[i] {
			span = widen(span, b.along(i))
		} else {
			rest = append(rest, i)
		}
	}
	if len(span) == 3 {
		return
	}
	price := func(i int) float64 { return b.all.problem.Price(i, b.all.sol.Displacement) / b.all.pairs[i].cost }
	outside := func(i int) int {
		if b.used[b.all.pairs[i].i] && b.used[b.all.pairs[i].j] {
			return 0
		}
		return 1
	}
	slices.SortStableFunc(rest, func(i, j int) int {
		return cmp.Or(cmp.Compare(outside(i), outside(j)), cmp.Compare(price(j), price(i)))
	})
	for _, i := range rest {
		wider := widen(span, b.along(i))
		if len(wider) > len(span) {
			b.add(i)
			span = wider
		}
		if len(span) == 3 {
			return
		}
	}
}

// along returns the direction of a bar.
func (b *bracing) along(i int) geom.Vec {
	p := b.all.pairs[i]
	return b.st.s.Nodes[p.j].At.Sub(b.st.s.Nodes[p.i].At)
}

// widen adds the part of d that is across an orthonormal set to it, if that is a share of d worth having.
func widen(span []geom.Vec, d geom.Vec) []geom.Vec {
	l := d.Norm()
	for _, e := range span {
		d = d.Sub(e.Scale(e.Dot(d)))
	}
	if n := d.Norm(); n > bracingSine*l && len(span) < 3 {
		return append(slices.Clip(span), d.Scale(1/n))
	}
	return span
}
