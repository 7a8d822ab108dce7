package ground

import (
	"math"

	"boughwork/geom"
)

// curvedPieces is the number of pieces along each side of the box round a cell in which a roof that is not plane is
// loaded. A cell of 4 m has pieces of 1 m; within one the surface counts as plane. What is conserved is the resultant of
// these pieces.
const curvedPieces = 4

// sameSlope is the difference of slopes (rise over run) below which a roof counts as plane within a cell.
const sameSlope = 1e-9

// deck is a roof as a load carrier, in plan coordinates from a near origin (not turned: x east, y north).
type deck struct {
	origin  geom.Vec
	surface geom.Surface
	areas   []area
	rings   [][][]ringStop // nodes (indices into nodes) along every ring of every area
	nodes   []int          // numbers in the structure
	at      []geom.Vec     // their places from origin
	cells   []cell         // Voronoi cells, clipped to the box round the roof
	index   *index         // of at
	plan    []float64      // tributary area of each node, m2
	reach   float64        // deck spacing, m
	needed  float64        // least radius of gyration of the nodes that take up a moment, m
	whole   []piece        // pieces of the whole roof
}

// piece is a part of the roof within one cell.
type piece struct {
	node   int // index into deck.nodes
	area   float64
	at     geom.Vec // centroid, with the height of the surface
	zx, zy float64  // slope of the surface there
}

// newDeck returns roof i as a load carrier. Called after the nodes are in order.
func (b *builder) newDeck(i int) *deck {
	r, p := b.site.Roofs[i], b.plans[i]
	d := &deck{surface: r.Surface, nodes: p.nodes, reach: b.spec.DeckSpacing}
	d.origin = b.nodes[p.nodes[0]].At
	flat := gridFrame{ox: d.origin.X, oy: d.origin.Y, c: 1}
	for _, reg := range r.Regions {
		d.areas = append(d.areas, flat.area(reg))
	}
	local := make(map[int]int, len(p.nodes))
	for k, n := range p.nodes {
		d.at = append(d.at, b.nodes[n].At.Sub(d.origin))
		local[n] = k
	}
	for _, rings := range p.rings {
		d.rings = append(d.rings, mapped(rings, func(stops []ringStop) []ringStop {
			return mapped(stops, func(s ringStop) ringStop { return ringStop{s.along, local[s.node]} })
		}))
	}
	d.index = planIndex(d.at, d.box())
	d.cells = voronoi(d.at, d.box(), d.index)
	d.whole = d.pieces(Pattern{})
	d.plan = make([]float64, len(d.nodes))
	for _, p := range d.whole {
		d.plan[p.node] += p.area
	}
	d.needed = math.Min(spread*d.reach, narrow*d.gyration(d.plan))
	return d
}

// box returns the rectangle round the roof and its nodes, with a margin, as a ring.
func (d *deck) box() ring {
	var all ring
	for _, a := range d.areas {
		all = append(all, a[0]...)
	}
	for _, v := range d.at {
		all = append(all, pt{v.X, v.Y})
	}
	lo, hi := all.box()
	return ring{{lo[0] - 1, lo[1] - 1}, {hi[0] + 1, lo[1] - 1}, {hi[0] + 1, hi[1] + 1}, {lo[0] - 1, hi[1] + 1}}
}

// voronoi returns for every node the part of a convex ring that is nearer to it in plan than to any other (Voronoi 1908),
// cut by the bisectors with the nodes around it, near ones first, until no further one can reach the cell.
func voronoi(at []geom.Vec, box ring, x *index) []cell {
	cells := make([]cell, len(at))
	for i, v := range at {
		p := pt{v.X, v.Y}
		c := cell{box, box.halves()}
		for k := 0; ; k++ {
			var far float64
			for _, q := range c.ring {
				far = math.Max(far, distance(p, q))
			}
			// The nodes in rings of cells up to k are all those within (k - 1) cells, at least.
			if float64(k-1)*x.size > 2*far {
				break
			}
			for _, j := range x.around(p, k) {
				q := pt{at[j].X, at[j].Y}
				n := pt{q[0] - p[0], q[1] - p[1]}
				if n == (pt{}) {
					continue
				}
				c = c.cut(half{n, (n[0]*(p[0]+q[0]) + n[1]*(p[1]+q[1])) / 2})
			}
		}
		cells[i] = c
	}
	return cells
}

