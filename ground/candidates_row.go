package ground

import (
	"math"

	"boughwork/geom"
)

// Directions are sorted into cells of this side on the unit sphere: small enough that few nodes share a cell, and no
// smaller than the angle under which a node farther than closeBlocker sees its tolerance.
const (
	directionCell = 4e-3
	closeBlocker  = ThroughNode / directionCell
)

// rowScan finds, for one node, all nodes that cannot be joined to it because another node is in the way. It sorts the
// nodes by direction, so that only those in nearly the same direction are compared: a few operations a pair, where
// walking along each segment takes hundreds.
type rowScan struct {
	key   []uint64 // of a cell; open addressing
	head  []int32  // first entry of a cell, or -1
	node  []int32  // entries: a node in a cell it reaches,
	next  []int32  // and the next entry of the cell
	slots []int32  // in use, to be cleared
	to    []geom.Vec
	dist  []float64
	close []int32 // nodes so near that they see their tolerance under a large angle
}

func newRowScan(nodes int) *rowScan {
	size := 16
	for size < 4*nodes {
		size *= 2
	}
	r := &rowScan{key: make([]uint64, size), head: make([]int32, size), to: make([]geom.Vec, nodes), dist: make([]float64, nodes)}
	for i := range r.head {
		r.head[i] = -1
	}
	return r
}

// blocked fills out with whether a node is within ThroughNode of the segment from node i to node j, for all j from i+1 on.
func (r *rowScan) blocked(i int, at []geom.Vec, out []bool) {
	r.reset()
	for k, p := range at {
		if k == i {
			continue
		}
		v := p.Sub(at[i])
		r.to[k], r.dist[k] = v, v.Norm()
		if r.dist[k] < closeBlocker {
			r.close = append(r.close, int32(k))
			continue
		}
		r.insert(int32(k))
	}
	for j := i + 1; j < len(at); j++ {
		out[j] = r.hidden(j)
	}
}

// reset empties the cells.
func (r *rowScan) reset() {
	for _, s := range r.slots {
		r.head[s] = -1
	}
	r.slots, r.node, r.next, r.close = r.slots[:0], r.node[:0], r.next[:0], r.close[:0]
}

// insert puts node k into all cells that its tolerance reaches, seen from the origin of the scan.
func (r *rowScan) insert(k int32) {
	angle := 1.01 * ThroughNode / r.dist[k] // a little more: the chord, and rounding
	u := r.to[k].Scale(1 / r.dist[k]).Array()
	var from, to [3]int
	for x, w := range u {
		from[x], to[x] = cellOf(w-angle), cellOf(w+angle)
	}
	for x := from[0]; x <= to[0]; x++ {
		for y := from[1]; y <= to[1]; y++ {
			for z := from[2]; z <= to[2]; z++ {
				s := r.slot(x, y, z)
				if r.head[s] < 0 {
					r.slots = append(r.slots, s)
				}
				r.node, r.next = append(r.node, k), append(r.next, r.head[s])
				r.head[s] = int32(len(r.node) - 1)
			}
		}
	}
}

func cellOf(w float64) int { return int(math.Floor((w + 2) / directionCell)) }

// slot returns the place of a cell in the table, which grows if it is half full.
func (r *rowScan) slot(x, y, z int) int32 {
	if 2*len(r.slots) >= len(r.head) {
		r.grow()
	}
	key := uint64(x)<<40 | uint64(y)<<20 | uint64(z)
	mask := uint64(len(r.head) - 1)
	for s := key * 0x9e3779b97f4a7c15 >> 20 & mask; ; s = (s + 1) & mask {
		if r.head[s] < 0 {
			r.key[s] = key
			return int32(s)
		}
		if r.key[s] == key {
			return int32(s)
		}
	}
}

// grow doubles the table.
func (r *rowScan) grow() {
	key, head, slots := r.key, r.head, r.slots
	r.key, r.head, r.slots = make([]uint64, 2*len(key)), make([]int32, 2*len(head)), nil
	for i := range r.head {
		r.head[i] = -1
	}
	mask := uint64(len(r.head) - 1)
	for _, old := range slots {
		s := key[old] * 0x9e3779b97f4a7c15 >> 20 & mask
		for r.head[s] >= 0 {
			s = (s + 1) & mask
		}
		r.key[s], r.head[s] = key[old], head[old]
		r.slots = append(r.slots, int32(s))
	}
}

// hidden reports whether a node is in the way to node j.
func (r *rowScan) hidden(j int) bool {
	l := r.dist[j]
	if l == 0 {
		return false
	}
	unit := r.to[j].Scale(1 / l)
	for _, k := range r.close {
		if int(k) != j && onSegment(r.to[k], unit, l) {
			return true
		}
	}
	for e := r.head[r.slot(cellOf(unit.X), cellOf(unit.Y), cellOf(unit.Z))]; e >= 0; e = r.next[e] {
		if k := r.node[e]; int(k) != j && onSegment(r.to[k], unit, l) {
			return true
		}
	}
	return false
}
