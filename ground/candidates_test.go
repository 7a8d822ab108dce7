package ground_test

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"boughwork/geom"
	"boughwork/ground"
)

// bruteAllowed says in the plainest way whether a pair of nodes is a candidate bar. Prisms must be convex. unsure is true
// if another answer comes out when the tolerances are a little smaller or larger: rounding may then decide.
func bruteAllowed(s *ground.Structure, i, j int) (allowed, unsure bool) {
	allowed = brute(s, i, j, 1)
	return allowed, brute(s, i, j, 1-nearly) != allowed || brute(s, i, j, 1+nearly) != allowed
}

// nearly is the share of a tolerance within which the brute force leaves a decision to rounding.
const nearly = 1e-6

func brute(s *ground.Structure, i, j int, scale float64) bool {
	a, b := s.Nodes[i], s.Nodes[j]
	if i == j || a.Fixed == [3]bool{true, true, true} && b.Fixed == a.Fixed {
		return false
	}
	if s.Rules.RoofBars == ground.RoofBarsExcluded && a.Role == ground.RoofPt && b.Role == ground.RoofPt {
		return false
	}
	through := ground.ThroughNode * scale
	l := math.Sqrt(math.Pow(a.At.X-b.At.X, 2) + math.Pow(a.At.Y-b.At.Y, 2) + math.Pow(a.At.Z-b.At.Z, 2))
	if l < 2*through || l < s.Rules.MinLength || s.Rules.MaxLength > 0 && l > s.Rules.MaxLength {
		return false
	}
	for k, n := range s.Nodes {
		if k == i || k == j {
			continue
		}
		// The foot of the perpendicular from n must be inside the bar, further from its ends than the tolerance.
		along := b.At.Sub(a.At).Scale(1 / l)
		t := n.At.Sub(a.At).Dot(along)
		if t > through && t < l-through && n.At.Sub(a.At).Cross(along).Norm() < through {
			return false
		}
	}
	for _, p := range s.Rules.KeepClear {
		if from, to := inside(p, a.At, b.At, geom.EnterTolerance*scale); to > from {
			return false
		}
	}
	return len(s.Rules.Envelope) == 0 || coveredBy(s.Rules.Envelope, a.At, b.At, geom.EnterTolerance*scale)
}

// inside returns the stretch of the segment a-b, as shares of it, that is deeper than depth inside a convex prism:
// nothing if to <= from. A negative depth widens the prism.
func inside(p geom.Prism, a, b geom.Vec, depth float64) (from, to float64) {
	from, to = 0, 1
	cut := func(fa, fb float64) { // keep where the function that runs from fa to fb is positive
		switch {
		case fa <= 0 && fb <= 0:
			to = math.Inf(-1)
		case fa < 0:
			from = math.Max(from, fa/(fa-fb))
		case fb < 0:
			to = math.Min(to, fa/(fa-fb))
		}
	}
	cut(a.Z-p.From-depth, b.Z-p.From-depth)
	cut(p.To-depth-a.Z, p.To-depth-b.Z)
	ring := p.Polygon[0]
	area := 0.0
	for i := range len(ring) - 1 {
		area += ring[i][0]*ring[i+1][1] - ring[i+1][0]*ring[i][1]
	}
	side := math.Copysign(1, area)
	for i := range len(ring) - 1 {
		ex, ey := ring[i+1][0]-ring[i][0], ring[i+1][1]-ring[i][1]
		dist := func(v geom.Vec) float64 {
			return side*(ex*(v.Y-ring[i][1])-ey*(v.X-ring[i][0]))/math.Hypot(ex, ey) - depth
		}
		cut(dist(a), dist(b))
	}
	return from, to
}

// coveredBy reports whether the convex prisms, widened by a depth, cover the segment together.
func coveredBy(ps []geom.Prism, a, b geom.Vec, depth float64) bool {
	at := 0.0
	for range ps {
		for _, p := range ps {
			if from, to := inside(p, a, b, -depth); from <= at && to > at {
				at = to
			}
		}
	}
	return at >= 1
}