// planIndex returns an index of places with about one to a cell.
func planIndex(at []geom.Vec, box ring) *index {
	lo, hi := box.box()
	x := &index{size: math.Sqrt((hi[0] - lo[0]) * (hi[1] - lo[1]) / float64(len(at))), cells: map[[2]int][]int{}}
	for i, v := range at {
		x.add(pt{v.X, v.Y}, i)
	}
	return x
}

// around returns the entries in the square ring of cells k steps away from that of p, in a fixed order.
func (x *index) around(p pt, k int) []int {
	c := x.cell(p)
	var out []int
	for i := -k; i <= k; i++ {
		for j := -k; j <= k; j++ {
			if max(i, -i, j, -j) == k {
				out = append(out, x.cells[[2]int{c[0] + i, c[1] + j}]...)
			}
		}
	}
	return out
}

// pieces returns the parts of the roof that a pattern covers, cell by cell.
func (d *deck) pieces(pattern Pattern) []piece {
	if d.whole != nil && pattern.Half == nil && len(pattern.Polygon) == 0 {
		return d.whole
	}
	mask := d.mask(pattern)
	var out []piece
	for i, whole := range d.cells {
		c := pt{d.at[i].X, d.at[i].Y}
		for _, part := range d.divide(whole) {
			var s integrals
			for _, m := range mask(part) {
				for _, a := range d.areas {
					for _, r := range a {
						s = s.add(m.sign, r.clipAll(m.cell.inner).about(c))
					}
				}
			}
			if s.area > noArea*d.reach*d.reach {
				out = append(out, d.piece(i, c, s))
			}
		}
	}
	return out
}

// noArea is the area, in units of the deck spacing squared, below which a piece is rounding.
const noArea = 1e-13

// piece returns the piece of node i with integrals about c.
func (d *deck) piece(i int, c pt, s integrals) piece {
	at := geom.Vec{X: c[0] + s.mx/s.area, Y: c[1] + s.my/s.area}
	x, y := at.X+d.origin.X, at.Y+d.origin.Y
	at.Z = d.surface.Height(x, y) - d.origin.Z
	zx, zy := d.surface.Gradient(x, y)
	return piece{node: i, area: s.area, at: at, zx: zx, zy: zy}
}

// divide cuts a cell into pieces small enough for the surface to be plane in each.
func (d *deck) divide(c cell) []cell {
	if len(c.ring) == 0 {
		return nil
	}
	lo, hi := c.ring.box()
	if d.plane(c.ring, lo, hi) {
		return []cell{c}
	}
	var out []cell
	us, vs := evenly(lo[0], hi[0], curvedPieces), evenly(lo[1], hi[1], curvedPieces)
	for j := range curvedPieces {
		for i := range curvedPieces {
			piece := c.cut(half{pt{-1, 0}, -us[i]}, half{pt{1, 0}, us[i+1]}, half{pt{0, -1}, -vs[j]}, half{pt{0, 1}, vs[j+1]})
			if piece.ring != nil {
				out = append(out, piece)
			}
		}
	}
	return out
}

// plane reports whether the slope of the surface is the same at the corners of a cell, at its middle and around it.
func (d *deck) plane(r ring, lo, hi pt) bool {
	m := pt{(lo[0] + hi[0]) / 2, (lo[1] + hi[1]) / 2}
	zx, zy := d.surface.Gradient(m[0]+d.origin.X, m[1]+d.origin.Y)
	for _, p := range r {
		for _, s := range [...]float64{0.4, 0.7, 1} {
			x, y := m[0]+s*(p[0]-m[0])+d.origin.X, m[1]+s*(p[1]-m[1])+d.origin.Y
			if gx, gy := d.surface.Gradient(x, y); math.Abs(gx-zx) > sameSlope || math.Abs(gy-zy) > sameSlope {
				return false
			}
		}
	}
	return true
}
