package ground

import (
	"context"
	"math"
	"runtime"
	"sync"
	"sync/atomic"

	"boughwork/geom"
)

// ThroughNode is the distance in metres within which a bar passes through a node: such a pair is no candidate, since two
// bars that meet at the node do its work. A millimetre is what a workshop can tell apart.
const ThroughNode = 1e-3

// Candidates says which pairs of nodes of a structure may be joined by a bar. It stores no pair. Safe for concurrent use.
type Candidates struct {
	s         *Structure
	obstacles *geom.Obstacles
	envelope  *geom.Envelope
	near      *nodeGrid
	held      []bool // wholly fixed nodes
}

// NewCandidates prepares the tests of a structure.
func NewCandidates(s *Structure) *Candidates {
	c := &Candidates{s: s, obstacles: geom.NewObstacles(s.Rules.KeepClear),
		envelope: geom.NewEnvelope(s.Rules.Envelope), near: newNodeGrid(s.Nodes), held: make([]bool, len(s.Nodes))}
	for i, n := range s.Nodes {
		c.held[i] = n.Fixed == [3]bool{true, true, true}
	}
	return c
}

// Allowed reports whether the pair of nodes i and j is a candidate bar: within the length limits, not between two
// wholly fixed nodes, obeying the rule for roof bars, through no other node, entering no keep-clear prism and leaving no
// envelope. The cheap tests come first.
func (c *Candidates) Allowed(i, j int) bool {
	return c.Plausible(i, j) && c.Clear(i, j)
}

// Plausible is the part of Allowed that needs no geometry but the length.
func (c *Candidates) Plausible(i, j int) bool {
	if i == j || c.held[i] && c.held[j] {
		return false
	}
	a, b := &c.s.Nodes[i], &c.s.Nodes[j]
	if c.s.Rules.RoofBars == RoofBarsExcluded && a.Role == RoofPt && b.Role == RoofPt {
		return false
	}
	l := b.At.Sub(a.At).Norm()
	return l >= math.Max(c.s.Rules.MinLength, 2*ThroughNode) && (c.s.Rules.MaxLength == 0 || l <= c.s.Rules.MaxLength)
}

// Clear is the rest of Allowed: through no node, no keep-clear, inside the envelope.
func (c *Candidates) Clear(i, j int) bool {
	a, b := c.s.Nodes[i].At, c.s.Nodes[j].At
	return !c.near.through(int32(i), int32(j), a, b) && c.unobstructed(a, b)
}

// unobstructed reports whether the segment enters no keep-clear and leaves no envelope.
func (c *Candidates) unobstructed(a, b geom.Vec) bool {
	return !c.obstacles.Blocked(a, b) && c.envelope.Contains(a, b)
}

// Factor returns the cost factor w of the pair.
func (c *Candidates) Factor(i, j int) float64 {
	r := &c.s.Rules
	if r.RoofBars == RoofBarsCosted && c.s.Nodes[i].Role == RoofPt && c.s.Nodes[j].Role == RoofPt {
		return r.RoofFactor
	}
	return 1
}

// Count returns the number of candidates. It tests every pair, on all cores.
func (c *Candidates) Count() int64 {
	n, _ := c.CountUntil(context.Background())
	return n
}

// CountUntil is Count, but returns the error of the context if that ends first.
func (c *Candidates) CountUntil(ctx context.Context) (int64, error) {
	var total atomic.Int64
	nodes := len(c.s.Nodes)
	type room struct {
		scan    *rowScan
		blocked []bool
	}
	rooms := sync.Pool{New: func() any { return &room{newRowScan(nodes), make([]bool, nodes)} }}
	c.EachRow(func(i int) {
		if ctx.Err() != nil {
			return
		}
		r := rooms.Get().(*room)
		defer rooms.Put(r)
		r.scan.blocked(i, c.near.at, r.blocked)
		n := int64(0)
		for j := i + 1; j < nodes; j++ {
			if !r.blocked[j] && c.Plausible(i, j) && c.unobstructed(c.s.Nodes[i].At, c.s.Nodes[j].At) {
				n++
			}
		}
		total.Add(n)
	})
	if err := ctx.Err(); err != nil {
		return 0, err
	}
	return total.Load(), nil
}

// EachRow calls f once for every node, from several goroutines.
func (c *Candidates) EachRow(f func(i int)) {
	var next atomic.Int64
	var wg sync.WaitGroup
	for range runtime.GOMAXPROCS(0) {
		wg.Add(1)
		go func() {
			defer wg.Done()
			for {
				i := int(next.Add(1)) - 1
				if i >= len(c.s.Nodes) {
					return
				}
				f(i)
			}
		}()
	}
	wg.Wait()
}
