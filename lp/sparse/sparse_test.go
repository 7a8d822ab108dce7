package sparse

import (
	"context"
	"math"
	"math/rand/v2"
	"runtime"
	"testing"
)

// grid returns the graph of a grid of nodes with 26 neighbours each and some long ties, with blocks of mixed sizes.
func grid(r *rand.Rand, nx, ny, nz, ties int, hub bool) *Graph {
	g := &Graph{}
	id := func(x, y, z int) int32 { return int32((x*ny+y)*nz + z) }
	seen := map[[2]int32]bool{}
	add := func(a, b int32) {
		if a > b {
			a, b = b, a
		}
		if a != b && !seen[[2]int32{a, b}] {
			seen[[2]int32{a, b}] = true
			g.Edge = append(g.Edge, [2]int32{b, a})
		}
	}
	for x := range nx {
		for y := range ny {
			for z := range nz {
				g.Size = append(g.Size, r.IntN(4)) // blocks of no rows happen: a node that is held
				g.At = append(g.At, [3]float64{float64(x), float64(y), float64(z)})
				for _, d := range [][3]int{{1, 0, 0}, {0, 1, 0}, {0, 0, 1}, {1, 1, 0}, {1, 0, 1}, {0, 1, 1}, {1, 1, 1}} {
					if x+d[0] < nx && y+d[1] < ny && z+d[2] < nz {
						add(id(x, y, z), id(x+d[0], y+d[1], z+d[2]))
					}
				}
			}
		}
	}
	n := int32(len(g.Size))
	for range ties {
		add(r.Int32N(n), r.Int32N(n))
	}
	if hub {
		g.Size = append(g.Size, 3)
		g.At = append(g.At, [3]float64{math.NaN(), 0, 0})
		for v := range n {
			if v%3 == 0 {
				add(v, n)
			}
		}
	}
	return g
}

// fill makes m positive definite: a sum of x x' over the edges.
func fill(r *rand.Rand, m *Matrix) {
	m.Clear()
	for e, uv := range m.Graph.Edge {
		nu, nv := m.Graph.Size[uv[0]], m.Graph.Size[uv[1]]
		x := make([]float64, nu+nv)
		for i := range x {
			x[i] = r.NormFloat64()
		}
		for i := range nu {
			for j := range nu {
				m.Diag[uv[0]][i*nu+j] += x[i] * x[j]
			}
			for j := range nv {
				m.Off[e][i*nv+j] += x[i] * x[nu+j]
			}
		}
		for i := range nv {
			for j := range nv {
				m.Diag[uv[1]][i*nv+j] += x[nu+i] * x[nu+j]
			}
		}
	}
	for v, n := range m.Graph.Size {
		for i := range n {
			m.Diag[v][i*n+i] += 0.1
		}
	}
}

// multiply returns A x from the blocks, which knows nothing of orderings and fronts.
func multiply(m *Matrix, x []float64) []float64 {
	off := make([]int, len(m.Graph.Size)+1)
	for v, n := range m.Graph.Size {
		off[v+1] = off[v] + n
	}
	y := make([]float64, len(x))
	for v, n := range m.Graph.Size {
		for i := range n {
			for j := range n {
				a := m.Diag[v][max(i, j)*n+min(i, j)]
				y[off[v]+i] += a * x[off[v]+j]
			}
		}
	}
	for e, uv := range m.Graph.Edge {
		nu, nv := m.Graph.Size[uv[0]], m.Graph.Size[uv[1]]
		for i := range nu {
			for j := range nv {
				a := m.Off[e][i*nv+j]
				y[off[uv[0]]+i] += a * x[off[uv[1]]+j]
				y[off[uv[1]]+j] += a * x[off[uv[0]]+i]
			}
		}
	}
	return y
}

