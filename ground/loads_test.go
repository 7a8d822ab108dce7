package ground

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"boughwork/geom"
)

// conserved is the relative error allowed in a resultant.
const conserved = 1e-9

// randomRoof returns an outline with holes: convex, star-shaped, L, T or with holes, turned and moved, up to far from
// the origin as national grids are.
func randomRoof(rnd *rand.Rand) (outline [][2]float64, holes [][][2]float64) {
	star := func(n int, lo, hi float64) [][2]float64 {
		var out [][2]float64
		for i := range n {
			s, c := math.Sincos(2 * math.Pi * (float64(i) + 0.6*rnd.Float64()) / float64(n))
			r := lo + (hi-lo)*rnd.Float64()
			out = append(out, [2]float64{r * c, r * s})
		}
		return out
	}
	a, b := 12+18*rnd.Float64(), 8+12*rnd.Float64()
	switch rnd.IntN(6) {
	case 0:
		outline = star(3+rnd.IntN(6), 15, 15.5)
	case 1:
		outline = star(8+rnd.IntN(12), 6, 20)
	case 2:
		outline = [][2]float64{{0, 0}, {a, 0}, {a, b / 2}, {a / 3, b / 2}, {a / 3, b}, {0, b}}
	case 3:
		outline, holes = box(0, 0, a, b), [][][2]float64{box(a/4, b/4, a/2, b/2), circle(0.75*a, 0.7*b, 1.5, 12)}
	case 4:
		outline, holes = circle(0, 0, a/2, 48), [][][2]float64{circle(1, 0, a/6, 24)}
	default:
		outline = box(0, 0, a, b)
	}
	dx, dy := 100*rnd.Float64(), 100*rnd.Float64()
	if rnd.IntN(3) == 0 {
		dx, dy = dx+4e5, dy+5.8e6
	}
	deg := 360 * rnd.Float64()
	outline = rotated(deg, dx, dy, outline)
	for i := range holes {
		holes[i] = rotated(deg, dx, dy, holes[i])
	}
	return outline, holes
}

// study is one random roof with a foot under it and what the tests need to judge its loads.
type study struct {
	site    *geom.Site
	plane   geom.Plane
	centre  geom.Vec
	size    float64
	spec    Spec
	outline [][2]float64
	holes   [][][2]float64
}

func newStudy(rnd *rand.Rand) *study {
	st := &study{spec: plainSpec()}
	st.outline, st.holes = randomRoof(rnd)
	st.centre = geom.Vec{X: st.outline[0][0], Y: st.outline[0][1], Z: 7}
	for _, p := range st.outline {
		st.size = math.Max(st.size, math.Hypot(p[0]-st.centre.X, p[1]-st.centre.Y))
	}
	st.plane = geom.Plane{X: st.centre.X, Y: st.centre.Y, Z: 7, SlopeX: rnd.Float64() - 0.5, SlopeY: rnd.Float64() - 0.5}
	if rnd.IntN(3) == 0 {
		st.plane.SlopeX, st.plane.SlopeY = 0, 0
	}
	st.site = onePost(roofOf(st.plane, st.outline, st.holes...), st.centre.X, st.centre.Y)
	st.site.Footings[0].Points[0].Z = -20
	st.spec.DeckSpacing = 2.5 + 3*rnd.Float64()
	st.spec.InnerSpacing = 10
	st.spec.InnerRise = 10
	st.spec.Combination = CombineListed
	st.spec.Actions = []Action{{Name: "load"}}
	st.spec.Cases = []UserCase{{Name: "load", Factors: map[string]float64{"load": 1}}}
	return st
}

