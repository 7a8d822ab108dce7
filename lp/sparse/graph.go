// Package sparse factorises the symmetric positive definite matrices of the layout program: block-sparse, one block a
// node of the structure, A = L L'. Ordering by nested dissection on coordinates (George 1973) with minimum vertex covers
// as separators and minimum degree at the leaves; numeric factorisation multifrontal (Duff and Reid 1983; Liu 1992).
//
// The same matrix gives the same factor, bit for bit, on any number of cores: every number is the result of the same
// operations in the same order; only who does them differs.
package sparse

import (
	"fmt"
	"slices"
)

// Graph is the block pattern of a symmetric matrix.
type Graph struct {
	Size []int        // rows of each block
	At   [][3]float64 // place of each block, to order by; NaN for a block that is ordered last. May be nil
	Edge [][2]int32   // pairs of distinct blocks whose coupling may be non-zero, each pair once
}

// Matrix holds the values of a symmetric matrix over a Graph. Blocks are row-major.
type Matrix struct {
	Graph *Graph
	// Diag[v] is the Size[v] x Size[v] diagonal block; its lower triangle is used.
	Diag [][]float64
	// Off[e] is the Size[u] x Size[v] block in the rows of u and the columns of v, where (u, v) = Edge[e].
	Off [][]float64
}

// NewMatrix returns a zero matrix over g.
func NewMatrix(g *Graph) *Matrix {
	m := &Matrix{Graph: g, Diag: make([][]float64, len(g.Size)), Off: make([][]float64, len(g.Edge))}
	total := 0
	for _, n := range g.Size {
		total += n * n
	}
	for _, e := range g.Edge {
		total += g.Size[e[0]] * g.Size[e[1]]
	}
	all := make([]float64, total)
	take := func(n int) []float64 {
		b := all[:n:n]
		all = all[n:]
		return b
	}
	for v, n := range g.Size {
		m.Diag[v] = take(n * n)
	}
	for e, uv := range g.Edge {
		m.Off[e] = take(g.Size[uv[0]] * g.Size[uv[1]])
	}
	return m
}

// Clear sets all values to zero.
func (m *Matrix) Clear() {
	for _, b := range m.Diag {
		clear(b)
	}
	for _, b := range m.Off {
		clear(b)
	}
}

// adjacency returns the neighbours of every block, sorted, without repeats.
func (g *Graph) adjacency() ([][]int32, error) {
	n := len(g.Size)
	degree := make([]int32, n)
	for i, e := range g.Edge {
		if e[0] == e[1] || e[0] < 0 || e[1] < 0 || int(e[0]) >= n || int(e[1]) >= n {
			return nil, fmt.Errorf("sparse: edge %d joins blocks %d and %d of %d", i, e[0], e[1], n)
		}
		degree[e[0]]++
		degree[e[1]]++
	}
	flat := make([]int32, 2*len(g.Edge))
	adj := make([][]int32, n)
	at := 0
	for v := range adj {
		adj[v] = flat[at : at : at+int(degree[v])]
		at += int(degree[v])
	}
	for _, e := range g.Edge {
		adj[e[0]] = append(adj[e[0]], e[1])
		adj[e[1]] = append(adj[e[1]], e[0])
	}
	for v := range adj {
		slices.Sort(adj[v])
		adj[v] = slices.Compact(adj[v])
	}
	return adj, nil
}
