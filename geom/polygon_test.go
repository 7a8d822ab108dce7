package geom

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/paulmach/orb"
	"github.com/paulmach/orb/planar"
)

// star returns a simple, mostly concave ring of n corners around c, closed.
func star(rnd *rand.Rand, c orb.Point, size float64, n int) orb.Ring {
	var r orb.Ring
	for i := range n {
		sin, cos := math.Sincos((float64(i) + 0.6*rnd.Float64()) * 2 * math.Pi / float64(n))
		d := size * (0.3 + 0.7*rnd.Float64())
		r = append(r, orb.Point{c[0] + d*cos, c[1] + d*sin})
	}
	return append(r, r[0])
}

// starWithHole returns a star with a hole that is inside it for sure.
func starWithHole(rnd *rand.Rand, c orb.Point, size float64) orb.Polygon {
	n := 5 + rnd.IntN(8)
	return orb.Polygon{star(rnd, c, size, n), star(rnd, c, size*0.15, 3+rnd.IntN(4))}
}

func near(a, b, tol float64) bool { return math.Abs(a-b) <= tol*(1+math.Abs(b)) }

// Areas and moments feed loads: they must be right for holes, both directions and far from the origin.
func TestMoments(t *testing.T) {
	// A rectangle 6 x 4 with a hole 2 x 1 by hand: area 24 - 2, moments about the origin 24*(13, 22) - 2*(12, 21.5).
	outer := orb.Ring{{10, 20}, {16, 20}, {16, 24}, {10, 24}, {10, 20}}
	hole := orb.Ring{{11, 21}, {13, 21}, {13, 22}, {11, 22}, {11, 21}}
	for _, flip := range []int{0, 1, 2, 3} {
		p := orb.Polygon{outer.Clone(), hole.Clone()}
		if flip&1 > 0 {
			p[0].Reverse()
		}
		if flip&2 > 0 {
			p[1].Reverse()
		}
		a, x, y := PolygonMoments(p)
		if !near(a, 22, 1e-14) || !near(x, 288, 1e-14) || !near(y, 485, 1e-14) {
			t.Errorf("flip %d: %v %v %v", flip, a, x, y)
		}
		if c := Centroid(p); !near(c[0], 288.0/22, 1e-14) || !near(c[1], 485.0/22, 1e-14) {
			t.Errorf("flip %d: centroid %v", flip, c)
		}
	}
	if a, x, y := Moments([]orb.Point{{0, 0}, {3, 0}, {0, 3}}); a != 4.5 || x != 4.5 || y != 4.5 {
		t.Errorf("open triangle: %v %v %v", a, x, y)
	}
	far := orb.Ring{{155000, 463000}, {155001, 463000}, {155001, 463001}, {155000, 463001}}
	if a, _, _ := Moments(far); a != 1 {
		t.Errorf("a square metre in a national grid has the area %v", a)
	}
}

// Empty and degenerate polygons must not panic: they come from users.
func TestDegeneratePolygons(t *testing.T) {
	for _, p := range []orb.Polygon{nil, {}, {{}}, {{{1, 1}}}, {{{1, 1}, {2, 2}}}, {{{1, 1}, {1, 1}, {1, 1}, {1, 1}}}} {
		if ContainsPoint(p, orb.Point{5, 5}) || Area(p) != 0 {
			t.Errorf("%v contains something", p)
		}
		Centroid(p)
		LongestEdgeBearing(p)
		DistanceToBoundary(p, orb.Point{})
		if _, ok := InteriorPoint(p); ok {
			t.Errorf("%v has an inside", p)
		}
		if (Prism{Polygon: p, To: 1}).Enters(Vec{0, 0, 0}, Vec{3, 3, 1}) {
			t.Errorf("%v is entered", p)
		}
	}
	if ClipHalfPlane(nil, orb.Point{1, 0}, 0) != nil {
		t.Error("something is left of nothing")
	}
}