// moments returns area and first moments about the centre of the part of the roof inside half-planes n . p <= d (p from
// the centre), by geom's polygon functions, which know nothing of cells and nodes.
func (st *study) moments(halves ...[3]float64) (a, mx, my float64) {
	for _, ring := range st.site.Roofs[0].Regions[0].Polygon() {
		open := ring[:len(ring)-1]
		local := geom.ClipHalfPlane(open, [2]float64{1, 0}, math.Inf(1))
		for k := range local {
			local[k] = [2]float64{open[k][0] - st.centre.X, open[k][1] - st.centre.Y}
		}
		for _, h := range halves {
			local = geom.ClipHalfPlane(local, [2]float64{h[0], h[1]}, h[2])
		}
		da, dx, dy := geom.Moments(local)
		a, mx, my = a+da, mx+dx, my+dy
	}
	return a, mx, my
}

// compare checks the resultant of the only case against a force per plan area that acts on the plane of the roof.
func (st *study) compare(t *testing.T, name string, q geom.Vec, a, mx, my float64) {
	t.Helper()
	s := mustBuild(t, st.site, st.spec)
	force := q.Scale(a)
	arm := geom.Vec{X: mx, Y: my, Z: st.plane.SlopeX*mx + st.plane.SlopeY*my}
	st.judge(t, name, s, force, arm.Cross(q))
}

// judge compares the resultant about the centre with force and moment.
func (st *study) judge(t *testing.T, name string, s *Structure, force, moment geom.Vec) {
	t.Helper()
	var f, m geom.Vec
	var gross float64
	for _, l := range s.Cases[0].Loads {
		f = f.Add(l.Force)
		m = m.Add(s.Nodes[l.Node].At.Sub(st.centre).Cross(l.Force))
		gross += l.Force.Norm()
	}
	if d := f.Sub(force).Norm(); d > conserved*gross {
		t.Errorf("%s: force %v, want %v (%.1e of the load)", name, f, force, d/gross)
	}
	if d := m.Sub(moment).Norm(); d > conserved*gross*st.size {
		t.Errorf("%s: moment %v, want %v (%.1e)", name, m, moment, d/(gross*st.size))
	}
}

// Force and moment of every kind of area load are those of the exact integrals over the polygon.
func TestAreaLoadsAreConserved(t *testing.T) {
	rnd := rand.New(rand.NewPCG(1, 2))
	for i := range 60 {
		st := newStudy(rnd)
		a, mx, my := st.moments()
		for _, l := range []AreaLoad{
			{Pressure: 700},
			{Pressure: -300, Direction: Normal},
			{Pressure: 400, Direction: Towards, Bearing: 360 * rnd.Float64()},
		} {
			q := geom.Vec{Z: -l.Pressure}
			if l.Direction == Normal {
				q = geom.Vec{X: st.plane.SlopeX, Y: st.plane.SlopeY, Z: -1}.Scale(l.Pressure)
			} else if l.Direction == Towards {
				x, y := geom.Towards(l.Bearing)
				q = geom.Vec{X: x, Y: y}.Scale(l.Pressure)
			}
			st.spec.Actions[0].Area = []AreaLoad{l}
			st.compare(t, fmt.Sprintf("roof %d, direction %d", i, l.Direction), q, a, mx, my)
		}
	}
}