// convexPrism is a random prism on a polygon with its corners on an ellipse, so that it is convex, of either direction.
func convexPrism(rng *rand.Rand, reach float64) geom.Prism {
	n := 3 + rng.IntN(5)
	cx, cy := reach*rng.Float64(), reach*rng.Float64()
	rx, ry, turn := reach*(0.02+0.25*rng.Float64()), reach*(0.02+0.25*rng.Float64()), rng.Float64()
	sign := float64(2*rng.IntN(2) - 1)
	var ring []geom.Vec
	for i := range n {
		t := sign * 2 * math.Pi * (float64(i) + turn) / float64(n)
		ring = append(ring, geom.Vec{X: cx + rx*math.Cos(t), Y: cy + ry*math.Sin(t)})
	}
	from := reach * (rng.Float64() - 0.3)
	return geom.Prism{Name: "prism", Polygon: geom.Region{Rings: [][]geom.Vec{ring}}.Polygon(), From: from, To: from + reach*rng.Float64()}
}

// randomRules fills a structure with nodes, among them some that lie on or beside bars, and with rules.
func randomRules(seed uint64) *ground.Structure {
	rng := rand.New(rand.NewPCG(seed, 99))
	reach := []float64{10, 10, 0.1}[rng.IntN(3)] // in a small cloud the tolerance reaches into many cells of the search
	s := &ground.Structure{}
	flat := rng.IntN(4)
	for range 24 {
		v := geom.Vec{X: reach * rng.Float64(), Y: reach * rng.Float64(), Z: reach * rng.Float64()}
		if flat == 0 {
			v.Y = 0
		}
		s.Nodes = append(s.Nodes, ground.Node{At: v, Role: ground.Role(rng.IntN(4))})
		if rng.IntN(4) == 0 {
			s.Nodes[len(s.Nodes)-1].Fixed = [3]bool{true, true, rng.IntN(2) == 0}
		}
	}
	for range 12 { // half of the tolerance off a bar, or twice
		a, b := s.Nodes[rng.IntN(24)].At, s.Nodes[rng.IntN(24)].At
		off := geom.Vec{X: rng.Float64() - 0.5, Z: rng.Float64() - 0.5}.Cross(b.Sub(a))
		if off.Norm() == 0 {
			continue
		}
		d := ground.ThroughNode * []float64{0, 0.5, 0.9, 1.1, 2}[rng.IntN(5)]
		s.Nodes = append(s.Nodes, ground.Node{At: a.Add(b.Sub(a).Scale(0.01 + 0.98*rng.Float64())).Add(off.Scale(d / off.Norm()))})
	}
	s.Rules.RoofBars = ground.RoofBars(rng.IntN(3))
	s.Rules.RoofFactor = 2
	if rng.IntN(2) == 0 {
		s.Rules.MinLength = 0.2 * reach * rng.Float64()
	}
	if rng.IntN(2) == 0 {
		s.Rules.MaxLength = reach * (0.5 + 0.5*rng.Float64())
	}
	for range rng.IntN(4) {
		s.Rules.KeepClear = append(s.Rules.KeepClear, convexPrism(rng, reach))
	}
	if rng.IntN(3) == 0 {
		for range 1 + rng.IntN(3) {
			p := convexPrism(rng, reach)
			p.From, p.To = -1, 11
			s.Rules.Envelope = append(s.Rules.Envelope, p)
		}
	}
	return s
}

// TestCandidatesByBruteForce breaks if a candidate is forgotten or invented: the grid that looks for nodes near a bar,
// the prepared prisms and the rules are compared with plain geometry, pair by pair.
func TestCandidatesByBruteForce(t *testing.T) {
	pairs, yes, open := 0, 0, 0
	for seed := range uint64(150) {
		s := randomRules(seed)
		c := ground.NewCandidates(s)
		count := int64(0)
		for i := range s.Nodes {
			for j := range s.Nodes {
				want, unsure := bruteAllowed(s, i, j)
				got := c.Allowed(i, j)
				pairs++
				if got != c.Allowed(j, i) {
					t.Errorf("seed %d: the pair %d, %d is a candidate in one direction only", seed, i, j)
				}
				if unsure {
					open++
				} else if got != want {
					t.Errorf("seed %d: the pair %d, %d at %v and %v: candidate %v, want %v", seed, i, j, s.Nodes[i].At, s.Nodes[j].At, got, want)
				}
				if i < j && got {
					yes++
					count++
				}
			}
		}
		if got := c.Count(); got != count {
			t.Errorf("seed %d: Count says %d, there are %d", seed, got, count)
		}
	}
	if yes < pairs/20 || open > pairs/100 {
		t.Errorf("of %d pairs %d are candidates and %d were left open: the test says too little", pairs, yes, open)
	}
}