// Points on the boundary are inside; orb's own test must agree away from it.
func TestContainsPoint(t *testing.T) {
	rnd := rand.New(rand.NewPCG(3, 4))
	for range 300 {
		p := starWithHole(rnd, orb.Point{100, -50}, 20)
		for _, ring := range p {
			for i := 0; i+1 < len(ring); i++ {
				if !ContainsPoint(p, ring[i]) || !ContainsPoint(p, along(ring[i], ring[i+1], rnd.Float64())) {
					t.Fatal("a place on the boundary is outside")
				}
			}
		}
		for range 20 {
			q := orb.Point{80 + 40*rnd.Float64(), -70 + 40*rnd.Float64()}
			if ContainsPoint(p, q) != planar.PolygonContains(p, q) {
				t.Fatalf("%v in %v: %v", q, p, ContainsPoint(p, q))
			}
		}
		if q, ok := InteriorPoint(p); !ok || !ContainsStrictly(p, q, 1e-3) {
			t.Fatalf("interior point %v of %v", q, p)
		}
	}
}

// Cutting a polygon in two conserves area and moments, and a clip keeps no point beyond the line: tributary areas rest
// on both.
func TestClipConserves(t *testing.T) {
	rnd := rand.New(rand.NewPCG(5, 6))
	for range 500 {
		ring := star(rnd, orb.Point{30, 10}, 15, 4+rnd.IntN(9))
		sin, cos := math.Sincos(rnd.Float64() * 7)
		n := orb.Point{cos, sin}
		limit := dot(n, orb.Point{30, 10}) + 20*(rnd.Float64()-0.5)
		a, x, y := Moments(ring)
		left, right := ClipHalfPlane(ring, n, limit), ClipHalfPlane(ring, orb.Point{-cos, -sin}, -limit)
		a1, x1, y1 := Moments(left)
		a2, x2, y2 := Moments(right)
		if !near(a1+a2, a, 1e-12) || !near(x1+x2, x, 1e-12) || !near(y1+y2, y, 1e-12) {
			t.Fatalf("area %v + %v of %v", a1, a2, a)
		}
		for _, p := range left {
			if dot(n, p) > limit+1e-9 {
				t.Fatalf("%v is beyond the line", p)
			}
		}
	}
	square := orb.Ring{{0, 0}, {2, 0}, {2, 2}, {0, 2}, {0, 0}}
	if got := ClipHalfPlane(square, orb.Point{1, 0}, 2); len(got) != 4 {
		t.Errorf("a line along an edge changed the square to %v", got)
	}
	if got := ClipHalfPlane(square, orb.Point{1, 0}, -1); got != nil {
		t.Errorf("beyond the square is %v", got)
	}
}

func TestDistances(t *testing.T) {
	p := orb.Polygon{{{0, 0}, {10, 0}, {10, 10}, {0, 10}, {0, 0}}, {{4, 4}, {6, 4}, {6, 6}, {4, 6}, {4, 4}}}
	for _, c := range []struct {
		at       orb.Point
		boundary float64
		polygon  float64
		side     int
	}{
		{orb.Point{13, 14}, 5, 5, -1}, {orb.Point{2, 5}, 2, 0, 1}, {orb.Point{3, 5}, 1, 0, 1}, {orb.Point{5, 5}, 1, 1, -1}, {orb.Point{10, 5}, 0, 0, 0}, {orb.Point{5, 4}, 0, 0, 0},
	} {
		if d := DistanceToBoundary(p, c.at); d != c.boundary {
			t.Errorf("%v is %v from the boundary, want %v", c.at, d, c.boundary)
		}
		if d := DistanceToPolygon(p, c.at); d != c.polygon {
			t.Errorf("%v is %v from the polygon, want %v", c.at, d, c.polygon)
		}
		if s := side(p, c.at, BoundaryTolerance); s != c.side {
			t.Errorf("%v is on side %v, want %v", c.at, s, c.side)
		}
	}
}