// The same for part of the roof: one side of a line, and a convex polygon; thin strips are worst.
func TestPatternedLoadsAreConserved(t *testing.T) {
	rnd := rand.New(rand.NewPCG(3, 4))
	for i := range 60 {
		st := newStudy(rnd)
		a, mx, my := st.moments()
		mid := [2]float64{st.centre.X + mx/a, st.centre.Y + my/a}
		bearing := 360 * rnd.Float64()
		dx, dy := geom.Towards(bearing)
		half := func(at [2]float64, b float64) [3]float64 {
			x, y := geom.Towards(b)
			return [3]float64{-x, -y, -x*(at[0]-st.centre.X) - y*(at[1]-st.centre.Y)}
		}
		for _, width := range []float64{5, 0.7, 0.02} {
			end := [2]float64{mid[0] + width*dx, mid[1] + width*dy}
			wide := func(at [2]float64, s float64) [2]float64 { return [2]float64{at[0] - s*dy, at[1] + s*dx} }
			strip := [][2]float64{wide(mid, 60), wide(mid, -60), wide(end, -60), wide(end, 60)}
			// Its sides as the rounded corners give them: far from the origin a corner is good to a nanometre only.
			var sides [][3]float64
			for k, a := range strip {
				b := strip[(k+1)%4]
				nx, ny := b[1]-a[1], a[0]-b[0]
				sides = append(sides, [3]float64{nx, ny, nx*(a[0]-st.centre.X) + ny*(a[1]-st.centre.Y)})
			}
			pa, px, py := st.moments(sides...)
			back := half(end, bearing+180)
			ba, bx, by := st.moments(append(sides, back)...)
			for k, l := range []AreaLoad{
				{Pressure: 700, Pattern: Pattern{Polygon: strip}},
				{Pressure: 700, Pattern: Pattern{Polygon: strip}, Direction: Normal},
				{Pressure: 700, Pattern: Pattern{Half: &HalfPlane{Through: &end, Bearing: bearing + 180}, Polygon: strip}},
			} {
				if k == 2 {
					pa, px, py = ba, bx, by
				}
				q := geom.Vec{Z: -700}
				if l.Direction == Normal {
					q = geom.Vec{X: st.plane.SlopeX, Y: st.plane.SlopeY, Z: -1}.Scale(700)
				}
				st.spec.Actions[0].Area = []AreaLoad{l}
				st.compare(t, fmt.Sprintf("roof %d, strip of %v m", i, width), q, pa, px, py)
			}
		}
		ha, hx, hy := st.moments(half(mid, bearing))
		st.spec.Actions[0].Area = []AreaLoad{{Pressure: 700, Pattern: Pattern{Half: &HalfPlane{Bearing: bearing}}}}
		st.compare(t, fmt.Sprintf("roof %d, half", i), geom.Vec{Z: -700}, ha, hx, hy)
	}
}

// A pattern that is not convex: the roof less the pattern and the pattern make up the whole.
func TestConcavePattern(t *testing.T) {
	st := newStudy(rand.New(rand.NewPCG(5, 6)))
	st.site = onePost(roofOf(level(7), box(0, 0, 20, 12)), 1, 1)
	st.plane, st.centre, st.size = level(7), geom.Vec{Z: 7}, 23
	for name, u := range map[string][][2]float64{
		"U":                {{2, 2}, {18, 2}, {18, 20}, {14, 20}, {14, 6}, {6, 6}, {6, 20}, {2, 20}},
		"U drawn backward": reversed([][2]float64{{2, 2}, {18, 2}, {18, 20}, {14, 20}, {14, 6}, {6, 6}, {6, 20}, {2, 20}}),
	} {
		// By hand: two legs of 4 m x 10 m and a bar of 8 m x 4 m, on the roof of 12 m.
		a := 2*4*10.0 + 8*4
		mx := 4*10*4.0 + 4*10*16 + 8*4*10
		my := 2*4*10*7.0 + 8*4*4
		st.spec.Actions[0].Area = []AreaLoad{{Pressure: 700, Pattern: Pattern{Polygon: u}}}
		st.compare(t, name, geom.Vec{Z: -700}, a, mx, my)
	}
}

