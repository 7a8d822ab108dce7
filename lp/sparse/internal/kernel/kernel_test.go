package kernel

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
)

// plain is C -= A B' by the definition.
func plain(c []float64, ldc int, a []float64, lda int, b []float64, ldb int, m, n, k int) {
	for i := range m {
		for j := range n {
			s := 0.0
			for p := range k {
				s += a[i*lda+p] * b[j*ldb+p]
			}
			c[i*ldc+j] -= s
		}
	}
}

func random(r *rand.Rand, n int) []float64 {
	x := make([]float64, n)
	for i := range x {
		x[i] = r.NormFloat64()
	}
	return x
}

// Sizes around the tile and block borders, where a packed kernel goes wrong; guards behind every row show a write
// outside of C.
func TestSubMulT(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	sizes := [][3]int{{1, 1, 1}, {4, 12, 1}, {5, 13, 3}, {3, 11, 7}, {97, 25, 257}, {200, 200, 64}, {101, 1543, 30}, {300, 37, 515}}
	for _, s := range sizes {
		m, n, k := s[0], s[1], s[2]
		for _, lower := range []bool{false, true} {
			for _, workers := range []int{1, 2, 3} {
				t.Run(fmt.Sprint(m, n, k, lower, workers), func(t *testing.T) {
					lda, ldb, ldc := k+3, k+1, n+5
					a, b, c := random(r, m*lda), random(r, n*ldb), random(r, m*ldc)
					want, before := append([]float64(nil), c...), append([]float64(nil), c...)
					plain(want, ldc, a, lda, b, ldb, m, n, k)
					SubMulT(c, ldc, a, lda, b, ldb, m, n, k, lower, workers)
					for i := range m {
						for j := range ldc {
							got, w := c[i*ldc+j], want[i*ldc+j]
							if j >= n {
								w = before[i*ldc+j]
							}
							if lower && j > i && j < n {
								continue
							}
							if d := math.Abs(got - w); d > 1e-13*float64(k+1) || (j >= n && d != 0) {
								t.Fatalf("C[%d][%d] = %g, want %g", i, j, got, w)
							}
						}
					}
				})
			}
		}
	}
}

// The factor must not depend on the number of cores, so neither may the kernel.
func TestWorkersGiveTheSameBits(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	m, n, k := 500, 500, 300
	a, b, c := random(r, m*k), random(r, n*k), random(r, m*n)
	one, four := append([]float64(nil), c...), append([]float64(nil), c...)
	SubMulT(one, n, a, k, b, k, m, n, k, true, 1)
	SubMulT(four, n, a, k, b, k, m, n, k, true, 4)
	for i := range one {
		if one[i] != four[i] {
			t.Fatalf("entry %d: %g with one worker, %g with four", i, one[i], four[i])
		}
	}
}

func BenchmarkSubMulT(b *testing.B) {
	r := rand.New(rand.NewPCG(5, 6))
	for _, n := range []int{64, 256, 1024, 2048} {
		for _, workers := range []int{1, 2} {
			b.Run(fmt.Sprintf("n=%d/workers=%d", n, workers), func(b *testing.B) {
				x, y, c := random(r, n*n), random(r, n*n), random(r, n*n)
				for b.Loop() {
					SubMulT(c, n, x, n, y, n, n, n, n, false, workers)
				}
				b.ReportMetric(2*float64(n)*float64(n)*float64(n)*float64(b.N)/b.Elapsed().Seconds()/1e9, "GFLOP/s")
			})
		}
	}
}

// Every shape that this machine has must do what the definition says, and those that fuse multiplication and addition
// must agree bit for bit: results may not depend on which of them a processor chooses.
func TestShapesAgree(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 8))
	m, n, k := 53, 41, 300
	a, b, c := random(r, m*k), random(r, n*k), random(r, m*n)
	want := append([]float64(nil), c...)
	plain(want, n, a, k, b, k, m, n, k)
	defer func(s shape) { chosen = s }(chosen)
	var fused []float64
	for _, s := range shapes {
		chosen = s
		got := append([]float64(nil), c...)
		SubMulT(got, n, a, k, b, k, m, n, k, false, 1)
		for i := range got {
			if d := math.Abs(got[i] - want[i]); d > 1e-13*float64(k) {
				t.Fatalf("%s: entry %d is %g, want %g", s.name, i, got[i], want[i])
			}
		}
		if s.name == plainShape.name {
			continue
		}
		if fused == nil {
			fused = got
		}
		for i := range got {
			if got[i] != fused[i] {
				t.Fatalf("%s: entry %d is %b, another shape says %b", s.name, i, got[i], fused[i])
			}
		}
	}
}

// X L' must give back what X was solved from, for every number of columns and rows around the block of sixteen, with
// nothing written beside X, on any number of workers.
func TestSolveT(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 10))
	for _, n := range []int{1, 2, 7, 15, Width} {
		for _, m := range []int{1, 15, 16, 17, 300} {
			const ld = Width + 3
			l, b := random(r, n*ld), random(r, m*ld)
			for i := range n {
				l[i*ld+i] = 2 + math.Abs(l[i*ld+i])
			}
			x, two := append([]float64(nil), b...), append([]float64(nil), b...)
			NewTriangle(l, ld, n).SolveT(x, ld, m, 1)
			NewTriangle(l, ld, n).SolveT(two, ld, m, 2)
			for i := range m {
				for j := range ld {
					want, got := b[i*ld+j], x[i*ld+j]
					if j < n {
						got = 0
						for p := range j + 1 {
							got += x[i*ld+p] * l[j*ld+p]
						}
					}
					if math.Abs(got-want) > 1e-12*(1+math.Abs(want)) || x[i*ld+j] != two[i*ld+j] {
						t.Fatalf("n %d, m %d: row %d, column %d: %g, want %g", n, m, i, j, got, want)
					}
				}
			}
		}
	}
}

// The assembly of the solve must do what the plain one does.
func TestSolve16(t *testing.T) {
	r := rand.New(rand.NewPCG(11, 12))
	var l, x [Width * Width]float64
	for j := range Width {
		for i := j; i < Width; i++ {
			l[j*Width+i] = 0.3 * r.NormFloat64()
		}
		l[j*Width+j] = 0.7
		for i := range Width {
			x[j*Width+i] = r.NormFloat64()
		}
	}
	y := x
	solve16(&l, &x)
	solve16Go(&l, &y)
	for i := range x {
		if math.Abs(x[i]-y[i]) > 1e-12*(1+math.Abs(y[i])) {
			t.Fatalf("entry %d: %g, plain Go says %g", i, x[i], y[i])
		}
	}
}