func gcd(a, b int) int {
	for b != 0 {
		a, b = b, a%b
	}
	return a
}

// TestCandidatesOnGrids breaks if bars through nodes are counted, or others are not: on a grid a pair passes through no
// node exactly if its offsets have no common divisor.
func TestCandidatesOnGrids(t *testing.T) {
	for _, n := range [][3]int{{2, 1, 2}, {5, 1, 4}, {9, 1, 6}, {1, 1, 30}, {3, 3, 3}, {5, 4, 3}, {7, 1, 7}} {
		for _, step := range []float64{1, 0.1, 0.7, 250} {
			t.Run(fmt.Sprint(n, step), func(t *testing.T) {
				s := &ground.Structure{}
				type place struct{ x, y, z int }
				var at []place
				for x := range n[0] {
					for y := range n[1] {
						for z := range n[2] {
							at = append(at, place{x, y, z})
							held := x == 0
							s.Nodes = append(s.Nodes, ground.Node{At: geom.Vec{X: step * float64(x), Y: 3 + step*float64(y), Z: step*float64(z) - 7}, Fixed: [3]bool{held, held, held}})
						}
					}
				}
				want := int64(0)
				for i, a := range at {
					for _, b := range at[:i] {
						if gcd(gcd(abs(a.x-b.x), abs(a.y-b.y)), abs(a.z-b.z)) == 1 && (a.x > 0 || b.x > 0) {
							want++
						}
					}
				}
				if got := ground.NewCandidates(s).Count(); got != want {
					t.Errorf("%d candidates, want %d", got, want)
				}
			})
		}
	}
}

func abs(v int) int { return max(v, -v) }

