package sparse

import (
	"context"
	"runtime"
	"sync"

	"boughwork/lp/sparse/internal/kernel"
)

// Factor is the numeric Cholesky factor of a matrix with the pattern of a Symbolic. It is reused from one factorisation
// to the next. Not for concurrent use.
type Factor struct {
	sym     *Symbolic
	panel   [][]float64 // rows x cols of every supernode, row-major
	scratch *pool
	offset  []int // first scalar row of every block in the caller's order
	entry   [][]entry
	// Dropped is the number of pivots of the last factorisation that were rounding noise: the matrix is singular in as
	// many directions, and the unknowns that they belong to are held at zero.
	Dropped int
}

// entry is an off-diagonal block of the matrix that is assembled into a front; flip if it is stored the other way round.
type entry struct {
	edge     int32
	row, col int32 // positions
	flip     bool
}

// NewFactor prepares a factor: storage for the panels, and the place of every block of the matrix.
func NewFactor(s *Symbolic) *Factor {
	f := &Factor{sym: s, panel: make([][]float64, len(s.node)), scratch: &pool{}, entry: make([][]entry, len(s.node))}
	for i, t := range s.node {
		f.panel[i] = make([]float64, t.rows*t.cols)
	}
	f.offset = make([]int, len(s.graph.Size)+1)
	for v, n := range s.graph.Size {
		f.offset[v+1] = f.offset[v] + n
	}
	for e, uv := range s.graph.Edge {
		p, q := s.place[uv[0]], s.place[uv[1]]
		en := entry{edge: int32(e), row: p, col: q}
		if p < q {
			en = entry{edge: int32(e), row: q, col: p, flip: true}
		}
		owner := s.of[en.col]
		f.entry[owner] = append(f.entry[owner], en)
	}
	return f
}

// Fronts with fewer flops than this are not worth a second goroutine inside.
const sharedFront = 2e7

// Factorise computes the factor of m, which must have the graph that was analysed. It returns the context's error if
// the context ends first; the factor is then of no use.
func (f *Factor) Factorise(ctx context.Context, m *Matrix) error {
	f.Dropped = 0
	workers := runtime.GOMAXPROCS(0)
	update := make([][]float64, len(f.sym.node))
	dropped := make([]int, len(f.sym.node))
	below, above := f.cutTree(workers)

	var wg sync.WaitGroup
	next := make(chan int32, len(below))
	for _, root := range below {
		next <- root
	}
	close(next)
	for range min(workers, len(below)) {
		wg.Add(1)
		go func() {
			defer wg.Done()
			w := f.newWorker(m, update, dropped, 1)
			for root := range next {
				w.subtree(ctx, root)
			}
		}()
	}
	wg.Wait()
	f.climb(ctx, above, func() *worker { return f.newWorker(m, update, dropped, workers) })
	for _, d := range dropped {
		f.Dropped += d
	}
	return ctx.Err()
}

// climb eliminates the fronts above the subtrees, which are children before parents. Those of different branches go on at
// the same time; inside, large fronts are shared between workers too.
func (f *Factor) climb(ctx context.Context, above []int32, hire func() *worker) {
	upper := map[int32]bool{}
	for _, i := range above {
		upper[i] = true
	}
	var climb func(w *worker, i int32)
	climb = func(w *worker, i int32) {
		var wg sync.WaitGroup
		first := int32(-1)
		for _, c := range f.sym.node[i].child {
			switch {
			case !upper[c]:
			case first < 0:
				first = c
			default:
				wg.Go(func() { climb(hire(), c) })
			}
		}
		if first >= 0 {
			climb(w, first)
		}
		wg.Wait()
		if ctx.Err() == nil {
			w.front(i)
		}
	}
	w := hire()
	for _, r := range f.sym.root {
		if upper[r] {
			climb(w, r)
		}
	}
}

