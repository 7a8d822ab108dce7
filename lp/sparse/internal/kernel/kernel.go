// Package kernel holds the dense kernels that the sparse factorisation spends its time in: C -= A B' for row-major
// matrices, by tiles over packed strips of B (Goto and van de Geijn 2008; A is read as it is), and the solution for few
// columns. The plain Go version always compiles; assembly replaces only the innermost tile and is tested against it.
package kernel

import "sync"

// Block sizes: kc and mc keep a packed strip of B in the first and a block of A in the second cache level; nc bounds the
// packed block of B. mc and nc are multiples of the sides of every tile.
const (
	kc = 256
	mc = 96
	nc = 1536
)

// SubMulT computes C -= A B', where C is m x n with row stride ldc, A is m x k with row stride lda and B is n x k with
// row stride ldb, all row-major. With lower, only the entries C[i][j] with j <= i are wanted; others may be changed
// too, and are left alone where that saves work. The result does not depend on workers, the number of goroutines.
func SubMulT(c []float64, ldc int, a []float64, lda int, b []float64, ldb int, m, n, k int, lower bool, workers int) {
	if m == 0 || n == 0 || k == 0 {
		return
	}
	t := &chosen
	w := buffers.Get().(*buffer)
	defer buffers.Put(w)
	for j0 := 0; j0 < n; j0 += nc {
		jn := min(nc, n-j0)
		i0 := 0
		if lower {
			i0 = j0 / t.mr * t.mr // rows above see no wanted entry of these columns
		}
		for p0 := 0; p0 < k; p0 += kc {
			pn := min(kc, k-p0)
			packAll(w.b, b, ldb, j0, jn, p0, pn, t.nr, workers)
			band := func(i int, own *buffer) {
				t.tiles(c, ldc, a[p0:], lda, w.b, i, min(mc, m-i), j0, jn, pn, lower, own)
			}
			bands := (m - i0 + mc - 1) / mc
			if workers < 2 || bands < 2 {
				for b := range bands {
					band(i0+b*mc, w)
				}
				continue
			}
			parallel(bands, workers, func(b int, own *buffer) { band(i0+b*mc, own) })
		}
	}
}

// parallel calls f for t = 0..n-1 from several goroutines, each with its own buffer. Which goroutine takes which t does
// not matter: the calls touch different rows of C.
func parallel(n, workers int, f func(t int, own *buffer)) {
	var wg sync.WaitGroup
	var mu sync.Mutex
	next := 0
	for range min(workers, n) {
		wg.Add(1)
		go func() {
			defer wg.Done()
			own := buffers.Get().(*buffer)
			defer buffers.Put(own)
			for {
				mu.Lock()
				t := next
				next++
				mu.Unlock()
				if t >= n {
					return
				}
				f(t, own)
			}
		}()
	}
	wg.Wait()
}

// largestTile bounds the sides of a tile.
const largestTile = 16

// InChunks calls f for stretches of 0 to n-1 of the given size, from so many goroutines. What f writes must belong to its
// stretch.
func InChunks(n, size, workers int, f func(lo, hi int)) {
	if workers < 2 || n <= size {
		f(0, n)
		return
	}
	parallel((n+size-1)/size, workers, func(t int, _ *buffer) { f(t*size, min(n, (t+1)*size)) })
}

// buffer is the space of one goroutine: a packed block of B, and copies of what stands over the edge of A and of C.
type buffer struct {
	a, b []float64
	edge [largestTile * largestTile]float64
}

var buffers = sync.Pool{New: func() any {
	return &buffer{a: make([]float64, largestTile*kc), b: make([]float64, (nc+largestTile)*kc)}
}}

// packShare is how many strips are worth a goroutine of their own.
const packShare = 4

// packAll packs a block of B, on so many goroutines.
func packAll(to, from []float64, ld, r0, n, p, pn, width, workers int) {
	InChunks(n, packShare*width, workers, func(lo, hi int) {
		pack(to[lo*pn:], from, ld, r0+lo, hi-lo, p, pn, width)
	})
}

// pack copies rows r0..r0+n of a matrix into strips of width rows, column by column, padded with zeros. Four rows are
// read at once, so that the strip is written in order. width is a multiple of four.
func pack(to, from []float64, ld, r0, n, p, pn, width int) {
	at := 0
	for r := 0; r < n; r += width {
		for s := 0; s < width; s += 4 {
			dst := to[at+s:]
			if r+s+4 > n {
				packEdge(dst, from, ld, r0+r+s, n-r-s, p, pn, width)
				continue
			}
			row := from[(r0+r+s)*ld+p:]
			x0, x1, x2, x3 := row[:pn], row[ld:][:pn], row[2*ld:][:pn], row[3*ld:][:pn]
			for q, v := range x0 {
				d := dst[q*width:][:4:4]
				d[0], d[1], d[2], d[3] = v, x1[q], x2[q], x3[q]
			}
		}
		at += width * pn
	}
}

// packEdge packs the last n < 4 rows, if any, and zeros after them.
func packEdge(dst, from []float64, ld, r, n, p, pn, width int) {
	for s := range 4 {
		if s >= n {
			for q := range pn {
				dst[q*width+s] = 0
			}
			continue
		}
		for q, v := range from[(r+s)*ld+p:][:pn] {
			dst[q*width+s] = v
		}
	}
}

// tiles runs the micro tile over a band of in rows and jn columns.
func (t *shape) tiles(c []float64, ldc int, a []float64, lda int, pb []float64, i0, in, j0, jn, k int, lower bool, own *buffer) {
	mr, nr := t.mr, t.nr
	last := in / mr * mr // rows from here on do not fill a tile
	if last < in {
		for r := range mr {
			row := own.a[r*k:][:k]
			if last+r < in {
				copy(row, a[(i0+last+r)*lda:])
			} else {
				clear(row)
			}
		}
	}
	for j := 0; j < jn; j += nr {
		b := pb[j*k:][: nr*k : nr*k]
		for i := 0; i < in; i += mr {
			if lower && i0+i+mr-1 < j0+j {
				continue // wholly above the diagonal
			}
			ai, ld := own.a, k
			if i < last {
				ai, ld = a[(i0+i)*lda:], lda
			}
			if i < last && j+nr <= jn {
				t.run(k, ai, ld, b, c[(i0+i)*ldc+j0+j:], ldc)
				continue
			}
			clear(own.edge[:mr*nr])
			t.run(k, ai, ld, b, own.edge[:], nr)
			for r := range min(mr, in-i) {
				row := c[(i0+i+r)*ldc+j0+j:]
				for s := range min(nr, jn-j) {
					row[s] += own.edge[r*nr+s]
				}
			}
		}
	}
}
