package export

import (
	"fmt"
	"math"
	"sort"

	"boughwork/geom"
	"boughwork/ground/layout"
)

// All records here are invented: their bars and forces follow simple rules and come from no solver. Only tripod and fan
// are in equilibrium, by construction.

func newRecord(title string) *layout.Record {
	return &layout.Record{Format: layout.Format, Version: layout.FormatVersion, Title: title, MadeBy: "boughwork 0.0.0 (test)", Status: "optimal",
		Units:    layout.Units{Length: "m", Force: "kN", Stress: "MPa", Area: "m2", Volume: "m3"},
		Frame:    layout.RecordFrame{OriginLonLat: &[2]float64{-27.43, 46.21}, CRS: "EPSG:4326"},
		Material: layout.RecordMaterial{Name: "steel S355", TensionMPa: 355, CompressionMPa: 213, DensityKgM3: 7850}, Deck: "diaphragm",
		Cautions: layout.Cautions}
}

// metric takes the place on earth away from a record.
func metric(rec *layout.Record) *layout.Record {
	rec.Frame = layout.RecordFrame{CRS: "EPSG:28992", Projection: "local metres as given"}
	return rec
}

// tripod is a post on a hub on three legs, with a load on the post: in equilibrium with its weight.
func tripod() *layout.Record {
	rec := newRecord("Shelter over a spring (invented)")
	const radius, hub, top, load = 1.2, 2.0, 2.6, 12.0
	for i := range 3 {
		sin, cos := math.Sincos(2 * math.Pi * float64(i) / 3)
		rec.Nodes = append(rec.Nodes, layout.RecordNode{XYZ: [3]float64{radius * cos, radius * sin, 0}, Fixed: [3]bool{true, true, true}, Role: "footing"})
	}
	rec.Nodes = append(rec.Nodes, layout.RecordNode{XYZ: [3]float64{0, 0, hub}, Role: "inner"}, layout.RecordNode{XYZ: [3]float64{0, 0, top}, Role: "roof"})
	areas := []float64{3e-4, 3e-4, 3e-4, 8e-4}
	ends := [][2]int{{0, 3}, {1, 3}, {2, 3}, {3, 4}}
	for i := range ends {
		rec.Bars = append(rec.Bars, layout.RecordBar{Nodes: ends[i], AreaM2: areas[i]})
	}
	for _, g := range []float64{1.35, 1} {
		down := load * g
		rec.Cases = append(rec.Cases, layout.RecordCase{Name: fmt.Sprintf("%g Roofing", g), Gravity: g, Loads: [][4]float64{{4, 0, 0, -down}}, Governs: g > 1})
		post := g * barWeight(rec, rec.Bars[3])
		leg := g * barWeight(rec, rec.Bars[0])
		share := (down + post + 3*leg/2) / 3
		l := lengthOf(rec, rec.Bars[0])
		for i := range 3 {
			rec.Bars[i].ForceKN = append(rec.Bars[i].ForceKN, -share*l/hub)
		}
		rec.Bars[3].ForceKN = append(rec.Bars[3].ForceKN, -(down + post/2))
	}
	s := 1.5
	rec.Context.Roof = []layout.RecordRegion{{Name: "Shelter", Closed: true, Rings: [][][3]float64{{{-s, -s, top}, {s, -s, top}, {s, s, top}, {-s, s, top}}}}}
	for i := range 3 {
		rec.Context.Footings = append(rec.Context.Footings, layout.RecordRegion{Name: fmt.Sprintf("Pad %d", i+1), Rings: [][][3]float64{{rec.Nodes[i].XYZ}}})
	}
	finish(rec)
	return rec
}

