package ground

import (
	"cmp"
	"math"
	"slices"

	"boughwork/geom"
)

// sameNode is the distance below which two nodes are one, m: nothing on site is set out finer than a centimetre.
const sameNode = 0.01

// sameRow is the difference of grid coordinates, m, up to which nodes count as one row when they are put in order.
const sameRow = 0.05

// draft is a node while the ground structure is being built.
type draft struct {
	Node
	grid  pt    // grid coordinates
	roofs []int // roofs that the node carries, ascending
	zones []int // footing zones that it belongs to
	area  float64
}

// builder carries what Build has found so far.
type builder struct {
	site   *geom.Site
	spec   Spec
	issues geom.Issues

	keepClear *geom.Obstacles
	envelope  *geom.Envelope

	grid    gridFrame
	axes    [2]axis
	plans   []roofPlan
	extent  []area // the plans of all roofs
	nodes   []draft
	near    index // of nodes, by plan cells
	kept    []Kept
	omitted []string
}

// roofPlan is a roof in grid coordinates with its nodes.
type roofPlan struct {
	areas []area
	// rings holds, for every ring of every area in turn, the nodes along it.
	rings [][][]ringStop
	nodes []int
}

// ringStop is a node along a ring.
type ringStop struct {
	along float64
	node  int
}

// contains reports whether p lies inside the roof.
func (p roofPlan) contains(q pt) bool {
	return slices.ContainsFunc(p.areas, func(a area) bool { return a.contains(q) })
}

// index finds nodes by place: plan cells of a given size.
type index struct {
	size  float64
	cells map[[2]int][]int
}

func (x *index) cell(p pt) [2]int {
	return [2]int{int(math.Floor(p[0] / x.size)), int(math.Floor(p[1] / x.size))}
}

func (x *index) add(p pt, i int) {
	c := x.cell(p)
	x.cells[c] = append(x.cells[c], i)
}

// add appends a node and returns its number.
func (b *builder) add(d draft) int {
	b.nodes = append(b.nodes, d)
	b.near.add(d.grid, len(b.nodes)-1)
	return len(b.nodes) - 1
}

// nearest returns the node nearest to a place within reach (at most the size of the index cells), or -1.
func (b *builder) nearest(at geom.Vec, p pt, reach float64) int {
	best, found := reach, -1
	c := b.near.cell(p)
	for i := -1; i <= 1; i++ {
		for j := -1; j <= 1; j++ {
			for _, n := range b.near.cells[[2]int{c[0] + i, c[1] + j}] {
				if d := b.nodes[n].At.Sub(at).Norm(); d < best || (d == best && found < 0) {
					best, found = d, n
				}
			}
		}
	}
	return found
}

// order sorts the nodes: roof, footing, wall, inner; inner nodes by level; then by rows of the grid, each from its low
// to its high end. All references to nodes follow.
func (b *builder) order() {
	rank := [...]int{RoofPt: 0, Footing: 1, Wall: 2, Inner: 3}
	u := rows(b.nodes, func(d draft) float64 { return d.grid[0] })
	v := rows(b.nodes, func(d draft) float64 { return d.grid[1] })
	z := rows(b.nodes, func(d draft) float64 { return d.At.Z })
	perm := make([]int, len(b.nodes))
	for i := range perm {
		perm[i] = i
	}
	slices.SortStableFunc(perm, func(i, j int) int {
		p, q := b.nodes[i], b.nodes[j]
		if c := cmp.Compare(rank[p.Role], rank[q.Role]); c != 0 {
			return c
		}
		if p.Role == Inner {
			if c := cmp.Compare(z[i], z[j]); c != 0 {
				return c
			}
		}
		return cmp.Or(cmp.Compare(v[i], v[j]), cmp.Compare(u[i], u[j]), cmp.Compare(z[i], z[j]),
			cmp.Compare(p.grid[1], q.grid[1]), cmp.Compare(p.grid[0], q.grid[0]), cmp.Compare(p.At.Z, q.At.Z))
	})
	to := make([]int, len(perm))
	sorted := make([]draft, len(perm))
	for n, o := range perm {
		to[o], sorted[n] = n, b.nodes[o]
	}
	b.nodes = sorted
	for i := range b.kept {
		b.kept[i].A, b.kept[i].B = to[b.kept[i].A], to[b.kept[i].B]
	}
	for _, p := range b.plans {
		for i, n := range p.nodes {
			p.nodes[i] = to[n]
		}
		slices.Sort(p.nodes)
		for _, rings := range p.rings {
			for _, stops := range rings {
				for i := range stops {
					stops[i].node = to[stops[i].node]
				}
			}
		}
	}
}

// rows numbers the nodes by a coordinate: nodes whose coordinates follow each other within sameRow share a number.
func rows(nodes []draft, of func(draft) float64) []int {
	perm := make([]int, len(nodes))
	for i := range perm {
		perm[i] = i
	}
	slices.SortStableFunc(perm, func(i, j int) int { return cmp.Compare(of(nodes[i]), of(nodes[j])) })
	out := make([]int, len(nodes))
	row := 0
	for k, i := range perm {
		if k > 0 && of(nodes[i])-of(nodes[perm[k-1]]) > sameRow {
			row++
		}
		out[i] = row
	}
	return out
}
