package ground

import (
	"math"

	"boughwork/geom"
)

// nodeGrid finds the nodes near a segment: a box of cells, each with the nodes that lie within ThroughNode of it.
type nodeGrid struct {
	low   geom.Vec
	cell  float64
	n     [3]int
	start []int32
	list  []int32
	at    []geom.Vec
}

func newNodeGrid(nodes []Node) *nodeGrid {
	g := &nodeGrid{n: [3]int{1, 1, 1}, cell: 1}
	if len(nodes) == 0 {
		g.start = make([]int32, 2)
		return g
	}
	low, high := nodes[0].At, nodes[0].At
	for _, n := range nodes {
		g.at = append(g.at, n.At)
		low = geom.Vec{X: math.Min(low.X, n.At.X), Y: math.Min(low.Y, n.At.Y), Z: math.Min(low.Z, n.At.Z)}
		high = geom.Vec{X: math.Max(high.X, n.At.X), Y: math.Max(high.Y, n.At.Y), Z: math.Max(high.Z, n.At.Z)}
	}
	pad := geom.Vec{X: 2 * ThroughNode, Y: 2 * ThroughNode, Z: 2 * ThroughNode}
	g.low = low.Sub(pad)
	size := high.Add(pad).Sub(g.low)
	g.cell = cellSize(size, len(nodes))
	for x, s := range size.Array() {
		g.n[x] = int(s/g.cell) + 1
	}
	g.fill()
	return g
}

// cellSize makes about one cell a node, whether the nodes fill a box, a plane or a line.
func cellSize(size geom.Vec, nodes int) float64 {
	product, dims := 1.0, 0
	longest := 0.0
	for _, s := range size.Array() {
		longest = math.Max(longest, s)
	}
	for _, s := range size.Array() {
		if s > longest/100 {
			product *= s
			dims++
		}
	}
	return math.Max(math.Pow(product/float64(nodes), 1/float64(dims)), longest/500)
}

// fill lists every node in all cells that its tolerance ball touches.
func (g *nodeGrid) fill() {
	cells := g.n[0] * g.n[1] * g.n[2]
	count := make([]int32, cells+1)
	g.each(func(c int, _ int32) { count[c+1]++ })
	for c := range cells {
		count[c+1] += count[c]
	}
	g.start = append([]int32(nil), count...)
	g.list = make([]int32, count[cells])
	g.each(func(c int, i int32) {
		g.list[count[c]] = i
		count[c]++
	})
}

func (g *nodeGrid) each(f func(cell int, node int32)) {
	for i, v := range g.at {
		var from, to [3]int
		for x, w := range v.Sub(g.low).Array() {
			from[x] = max(0, int((w-ThroughNode)/g.cell))
			to[x] = min(g.n[x]-1, int((w+ThroughNode)/g.cell))
		}
		for x := from[0]; x <= to[0]; x++ {
			for y := from[1]; y <= to[1]; y++ {
				for z := from[2]; z <= to[2]; z++ {
					f((x*g.n[1]+y)*g.n[2]+z, int32(i))
				}
			}
		}
	}
}

// through reports whether the segment between nodes i and j passes within ThroughNode of another node. It walks the
// cells that the segment crosses (Amanatides and Woo 1987).
func (g *nodeGrid) through(i, j int32, a, b geom.Vec) bool {
	d := b.Sub(a)
	l := d.Norm()
	from, dir := a.Sub(g.low).Array(), d.Array()
	var at, step [3]int
	var next, delta [3]float64
	for x := range 3 {
		at[x] = min(max(int(from[x]/g.cell), 0), g.n[x]-1)
		next[x], delta[x] = math.Inf(1), math.Inf(1)
		switch {
		case dir[x] > 0:
			step[x], next[x], delta[x] = 1, (float64(at[x]+1)*g.cell-from[x])/dir[x], g.cell/dir[x]
		case dir[x] < 0:
			step[x], next[x], delta[x] = -1, (float64(at[x])*g.cell-from[x])/dir[x], -g.cell/dir[x]
		}
	}
	unit := d.Scale(1 / l)
	for {
		c := (at[0]*g.n[1]+at[1])*g.n[2] + at[2]
		for _, k := range g.list[g.start[c]:g.start[c+1]] {
			if k != i && k != j && onSegment(g.at[k].Sub(a), unit, l) {
				return true
			}
		}
		x := 0
		if next[1] < next[x] {
			x = 1
		}
		if next[2] < next[x] {
			x = 2
		}
		if next[x] > 1 {
			return false
		}
		at[x] += step[x]
		next[x] += delta[x]
		if at[x] < 0 || at[x] >= g.n[x] {
			return false
		}
	}
}

// onSegment reports whether the point v (from the segment's start) is within ThroughNode of the inside of a segment.
func onSegment(v, unit geom.Vec, l float64) bool {
	t := v.Dot(unit)
	if t <= ThroughNode || t >= l-ThroughNode {
		return false
	}
	off := v.Sub(unit.Scale(t))
	return off.Dot(off) <= ThroughNode*ThroughNode
}
