package bench

import (
	"math"
	"strings"
	"testing"

	"boughwork/geom"
	"boughwork/ground"
)

// near is what sums of loads may be off by.
const near = 1e-12

// build returns the structure of a named problem.
func build(t *testing.T, name string) *ground.Structure {
	t.Helper()
	p, err := Find(name)
	if err != nil {
		t.Fatal(err)
	}
	return p.Build()
}

// Every problem has the nodes, supports and cases that its definition says, and its loads add up to what each case says.
func TestProblemsAreAsDefined(t *testing.T) {
	hanging := []geom.Vec{{Z: -0.01}} // on 100 m: as 1 N on 1 m
	three := []geom.Vec{{Z: -1}, {Z: -0.5}, {Z: -0.5}}
	five := append(three[:3:3], geom.Vec{X: 0.1, Z: -1}, geom.Vec{Y: 0.1, Z: -1})
	twelve := append(three[:3:3], geom.Vec{Z: -0.5}, geom.Vec{Z: -0.5},
		geom.Vec{X: 0.1, Z: -1}, geom.Vec{X: -0.1, Z: -1}, geom.Vec{Y: 0.1, Z: -1}, geom.Vec{Y: -0.1, Z: -1},
		geom.Vec{X: 0.1, Z: 0.4}, geom.Vec{Y: 0.1, Z: 0.4}, geom.Vec{Z: -0.25})
	want := map[string]struct {
		nodes, held int
		loads       []geom.Vec
	}{
		"cantilever-21x11":   {231, 11, hanging},
		"cantilever-41x21":   {861, 21, hanging},
		"cantilever-61x31":   {1891, 31, hanging},
		"cantilever-81x41":   {3321, 41, hanging},
		"cantilever-121x61":  {7381, 61, hanging},
		"cantilever-161x81":  {13041, 81, hanging},
		"cantilever-151x101": {15251, 101, hanging},
		"canopy-2m-1":        {605, 16, three[:1]}, // four feet around each of four points
		"canopy-2m-3":        {605, 16, three},
		"canopy-2m-5":        {605, 16, five},
		"canopy-2m-12":       {605, 16, twelve},
		"canopy-1m-1":        {3969, 36, three[:1]}, // nine around each
		"canopy-1m-3":        {3969, 36, three},
		"canopy-1m-5":        {3969, 36, five},
		"canopy-1m-12":       {3969, 36, twelve},
		"longroof-3":         {6825, 52, three}, // five where a point is a node, at 65 m and 195 m, else two
	}
	if len(Problems) != len(want) {
		t.Errorf("%d problems, want %d", len(Problems), len(want))
	}
	for _, p := range Problems {
		w, ok := want[p.Name]
		if !ok {
			t.Errorf("a problem that nobody asked for: %s", p.Name)
			continue
		}
		s := p.Build()
		count := 0
		for _, n := range s.Nodes {
			if n.Fixed == held {
				count++
			}
		}
		if len(s.Nodes) != w.nodes || count != w.held || len(s.Cases) != len(w.loads) {
			t.Errorf("%s: %d nodes, %d held, %d cases; want %d, %d, %d", p.Name, len(s.Nodes), count, len(s.Cases), w.nodes, w.held, len(w.loads))
			continue
		}
		if s.Material.Tension != 1 || s.Material.Compression != 1 || s.Material.Density != 0 || s.JointCost != 0 {
			t.Errorf("%s: material %+v, joint cost %g", p.Name, s.Material, s.JointCost)
		}
		for i, c := range s.Cases {
			var sum geom.Vec
			for _, l := range c.Loads {
				sum = sum.Add(l.Force)
			}
			if sum.Sub(w.loads[i]).Norm() > near || c.Gravity != 0 {
				t.Errorf("%s, case %q: loads add up to %v, want %v; gravity %g", p.Name, c.Name, sum, w.loads[i], c.Gravity)
			}
		}
	}
	if got := build(t, "longroof-3").Rules.MaxLength; got != 40 {
		t.Errorf("longroof-3: bars up to %g m", got)
	}
}

