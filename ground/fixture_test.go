package ground

import (
	"math"

	"boughwork/geom"
)

// vecs returns positions at a height.
func vecs(z float64, xy ...[2]float64) []geom.Vec {
	var out []geom.Vec
	for _, p := range xy {
		out = append(out, geom.Vec{X: p[0], Y: p[1], Z: z})
	}
	return out
}

func box(x0, y0, x1, y1 float64) [][2]float64 {
	return [][2]float64{{x0, y0}, {x1, y0}, {x1, y1}, {x0, y1}}
}

// rotated turns places about the origin, degrees anticlockwise, and moves them.
func rotated(deg, dx, dy float64, ps [][2]float64) [][2]float64 {
	s, c := math.Sincos(deg * math.Pi / 180)
	var out [][2]float64
	for _, p := range ps {
		out = append(out, [2]float64{dx + c*p[0] - s*p[1], dy + s*p[0] + c*p[1]})
	}
	return out
}

// circle returns a regular polygon, anticlockwise.
func circle(x, y, r float64, n int) [][2]float64 {
	var out [][2]float64
	for i := range n {
		s, c := math.Sincos(2 * math.Pi * float64(i) / float64(n))
		out = append(out, [2]float64{x + r*c, y + r*s})
	}
	return out
}

func reversed(ps [][2]float64) [][2]float64 {
	var out [][2]float64
	for i := range ps {
		out = append(out, ps[len(ps)-1-i])
	}
	return out
}

// roofOf returns a roof with an outline and holes (given anticlockwise) under a surface.
func roofOf(s geom.Surface, outline [][2]float64, holes ...[][2]float64) geom.Roof {
	reg := geom.Region{Rings: [][]geom.Vec{vecs(0, outline...)}}
	for _, h := range holes {
		reg.Rings = append(reg.Rings, vecs(0, reversed(h)...))
	}
	return geom.Roof{Name: "roof", Regions: []geom.Region{reg}, Surface: s}
}

func pad(name string, z float64, ps [][2]float64) geom.Zone {
	return geom.Zone{Name: name, Regions: []geom.Region{{Rings: [][]geom.Vec{vecs(z, ps...)}}}}
}

func level(z float64) geom.Plane { return geom.Plane{Z: z} }

// hall is a flat roof of 40 m x 20 m at 7 m over two pads.
func hall() *geom.Site {
	return &geom.Site{
		Roofs:    []geom.Roof{roofOf(level(7), box(0, 0, 40, 20))},
		Footings: []geom.Zone{pad("west pad", 0, box(8, 8, 12, 12)), pad("east pad", 0, box(28, 8, 32, 12))},
	}
}

// plainSpec is a brief with spacings and one permanent load.
func plainSpec() Spec {
	return Spec{
		DeckSpacing: 4, InnerSpacing: 2.5, InnerRise: 2.5, FootSpacing: 2, WallSpacing: 2, MinLength: 0.5, MaxLength: 30,
		Deck: DeckDiaphragm, SelfWeight: true, RoofFactor: 1,
		Actions: []Action{{Name: "dead", Kind: Permanent, Area: []AreaLoad{{Pressure: 500}}}},
	}
}