// fan is feet and roof nodes of a held deck with one straight bar each: in equilibrium with any loads.
func fan(n int) *layout.Record {
	rec := newRecord("Fan (invented)")
	rec.Deck = "held"
	rec.Nodes = append(rec.Nodes, layout.RecordNode{Fixed: [3]bool{true, true, true}, Role: "footing"})
	for i := range n {
		x, y := float64(i%4)*3-4, float64(i/4)*2.5-3
		rec.Nodes = append(rec.Nodes, layout.RecordNode{XYZ: [3]float64{x, y, 5 + 0.1*x}, Fixed: [3]bool{true, true, false}, Role: "roof"})
		rec.Bars = append(rec.Bars, layout.RecordBar{Nodes: [2]int{i + 1, 0}, AreaM2: 1e-3 * float64(i+1)})
	}
	for k, g := range []float64{0, 1.35, 1} {
		c := layout.RecordCase{Name: fmt.Sprintf("Case, \"%d\"", k), Gravity: g, Governs: k == 1}
		for i := range n {
			load := [4]float64{float64(i + 1), 0.3 * float64(k), -0.2 * float64(i), -4 - float64(i*k) + 9*float64(k/2)}
			c.Loads = append(c.Loads, load)
			b := &rec.Bars[i]
			down := -load[3] + g*barWeight(rec, *b)/2
			b.ForceKN = append(b.ForceKN, -down*lengthOf(rec, *b)/rec.Nodes[i+1].XYZ[2])
		}
		rec.Cases = append(rec.Cases, c)
	}
	finish(rec)
	return rec
}

// plan says how grove lays out a big record.
type groveplan struct {
	title         string
	length, width float64
	step          float64 // of the roof nodes
	zones         []zoneplan
	height        func(x, y float64) float64
	branches      int // bars of each roof node down to crowns
	ties          bool
}

// zoneplan is a footing zone of nx x ny feet and as many crowns.
type zoneplan struct {
	name         string
	x, y, dx, dy float64
	nx, ny       int
	ground       float64
}

// canopy is 40 m x 20 m under a curved roof on three zones, with a lane and a tree.
func canopy(turn float64) *layout.Record {
	rec := grove(groveplan{title: "Canopy over a market and a landing (invented)", length: 40, width: 20, step: 4, branches: 3, ties: true,
		zones:  []zoneplan{{"Market floor", 4, 4, 6, 5, 3, 2, 0}, {"Quay wall", 6, 16.5, 8, 2, 3, 1, 0}, {"Pile cap", 30, 7, 6, 6, 2, 2, -0.6}},
		height: func(x, y float64) float64 { return 5.6 + 2.2*math.Sin(math.Pi*y/20) + 0.02*x }})
	lane := [][2]float64{{18, -14}, {24, -14}, {24, 34}, {18, 34}}
	var tree [][2]float64
	for i := range 12 {
		sin, cos := math.Sincos(2 * math.Pi * float64(i) / 12)
		tree = append(tree, [2]float64{13.5 + 2*cos, 13 + 2*sin})
	}
	rec.Candidates.KeepClear = []layout.RecordPrism{{Name: "Lane", Ring: closed(lane), FromM: 0, ToM: 4.5}, {Name: "Lime tree", Ring: closed(tree), FromM: 0, ToM: 14}}
	rec.Context.Walls = []layout.RecordRegion{{Name: "Harbour office", Rings: [][][3]float64{{{-2, 22, 0}, {16, 22, 0}, {16, 26, 0}}}}}
	turnRecord(rec, turn)
	return rec
}

// longRoof is 260 m x 30 m with about 1500 bars.
func longRoof(turn float64) *layout.Record {
	var zones []zoneplan
	for i := range 8 {
		zones = append(zones, zoneplan{fmt.Sprintf("Platform bay %d", i+1), 12 + 33*float64(i), 9, 10, 12, 2, 2, 0})
	}
	rec := grove(groveplan{title: "Roof over a tram station (invented)", length: 260, width: 30, step: 5, zones: zones, branches: 3, ties: true,
		height: func(x, y float64) float64 {
			return 8 + 2.5*math.Cos(2*math.Pi*x/65) - 1.5*math.Pow((y-15)/15, 2)
		}})
	rec.Candidates.KeepClear = []layout.RecordPrism{{Name: "Tracks", Ring: closed([][2]float64{{-20, 12}, {280, 12}, {280, 18}, {-20, 18}}), FromM: 0, ToM: 5.2}}
	turnRecord(rec, turn)
	return rec
}