// cutTree parts the tree into subtrees that one worker each takes whole, the heaviest first, and the fronts above them,
// children before parents.
func (f *Factor) cutTree(workers int) (below, above []int32) {
	limit := f.sym.Flops / float64(4*workers)
	if workers == 1 {
		limit = f.sym.Flops
	}
	var walk func(i int32)
	walk = func(i int32) {
		t := &f.sym.node[i]
		if t.subtree <= limit {
			below = append(below, i)
			return
		}
		for _, c := range t.child {
			walk(c)
		}
		above = append(above, i)
	}
	for _, r := range f.sym.root {
		walk(r)
	}
	return below, above
}

// worker eliminates fronts one after the other.
type worker struct {
	f       *Factor
	m       *Matrix
	update  [][]float64
	dropped []int
	rowOf   []int32 // rowOf[position] = first row of the block in the present front
	run     []run
	scale   []float64
	workers int
}

func (f *Factor) newWorker(m *Matrix, update [][]float64, dropped []int, workers int) *worker {
	return &worker{f: f, m: m, update: update, dropped: dropped, rowOf: make([]int32, len(f.sym.order)), workers: workers}
}

func (w *worker) subtree(ctx context.Context, i int32) {
	for _, c := range w.f.sym.node[i].child {
		w.subtree(ctx, c)
	}
	if ctx.Err() == nil {
		w.front(i)
	}
}

// front assembles and eliminates supernode i, and leaves what it does to later rows in update[i].
func (w *worker) front(i int32) {
	f, t := w.f, &w.f.sym.node[i]
	w.number(t)
	a := f.panel[i]
	rest := t.rows - t.cols
	u := f.scratch.get(rest * rest)
	workers := w.workers
	if t.flops < sharedFront {
		workers = 1
	}
	clearFront(t, a, u, workers)
	w.assemble(i, t, a)
	for _, c := range t.child {
		w.extendAdd(c, t, a, u, workers)
		f.scratch.put(w.update[c])
		w.update[c] = nil
	}
	p := panel{a: a, rows: t.rows, cols: t.cols, scale: w.scale, workers: workers}
	p.factor(0, t.cols)
	w.dropped[i] = p.dropped
	if rest > 0 {
		low := a[t.cols*t.cols:]
		kernel.SubMulT(u, rest, low, t.cols, low, t.cols, rest, rest, t.cols, true, workers)
		w.update[i] = u
	} else {
		f.scratch.put(u)
	}
}

// number gives every block of the front its first row.
func (w *worker) number(t *supernode) {
	g, order := w.f.sym.graph, w.f.sym.order
	row := int32(0)
	for p := t.first; p < t.last; p++ {
		w.rowOf[p] = row
		row += int32(g.Size[order[p]])
	}
	for _, p := range t.below {
		w.rowOf[p] = row
		row += int32(g.Size[order[p]])
	}
}

// assemble copies the blocks of the matrix into the panel.
func (w *worker) assemble(i int32, t *supernode, a []float64) {
	g, order := w.f.sym.graph, w.f.sym.order
	ld := t.cols
	w.scale = w.scale[:0]
	for p := t.first; p < t.last; p++ {
		n, r, d := g.Size[order[p]], int(w.rowOf[p]), w.m.Diag[order[p]]
		for x := range n {
			copy(a[(r+x)*ld+r:][:x+1], d[x*n:])
			w.scale = append(w.scale, d[x*n+x])
		}
	}
	for _, e := range w.f.entry[i] {
		b := w.m.Off[e.edge]
		r, c := int(w.rowOf[e.row]), int(w.rowOf[e.col])
		rn, cn := g.Size[order[e.row]], g.Size[order[e.col]]
		for x := range rn {
			dst := a[(r+x)*ld+c:][:cn]
			if e.flip {
				for y := range cn {
					dst[y] += b[y*rn+x]
				}
			} else {
				for y, v := range b[x*cn:][:cn] {
					dst[y] += v
				}
			}
		}
	}
}
