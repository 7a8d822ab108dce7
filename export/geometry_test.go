package export

import (
	"math"
	"math/rand"
	"testing"

	"boughwork/geom"
)

// The triangles of a roof cover it once: their areas sum to that of the outline, with its hole.
func TestRoofMeshCoversTheRoof(t *testing.T) {
	outer := []geom.Vec{{X: 0, Y: 0}, {X: 24, Y: 0}, {X: 24, Y: 12}, {X: 12, Y: 12}, {X: 12, Y: 20}, {X: 0, Y: 20}}
	hole := []geom.Vec{{X: 4, Y: 4}, {X: 8, Y: 4}, {X: 8, Y: 8}, {X: 4, Y: 8}}
	rings := [][]geom.Vec{outer, hole}
	var places []geom.Vec
	for x := 0.0; x <= 24; x += 2 {
		for y := 0.0; y <= 20; y += 2 {
			if p := (geom.Vec{X: x, Y: y, Z: x * y / 50}); inside(rings, x, y) || toRings(rings, p) < onRoof {
				places = append(places, p)
			}
		}
	}
	triangles, border := roofMesh(places, rings)
	area := 0.0
	for _, tr := range triangles {
		area += math.Abs(ringArea([]geom.Vec{places[tr[0]], places[tr[1]], places[tr[2]]}))
	}
	if want := ringArea(outer) - ringArea(hole); math.Abs(area-want) > 1e-6 {
		t.Errorf("the triangles have %g m2, want %g", area, want)
	}
	length := 0.0
	for _, e := range border {
		d := places[e[1]].Sub(places[e[0]])
		length += math.Hypot(d.X, d.Y)
	}
	if want := 88.0 + 16; math.Abs(length-want) > 1e-6 {
		t.Errorf("the border is %g m long, want %g", length, want)
	}
}

// No place lies in the circle of a triangle: that is what makes it a Delaunay triangulation.
func TestDelaunayCirclesAreEmpty(t *testing.T) {
	rng := rand.New(rand.NewSource(5))
	var places []geom.Vec
	for range 120 {
		places = append(places, geom.Vec{X: 30 * rng.Float64(), Y: 10 * rng.Float64()})
	}
	xy := planPts(places)
	triangles := delaunay(places)
	if len(triangles) < 120 {
		t.Fatalf("%d triangles", len(triangles))
	}
	for _, tr := range triangles {
		c := circled(xy, tr)
		for i, p := range xy {
			if i == tr[0] || i == tr[1] || i == tr[2] {
				continue
			}
			if d := math.Hypot(p.x-c.centre.x, p.y-c.centre.y); d < c.radius*(1-1e-3) {
				t.Errorf("place %d lies in the circle of %v by %g", i, tr, c.radius-d)
			}
		}
	}
}

// A rectangle at any angle comes out along u, the longer side first, and u points east rather than west.
func TestPrincipalAxes(t *testing.T) {
	for degrees := -180.0; degrees <= 180; degrees += 7.5 {
		sin, cos := math.Sincos(degrees * math.Pi / 180)
		var ps []geom.Vec
		for _, c := range [][2]float64{{0, 0}, {9, 0}, {9, 4}, {5, 4}, {5, 3}, {0, 4}} {
			ps = append(ps, geom.Vec{X: 100 + cos*c[0] - sin*c[1], Y: -50 + sin*c[0] + cos*c[1]})
		}
		a := principalAxes(ps)
		e := planExtent(a, ps)
		if math.Abs(e.w()-9) > 1e-9 || math.Abs(e.h()-4) > 1e-9 || math.Abs(e.x0+4.5) > 1e-9 || math.Abs(e.y0+2) > 1e-9 {
			t.Errorf("%g degrees: extent %+v", degrees, e)
		}
		if a.cos < -1e-9 || math.Abs(math.Hypot(a.cos, a.sin)-1) > 1e-12 {
			t.Errorf("%g degrees: u points to %g, %g", degrees, a.cos, a.sin)
		}
	}
}