func closed(ring [][2]float64) [][2]float64 { return append(ring, ring[0]) }

// grove makes roof nodes on a grid, crowns over the feet of each zone, and bars between the nearest of them.
func grove(p groveplan) *layout.Record {
	rec := newRecord(p.title)
	var roof, crowns, feet []int
	node := func(v geom.Vec, role string) int {
		f := role == "footing"
		rec.Nodes = append(rec.Nodes, layout.RecordNode{XYZ: v.Array(), Fixed: [3]bool{f, f, f}, Role: role})
		return len(rec.Nodes) - 1
	}
	nx, ny := int(p.length/p.step+.5), int(p.width/p.step+.5)
	for i := range nx + 1 {
		for j := range ny + 1 {
			x, y := p.length*float64(i)/float64(nx), p.width*float64(j)/float64(ny)
			roof = append(roof, node(geom.Vec{X: x, Y: y, Z: p.height(x, y)}, "roof"))
		}
	}
	var ring [][3]float64
	for _, c := range [][2]float64{{0, 0}, {p.length, 0}, {p.length, p.width}, {0, p.width}} {
		ring = append(ring, [3]float64{c[0], c[1], p.height(c[0], c[1])})
	}
	rec.Context.Roof = []layout.RecordRegion{{Name: "Roof", Closed: true, Rings: [][][3]float64{ring}}}
	for _, z := range p.zones {
		foot := layout.RecordFooting{Name: z.name}
		for i := range z.nx {
			for j := range z.ny {
				v := geom.Vec{X: z.x + z.dx*(float64(i)+.5)/float64(z.nx), Y: z.y + z.dy*(float64(j)+.5)/float64(z.ny), Z: z.ground}
				feet = append(feet, node(v, "footing"))
				foot.Nodes = append(foot.Nodes, feet[len(feet)-1])
				v.Z = z.ground + 0.45*p.height(v.X, v.Y)
				crowns = append(crowns, node(v, "inner"))
			}
		}
		rec.Footings = append(rec.Footings, foot)
		x0, x1, y0, y1 := z.x, z.x+z.dx, z.y, z.y+z.dy
		rec.Context.Footings = append(rec.Context.Footings, layout.RecordRegion{Name: z.name, Closed: true,
			Rings: [][][3]float64{{{x0, y0, z.ground}, {x1, y0, z.ground}, {x1, y1, z.ground}, {x0, y1, z.ground}}}})
	}
	names := []string{"1.35 Roofing + 1.5 Snow all + 0.9 Wind from seaward", "1.35 Roofing + 1.5 Snow landward half", "1.35 Roofing + 1.5 Snow seaward half",
		"1 Roofing + 1.5 Wind up", "1.35 Roofing + 1.5 Wind from seaward + 0.75 Snow all", "1.35 Roofing + 1.5 Wind from landward + 0.75 Snow all",
		"1.35 Roofing + 1.5 Wind along the quay", "1.35 Roofing", "1 Roofing + sideways 0.5 % east", "1 Roofing + sideways 0.5 % north"}
	down := []float64{1, 0.8, 0.75, -0.5, 0.7, 0.6, 0.6, 0.4, 0.35, 0.35}
	for k, name := range names {
		c := layout.RecordCase{Name: name, Gravity: 1, Governs: k < 5}
		for _, n := range roof {
			c.Loads = append(c.Loads, [4]float64{float64(n), 0, 0, -down[k] * p.step * p.step * 1.8})
		}
		rec.Cases = append(rec.Cases, c)
	}
	bar := func(a, b int, kn float64, tie bool) {
		d := at(rec, a).Sub(at(rec, b))
		q := kn * d.Norm() / math.Max(math.Abs(d.Z), 0.3*d.Norm())
		var forces []float64
		most := 0.0
		for k := range down {
			f := -q * down[k]
			if down[k] < 0 && len(rec.Bars)%6 > 0 { // wind lifts some of the bars only
				f = -q / 50
			}
			if tie {
				f = q * math.Abs(down[k])
			}
			forces = append(forces, f)
			most = math.Max(most, math.Max(f/355e3, -f/213e3))
		}
		rec.Bars = append(rec.Bars, layout.RecordBar{Nodes: [2]int{a, b}, AreaM2: most, ForceKN: forces})
	}
	carried := map[int]float64{}
	each := p.step * p.step * 1.8
	for i, n := range roof {
		for j, c := range nearest(rec, n, crowns, p.branches) {
			share := each / float64(int(2)<<j)
			carried[c] += share
			bar(n, c, share, false)
		}
		if p.ties && i+ny+1 < len(roof) {
			bar(n, roof[i+ny+1], each/6, true)
		}
	}
	for i, c := range crowns {
		bar(c, feet[i], carried[c]*0.6, false)
		for _, f := range nearest(rec, c, feet, 3)[1:] {
			bar(c, f, carried[c]*0.2, false)
		}
		for _, d := range nearest(rec, c, crowns, 3)[1:] {
			if d > c {
				bar(c, d, carried[c]*0.1, true)
			}
		}
	}
	finish(rec)
	return rec
}