// The grid of nodes follows the longest edge: a vertex in the middle of it must not hide it.
func TestLongestEdgeBearing(t *testing.T) {
	for _, c := range []struct {
		ring orb.Ring
		want float64
	}{
		{orb.Ring{{0, 0}, {40, 0}, {40, 20}, {0, 20}, {0, 0}}, 90},
		{orb.Ring{{0, 0}, {20, 0}, {20, 40}, {0, 40}, {0, 0}}, 0},
		{orb.Ring{{0, 0}, {10, 10}, {0, 20}, {-10, 10}, {0, 0}}, 45},
		{orb.Ring{{10, 0}, {20, 0}, {30, 0}, {30, 16}, {0, 16}, {0, 0}, {10, 0}}, 90},
	} {
		if got := LongestEdgeBearing(orb.Polygon{c.ring}); !near(got, c.want, 1e-12) {
			t.Errorf("%v: %v, want %v", c.ring, got, c.want)
		}
	}
	for _, b := range []float64{0, 30, 90, 123.4, 180, 270, 359} {
		dx, dy := Towards(b)
		if got := Bearing(dx, dy); !near(got, b, 1e-12) {
			t.Errorf("bearing %v came back as %v", b, got)
		}
	}
	if dx, dy := Towards(-90); dx != -1 || dy != 0 {
		t.Errorf("west is (%v, %v)", dx, dy)
	}
}

// Overlap of roofs and the nesting of holes rest on these two: shared edges do not count, crossings and insides do.
func TestOverlapping(t *testing.T) {
	rect := func(x0, y0, x1, y1 float64) orb.Polygon {
		return orb.Polygon{{{x0, y0}, {x1, y0}, {x1, y1}, {x0, y1}, {x0, y0}}}
	}
	ringed := orb.Polygon{rect(0, 0, 10, 10)[0], rect(3, 3, 7, 7)[0]}
	for _, c := range []struct {
		name           string
		p, q           orb.Polygon
		overlaps, pInQ bool
	}{
		{"apart", rect(0, 0, 1, 1), rect(2, 0, 3, 1), false, false},
		{"side by side", rect(0, 0, 2, 1), rect(2, 0, 3, 1), false, false},
		{"corner to corner", rect(0, 0, 1, 1), rect(1, 1, 2, 2), false, false},
		{"crossing", rect(0, 0, 3, 1), rect(1, -1, 2, 2), true, false},
		{"shifted along shared lines", rect(0, 0, 2, 1), rect(1, 0, 3, 1), true, false},
		{"inside", rect(1, 1, 2, 2), rect(0, 0, 3, 3), true, true},
		{"around", rect(0, 0, 3, 3), rect(1, 1, 2, 2), true, false},
		{"the same", rect(0, 0, 1, 1), rect(0, 0, 1, 1), true, true},
		{"in the hole", rect(4, 4, 6, 6), ringed, false, false},
		{"filling the hole", rect(3, 3, 7, 7), ringed, false, false},
		{"over the hole", rect(2, 2, 8, 8), ringed, true, false},
		{"beside the hole", rect(1, 1, 2, 9), ringed, true, true},
	} {
		if got := overlapping(c.p, c.q, BoundaryTolerance); got != c.overlaps {
			t.Errorf("%s: overlapping %v", c.name, got)
		}
		if got := overlapping(c.q, c.p, BoundaryTolerance); got != c.overlaps {
			t.Errorf("%s, exchanged: overlapping %v", c.name, got)
		}
		if got := within(c.p, c.q); got != c.pInQ {
			t.Errorf("%s: within %v", c.name, got)
		}
	}
}

// Rings through random places cross themselves or not; every pair of edges tested one by one must agree.
func TestClashesAgainstAllPairs(t *testing.T) {
	rnd := rand.New(rand.NewPCG(19, 20))
	left := func(a, b, c orb.Point) bool { return cross(diff(b, a), diff(c, a)) > 0 }
	simple := 0
	for range 4000 {
		ring := make([]orb.Point, 4+rnd.IntN(5))
		n := len(ring)
		for i := range ring {
			ring[i] = orb.Point{155000 + 40*rnd.Float64(), 463000 + 40*rnd.Float64()}
		}
		crossings := 0
		for i := range n {
			for j := i + 2; j < n; j++ {
				a, b, c, d := ring[i], ring[i+1], ring[j], ring[(j+1)%n]
				if (i > 0 || j < n-1) && left(a, b, c) != left(a, b, d) && left(c, d, a) != left(c, d, b) {
					crossings++
				}
			}
		}
		if got := clashes([][]orb.Point{ring}); (len(got) > 0) != (crossings > 0) {
			t.Fatalf("%v: %d crossings, clashes %v", ring, crossings, got)
		}
		if crossings == 0 {
			simple++
		}
	}
	if simple < 200 || simple > 3800 {
		t.Errorf("only one kind of ring is tested: %d of 4000 are simple", simple)
	}
}