// Line loads: exact integrals along the edges, edge by edge.
func TestEdgeLoadsAreConserved(t *testing.T) {
	rnd := rand.New(rand.NewPCG(7, 8))
	for i := range 60 {
		st := newStudy(rnd)
		bearing := 360 * rnd.Float64()
		tx, ty := geom.Towards(bearing)
		for _, l := range []EdgeLoad{
			{Force: 900},
			{Force: 900, Direction: Towards, Bearing: bearing},
			{Force: 900, Direction: Towards, Bearing: bearing, Windward: true},
		} {
			var force, moment geom.Vec
			for _, ring := range st.site.Roofs[0].Regions[0].Rings {
				for k, a := range ring {
					b := ring[(k+1)%len(ring)]
					d := b.Sub(a)
					q := geom.Vec{Z: -l.Force}
					if l.Direction == Towards {
						q = geom.Vec{X: tx, Y: ty}.Scale(l.Force)
					}
					n := d.Norm()
					if l.Windward {
						// Outward normal (dy, -dx); the wind sees the edge if it blows against it.
						n = math.Max(0, -(d.Y*tx - d.X*ty))
					}
					mid := a.Add(b).Scale(0.5)
					mid.Z = st.plane.Height(mid.X, mid.Y)
					f := q.Scale(n)
					force = force.Add(f)
					moment = moment.Add(mid.Sub(st.centre).Cross(f))
				}
			}
			st.spec.Actions[0].Edge = []EdgeLoad{l}
			st.judge(t, fmt.Sprintf("roof %d, direction %d, windward %v", i, l.Direction, l.Windward), mustBuild(t, st.site, st.spec), force, moment)
		}
	}
}

// The edges of one half, by hand: west half of 20 m x 12 m is two stretches of 10 m and the west edge.
func TestEdgeLoadOnHalf(t *testing.T) {
	st := newStudy(rand.New(rand.NewPCG(5, 6)))
	st.site = onePost(roofOf(level(7), box(0, 0, 20, 12)), 1, 1)
	st.plane, st.centre, st.size = level(7), geom.Vec{Z: 7}, 23
	st.spec.Actions[0].Edge = []EdgeLoad{{Force: 100, Pattern: Pattern{Half: &HalfPlane{Bearing: 270}}}}
	f := geom.Vec{Z: -100 * 32}
	at := geom.Vec{X: (10*5 + 10*5 + 0) / 32.0, Y: (0 + 120 + 12*6) / 32.0}
	st.judge(t, "half", mustBuild(t, st.site, st.spec), f, at.Cross(f))
}

func TestPointLoadsAreConserved(t *testing.T) {
	rnd := rand.New(rand.NewPCG(9, 10))
	for i := range 40 {
		st := newStudy(rnd)
		poly := st.site.Roofs[0].Regions[0].Polygon()
		for n := 0; n < 3; {
			at := [2]float64{st.centre.X + st.size*(2*rnd.Float64()-1), st.centre.Y + st.size*(2*rnd.Float64()-1)}
			if !geom.ContainsStrictly(poly, at, 0.01) {
				continue
			}
			n++
			f := geom.Vec{X: rnd.NormFloat64(), Y: rnd.NormFloat64(), Z: -5 * rnd.Float64()}
			st.spec.Actions[0].Point = []PointLoad{{At: at, Force: f}}
			s := mustBuild(t, st.site, st.spec)
			if n := len(s.Cases[0].Loads); n > 3 {
				t.Errorf("roof %d: a point load reaches %d nodes", i, n)
			}
			arm := geom.Vec{X: at[0], Y: at[1], Z: st.plane.Height(at[0], at[1])}.Sub(st.centre)
			st.judge(t, fmt.Sprintf("roof %d, point", i), s, f, arm.Cross(f))
		}
	}
}

// A point load on a node stays there; between two it divides by the lever rule; in a triangle of a square it is shared.
func TestPointLoadByHand(t *testing.T) {
	for _, c := range []struct {
		at   [2]float64
		want map[geom.Vec]float64
	}{
		{[2]float64{8, 4}, map[geom.Vec]float64{{X: 8, Y: 4, Z: 7}: -10}},
		{[2]float64{9, 4}, map[geom.Vec]float64{{X: 8, Y: 4, Z: 7}: -7.5, {X: 12, Y: 4, Z: 7}: -2.5}},
		{[2]float64{9, 5}, map[geom.Vec]float64{{X: 8, Y: 4, Z: 7}: -5, {X: 12, Y: 4, Z: 7}: -2.5, {X: 8, Y: 8, Z: 7}: -2.5}},
	} {
		site, spec := hall(), plainSpec()
		spec.Actions[0].Area = nil
		spec.Actions[0].Point = []PointLoad{{At: c.at, Force: geom.Vec{Z: -10}}}
		spec.Combination, spec.Cases = CombineListed, []UserCase{{Factors: map[string]float64{"dead": 1}}}
		s := mustBuild(t, site, spec)
		if len(s.Cases[0].Loads) != len(c.want) {
			t.Errorf("at %v: loads %v", c.at, s.Cases[0].Loads)
		}
		for _, l := range s.Cases[0].Loads {
			if w := c.want[s.Nodes[l.Node].At]; math.Abs(l.Force.Z-w) > 1e-9 {
				t.Errorf("at %v: %v N on %v, want %v", c.at, l.Force.Z, s.Nodes[l.Node].At, w)
			}
		}
	}
}