// nearest returns the n nodes of a list that are nearest to a node, itself with them if it is there.
func nearest(rec *layout.Record, node int, list []int, n int) []int {
	sorted := append([]int(nil), list...)
	sort.SliceStable(sorted, func(i, j int) bool {
		return at(rec, sorted[i]).Sub(at(rec, node)).Norm() < at(rec, sorted[j]).Sub(at(rec, node)).Norm()
	})
	return sorted[:min(n, len(sorted))]
}

// finish fills in the certificate.
func finish(rec *layout.Record) {
	v := 0.0
	for _, b := range rec.Bars {
		v += lengthOf(rec, b) * b.AreaM2
	}
	rec.Certificate = layout.RecordCertificate{ObjectiveM3: v, VolumeM3: v, BoundM3: v * 0.9994, Gap: 0.0006}
}

// turnRecord turns a whole record about the origin by degrees anticlockwise.
func turnRecord(rec *layout.Record, degrees float64) {
	sin, cos := math.Sincos(degrees * math.Pi / 180)
	turn := func(x, y *float64) { *x, *y = cos**x-sin**y, sin**x+cos**y }
	for i := range rec.Nodes {
		turn(&rec.Nodes[i].XYZ[0], &rec.Nodes[i].XYZ[1])
	}
	for _, c := range rec.Cases {
		for i := range c.Loads {
			turn(&c.Loads[i][1], &c.Loads[i][2])
		}
	}
	for _, list := range [][]layout.RecordRegion{rec.Context.Roof, rec.Context.Footings, rec.Context.Walls} {
		for _, r := range list {
			for _, ring := range r.Rings {
				for i := range ring {
					turn(&ring[i][0], &ring[i][1])
				}
			}
		}
	}
	for _, p := range rec.Candidates.KeepClear {
		for _, ring := range append([][][2]float64{p.Ring}, p.Holes...) {
			for i := range ring {
				turn(&ring[i][0], &ring[i][1])
			}
		}
	}
}

// collapsed is a canopy that nothing holds sideways: its roof slides.
func collapsed() *layout.Record {
	rec := canopy(0)
	rec.Bars, rec.Status = nil, "no equilibrium"
	rec.Certificate = layout.RecordCertificate{}
	c := &layout.RecordCollapse{Case: rec.Cases[4].Name, WorkKJ: 41.2,
		Text: "No layout can carry the case \"1.35 Roofing + 1.5 Wind from seaward + 0.75 Snow all\": its loads drive the motion " +
			"that is drawn, and no candidate bar resists it. Footing zone Quay wall takes no uplift; allow uplift there or add a zone."}
	for i, n := range rec.Nodes {
		m := [3]float64{}
		if n.Role == "roof" {
			m = [3]float64{0, 1, 0.4 * (n.XYZ[1] - 10) / 10}
			if i%7 == 0 {
				c.Nodes = append(c.Nodes, i)
			}
		}
		c.Motion = append(c.Motion, m)
	}
	rec.Collapse = c
	return rec
}
