package ground

import (
	"math"
	"reflect"
	"slices"
	"strings"
	"testing"

	"boughwork/geom"
)

func mustBuild(t *testing.T, site *geom.Site, spec Spec) *Structure {
	t.Helper()
	s, issues := Build(site, spec)
	if s == nil {
		t.Fatalf("no structure: %v", issues)
	}
	return s
}

// onePost returns a site with one roof and a foot at a place.
func onePost(r geom.Roof, x, y float64) *geom.Site {
	return &geom.Site{Roofs: []geom.Roof{r}, Footings: []geom.Zone{{Name: "post", Points: []geom.Vec{{X: x, Y: y}}}}}
}

// A roof of 40 m x 20 m at 4 m has 11 x 6 roof nodes in perfect rows; the inner nodes share its lines.
func TestRectangleHasPerfectRows(t *testing.T) {
	s := mustBuild(t, hall(), plainSpec())
	if got := s.Count(RoofPt); got != 66 {
		t.Fatalf("%d roof nodes, want 11 x 6", got)
	}
	for k, n := range s.Nodes[:66] {
		want := geom.Vec{X: 4 * float64(k%11), Y: 4 * float64(k/11), Z: 7}
		if n.At != want {
			t.Fatalf("roof node %d at %v, want %v", k, n.At, want)
		}
	}
	// 2.5 m is nearest to half a deck panel (2 m), and 7 m is nearest to three rises of 2.33 m: 21 x 11 nodes on 2 levels.
	if got := s.Count(Inner); got != 21*11*2 {
		t.Errorf("%d inner nodes, want 462", got)
	}
	if got := s.Count(Footing); got != 8 {
		t.Errorf("%d feet, want 2 x 2 in each pad of 4 m at 2 m", got)
	}
	if len(s.Diaphragms) != 1 || len(s.Diaphragms[0]) != 66 {
		t.Errorf("diaphragms %v, want the 66 roof nodes", s.Diaphragms)
	}
}

var shapes = map[string]geom.Roof{
	"rectangle":     roofOf(level(7), box(0, 0, 40, 20)),
	"narrow":        roofOf(level(7), box(0, 0, 30, 1.2)),
	"small":         roofOf(level(7), box(0, 0, 2, 2)),
	"turned":        roofOf(level(7), rotated(33, 5, 5, box(0, 0, 40, 20))),
	"L":             roofOf(level(7), [][2]float64{{0, 0}, {25, 0}, {25, 11}, {10, 11}, {10, 21}, {0, 21}}),
	"circle":        roofOf(level(7), circle(0, 0, 10, 64)),
	"ring":          roofOf(level(7), circle(0, 0, 14, 64), circle(0, 0, 5, 32)),
	"lens":          roofOf(level(7), append(arc(0, -5, 13, 30), rotated(180, 0, 0, arc(0, -5, 13, 30))...)),
	"triangle":      roofOf(level(7), [][2]float64{{0, 0}, {30, 0}, {8, 18}}),
	"hole":          roofOf(level(7), box(0, 0, 40, 20), box(15, 5, 23, 13)),
	"drain":         roofOf(level(7), box(0, 0, 40, 20), box(21, 9, 21.3, 9.3)),
	"cut corner":    roofOf(level(7), [][2]float64{{0.3, 0}, {20, 0}, {20, 10}, {0, 10}, {0, 0.3}}),
	"extra corner":  roofOf(level(7), [][2]float64{{0, 0}, {7.3, 0}, {20, 0}, {20, 8}, {0, 8}}),
	"drawn by hand": roofOf(level(7), [][2]float64{{0.003, -0.002}, {40.004, 0.001}, {39.998, 20.003}, {0.001, 19.996}}),
}

// arc returns points of a circle round (x, y) from its right to its left crossing of the x axis, both ends but the last.
func arc(x, y, r float64, n int) [][2]float64 {
	from := math.Asin(-y / r)
	var out [][2]float64
	for i := range n {
		s, c := math.Sincos(from + (math.Pi-2*from)*float64(i)/float64(n))
		out = append(out, [2]float64{x + r*c, y + r*s})
	}
	return out
}

