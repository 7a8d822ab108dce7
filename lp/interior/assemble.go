package interior

import (
	"context"
	"math"

	"boughwork/lp/sparse"
)

// A diagonal entry is raised by this share of the largest in its block, so that a row that no bar holds now keeps a
// pivot; larger values were seen to spoil the last digits of the equilibrium.
// A block that no bar touches gets emptyShare of the largest entry of all instead.
const (
	diagonalShare = 1e-15
	emptyShare    = 1e-6
)

// term is what one bar adds to one block of the matrix: that with the rows of its part x and the columns of its part y.
type term struct{ bar, x, y int32 }

// collect lists, for every diagonal block and then every off-diagonal one, the terms that it is the sum of.
func (sys *system) collect() {
	blocks := len(sys.graph.Size)
	sys.term = make([][]term, blocks+len(sys.graph.Edge))
	for i := range int32(sys.s.bars) {
		first, e := sys.partPtr[i], sys.edgePtr[i]
		for x := first; x < sys.partPtr[i+1]; x++ {
			b := sys.part[x].block
			sys.term[b] = append(sys.term[b], term{i, x, x})
			for y := first; y < x; y++ {
				rows, cols := x, y
				if b < sys.part[y].block {
					rows, cols = y, x
				}
				at := blocks + int(sys.edge[e])
				sys.term[at] = append(sys.term[at], term{i, rows, cols})
				e++
			}
		}
	}
}

// assembleChunk is how many blocks of the matrix are worth a goroutine's while.
const assembleChunk = 64

// assemble fills and factorises the matrix, block by block on all cores.
func (sys *system) assemble(ctx context.Context, w *weights) error {
	sys.mat.Clear()
	blocks := len(sys.graph.Size)
	inChunks(len(sys.term), assembleChunk, func(lo, hi int) {
		var v blockVectors
		for n := lo; n < hi; n++ {
			if n < blocks {
				for _, t := range sys.term[n] {
					sys.addTerm(t, sys.mat.Diag[n], w, &v)
				}
				continue
			}
			for _, t := range sys.term[n] {
				sys.addTerm(t, sys.mat.Off[n-blocks], w, &v)
			}
		}
	})
	sys.raise(sys.mat)
	return sys.factor.Factorise(ctx, sys.mat)
}

// raise adds a little to the diagonal.
func (sys *system) raise(mat *sparse.Matrix) {
	top := make([]float64, len(mat.Diag))
	all := 0.0
	for v, d := range mat.Diag {
		n := sys.graph.Size[v]
		for x := range n {
			top[v] = math.Max(top[v], d[x*n+x])
		}
		all = math.Max(all, top[v])
	}
	for v, d := range mat.Diag {
		n := sys.graph.Size[v]
		raise := diagonalShare * math.Max(top[v], emptyShare*all)
		for x := range n {
			d[x*n+x] += raise
		}
	}
}

// blockVectors is room for the vectors v of a bar in two blocks.
type blockVectors struct{ x, y []float64 }

// addTerm adds v_x v_y' / S and, within each case, b_x b_y' / D to a block. Of a diagonal block the lower triangle is
// enough.
func (sys *system) addTerm(t term, dst []float64, w *weights, room *blockVectors) {
	s, k, i := sys.s, sys.s.cases, int(t.bar)
	px, py := sys.part[t.x], sys.part[t.y]
	ld := sys.graph.Size[py.block]
	if f := w.invS[i]; f != 0 {
		room.x = sys.spread(room.x, t.bar, px, w)
		vy := room.x
		if t.x != t.y {
			room.y = sys.spread(room.y, t.bar, py, w)
			vy = room.y
		}
		for r, v := range room.x {
			if v == 0 {
				continue
			}
			f, row, vy := f*v, dst[r*ld:][:ld], vy
			if t.x == t.y {
				vy = vy[:r+1]
			}
			row = row[:len(vy)]
			for c, u := range vy {
				row[c] += f * u
			}
		}
	}
	for _, jx := range sys.entries[px.first:px.end] {
		rx := s.row[jx]
		for _, jy := range sys.entries[py.first:py.end] {
			ry := s.row[jy]
			bb := s.b[jx] * s.b[jy]
			at := int(sys.local[rx])*ld + int(sys.local[ry])
			step := int(sys.stride[rx])*ld + int(sys.stride[ry])
			for c := range k {
				dst[at+c*step] += w.invD[i*k+c] * bb
			}
		}
	}
}

// spread returns the vector v of a bar in the block of a part: t b - g h by case and row, zero where it has no entry.
func (sys *system) spread(to []float64, bar int32, p part, w *weights) []float64 {
	s, k := sys.s, sys.s.cases
	n := sys.graph.Size[p.block]
	if cap(to) < n {
		to = make([]float64, n)
	}
	to = to[:n]
	clear(to)
	for _, j := range sys.entries[p.first:p.end] {
		r := s.row[j]
		at, step := int(sys.local[r]), int(sys.stride[r])
		for c := range k {
			to[at+c*step] = w.t[int(bar)*k+c]*s.b[j] - s.gravity[c]*s.h[j]
		}
	}
	return to
}
