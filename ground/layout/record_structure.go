package layout

import (
	"fmt"

	"boughwork/geom"
	"boughwork/ground"
)

// Structure rebuilds the ground structure that the record was made from, in SI units.
func (r *Record) Structure() (*ground.Structure, error) {
	s := &ground.Structure{Title: r.Title, JointCost: r.JointCostM,
		Material: ground.Material{Name: r.Material.Name, Tension: r.Material.TensionMPa * mega, Compression: r.Material.CompressionMPa * mega, Density: r.Material.DensityKgM3},
		Rules: ground.Rules{MinLength: r.Candidates.MinLengthM, MaxLength: r.Candidates.MaxLengthM, RoofFactor: r.Candidates.RoofFactor,
			KeepClear: prisms(r.Candidates.KeepClear), Envelope: prisms(r.Candidates.Envelope)}}
	if o := r.Frame.OriginLonLat; o != nil {
		s.Frame = geom.Frame{Geographic: true, Lon: o[0], Lat: o[1]}
	}
	s.Frame.CRS = r.Frame.CRS
	var err error
	if s.Deck, err = word(r.Deck, "deck", ground.DeckFree, ground.DeckDiaphragm, ground.DeckHeld); err != nil {
		return nil, err
	}
	if s.Rules.RoofBars, err = word(r.Candidates.RoofBars, "roof_bars", ground.RoofBarsAllowed, ground.RoofBarsCosted, ground.RoofBarsExcluded); err != nil {
		return nil, err
	}
	for i, n := range r.Nodes {
		role, err := word(n.Role, fmt.Sprintf("nodes[%d].role", i), ground.Inner, ground.RoofPt, ground.Footing, ground.Wall)
		if err != nil {
			return nil, err
		}
		s.Nodes = append(s.Nodes, ground.Node{At: geom.FromArray(n.XYZ), Fixed: n.Fixed, Role: role})
	}
	for _, c := range r.Cases {
		sc := ground.Case{Name: c.Name, Gravity: c.Gravity}
		for _, l := range c.Loads {
			sc.Loads = append(sc.Loads, ground.NodeLoad{Node: int(l[0]), Force: geom.Vec{X: l[1], Y: l[2], Z: l[3]}.Scale(kilo)})
		}
		s.Cases = append(s.Cases, sc)
	}
	for _, d := range r.Diaphragms {
		s.Diaphragms = append(s.Diaphragms, d.Nodes)
	}
	for _, f := range r.Footings {
		n := func(kn *float64) *float64 {
			if kn == nil {
				return nil
			}
			v := *kn * kilo
			return &v
		}
		s.Zones = append(s.Zones, ground.Zone{Name: f.Name, Nodes: f.Nodes, Limits: geom.FootLimits{NoUplift: f.NoUplift, VerticalOnly: f.VerticalOnly,
			Vertical: n(f.VerticalKN), Uplift: n(f.UpliftKN), Sideways: n(f.SidewaysKN), Cost: f.CostM3PerKN / kilo}})
	}
	for _, k := range r.Candidates.Kept {
		s.Kept = append(s.Kept, ground.Kept{A: k.Nodes[0], B: k.Nodes[1], Area: k.AreaM2})
	}
	return s, validate(s)
}

// word returns the one of several values that prints as text.
func word[T fmt.Stringer](text, what string, values ...T) (T, error) {
	for _, v := range values {
		if v.String() == text {
			return v, nil
		}
	}
	return values[0], fmt.Errorf("layout: record: %s %q: want one of %v", what, text, values)
}

func prisms(ps []RecordPrism) []geom.Prism {
	var out []geom.Prism
	for _, p := range ps {
		g := geom.Prism{Name: p.Name, From: p.FromM, To: p.ToM}
		var plan geom.Region
		for _, ring := range append([][][2]float64{p.Ring}, p.Holes...) {
			var open []geom.Vec
			for _, v := range ring[:max(0, len(ring)-1)] {
				open = append(open, geom.Vec{X: v[0], Y: v[1]})
			}
			plan.Rings = append(plan.Rings, open)
		}
		g.Polygon = plan.Polygon()
		out = append(out, g)
	}
	return out
}