// A uniform load on a rectangle in whole panels: inner nodes 16 m2, edges 8, corners 4, as anyone would by hand.
func TestTributaryAreasByHand(t *testing.T) {
	s := mustBuild(t, hall(), plainSpec())
	for n, d := range s.Nodes {
		want := 0.0
		if d.Role == RoofPt {
			want = 16
			if d.At.X == 0 || d.At.X == 40 {
				want /= 2
			}
			if d.At.Y == 0 || d.At.Y == 20 {
				want /= 2
			}
		}
		if math.Abs(s.Tributary[n]-want) > 1e-9 {
			t.Errorf("node %v carries %v m2, want %v", d.At, s.Tributary[n], want)
		}
	}
}

// Tributary areas add up to the roof, and two halves to the whole.
func TestAreasAddUp(t *testing.T) {
	rnd := rand.New(rand.NewPCG(11, 12))
	for i := range 40 {
		st := newStudy(rnd)
		a, _, _ := st.moments()
		b := 360 * rnd.Float64()
		load := func(p Pattern) float64 {
			st.spec.Actions[0].Area = []AreaLoad{{Pressure: 1, Pattern: p}}
			s := mustBuild(t, st.site, st.spec)
			var sum float64
			for _, v := range s.Tributary {
				sum += v
			}
			if math.Abs(sum-a) > conserved*a {
				t.Errorf("roof %d: tributary areas %v m2, roof %v m2", i, sum, a)
			}
			f, _ := s.Resultant(0)
			return -f.Z
		}
		whole := load(Pattern{})
		halves := load(Pattern{Half: &HalfPlane{Bearing: b}}) + load(Pattern{Half: &HalfPlane{Bearing: b + 180}})
		if math.Abs(whole-a) > conserved*a || math.Abs(halves-a) > conserved*a {
			t.Errorf("roof %d of %v m2: whole %v, halves %v", i, a, whole, halves)
		}
	}
}

// The brute-force meaning of a tributary area: a random place of the roof belongs to the nearest node.
func TestCellsHoldTheNearestPlaces(t *testing.T) {
	rnd := rand.New(rand.NewPCG(13, 14))
	for range 10 {
		st := newStudy(rnd)
		b := &builder{site: st.site, spec: st.spec}
		b.prepare()
		b.placeNodes()
		d := b.newDeck(0)
		for range 400 {
			p := pt{st.size * (2*rnd.Float64() - 1), st.size * (2*rnd.Float64() - 1)}
			if !d.areas[0].contains(p) {
				continue
			}
			if n := d.nearest(p); !d.cells[n].ring.contains(p) && d.cells[n].ring.edgeDistance(p) > 1e-9 {
				t.Fatalf("%v is nearest to node %d but outside its cell", p, n)
			}
		}
	}
}