// Whatever the shape: roof nodes stand on the roof, none nearly in the same place as another, and no place of the roof is
// far from one.
func TestRoofNodesFitEveryShape(t *testing.T) {
	const s = 4.0
	counts := map[string]int{"rectangle": 66, "turned": 66, "drawn by hand": 66, "drain": 66, "extra corner": 18, "small": 4}
	for name, r := range shapes {
		b := &builder{site: onePost(r, 1, 1), spec: plainSpec()}
		b.prepare()
		for k := range b.axes {
			b.axes[k] = fitAxis(k, b.extent, s)
		}
		b.placeRoofNodes()
		if b.failed() {
			t.Errorf("%s: %v", name, b.issues)
		}
		if want, ok := counts[name]; ok && len(b.nodes) != want {
			t.Errorf("%s: %d roof nodes, want %d", name, len(b.nodes), want)
		}
		poly := r.Regions[0].Polygon()
		for i, n := range b.nodes {
			if d := geom.DistanceToPolygon(poly, [2]float64{n.At.X, n.At.Y}); d > 1e-6 {
				t.Errorf("%s: node %v is %g m off the roof", name, n.At, d)
			}
			for _, o := range b.nodes[:i] {
				if d := n.At.Sub(o.At).Norm(); d < cornersApart*s {
					t.Errorf("%s: nodes %v and %v are %.2f m apart", name, n.At, o.At, d)
				}
			}
		}
		lo, hi := gridFrame{c: 1}.ring(r.Regions[0].Rings[0]).box()
		for x := lo[0]; x <= hi[0]; x += 0.5 {
			for y := lo[1]; y <= hi[1]; y += 0.5 {
				if !geom.ContainsPoint(poly, [2]float64{x, y}) {
					continue
				}
				// Half a diagonal of a panel, and what a dropped neighbour of the outline leaves open.
				if n := b.nearest(geom.Vec{X: x, Y: y, Z: 7}, b.grid.in(x, y), 2.5); n < 0 {
					n = b.farNearest(x, y)
					if d := math.Hypot(b.nodes[n].At.X-x, b.nodes[n].At.Y-y); d > 1.05*s*math.Sqrt2/2+keepApart*s {
						t.Errorf("%s: (%.1f, %.1f) is %.2f m from the nearest roof node", name, x, y, d)
					}
				}
			}
		}
	}
}

func (b *builder) farNearest(x, y float64) int {
	best := 0
	for i, n := range b.nodes {
		if math.Hypot(n.At.X-x, n.At.Y-y) < math.Hypot(b.nodes[best].At.X-x, b.nodes[best].At.Y-y) {
			best = i
		}
	}
	return best
}

// An L-shape gets a grid line at its inner corner: all nodes on lines, both wings in whole panels.
func TestInnerCornerDrawsGridLines(t *testing.T) {
	s := mustBuild(t, onePost(shapes["L"], 5, 5), plainSpec())
	// x: 0..10 in 3 panels, 10..25 in 4; y: 0..11 in 3, 11..21 in 3: 8 lines x 4 + 4 lines x 3 above.
	if got := s.Count(RoofPt); got != 8*4+4*3 {
		t.Errorf("%d roof nodes, want 44", got)
	}
}

// On a rectangle there is an inner node straight below every roof node on every level, so that columns can stand.
func TestInnerNodesStandUnderRoofNodes(t *testing.T) {
	for _, spacing := range []float64{1.3, 2, 2.5, 4, 5, 9} {
		spec := plainSpec()
		spec.InnerSpacing = spacing
		s := mustBuild(t, hall(), spec)
		roof := map[[2]float64]bool{}
		for _, n := range s.Nodes {
			if n.Role == RoofPt {
				roof[[2]float64{n.At.X, n.At.Y}] = true
			}
		}
		under := 0
		for _, n := range s.Nodes {
			if n.Role == Inner && roof[[2]float64{n.At.X, n.At.Y}] {
				under++
			}
		}
		if inner := s.Count(Inner); spacing <= 4 && under != 2*66 || spacing > 4 && under != inner {
			t.Errorf("inner spacing %v: %d of %d inner nodes are straight below roof nodes", spacing, under, inner)
		}
	}
}

// Feet beside the roof open the space up to them; without such feet no inner node lies beside the roof.
func TestInnerNodesReachFeetBesideTheRoof(t *testing.T) {
	beside := func(x float64) int {
		site := hall()
		site.Footings[1] = geom.Zone{Name: "far", Points: []geom.Vec{{X: x, Y: 10}}}
		n := 0
		for _, d := range mustBuild(t, site, plainSpec()).Nodes {
			if d.Role == Inner && d.At.X > 40.1 {
				n++
				if d.At.X > x+0.1 {
					t.Errorf("inner node %v lies beyond the foot at x = %v", d.At, x)
				}
			}
		}
		return n
	}
	if n := beside(39); n != 0 {
		t.Errorf("%d inner nodes beside the roof though no foot is", n)
	}
	if n := beside(48); n == 0 {
		t.Error("no inner node between the roof and a foot 8 m beside it")
	}
}

