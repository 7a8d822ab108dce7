package geom

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/paulmach/orb"
)

// lift gives the vertices of a polygon heights and makes a region of it, oriented as ReadSite does.
func lift(p orb.Polygon, z func(x, y float64) float64) Region {
	var r Region
	for k, ring := range p {
		var out []Vec
		for _, v := range ring[:len(ring)-1] {
			out = append(out, Vec{v[0], v[1], z(v[0], v[1])})
		}
		if a, _, _ := Moments(ring); (a > 0) != (k == 0) {
			for i, j := 0, len(out)-1; i < j; i, j = i+1, j-1 {
				out[i], out[j] = out[j], out[i]
			}
		}
		r.Rings = append(r.Rings, out)
	}
	return r
}

// slopes returns the gradient by central differences of the third order.
func slopes(s Surface, x, y, h float64) (zx, zy float64) {
	d := func(dx, dy float64) float64 {
		return (8*(s.Height(x+dx*h, y+dy*h)-s.Height(x-dx*h, y-dy*h)) - (s.Height(x+2*dx*h, y+2*dy*h) - s.Height(x-2*dx*h, y-2*dy*h))) / (12 * h)
	}
	return d(1, 0), d(0, 1)
}

// An outline in one plane is that plane, also for several regions and far from the origin.
func TestPlanarOutline(t *testing.T) {
	want := func(x, y float64) float64 { return 7 + 0.1*(x-155000) - 0.05*(y-463000) }
	p := orb.Polygon{{{155000, 463000}, {155030, 463002}, {155025, 463020}, {155003, 463018}, {155000, 463000}}}
	q := orb.Polygon{{{155040, 463000}, {155050, 463000}, {155050, 463010}, {155040, 463000}}}
	s := OutlineSurface([]Region{lift(p, want), lift(q, want)})
	if _, ok := s.(Plane); !ok {
		t.Errorf("the surface is a %T", s)
	}
	if z := s.Height(155013, 463007); math.Abs(z-want(155013, 463007)) > 1e-6 {
		t.Errorf("height %v", z)
	}
	if zx, zy := s.Gradient(0, 0); math.Abs(zx-0.1) > 1e-8 || math.Abs(zy+0.05) > 1e-8 {
		t.Errorf("slopes %v, %v", zx, zy)
	}
	// Two roofs at two heights are two planes.
	s = OutlineSurface([]Region{lift(p, func(_, _ float64) float64 { return 5 }), lift(q, func(_, _ float64) float64 { return 8 })})
	if a, b := s.Height(155013, 463007), s.Height(155045, 463002); a != 5 || b != 8 {
		t.Errorf("heights %v and %v", a, b)
	}
}