// No roof node is lifted by a load that presses down, wherever it lies, on grids as people draw them; but a sliver of roof
// beyond the outermost nodes is a cantilever and may lift one by next to nothing.
func TestDownwardLoadsLiftNothing(t *testing.T) {
	for name, r := range shapes {
		for b := 0.0; b < 360; b += 37 {
			for _, p := range []Pattern{{}, {Half: &HalfPlane{Bearing: b}}, {Half: &HalfPlane{Through: &[2]float64{1, 0.9}, Bearing: b}}} {
				spec := plainSpec()
				spec.Actions[0].Area[0].Pattern = p
				s, _ := Build(onePost(r, 1, 1), spec)
				if s == nil {
					continue // the pattern may miss the roof
				}
				total, _ := s.Resultant(0)
				for _, l := range s.Cases[0].Loads {
					if l.Force.Z > 1e-3*total.Norm() {
						t.Errorf("%s, half towards %v: node %v is lifted by %v N", name, b, s.Nodes[l.Node].At, l.Force.Z)
					}
				}
			}
		}
	}
}

// bowl is z = h + k (x^2 + y^2).
type bowl struct{ h, k float64 }

func (b bowl) Height(x, y float64) float64            { return b.h + b.k*(x*x+y*y) }
func (b bowl) Gradient(x, y float64) (zx, zy float64) { return 2 * b.k * x, 2 * b.k * y }

// On a curved roof the resultant is that of pieces of about a quarter of the spacing. Exact integrals over the rectangle
// 0..a x 0..b of z = h + k (x2 + y2): volume, and of the slope 2 k x.
func TestCurvedRoof(t *testing.T) {
	const a, b, h, k = 24.0, 12.0, 6.0, 0.004
	site := onePost(roofOf(bowl{h, k}, box(0, 0, a, b)), 1, 1)
	spec := plainSpec()
	for _, c := range []struct {
		load   AreaLoad
		fx, fz float64
		my     float64 // integral of z fx - x fz
	}{
		{AreaLoad{Pressure: 1}, 0, -a * b, a * b * a / 2},
		{AreaLoad{Pressure: 1, Direction: Towards, Bearing: 90}, a * b, 0, h*a*b + k*(a*a*a*b+a*b*b*b)/3},
		{AreaLoad{Pressure: 1, Direction: Normal}, k * a * a * b, -a * b,
			h*k*a*a*b + 2*k*k*(a*a*a*a*b/4+a*a/2*b*b*b/3) + a*b*a/2},
	} {
		spec.Actions[0].Area = []AreaLoad{c.load}
		spec.Combination, spec.Cases = CombineListed, []UserCase{{Factors: map[string]float64{"dead": 1}}}
		s := mustBuild(t, site, spec)
		f, m := s.Resultant(0)
		if math.Abs(f.X-c.fx) > 1e-9*a*b || math.Abs(f.Z-c.fz) > 1e-9*a*b {
			t.Errorf("direction %d: force %v, want (%v, 0, %v)", c.load.Direction, f, c.fx, c.fz)
		}
		if math.Abs(m.Y-c.my) > 1e-4*math.Abs(c.my) {
			t.Errorf("direction %d: moment about y %v, want %v", c.load.Direction, m.Y, c.my)
		}
	}
}

// Wind on 40 m x 20 m from the west at 500 N/m: only the west edge of 20 m faces it. From the south-west both edges do, by
// their projected lengths.
func TestWindwardEdges(t *testing.T) {
	for _, c := range []struct{ bearing, want float64 }{
		{90, 500 * 20},
		{0, 500 * 40},
		{45, 500 * (20 + 40) / math.Sqrt2},
	} {
		spec := plainSpec()
		spec.Actions[0].Area = nil
		spec.Actions[0].Edge = []EdgeLoad{{Force: 500, Direction: Towards, Bearing: c.bearing, Windward: true}}
		spec.Combination, spec.Cases = CombineListed, []UserCase{{Factors: map[string]float64{"dead": 1}}}
		s := mustBuild(t, hall(), spec)
		f, _ := s.Resultant(0)
		if math.Abs(f.Norm()-c.want) > 1e-6 || math.Abs(geom.Bearing(f.X, f.Y)-c.bearing) > 1e-9 {
			t.Errorf("wind towards %v: %v N towards %v, want %v", c.bearing, f.Norm(), geom.Bearing(f.X, f.Y), c.want)
		}
	}
}
