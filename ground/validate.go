package ground

import (
	"fmt"
	"math"

	"boughwork/geom"
)

// validate reports what is wrong with site and brief by themselves.
func (b *builder) validate() {
	b.validateSite()
	b.validateSpacings()
	b.validateZones()
	for i, a := range b.spec.Actions {
		b.validateAction(fmt.Sprintf("loads.actions[%d]", i), i, a)
	}
	if s := b.spec.SidewaysShare; !(s >= 0 && s <= 1) {
		b.issues.Add(geom.Error, "", "sideways_share", "the nominal sideways load is %v of the vertical; give a share from 0 to 1", s)
	}
}

func (b *builder) validateSite() {
	if len(b.site.Roofs) == 0 {
		b.issues.Add(geom.Error, "", "", "the site has no roof; add a polygon with role roof")
	}
	for _, r := range b.site.Roofs {
		if r.Surface == nil {
			b.issues.Add(geom.Error, r.Name, "", "the roof has no heights; give them in the site or the brief")
		}
		for _, reg := range r.Regions {
			if len(reg.Rings) == 0 || len(reg.Rings[0]) < 3 || !(geom.Area(reg.Polygon()) > 0) {
				b.issues.Add(geom.Error, r.Name, "", "the roof has a polygon without area; draw its outline with three corners or more")
			}
		}
		if len(r.Regions) == 0 {
			b.issues.Add(geom.Error, r.Name, "", "the roof has no polygon")
		}
	}
	for i, k := range b.site.Kept {
		if !(k.Area > 0) {
			b.issues.Add(geom.Error, k.Name, fmt.Sprintf("kept[%d].area", i), "a kept member needs an area above 0")
		}
	}
}

// validateSpacings checks the numbers of the grid and of the bars.
func (b *builder) validateSpacings() {
	s := b.spec
	positive := func(path string, v float64) {
		if !(v > 0) || math.IsInf(v, 1) {
			b.issues.Add(geom.Error, "", path, "is %v m; give a length above 0", v)
		}
	}
	positive("grid.deck_spacing_m", s.DeckSpacing)
	positive("grid.inner_spacing_m", s.InnerSpacing)
	positive("grid.inner_rise_m", s.InnerRise)
	positive("grid.foot_spacing_m", s.FootSpacing)
	if len(b.site.Walls) > 0 {
		positive("grid.wall_spacing_m", s.WallSpacing)
	}
	if !(s.MinLength >= 0) || !(s.MaxLength > s.MinLength) {
		b.issues.Add(geom.Error, "", "grid.longest_m", "bars may be %v m to %v m long; the longest must be above the shortest", s.MinLength, s.MaxLength)
	}
	if s.RoofBars == RoofBarsCosted && !(s.RoofFactor > 0) {
		b.issues.Add(geom.Error, "", "roof.bar_cost_factor", "is %v; give a cost factor above 0", s.RoofFactor)
	}
	if g := s.GridBearing; g != nil && (math.IsNaN(*g) || math.IsInf(*g, 0)) {
		b.issues.Add(geom.Error, "", "grid.bearing_deg", "is not a number; give degrees clockwise from north")
	}
}

// validateAction checks the values of one action.
func (b *builder) validateAction(path string, i int, a Action) {
	bad := func(path, format string, args ...any) { b.issues.Add(geom.Error, a.Name, path, format, args...) }
	for _, o := range b.spec.Actions[:i] {
		if o.Name == a.Name {
			bad(path+".name", "two actions are called %q; give each a name of its own", a.Name)
			break
		}
	}
	if a.Kind == Permanent && a.Group != "" {
		b.issues.Add(geom.Warning, a.Name, path+".group", "permanent actions always act; the group is ignored")
	}
	if a.Psi0 != nil && !(*a.Psi0 >= 0 && *a.Psi0 <= 1) {
		bad(path+".psi0", "is %v; a combination factor lies between 0 and 1", *a.Psi0)
	}
	finite := func(path string, vs ...float64) {
		for _, v := range vs {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				bad(path, "holds a number that is not finite")
				return
			}
		}
	}
	for j, l := range a.Area {
		p := fmt.Sprintf("%s.area[%d]", path, j)
		finite(p, append(l.Pattern.numbers(), l.Pressure, l.Bearing)...)
		b.validatePattern(a.Name, p, l.Pattern)
	}
	for j, l := range a.Edge {
		p := fmt.Sprintf("%s.edge[%d]", path, j)
		finite(p, append(l.Pattern.numbers(), l.Force, l.Bearing)...)
		b.validatePattern(a.Name, p, l.Pattern)
		if l.Direction == Normal {
			bad(p, "a load on an edge acts down or towards a bearing; an edge has no surface to be normal to")
		}
		if l.Windward && l.Direction != Towards {
			bad(p, "only a load towards a bearing can be on the windward edges")
		}
	}
	for j, l := range a.Point {
		finite(fmt.Sprintf("%s.point[%d]", path, j), l.At[0], l.At[1], l.Force.X, l.Force.Y, l.Force.Z)
	}
}

func (b *builder) validatePattern(feature, path string, p Pattern) {
	if n := len(p.Polygon); n > 0 && n < 3 {
		b.issues.Add(geom.Error, feature, path, "the polygon of the pattern has %d corners; give three or more", n)
	}
}

// numbers returns all numbers of a pattern.
func (p Pattern) numbers() []float64 {
	var out []float64
	if p.Half != nil {
		out = append(out, p.Half.Bearing)
		if t := p.Half.Through; t != nil {
			out = append(out, t[0], t[1])
		}
	}
	for _, q := range p.Polygon {
		out = append(out, q[0], q[1])
	}
	return out
}