func TestFactorSolvesWhatTheBlocksSay(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 8))
	for _, c := range []struct {
		nx, ny, nz, ties int
		hub              bool
	}{{1, 1, 1, 0, false}, {5, 1, 1, 0, false}, {9, 7, 1, 5, true}, {8, 8, 6, 0, false}, {10, 8, 7, 300, true}, {40, 30, 1, 40, false}} {
		g := grid(r, c.nx, c.ny, c.nz, c.ties, c.hub)
		s, err := Analyse(g)
		if err != nil {
			t.Fatal(err)
		}
		m := NewMatrix(g)
		fill(r, m)
		f := NewFactor(s)
		if err := f.Factorise(context.Background(), m); err != nil {
			t.Fatal(err)
		}
		if f.Dropped != 0 {
			t.Errorf("%v: %d pivots dropped of a positive definite matrix", c, f.Dropped)
		}
		want := make([]float64, s.rows)
		for i := range want {
			want[i] = r.NormFloat64()
		}
		b := multiply(m, want)
		f.Solve(b)
		for i := range want {
			if math.Abs(b[i]-want[i]) > 1e-9 {
				t.Fatalf("%v: x[%d] = %g, want %g", c, i, b[i], want[i])
			}
		}
	}
}

// A singular direction is dropped, counted, and leaves the rest of a consistent system solved.
func TestSingularDirectionIsDropped(t *testing.T) {
	g := &Graph{Size: []int{1, 1, 1}, Edge: [][2]int32{{1, 0}, {2, 1}}}
	s, _ := Analyse(g)
	m := NewMatrix(g)
	for e := range g.Edge { // a chain of springs held nowhere
		m.Off[e][0] = -1
	}
	m.Diag[0][0], m.Diag[1][0], m.Diag[2][0] = 1, 2, 1
	f := NewFactor(s)
	if err := f.Factorise(context.Background(), m); err != nil || f.Dropped != 1 {
		t.Fatalf("dropped %d (%v), want 1", f.Dropped, err)
	}
	b := []float64{1, 0, -1}
	f.Solve(b)
	if math.Abs(b[0]-b[1]-1) > 1e-12 || math.Abs(b[1]-b[2]-1) > 1e-12 {
		t.Errorf("displacements %v: want differences of 1", b)
	}
}

func TestSameBitsOnAnyNumberOfCores(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 10))
	g := grid(r, 12, 10, 8, 500, true)
	s, _ := Analyse(g)
	m := NewMatrix(g)
	fill(r, m)
	var first []float64
	defer runtime.GOMAXPROCS(runtime.GOMAXPROCS(0))
	for _, procs := range []int{1, 2, 4} {
		runtime.GOMAXPROCS(procs)
		f := NewFactor(s)
		if err := f.Factorise(context.Background(), m); err != nil {
			t.Fatal(err)
		}
		b := make([]float64, s.rows)
		for i := range b {
			b[i] = float64(i%17) - 8
		}
		f.Solve(b)
		if first == nil {
			first = b
		}
		for i := range b {
			if b[i] != first[i] {
				t.Fatalf("GOMAXPROCS %d: x[%d] = %g, with one core %g", procs, i, b[i], first[i])
			}
		}
	}
}

func TestBadEdgeIsAnError(t *testing.T) {
	for _, e := range [][2]int32{{0, 0}, {0, 2}, {-1, 0}} {
		if _, err := Analyse(&Graph{Size: []int{1, 1}, Edge: [][2]int32{e}}); err == nil {
			t.Errorf("edge %v: no error", e)
		}
	}
}

func BenchmarkFactorise(b *testing.B) {
	r := rand.New(rand.NewPCG(11, 12))
	for _, size := range []struct {
		name       string
		x, y, z, k int
	}{{"S", 10, 10, 4, 1}, {"M", 11, 11, 5, 4}, {"L", 20, 20, 8, 1}} {
		b.Run(size.name, func(b *testing.B) {
			g := grid(r, size.x, size.y, size.z, 4*size.x*size.y*size.z, false)
			for v := range g.Size {
				g.Size[v] = 3 * size.k
			}
			s, _ := Analyse(g)
			m := NewMatrix(g)
			fill(r, m)
			f := NewFactor(s)
			for b.Loop() {
				if err := f.Factorise(context.Background(), m); err != nil {
					b.Fatal(err)
				}
			}
			b.ReportMetric(s.Flops*float64(b.N)/b.Elapsed().Seconds()/1e9, "GFLOP/s")
			b.ReportMetric(float64(s.Nonzeros), "nonzeros")
		})
	}
}