// TestCandidateRules says what each rule does to one pair.
func TestCandidateRules(t *testing.T) {
	held := [3]bool{true, true, true}
	lane := geom.Prism{Polygon: geom.Region{Rings: [][]geom.Vec{{{X: 1, Y: -1}, {X: 2, Y: -1}, {X: 2, Y: 1}, {X: 1, Y: 1}}}}.Polygon(), From: 0, To: 3}
	low, high := lane, lane
	low.To, high.From, high.To = 0.5, 3, 9
	room := geom.Prism{Polygon: geom.Region{Rings: [][]geom.Vec{{{X: -1, Y: -1}, {X: 4, Y: -1}, {X: 4, Y: 1}, {X: -1, Y: 1}}}}.Polygon(), From: 0, To: 3}
	left, right, gap := room, room, room
	left.Polygon = geom.Region{Rings: [][]geom.Vec{{{X: -1, Y: -1}, {X: 1, Y: -1}, {X: 1, Y: 1}, {X: -1, Y: 1}}}}.Polygon()
	right.Polygon = geom.Region{Rings: [][]geom.Vec{{{X: 1, Y: -1}, {X: 4, Y: -1}, {X: 4, Y: 1}, {X: 1, Y: 1}}}}.Polygon()
	gap.Polygon = geom.Region{Rings: [][]geom.Vec{{{X: 1.5, Y: -1}, {X: 4, Y: -1}, {X: 4, Y: 1}, {X: 1.5, Y: 1}}}}.Polygon()
	for _, c := range []struct {
		what   string
		change func(s *ground.Structure)
		want   bool
		factor float64
	}{
		{"as it is", func(*ground.Structure) {}, true, 1},
		{"one end held", func(s *ground.Structure) { s.Nodes[0].Fixed = held }, true, 1},
		{"both ends held", func(s *ground.Structure) { s.Nodes[0].Fixed, s.Nodes[1].Fixed = held, held }, false, 1},
		{"both ends held in two directions", func(s *ground.Structure) {
			s.Nodes[0].Fixed, s.Nodes[1].Fixed = [3]bool{true, true, false}, [3]bool{true, true, false}
		}, true, 1},
		{"as long as the longest", func(s *ground.Structure) { s.Rules.MaxLength = 3 }, true, 1},
		{"longer than the longest", func(s *ground.Structure) { s.Rules.MaxLength = 2.999 }, false, 1},
		{"as long as the shortest", func(s *ground.Structure) { s.Rules.MinLength = 3 }, true, 1},
		{"shorter than the shortest", func(s *ground.Structure) { s.Rules.MinLength = 3.001 }, false, 1},
		{"between roof nodes, excluded", func(s *ground.Structure) { roof(s); s.Rules.RoofBars = ground.RoofBarsExcluded }, false, 1},
		{"from a roof node, excluded", func(s *ground.Structure) {
			s.Nodes[0].Role, s.Rules.RoofBars = ground.RoofPt, ground.RoofBarsExcluded
		}, true, 1},
		{"between roof nodes, costed", func(s *ground.Structure) {
			roof(s)
			s.Rules.RoofBars, s.Rules.RoofFactor = ground.RoofBarsCosted, 2
		}, true, 2},
		{"between roof nodes, allowed with a factor", func(s *ground.Structure) { roof(s); s.Rules.RoofFactor = 2 }, true, 1},
		{"a node on it", func(s *ground.Structure) { s.Nodes = append(s.Nodes, ground.Node{At: geom.Vec{X: 1, Z: 1}}) }, false, 1},
		{"a node half a tolerance beside it", func(s *ground.Structure) {
			s.Nodes = append(s.Nodes, ground.Node{At: geom.Vec{X: 1, Y: ground.ThroughNode / 2, Z: 1}})
		}, false, 1},
		{"a node two tolerances beside it", func(s *ground.Structure) {
			s.Nodes = append(s.Nodes, ground.Node{At: geom.Vec{X: 1, Y: 2 * ground.ThroughNode, Z: 1}})
		}, true, 1},
		{"a node beyond its end", func(s *ground.Structure) { s.Nodes = append(s.Nodes, ground.Node{At: geom.Vec{X: 3.1, Z: 1}}) }, true, 1},
		{"a node at its end", func(s *ground.Structure) { s.Nodes = append(s.Nodes, ground.Node{At: geom.Vec{X: 3, Z: 1}}) }, true, 1},
		{"across a keep-clear", func(s *ground.Structure) { s.Rules.KeepClear = []geom.Prism{lane} }, false, 1},
		{"above a keep-clear", func(s *ground.Structure) { s.Rules.KeepClear = []geom.Prism{low} }, true, 1},
		{"below a keep-clear", func(s *ground.Structure) { s.Rules.KeepClear = []geom.Prism{high} }, true, 1},
		{"one keep-clear of two", func(s *ground.Structure) { s.Rules.KeepClear = []geom.Prism{low, lane} }, false, 1},
		{"in the envelope", func(s *ground.Structure) { s.Rules.Envelope = []geom.Prism{room} }, true, 1},
		{"partly out of the envelope", func(s *ground.Structure) { s.Rules.Envelope = []geom.Prism{left} }, false, 1},
		{"in an envelope of two parts", func(s *ground.Structure) { s.Rules.Envelope = []geom.Prism{right, left} }, true, 1},
		{"in an envelope with a gap", func(s *ground.Structure) { s.Rules.Envelope = []geom.Prism{left, gap} }, false, 1},
		{"above the envelope", func(s *ground.Structure) { s.Rules.Envelope = []geom.Prism{low} }, false, 1},
	} {
		t.Run(c.what, func(t *testing.T) {
			s := &ground.Structure{Nodes: []ground.Node{{At: geom.Vec{Z: 1}}, {At: geom.Vec{X: 3, Z: 1}}}}
			c.change(s)
			can := ground.NewCandidates(s)
			if got := can.Allowed(0, 1); got != c.want || can.Allowed(1, 0) != c.want {
				t.Errorf("candidate %v, want %v", got, c.want)
			}
			if got := can.Factor(0, 1); got != c.factor || can.Factor(1, 0) != c.factor {
				t.Errorf("cost factor %v, want %v", got, c.factor)
			}
		})
	}
}

func roof(s *ground.Structure) { s.Nodes[0].Role, s.Nodes[1].Role = ground.RoofPt, ground.RoofPt }

// TestCandidatesOfNothing breaks if a structure without nodes, or with nodes in one place, upsets the search.
func TestCandidatesOfNothing(t *testing.T) {
	for _, s := range []*ground.Structure{{}, {Nodes: make([]ground.Node, 1)}, {Nodes: make([]ground.Node, 5)}} {
		if got := ground.NewCandidates(s).Count(); got != 0 {
			t.Errorf("%d nodes in one place: %d candidates", len(s.Nodes), got)
		}
	}
}