// Mean value coordinates reproduce planes everywhere (Floater 2003, equation 2.1; Hormann and Floater 2006, section 4),
// take the heights of the vertices and are linear along the edges.
func TestMeanValueLaws(t *testing.T) {
	rnd := rand.New(rand.NewPCG(15, 16))
	for range 100 {
		p := starWithHole(rnd, orb.Point{50, 50}, 20)
		plane := func(x, y float64) float64 { return 4 + 0.3*x - 0.2*y }
		m := newMeanValue(lift(p, plane))
		bump := newMeanValue(lift(p, func(x, y float64) float64 { return 6 + math.Sin(x) + math.Cos(2*y) }))
		for range 20 {
			q := orb.Point{30 + 40*rnd.Float64(), 30 + 40*rnd.Float64()}
			if !ContainsStrictly(p, q, 1e-6) {
				continue
			}
			if z := m.Height(q[0], q[1]); math.Abs(z-plane(q[0], q[1])) > 1e-8 {
				t.Fatalf("height %v at %v, want %v", z, q, plane(q[0], q[1]))
			}
			if zx, zy := m.Gradient(q[0], q[1]); math.Abs(zx-0.3) > 1e-6 || math.Abs(zy+0.2) > 1e-6 {
				t.Fatalf("slopes %v, %v at %v", zx, zy, q)
			}
		}
		for _, ring := range bump.rings {
			for i, a := range ring {
				b := ring[(i+1)%len(ring)]
				s := rnd.Float64()
				c := a.Add(b.Sub(a).Scale(s))
				if z := bump.Height(a.X, a.Y); math.Abs(z-a.Z) > 1e-9 {
					t.Fatalf("the corner is at %v, want %v", z, a.Z)
				}
				// On the edge, and a hair to both sides of it: continuous.
				n := orb.Point{-(b.Y - a.Y), b.X - a.X}
				for _, off := range []float64{0, 1e-12, -1e-12, 2e-9, 1e-7, 1e-6} {
					x, y := c.X+off*n[0]/length(n), c.Y+off*n[1]/length(n)
					if z := bump.Height(x, y); math.Abs(z-c.Z) > 1e-4 {
						t.Fatalf("%v m from the edge the height is %v, want %v", off, z, c.Z)
					}
					if zx, zy := bump.Gradient(x, y); math.IsNaN(zx+zy) || math.Abs(zx)+math.Abs(zy) > 1e4 {
						t.Fatalf("%v m from the edge the slopes are %v, %v", off, zx, zy)
					}
				}
			}
		}
	}
}

// In a square with the corner heights 0, 0, 0, 1 symmetry puts the middle at 1/4; outside, the nearest edge counts.
func TestMeanValueValues(t *testing.T) {
	r := lift(orb.Polygon{{{0, 0}, {2, 0}, {2, 2}, {0, 2}, {0, 0}}}, func(x, y float64) float64 { return x * y / 4 })
	s := OutlineSurface([]Region{r})
	for _, c := range [][3]float64{{1, 1, 0.25}, {2, 1, 0.5}, {3, 1, 0.5}, {2, 2, 1}, {5, 5, 1}, {-1, 1, 0}} {
		if z := s.Height(c[0], c[1]); math.Abs(z-c[2]) > 1e-12 {
			t.Errorf("height %v at (%v, %v), want %v", z, c[0], c[1], c[2])
		}
	}
	if zx, zy := s.Gradient(1, 1); math.Abs(zx-zy) > 1e-12 || zx <= 0 {
		t.Errorf("slopes %v, %v in the middle", zx, zy)
	}
}

// Wind acts along the normal: the gradient must be that of the heights. On an edge it is the slope just inside.
func TestGradients(t *testing.T) {
	rnd := rand.New(rand.NewPCG(17, 18))
	grid, err := NewHeightGrid(-3, -4, 2, 3, 30, [][]float64{{1, 2, 4, 3, 5}, {2, 2, 0, 1, 7}, {5, 3, 2, 2, 1}, {0, 1, 2, 3, 9}})
	if err != nil {
		t.Fatal(err)
	}
	p := starWithHole(rnd, orb.Point{2, 2}, 10)
	surfaces := map[string]Surface{
		"plane":      Plane{X: 1, Y: 2, Z: 3, SlopeX: 0.25, SlopeY: -0.5},
		"grid":       grid,
		"mean value": newMeanValue(lift(p, func(x, y float64) float64 { return 6 + math.Sin(x) + math.Cos(2*y) })),
	}
	for name, s := range surfaces {
		tested := 0
		for range 400 {
			q := orb.Point{12*rnd.Float64() - 4, 12*rnd.Float64() - 4}
			const h = 1e-3
			if name == "mean value" && !ContainsStrictly(p, q, 0.1) {
				continue
			}
			if name == "grid" {
				u, v := grid.locate(q[0], q[1])
				if math.Abs(u-math.Round(u)) < 2*h || math.Abs(v-math.Round(v)) < 2*h {
					continue
				}
			}
			tested++
			zx, zy := s.Gradient(q[0], q[1])
			wx, wy := slopes(s, q[0], q[1], h)
			if math.Abs(zx-wx) > 1e-6 || math.Abs(zy-wy) > 1e-6 {
				t.Fatalf("%s at %v: gradient (%v, %v), by differences (%v, %v)", name, q, zx, zy, wx, wy)
			}
		}
		if tested < 50 {
			t.Errorf("%s: only %d places tested", name, tested)
		}
	}
	m := surfaces["mean value"].(meanValue)
	for i, a := range m.rings[0] {
		b := m.rings[0][(i+1)%len(m.rings[0])]
		x, y := (a.X+b.X)/2, (a.Y+b.Y)/2
		l := math.Hypot(b.X-a.X, b.Y-a.Y)
		zx, zy := m.Gradient(x, y)
		nx, ny := -(b.Y-a.Y)/l, (b.X-a.X)/l
		wx, wy := m.Gradient(x+0.01*nx, y+0.01*ny)
		if math.Abs(zx-wx)+math.Abs(zy-wy) > 0.5 {
			t.Errorf("edge %d: the slope jumps from (%v, %v) to (%v, %v) in 10 mm", i, zx, zy, wx, wy)
		}
		if along := (zx*(b.X-a.X) + zy*(b.Y-a.Y)) - (b.Z - a.Z); math.Abs(along) > 0.02*l {
			t.Errorf("edge %d: the slope along the edge is off by %v", i, along/l)
		}
	}
}