// The load of a cantilever hangs in the middle of its right edge, and its plane is held.
func TestCantileverInItsPlace(t *testing.T) {
	for name, reach := range map[string]float64{"cantilever-21x11": 200, "cantilever-151x101": 150} {
		s := build(t, name)
		if at := s.Nodes[s.Cases[0].Loads[0].Node].At; at != (geom.Vec{X: reach, Z: 50}) {
			t.Errorf("%s: the load is at %v", name, at)
		}
		for _, n := range s.Nodes {
			if !n.Fixed[1] || n.Fixed[0] != (n.At.X == 0) {
				t.Fatalf("%s: the node at %v is held in %v", name, n.At, n.Fixed)
			}
		}
	}
}

// A half of the load has its middle where that of the half roof is: a quarter of the length less than the middle, as a
// node on the line between the halves belongs half to either.
func TestHalvesAreInTheirPlace(t *testing.T) {
	for name, length := range map[string]float64{"canopy-2m-12": 20, "canopy-1m-12": 20, "longroof-3": 260} {
		s := build(t, name)
		for i, c := range s.Cases[1:3] {
			var moment, most float64
			for _, l := range c.Loads {
				x := s.Nodes[l.Node].At.X
				moment -= x * l.Force.Z
				most = math.Max(most, float64(1-2*i)*(x-length/2))
			}
			if most > 0 {
				t.Errorf("%s, case %q: loads up to %g m beyond the middle", name, c.Name, most)
			}
			// Lumping at the nodes leaves the middle of a span where it is.
			if want := 0.5 * length * (0.25 + 0.5*float64(i)); math.Abs(moment-want) > 1e-9 {
				t.Errorf("%s, case %q: moment about x = 0 is %g, want %g", name, c.Name, moment, want)
			}
		}
	}
}

// The numbers of candidates that were known before this program was: those of pairs through no node. The program leaves
// out pairs of two held nodes as well, which are those of neighbours along the held edge.
func TestCandidates(t *testing.T) {
	for _, c := range []struct {
		name        string
		pairs, held int64
	}{
		{"cantilever-21x11", 16290, 10},
		{"cantilever-41x21", 225848, 20},
	} {
		if got := ground.NewCandidates(build(t, c.name)).Count(); got != c.pairs-c.held {
			t.Errorf("%s: %d candidates, want %d", c.name, got, c.pairs-c.held)
		}
	}
	if got := ground.NewCandidates(build(t, "canopy-2m-1")).Count(); got < 150_000 || got > 151_500 {
		t.Errorf("canopy-2m-1: %d candidates, want about 151 000", got)
	}
}

// On a lattice the line through two nodes passes every other node at a distance of at least the step over the length in
// steps, or goes through it. That must be more than what counts as passing through, or candidates are lost.
func TestNoCandidateIsLost(t *testing.T) {
	for _, p := range Problems {
		s := p.Build()
		step, far := math.Inf(1), 0.0
		for _, n := range s.Nodes[1:] {
			l := n.At.Sub(s.Nodes[0].At).Norm() // the first node is a corner, the last the one across
			step, far = math.Min(step, l), math.Max(far, l)
		}
		if least := step * step / far; least < 2*ground.ThroughNode {
			t.Errorf("%s: a bar of %g m may pass %g m from a node", p.Name, far, least)
		}
	}
}

// A name that is unknown is told with those that are known.
func TestFind(t *testing.T) {
	_, err := Find("canopy-3m")
	if err == nil {
		t.Fatal("there is no such problem")
	}
	for _, p := range Problems {
		if !strings.Contains(err.Error(), p.Name) {
			t.Errorf("%q does not name %s", err, p.Name)
		}
	}
	for _, name := range Small {
		if _, err := Find(name); err != nil {
			t.Error(err)
		}
	}
}
