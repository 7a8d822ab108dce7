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

// tooFine rejects spacings that would make so many nodes that even counting them takes long.
func (b *builder) tooFine() {
	s := b.spec
	var plan, edge, height float64
	for i, r := range b.site.Roofs {
		for _, reg := range r.Regions {
			plan += geom.Area(reg.Polygon())
			edge += b.plans[i].areas[0][0].length()
			for _, v := range reg.Rings[0] {
				height = math.Max(height, math.Abs(r.Surface.Height(v.X, v.Y)))
			}
		}
	}
	b.limit("grid.deck_spacing_m", "roof nodes", s.DeckSpacing, plan/(s.DeckSpacing*s.DeckSpacing)+edge/s.DeckSpacing, 2)
	b.limit("grid.inner_spacing_m", "inner nodes", s.InnerSpacing, plan/(s.InnerSpacing*s.InnerSpacing), 2)
	var feet float64
	for _, z := range b.site.Footings {
		for _, reg := range z.Regions {
			feet += geom.Area(reg.Polygon())
		}
	}
	b.limit("grid.foot_spacing_m", "foot positions", s.FootSpacing, feet/(s.FootSpacing*s.FootSpacing), 2)
}

// limit reports a number of nodes, which grows with 1/spacing to a power, that is above MaxNodes.
func (b *builder) limit(path, what string, spacing, n, power float64) {
	if n <= MaxNodes {
		return
	}
	fits := math.Ceil(10*spacing*math.Pow(n/MaxNodes, 1/power)) / 10
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
	path := [...]string{"grid.inner_spacing_m", "grid.deck_spacing_m", "grid.foot_spacing_m", "grid.wall_spacing_m"}[role]
	spacing := [...]float64{b.spec.InnerSpacing, b.spec.DeckSpacing, b.spec.FootSpacing, b.spec.WallSpacing}[role]
	room := math.Max(MaxNodes-(float64(n)-count[role]), MaxNodes/10)
	fits := math.Ceil(10*spacing*math.Sqrt(count[role]/room)) / 10
	b.issues.Add(geom.Error, "", path, "the ground structure has %d nodes, %.0f of them %s nodes; at most %d are allowed. %v m would fit",
		n, count[role], role, MaxNodes, fits)
}