// The grid: heights at its points, bilinear between, level outside, turned clockwise.
func TestHeightGrid(t *testing.T) {
	g, err := NewHeightGrid(10, 20, 2, 5, 0, [][]float64{{1, 2, 3}, {4, 5, 8}})
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range [][3]float64{{10, 20, 1}, {14, 25, 8}, {11, 20, 1.5}, {13, 22.5, 4.5}, {0, 0, 1}, {99, 99, 8}, {12, 99, 5}} {
		if z := g.Height(c[0], c[1]); z != c[2] {
			t.Errorf("height %v at (%v, %v), want %v", z, c[0], c[1], c[2])
		}
	}
	if zx, zy := g.Gradient(99, 22); zx != 0 || zy != 1 {
		t.Errorf("slopes %v, %v beside the grid", zx, zy)
	}
	// Turned by 90 degrees the first axis points south and the second east.
	g, _ = NewHeightGrid(0, 0, 1, 1, 90, [][]float64{{0, 1}, {10, 11}})
	if z := g.Height(0, -1); z != 1 {
		t.Errorf("to the south is %v", z)
	}
	if z := g.Height(1, 0); z != 10 {
		t.Errorf("to the east is %v", z)
	}
	for name, rows := range map[string][][]float64{"no rows": nil, "one row": {{1, 2}}, "one column": {{1}, {2}}, "ragged": {{1, 2}, {1}}, "NaN": {{1, 2}, {3, math.NaN()}}} {
		if _, err := NewHeightGrid(0, 0, 1, 1, 0, rows); err == nil {
			t.Errorf("%s: no error", name)
		}
	}
	if _, err := NewHeightGrid(0, 0, 0, 1, 0, [][]float64{{1, 2}, {3, 4}}); err == nil {
		t.Error("no spacing: no error")
	}
	if _, err := NewHeightGrid(math.NaN(), 0, 1, 1, 0, [][]float64{{1, 2}, {3, 4}}); err == nil {
		t.Error("no first point: no error")
	}
}

func TestPlaneThrough(t *testing.T) {
	p, err := PlaneThrough(Vec{0, 0, 1}, Vec{10, 0, 2}, Vec{0, 5, 4})
	if err != nil || math.Abs(p.Height(10, 5)-5) > 1e-12 {
		t.Errorf("%v %v", p, err)
	}
	if _, err := PlaneThrough(Vec{0, 0, 1}, Vec{10, 0, 2}, Vec{20, 0, 4}); err == nil {
		t.Error("a vertical plane was taken")
	}
}
