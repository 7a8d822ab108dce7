package ground

import (
	"math"

	"boughwork/geom"
)

// MaxNodes is the largest number of nodes of a ground structure: 20 000 nodes have 200 million pairs, about what can be
// priced while somebody waits.
const MaxNodes = 20000

// supportRange returns the range of grid coordinate k over roofs and supports.
func (b *builder) supportRange(k int) (lo, hi float64) {
	lo, hi = math.Inf(1), math.Inf(-1)
	for _, a := range b.extent {
		l, h := a[0].box()
		lo, hi = math.Min(lo, l[k]), math.Max(hi, h[k])
	}
	for _, d := range b.nodes {
		if d.Role == Footing || d.Role == Wall {
			lo, hi = math.Min(lo, d.grid[k]), math.Max(hi, d.grid[k])
		}
	}
	return lo, hi
}

// tooFine rejects spacings that would make so many nodes that even placing them takes long.
func (b *builder) tooFine() {
	s := b.spec
	var plan, edge float64
	low, high := math.Inf(1), math.Inf(-1)
	for i, r := range b.site.Roofs {
		for j, reg := range r.Regions {
			plan += geom.Area(reg.Polygon())
			for k, ring := range reg.Rings {
				edge += b.plans[i].areas[j][k].length()
				for _, v := range ring {
					high = math.Max(high, r.Surface.Height(v.X, v.Y))
				}
			}
		}
	}
	var feet float64
	for _, z := range b.site.Footings {
		for _, reg := range z.Regions {
			feet += geom.Area(reg.Polygon()) / (s.FootSpacing * s.FootSpacing)
			low = math.Min(low, lowest(reg.Rings...))
		}
		for _, l := range z.Lines {
			feet += pathLength(l) / s.FootSpacing
			low = math.Min(low, lowest(l))
		}
	}
	var walls float64
	for _, w := range b.site.Walls {
		up := math.Max(1, (w.Top-lowest(w.Points))/s.WallSpacing)
		walls += pathLength(w.Points) / s.WallSpacing * up
	}
	b.limit("grid.deck_spacing_m", "roof nodes", s.DeckSpacing, plan/(s.DeckSpacing*s.DeckSpacing)+edge/s.DeckSpacing)
	levels := math.Max(1, (high-math.Min(low, high))/s.InnerRise)
	path, spacing := b.innerPath()
	b.limit(path, "inner nodes", spacing, plan/(s.InnerSpacing*s.InnerSpacing)*levels)
	b.limit("grid.foot_spacing_m", "foot positions", s.FootSpacing, feet)
	b.limit("grid.wall_spacing_m", "wall nodes", s.WallSpacing, walls)
}

// innerPath returns which of the two spacings of inner nodes is to blame for their number.
func (b *builder) innerPath() (path string, spacing float64) {
	if b.spec.InnerRise < b.spec.InnerSpacing/2 {
		return "grid.inner_rise_m", b.spec.InnerRise
	}
	return "grid.inner_spacing_m", b.spec.InnerSpacing
}

// lowest returns the lowest height of some places; +Inf if there are none.
func lowest(lines ...[]geom.Vec) float64 {
	z := math.Inf(1)
	for _, l := range lines {
		for _, v := range l {
			z = math.Min(z, v.Z)
		}
	}
	return z
}

// pathLength returns the length of a polyline.
func pathLength(vs []geom.Vec) float64 {
	var l float64
	for i := 1; i < len(vs); i++ {
		l += vs[i].Sub(vs[i-1]).Norm()
	}
	return l
}

// limit reports a number of nodes that is above MaxNodes, with a spacing that would fit.
func (b *builder) limit(path, what string, spacing, n float64) {
	if n <= MaxNodes {
		return
	}
	fits := fitting(path, spacing, n/MaxNodes)
	b.issues.Add(geom.Error, "", path, "%v m makes about %.0f %s; at most %d nodes are allowed. %v m would fit", spacing, n, what, MaxNodes, fits)
}

// tooMany reports a ground structure with too many nodes, with the spacing of its most numerous kind that would fit.
func (b *builder) tooMany(n int) {
	var count [4]float64
	for _, d := range b.nodes {
		count[d.Role]++
	}
	role := Inner
	for _, r := range [...]Role{RoofPt, Footing, Wall} {
		if count[r] > count[role] {
			role = r
		}
	}
	path := [...]string{"", "grid.deck_spacing_m", "grid.foot_spacing_m", "grid.wall_spacing_m"}[role]
	spacing := [...]float64{0, b.spec.DeckSpacing, b.spec.FootSpacing, b.spec.WallSpacing}[role]
	if role == Inner {
		path, spacing = b.innerPath()
	}
	room := math.Max(MaxNodes-(float64(n)-count[role]), MaxNodes/10)
	b.issues.Add(geom.Error, "", path, "the ground structure has %d nodes, %.0f of them %s nodes; at most %d are allowed. %v m would fit",
		n, count[role], role, MaxNodes, fitting(path, spacing, count[role]/room))
}

// fitting returns the spacing, to the next decimetre, that makes so many times fewer nodes. Their number falls with the
// rise, and with the square of the other spacings.
func fitting(path string, spacing, times float64) float64 {
	if path != "grid.inner_rise_m" {
		times = math.Sqrt(times)
	}
	return math.Ceil(10*spacing*times) / 10
}