func TestNodesKeepClear(t *testing.T) {
	site := hall()
	lane := geom.Prism{Name: "lane", Polygon: geom.Region{Rings: [][]geom.Vec{vecs(0, box(10, -1, 20, 21)...)}}.Polygon(), From: 0, To: 4.5}
	tree := geom.Prism{Name: "tree", Polygon: geom.Region{Rings: [][]geom.Vec{vecs(0, box(27, 7, 29, 9)...)}}.Polygon(), From: 0, To: 9}
	site.KeepClear = []geom.Prism{lane, tree}
	s, issues := Build(site, plainSpec())
	if s == nil {
		t.Fatal(issues)
	}
	for _, n := range s.Nodes {
		in := func(x0, y0, x1, y1, top float64) bool {
			return n.At.X > x0 && n.At.X < x1 && n.At.Y > y0 && n.At.Y < y1 && n.At.Z < top
		}
		if in(10, -1, 20, 21, 4.5) || in(27, 7, 29, 9, 9) {
			t.Errorf("%s node %v lies in a keep-clear", n.Role, n.At)
		}
	}
	// One pad loses the two feet inside the lane (x = 11), the roof loses the node at (28, 8).
	if got := len(s.Zones[0].Nodes); got != 2 {
		t.Errorf("%d feet left in the west pad, want 2", got)
	}
	if got := s.Count(RoofPt); got != 65 {
		t.Errorf("%d roof nodes, want 65", got)
	}
	text := joined(issues)
	for _, want := range []string{"west pad", "2 of 4 foot positions", "1 roof nodes"} {
		if !strings.Contains(text, want) {
			t.Errorf("issues do not mention %q:\n%s", want, text)
		}
	}
}

func joined(issues geom.Issues) string {
	var b strings.Builder
	for _, i := range issues {
		b.WriteString(i.String() + "\n")
	}
	return b.String()
}

func TestEnvelopeHoldsAllNodes(t *testing.T) {
	site := hall()
	site.Envelope = []geom.Prism{{Polygon: geom.Region{Rings: [][]geom.Vec{vecs(0, box(0, 0, 34, 20)...)}}.Polygon(), From: 0, To: 7}}
	s := mustBuild(t, site, plainSpec())
	for _, n := range s.Nodes {
		if n.At.X > 34.001 {
			t.Errorf("%s node %v is outside the envelope", n.Role, n.At)
		}
	}
	if got := s.Count(RoofPt); got != 9*6 {
		t.Errorf("%d roof nodes inside the envelope, want 9 x 6", got)
	}
}

func TestDecks(t *testing.T) {
	for _, c := range []struct {
		deck       Deck
		fixed      [3]bool
		diaphragms int
	}{
		{DeckFree, [3]bool{}, 0},
		{DeckDiaphragm, [3]bool{}, 1},
		{DeckHeld, [3]bool{true, true, false}, 0},
	} {
		spec := plainSpec()
		spec.Deck = c.deck
		s := mustBuild(t, hall(), spec)
		if s.Nodes[0].Fixed != c.fixed || len(s.Diaphragms) != c.diaphragms || s.Deck != c.deck {
			t.Errorf("deck %s: fixed %v, %d diaphragms", c.deck, s.Nodes[0].Fixed, len(s.Diaphragms))
		}
	}
}

// Roofs apart are a diaphragm each; roofs that share nodes move together.
func TestSeveralRoofs(t *testing.T) {
	for _, c := range []struct {
		name       string
		second     geom.Roof
		diaphragms int
		nodes      int
	}{
		{"apart", roofOf(level(5), box(44, 0, 64, 20)), 2, 36 + 36},
		{"touching at one height", roofOf(level(7), box(20, 0, 40, 20)), 1, 36 + 30},
		{"one over the other", roofOf(level(10), box(0, 0, 20, 20)), 2, 36 + 36},
	} {
		site := hall()
		site.Roofs = []geom.Roof{roofOf(level(7), box(0, 0, 20, 20)), c.second}
		s := mustBuild(t, site, plainSpec())
		if len(s.Diaphragms) != c.diaphragms || s.Count(RoofPt) != c.nodes {
			t.Errorf("%s: %d diaphragms, %d roof nodes; want %d, %d", c.name, len(s.Diaphragms), s.Count(RoofPt), c.diaphragms, c.nodes)
		}
		// 500 Pa on 800 m2, whichever way the roofs lie.
		if f, _ := s.Resultant(0); math.Abs(f.Z+1.35*500*800) > 1e-6 {
			t.Errorf("%s: dead load %v N, want %v", c.name, f.Z, -1.35*500*800)
		}
	}
}

