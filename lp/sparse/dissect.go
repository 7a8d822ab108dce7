package sparse

import (
	"math"
	"slices"
)

// Blocks per leaf of the dissection: below this, minimum degree orders as well and costs less.
const leafBlocks = 64

// A separator larger than this share of the smaller side does not pay: long bars tie the halves together, and minimum
// degree on the whole part does better.
const worstSeparator = 0.9

// order returns an elimination order of the blocks: order[position] = block. Blocks without a place come last.
func order(g *Graph, adj [][]int32) []int32 {
	n := len(adj)
	d := &dissection{g: g, adj: adj, part: make([]int32, n), local: make([]int32, n)}
	var placed, last []int32
	for v := range n {
		if g.At != nil && math.IsNaN(g.At[v][0]) {
			last = append(last, int32(v))
			d.part[v] = -1
		} else {
			placed = append(placed, int32(v))
		}
	}
	d.next = 1
	for _, v := range placed {
		d.part[v] = 1
	}
	d.split(placed, 1)
	return append(d.out, last...)
}

// dissection is the state of the recursion. part[v] is the number of the part that v belongs to now; separators and
// finished blocks keep theirs, so that "in the same part" is one comparison.
type dissection struct {
	g     *Graph
	adj   [][]int32
	part  []int32
	local []int32
	next  int32
	out   []int32
}

// split orders the blocks of part id: first both halves, then the separator between them.
func (d *dissection) split(blocks []int32, id int32) {
	if len(blocks) <= leafBlocks || d.g.At == nil {
		d.leaf(blocks)
		return
	}
	left, right, sep := d.bestCut(blocks)
	if small := min(len(left), len(right)); float64(len(sep)) > worstSeparator*float64(small) {
		d.leaf(blocks)
		return
	}
	idL, idR, idS := d.next+1, d.next+2, d.next+3
	d.next += 3
	d.mark(left, idL)
	d.mark(right, idR)
	d.mark(sep, idS)
	d.split(left, idL)
	d.split(right, idR)
	d.leaf(sep)
}

func (d *dissection) mark(blocks []int32, id int32) {
	for _, v := range blocks {
		d.part[v] = id
	}
}

// bestCut tries the median plane of each axis and returns the cut with the smallest separator.
func (d *dissection) bestCut(blocks []int32) (left, right, sep []int32) {
	best := math.Inf(1)
	sorted := slices.Clone(blocks)
	for axis := range 3 {
		slices.SortFunc(sorted, func(a, b int32) int { return d.compare(a, b, axis) })
		if d.g.At[sorted[0]][axis] == d.g.At[sorted[len(sorted)-1]][axis] {
			continue
		}
		half := d.median(sorted, axis)
		l, r, s := d.cover(sorted[:half], sorted[half:])
		if score := float64(len(s)) + 0.1*math.Abs(float64(len(l)-len(r))); score < best {
			best, left, right, sep = score, l, r, s
		}
	}
	if left == nil {
		return blocks, nil, blocks
	}
	return left, right, sep
}

// compare orders by the coordinate of an axis, then by the others, then by number, so that equal inputs sort alike.
func (d *dissection) compare(a, b int32, axis int) int {
	for s := range 3 {
		x := (axis + s) % 3
		if p, q := d.g.At[a][x], d.g.At[b][x]; p < q {
			return -1
		} else if p > q {
			return 1
		}
	}
	return int(a - b)
}

// median returns the place nearest the middle where the coordinate changes, so that a row of the grid is not torn.
func (d *dissection) median(sorted []int32, axis int) int {
	n := len(sorted)
	at := func(i int) float64 { return d.g.At[sorted[i]][axis] }
	for off := 0; off < n/2; off++ {
		if i := n/2 + off; i < n && at(i-1) != at(i) {
			return i
		}
		if i := n/2 - off; i > 0 && at(i-1) != at(i) {
			return i
		}
	}
	return n / 2
}

// cover returns the two sides without, and the separator that is, a minimum vertex cover of the edges between them
// (Koenig 1931: from a maximum matching, here by augmenting paths).
func (d *dissection) cover(a, b []int32) (left, right, sep []int32) {
	side := d.local // 1: in a, 2: in b
	for _, v := range a {
		side[v] = 1
	}
	for _, v := range b {
		side[v] = 2
	}
	m := newMatching(d, a, b)
	m.run()
	inCover := m.cover()
	for _, v := range a {
		if inCover[v] {
			sep = append(sep, v)
		} else {
			left = append(left, v)
		}
	}
	for _, v := range b {
		if inCover[v] {
			sep = append(sep, v)
		} else {
			right = append(right, v)
		}
	}
	for _, v := range a {
		side[v] = 0
	}
	for _, v := range b {
		side[v] = 0
	}
	slices.Sort(sep)
	return left, right, sep
}