// The hatch of a square with a hole has the length that its area asks for, and no line of it lies in the hole.
func TestHatch(t *testing.T) {
	rings := [][]pt{{{10, 10}, {90, 10}, {90, 70}, {10, 70}}, {{30, 30}, {60, 30}, {60, 50}, {30, 50}}}
	const step = 0.05
	sum := 0.0
	for _, l := range hatch(rings, step) {
		sum += math.Hypot(l[1].x-l[0].x, l[1].y-l[0].y)
		if x, y := (l[0].x+l[1].x)/2, (l[0].y+l[1].y)/2; x > 30 && x < 60 && y > 30 && y < 50 {
			t.Fatalf("a line at %g, %g lies in the hole", x, y)
		}
		if dx, dy := l[1].x-l[0].x, l[1].y-l[0].y; math.Abs(dx+dy) > 1e-9 {
			t.Fatalf("a line runs along %g, %g", dx, dy)
		}
	}
	if want := (80.0*60 - 30*20) / step; math.Abs(sum-want) > 1e-3*want {
		t.Errorf("the lines are %g mm long, want %g", sum, want)
	}
}

func TestClipRing(t *testing.T) {
	b := box{0, 0, 10, 10}
	got := clipRing([]pt{{-5, 5}, {5, -5}, {15, 5}, {5, 15}}, b) // a square on its corner loses four corners of nothing
	if a := ringArea(planVecs(got)); math.Abs(math.Abs(a)-100) > 1e-9 {
		t.Errorf("area %g, want 100", a)
	}
	if got := clipRing([]pt{{20, 20}, {30, 20}, {30, 30}}, b); got != nil {
		t.Errorf("outside: %v", got)
	}
}

func TestCrossesBox(t *testing.T) {
	b := box{0, 0, 10, 5}
	for _, c := range []struct {
		a, b pt
		want bool
	}{
		{pt{-5, 2}, pt{15, 3}, true}, {pt{2, 2}, pt{3, 3}, true}, {pt{-5, 6}, pt{15, 6}, false}, {pt{-1, 4}, pt{3, 8}, false},
		{pt{5, -5}, pt{5, -1}, false}, {pt{5, -5}, pt{5, 1}, true},
	} {
		if got := crossesBox(c.a, c.b, b); got != c.want {
			t.Errorf("%v to %v: %t", c.a, c.b, got)
		}
	}
}

// Projections keep lengths along their axes: what makes a drawing to scale.
func TestAxonometricAxes(t *testing.T) {
	for _, c := range []struct {
		axis geom.Vec
		want float64
	}{{geom.Vec{X: 1}, 1}, {geom.Vec{Y: 1}, 0.5}, {geom.Vec{Z: 1}, 1}} {
		if x, y := axonometric.flat(c.axis); math.Abs(math.Hypot(x, y)-c.want) > 1e-12 {
			t.Errorf("%v is drawn %g long, want %g", c.axis, math.Hypot(x, y), c.want)
		}
	}
	// The viewer is in front (v falls), above and to the left (u falls): what is nearer hides what is farther.
	for _, v := range []geom.Vec{{X: -1}, {Y: -1}, {Z: 1}} {
		if axonometric.near(v) <= 0 {
			t.Errorf("%v is not nearer to the viewer than the origin", v)
		}
	}
}

func TestWrapped(t *testing.T) {
	const size, width = 2.0, 30.0
	text := "Buckling, stiffness and joints are not checked; averyveryverylongwordthatfitsnowhereatall stands here"
	got := ""
	for _, l := range wrapped(text, width, size, false) {
		if w := textWidth(l, size, false); w > width {
			t.Errorf("%q is %g mm wide", l, w)
		}
		got += l
	}
	if letters(got) != letters(text) {
		t.Errorf("words were lost: %q", got)
	}
	if s := trimmed(text, width, size, false); textWidth(s, size, false) > width || s[len(s)-3:] != "…" {
		t.Errorf("trimmed to %q", s)
	}
}

func letters(s string) (out string) {
	for _, r := range s {
		if r != ' ' {
			out += string(r)
		}
	}
	return out
}