// The order is roof, footing, wall, inner; in each by rows, inner nodes by level first.
func TestOrderOfNodes(t *testing.T) {
	site := hall()
	site.Walls = []geom.Line{{Name: "wall", Points: vecs(0, [2]float64{-2, 0}, [2]float64{-2, 20}), Top: 6}}
	s := mustBuild(t, site, plainSpec())
	rank := map[Role]int{RoofPt: 0, Footing: 1, Wall: 2, Inner: 3}
	for i := 1; i < len(s.Nodes); i++ {
		a, b := s.Nodes[i-1], s.Nodes[i]
		if rank[a.Role] > rank[b.Role] {
			t.Fatalf("node %d is %s, node %d is %s", i-1, a.Role, i, b.Role)
		}
		if a.Role == b.Role && a.Role == Inner && a.At.Z > b.At.Z {
			t.Fatalf("inner node %d is above the next", i-1)
		}
		if a.Role == b.Role && a.At.Z == b.At.Z && (a.At.Y > b.At.Y || a.At.Y == b.At.Y && a.At.X >= b.At.X) {
			t.Fatalf("%s nodes %v, %v are not in rows", a.Role, a.At, b.At)
		}
	}
}

// The same input gives the same structure, and the input is left as it was.
func TestBuildRepeats(t *testing.T) {
	site, spec := hall(), snowAndWind()
	site.KeepClear = []geom.Prism{{Name: "lane", Polygon: geom.Region{Rings: [][]geom.Vec{vecs(0, box(10, -1, 20, 21)...)}}.Polygon(), To: 4.5}}
	spec.Limits = map[string]geom.FootLimits{"west pad": {NoUplift: true}, "east pad": {VerticalOnly: true}}
	before := hall()
	before.KeepClear = site.KeepClear
	first, issues := Build(site, spec)
	for range 5 {
		again, more := Build(site, spec)
		if !reflect.DeepEqual(first, again) || !reflect.DeepEqual(issues, more) {
			t.Fatal("the same input gave another structure")
		}
	}
	if !reflect.DeepEqual(site, before) {
		t.Error("Build changed the site")
	}
}

// A turned roof far from the origin, as in a national grid, has the rows of the roof at the origin; a bearing given by the
// user does the same as the longest edge.
func TestGridFollowsTheRoof(t *testing.T) {
	plain := mustBuild(t, hall(), plainSpec())
	for _, deg := range []float64{0, 17, 45, 90, 133, 180, 300} {
		turned := func(x0, y0, x1, y1 float64) [][2]float64 { return rotated(deg, 4e5, 5.8e6, box(x0, y0, x1, y1)) }
		site := &geom.Site{
			Roofs:    []geom.Roof{roofOf(level(7), turned(0, 0, 40, 20))},
			Footings: []geom.Zone{pad("west pad", 0, turned(8, 8, 12, 12)), pad("east pad", 0, turned(28, 8, 32, 12))},
		}
		bearing := 90 - deg
		for _, b := range []*float64{nil, &bearing} {
			spec := plainSpec()
			spec.GridBearing = b
			s := mustBuild(t, site, spec)
			if len(s.Nodes) != len(plain.Nodes) {
				t.Errorf("turned by %v: %d nodes, want %d", deg, len(s.Nodes), len(plain.Nodes))
				continue
			}
			for _, n := range plain.Nodes {
				want := rotated(deg, 4e5, 5.8e6, [][2]float64{{n.At.X, n.At.Y}})[0]
				found := slices.ContainsFunc(s.Nodes, func(o Node) bool {
					return o.Role == n.Role && o.At.Sub(geom.Vec{X: want[0], Y: want[1], Z: n.At.Z}).Norm() < 1e-6
				})
				if !found {
					t.Errorf("turned by %v: no %s node at the turned %v", deg, n.Role, n.At)
				}
			}
		}
	}
}

// Rings drawn the other way round make the same structure but for its order.
func TestDirectionOfRingsDoesNotMatter(t *testing.T) {
	right := mustBuild(t, onePost(shapes["hole"], 1, 1), plainSpec())
	r := roofOf(level(7), reversed(box(0, 0, 40, 20)), reversed(box(15, 5, 23, 13)))
	wrong := mustBuild(t, onePost(r, 1, 1), plainSpec())
	f, _ := right.Resultant(0)
	g, _ := wrong.Resultant(0)
	if len(right.Nodes) != len(wrong.Nodes) || f.Sub(g).Norm() > 1e-6 || math.Abs(f.Z+1.35*500*(800-64)) > 1e-6 {
		t.Errorf("%d and %d nodes, load %v and %v", len(right.Nodes), len(wrong.Nodes), f, g)
	}
}
