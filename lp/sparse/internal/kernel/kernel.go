// Package kernel holds the dense kernel that the sparse factorisation spends its time in: C -= A B' for row-major
// matrices, by packed tiles (Goto and van de Geijn 2008). The plain Go version always compiles; assembly replaces only
// the innermost tile and is tested against it.
package kernel

import "sync"

// Tile sizes: a micro tile is mr x nr numbers of C. kc and mc keep a packed strip of B in the first and a packed block
// of A in the second cache level; nc bounds the packed block of B.
const (
	mr = 4
	nr = 12
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
	w := buffers.Get().(*buffer)
	defer buffers.Put(w)
	for j0 := 0; j0 < n; j0 += nc {
		jn := min(nc, n-j0)
		i0 := 0
		if lower {
			i0 = j0 / mr * mr // rows above see no wanted entry of these columns
		}
		for p0 := 0; p0 < k; p0 += kc {
			pn := min(kc, k-p0)
			pack(w.b, b, ldb, j0, jn, p0, pn, nr)
			band := func(i int, own *buffer) {
				in := min(mc, m-i)
				pack(own.a, a, lda, i, in, p0, pn, mr)
				tiles(c, ldc, own.a, w.b, i, in, j0, jn, pn, lower, &own.edge)
			}
			bands := (m - i0 + mc - 1) / mc
			if workers < 2 || bands < 2 {
				for t := range bands {
					band(i0+t*mc, w)
				}
				continue
			}
			parallel(bands, workers, func(t int, own *buffer) { band(i0+t*mc, own) })
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

// buffer is the packing space of one goroutine.
type buffer struct {
	a, b []float64
	edge [mr * nr]float64
}

var buffers = sync.Pool{New: func() any {
	return &buffer{a: make([]float64, (mc+mr)*kc), b: make([]float64, (nc+nr)*kc)}
}}

// pack copies rows r0..r0+n of a matrix into strips of width rows, column by column, padded with zeros.
func pack(to, from []float64, ld, r0, n, p, pn, width int) {
	at := 0
	for r := 0; r < n; r += width {
		for s := range width {
			dst := to[at+s:]
			if r+s >= n {
				for q := range pn {
					dst[q*width] = 0
				}
				continue
			}
			for q, v := range from[(r0+r+s)*ld+p:][:pn] {
				dst[q*width] = v
			}
		}
		at += width * pn
	}
}

// tiles runs the micro tile over a band of in rows and jn columns.
func tiles(c []float64, ldc int, pa, pb []float64, i0, in, j0, jn, k int, lower bool, edge *[mr * nr]float64) {
	for j := 0; j < jn; j += nr {
		b := pb[j*k:][: nr*k : nr*k]
		for i := 0; i < in; i += mr {
			if lower && i0+i+mr-1 < j0+j {
				continue // wholly above the diagonal
			}
			a := pa[i*k:][: mr*k : mr*k]
			if i+mr <= in && j+nr <= jn {
				tile(k, a, b, c[(i0+i)*ldc+j0+j:], ldc)
				continue
			}
			clear(edge[:])
			tile(k, a, b, edge[:], nr)
			for r := range min(mr, in-i) {
				row := c[(i0+i+r)*ldc+j0+j:]
				for s := range min(nr, jn-j) {
					row[s] += edge[r*nr+s]
				}
			}
		}
	}
}
