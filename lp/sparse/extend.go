package sparse

import "boughwork/lp/sparse/internal/kernel"

// run is a stretch of rows of a child that stay side by side in its parent: rows from..from+n-1 of the child are rows
// to..to+n-1 of the parent.
type run struct{ from, to, n int }

// extendRows is how many rows of a child are worth a goroutine of their own.
const extendRows = 64

// clearFront sets the panel and the lower triangle of the update matrix of a front to zero.
func clearFront(t *supernode, a, u []float64, workers int) {
	rest := t.rows - t.cols
	kernel.InChunks(t.rows, extendRows, workers, func(lo, hi int) {
		clear(a[lo*t.cols : hi*t.cols])
		for r := max(lo-t.cols, 0); r < hi-t.cols; r++ {
			clear(u[r*rest : r*rest+r+1])
		}
	})
}

// extendAdd adds what child c does to later rows to the panel a and the update matrix u of its parent t.
func (w *worker) extendAdd(c int32, t *supernode, a, u []float64, workers int) {
	g, order := w.f.sym.graph, w.f.sym.order
	from := w.update[c]
	w.run = w.run[:0]
	n, inPanel := 0, 0 // rows of the child, and those that this front eliminates
	for _, p := range w.f.sym.node[c].below {
		size, to := g.Size[order[p]], int(w.rowOf[p])
		if size == 0 {
			continue
		}
		if last := len(w.run) - 1; last >= 0 && w.run[last].to+w.run[last].n == to && to != t.cols {
			w.run[last].n += size
		} else {
			w.run = append(w.run, run{n, to, size})
		}
		n += size
		if to < t.cols {
			inPanel = n
		}
	}
	rest := t.rows - t.cols
	kernel.InChunks(n, extendRows, workers, func(lo, hi int) {
		for _, rr := range w.run {
			for x := max(lo, rr.from); x < min(hi, rr.from+rr.n); x++ {
				r := rr.to + x - rr.from
				extendRow(from[x*n:x*n+x+1], w.run, a[r*t.cols:], 0, inPanel)
				if x >= inPanel {
					extendRow(from[x*n:x*n+x+1], w.run, u[(r-t.cols)*rest:], t.cols, x+1)
				}
			}
		}
	})
}

// extendRow adds the columns of a row of a child that come before end, and are at first or later in the parent, to a row
// that begins with column first of the parent.
func extendRow(src []float64, runs []run, dst []float64, first, end int) {
	for _, q := range runs {
		n := min(q.n, len(src)-q.from, end-q.from)
		if n <= 0 {
			return
		}
		if q.to < first {
			continue
		}
		add(src[q.from:q.from+n], dst[q.to-first:])
	}
}

// add adds x to the first entries of y.
func add(x, y []float64) {
	y = y[:len(x)]
	for i, v := range x {
		y[i] += v
	}
}
