package interior

import (
	"boughwork/lp"
	"boughwork/lp/sparse"
)

// system is the reduced normal equations of the layout program: one symmetric positive definite matrix in the
// displacements of all cases,
//
//	M_kk' = delta_kk' sum_i b_i b_i' / D_ik + sum_i v_ik v_ik'' / S_i,   v_ik = t_ik b_i - g_k h_i,
//
// with weights from the iterate (direction.go). Vectors over it hold, block after block of the problem, the rows of case
// 0, of case 1 and so on.
type system struct {
	s      *scaled
	graph  *sparse.Graph
	mat    *sparse.Matrix
	factor *sparse.Factor
	size   int     // rows x cases
	base   []int32 // place of every row in case 0
	stride []int32 // from one case to the next
	local  []int32 // row within its block
	block  []int32 // block of every row
	// Bars touch few blocks: bar i has parts partPtr[i] to partPtr[i+1]-1, each the run of entries of one block, and the
	// edges between its parts, in the order (1,0), (2,0), (2,1), ...
	partPtr []int32
	part    []part
	edgePtr []int32
	edge    []int32
	entries []int32 // entries of a bar, grouped by block
	term    [][]term
	// Iterations after which the forces must be in balance, or 0: a start out of balance that does not come into it.
	patience int
}

// part is a run of entries of a bar in one block.
type part struct {
	block      int32
	first, end int32 // into entries
}

func newSystem(s *scaled, p *lp.Problem) (*system, error) {
	sys := &system{s: s, size: s.rows * s.cases}
	sys.layOut(p)
	sys.connect()
	sym, err := sparse.Analyse(sys.graph)
	if err != nil {
		return nil, err
	}
	sys.mat = sparse.NewMatrix(sys.graph)
	sys.factor = sparse.NewFactor(sym)
	sys.collect()
	return sys, nil
}

// layOut places the rows of all cases, block by block.
func (sys *system) layOut(p *lp.Problem) {
	k := int32(sys.s.cases)
	blocks := len(p.Block) - 1
	sys.graph = &sparse.Graph{Size: make([]int, blocks), At: p.At}
	sys.base, sys.stride = make([]int32, p.Rows), make([]int32, p.Rows)
	sys.local, sys.block = make([]int32, p.Rows), make([]int32, p.Rows)
	for v := range blocks {
		dim := p.Block[v+1] - p.Block[v]
		sys.graph.Size[v] = int(dim * k)
		for r := p.Block[v]; r < p.Block[v+1]; r++ {
			sys.base[r] = p.Block[v]*k + r - p.Block[v]
			sys.stride[r], sys.local[r], sys.block[r] = dim, r-p.Block[v], int32(v)
		}
	}
}

// connect finds the parts of every bar and the pairs of blocks that it couples.
func (sys *system) connect() {
	s := sys.s
	number := map[[2]int32]int32{}
	sys.partPtr, sys.edgePtr = make([]int32, s.bars+1), make([]int32, s.bars+1)
	for i := range s.bars {
		begin := len(sys.part)
		for j := s.ptr[i]; j < s.ptr[i+1]; j++ {
			v := sys.block[s.row[j]]
			if seen := sys.hasPart(begin, v); seen {
				continue
			}
			pt := part{block: v, first: int32(len(sys.entries))}
			for q := j; q < s.ptr[i+1]; q++ {
				if sys.block[s.row[q]] == v {
					sys.entries = append(sys.entries, q)
				}
			}
			pt.end = int32(len(sys.entries))
			sys.part = append(sys.part, pt)
		}
		sys.partPtr[i+1] = int32(len(sys.part))
		for x := begin; x < len(sys.part); x++ {
			for y := begin; y < x; y++ {
				key := [2]int32{max(sys.part[x].block, sys.part[y].block), min(sys.part[x].block, sys.part[y].block)}
				e, ok := number[key]
				if !ok {
					e = int32(len(sys.graph.Edge))
					number[key] = e
					sys.graph.Edge = append(sys.graph.Edge, key)
				}
				sys.edge = append(sys.edge, e)
			}
		}
		sys.edgePtr[i+1] = int32(len(sys.edge))
	}
}

func (sys *system) hasPart(begin int, v int32) bool {
	for _, pt := range sys.part[begin:] {
		if pt.block == v {
			return true
		}
	}
	return false
}

// dot returns b_i . x for case k, lift returns h_i . x.
func (sys *system) dot(i, k int, x []float64) float64  { return sys.times(sys.s.b, i, k, x) }
func (sys *system) lift(i, k int, x []float64) float64 { return sys.times(sys.s.h, i, k, x) }

// times returns the scalar product of x in case k with the values of bar i.
func (sys *system) times(value []float64, i, k int, x []float64) float64 {
	sum := 0.0
	for j := sys.s.ptr[i]; j < sys.s.ptr[i+1]; j++ {
		r := sys.s.row[j]
		sum += value[j] * x[sys.base[r]+int32(k)*sys.stride[r]]
	}
	return sum
}

// add adds beta b_i + eta h_i to x in case k.
func (sys *system) add(i, k int, beta, eta float64, x []float64) {
	for j := sys.s.ptr[i]; j < sys.s.ptr[i+1]; j++ {
		r := sys.s.row[j]
		x[sys.base[r]+int32(k)*sys.stride[r]] += beta*sys.s.b[j] + eta*sys.s.h[j]
	}
}

// weights are the coefficients of one bar in the matrix: invD[k] = 1/D_ik, t[k], and invS = 1/S_i (0 for a fixed bar).
type weights struct {
	invD, t []float64 // [bar * cases + case]
	invS    []float64 // [bar]
}

// multiply returns M x, bar by bar, without the matrix: it knows nothing of the rounding that assembly did.
func (sys *system) multiply(w *weights, x []float64) []float64 {
	s, k := sys.s, sys.s.cases
	y := make([]float64, sys.size)
	for i := range s.bars {
		sum := 0.0
		for c := range k {
			bx := sys.dot(i, c, x)
			sys.add(i, c, w.invD[i*k+c]*bx, 0, y)
			sum += w.t[i*k+c] * bx
			if s.weighs && s.gravity[c] != 0 {
				sum -= s.gravity[c] * sys.lift(i, c, x)
			}
		}
		if sum *= w.invS[i]; sum != 0 {
			for c := range k {
				sys.add(i, c, sum*w.t[i*k+c], -sum*s.gravity[c], y)
			}
		}
	}
	return y
}
