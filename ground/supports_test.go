package ground

import (
	"math"
	"strings"
	"testing"

	"boughwork/geom"
)

func TestFootPositions(t *testing.T) {
	cases := []struct {
		name string
		zone geom.Zone
		want []geom.Vec
	}{
		{"one in a small pad", pad("z", 0, box(4, 4, 5, 5)), []geom.Vec{{X: 4.5, Y: 4.5}}},
		{"two by three", pad("z", 0.5, box(2, 2, 6, 8)), []geom.Vec{
			{X: 3, Y: 3, Z: 0.5}, {X: 5, Y: 3, Z: 0.5}, {X: 3, Y: 5, Z: 0.5}, {X: 5, Y: 5, Z: 0.5}, {X: 3, Y: 7, Z: 0.5}, {X: 5, Y: 7, Z: 0.5}}},
		{"points as they are", geom.Zone{Name: "z", Points: []geom.Vec{{X: 3, Y: 2, Z: 1}}}, []geom.Vec{{X: 3, Y: 2, Z: 1}}},
		{"along a line that climbs", geom.Zone{Name: "z", Lines: [][]geom.Vec{{{X: 2, Y: 2}, {X: 6, Y: 2, Z: 1}}}},
			[]geom.Vec{{X: 2, Y: 2}, {X: 4, Y: 2, Z: 0.5}, {X: 6, Y: 2, Z: 1}}},
		{"on sloping ground", geom.Zone{Name: "z", Regions: []geom.Region{{Rings: [][]geom.Vec{{
			{X: 2, Y: 2}, {X: 6, Y: 2, Z: 0.4}, {X: 6, Y: 4, Z: 0.4}, {X: 2, Y: 4}}}}}},
			[]geom.Vec{{X: 3, Y: 3, Z: 0.1}, {X: 5, Y: 3, Z: 0.3}}},
	}
	for _, c := range cases {
		site := hall()
		site.Footings = []geom.Zone{c.zone}
		s := mustBuild(t, site, plainSpec())
		if len(s.Zones[0].Nodes) != len(c.want) {
			t.Errorf("%s: %d feet, want %d", c.name, len(s.Zones[0].Nodes), len(c.want))
			continue
		}
		for k, n := range s.Zones[0].Nodes {
			if d := s.Nodes[n].At.Sub(c.want[k]).Norm(); d > 1e-9 {
				t.Errorf("%s: foot %d at %v, want %v", c.name, k, s.Nodes[n].At, c.want[k])
			}
			if s.Nodes[n].Fixed != [3]bool{true, true, true} || s.Nodes[n].Role != Footing {
				t.Errorf("%s: foot %d is %v", c.name, k, s.Nodes[n])
			}
		}
	}
}

// A horseshoe has its centroid outside and cells too large to fall inside: its foot must be inside all the same.
func TestFootOfAHorseshoe(t *testing.T) {
	site := hall()
	shoe := [][2]float64{{10, 5}, {20, 5}, {20, 15}, {10, 15}, {10, 14.5}, {19.5, 14.5}, {19.5, 5.5}, {10, 5.5}}
	site.Footings = []geom.Zone{pad("shoe", 0, shoe)}
	spec := plainSpec()
	spec.FootSpacing = 30
	s := mustBuild(t, site, spec)
	if len(s.Zones[0].Nodes) != 1 {
		t.Fatalf("%d feet, want 1", len(s.Zones[0].Nodes))
	}
	at := s.Nodes[s.Zones[0].Nodes[0]].At
	if !geom.ContainsStrictly(site.Footings[0].Regions[0].Polygon(), [2]float64{at.X, at.Y}, 0.1) {
		t.Errorf("the foot at %v is not inside", at)
	}
}

func TestLimitsOfZones(t *testing.T) {
	site := hall()
	site.Footings[0].Limits.NoUplift = true
	spec := plainSpec()
	most := 5e4
	spec.Limits = map[string]geom.FootLimits{"east pad": {VerticalOnly: true, Vertical: &most}}
	s := mustBuild(t, site, spec)
	if !s.Zones[0].Limits.NoUplift || !s.Zones[1].Limits.VerticalOnly || *s.Zones[1].Limits.Vertical != most {
		t.Errorf("limits %+v, %+v", s.Zones[0].Limits, s.Zones[1].Limits)
	}
	for _, n := range s.Zones[1].Nodes {
		if s.Nodes[n].Fixed != [3]bool{false, false, true} {
			t.Errorf("a vertical-only foot is fixed in %v", s.Nodes[n].Fixed)
		}
	}
	if site.Footings[1].Limits.VerticalOnly {
		t.Error("Build changed the limits in the site")
	}
	spec.Limits = map[string]geom.FootLimits{"east pat": {}}
	if _, issues := Build(site, spec); !strings.Contains(joined(issues), "did you mean east pad?") {
		t.Errorf("an unknown zone is not answered with the nearest: %v", issues)
	}
}

func TestWalls(t *testing.T) {
	site := hall()
	site.Walls = []geom.Line{{Name: "wall", Points: vecs(0, [2]float64{-3, 0}, [2]float64{-3, 20}), Top: 5}}
	s := mustBuild(t, site, plainSpec())
	// 10 panels of 2 m along, 3 rises of 1.67 m.
	if got := s.Count(Wall); got != 11*4 {
		t.Errorf("%d wall nodes, want 44", got)
	}
	for _, n := range s.Nodes {
		if n.Role == Wall && n.Fixed != [3]bool{true, true, true} {
			t.Errorf("wall node %v is fixed in %v", n.At, n.Fixed)
		}
	}
}

// A wall under the roof's edge, up to its height, holds the roof nodes on it instead of doubling them. A diaphragm keeps
// its freedom in plan.
func TestRoofOnTopOfAWall(t *testing.T) {
	for _, c := range []struct {
		deck Deck
		want [3]bool
	}{{DeckFree, [3]bool{true, true, true}}, {DeckDiaphragm, [3]bool{false, false, true}}} {
		site, spec := hall(), plainSpec()
		spec.Deck = c.deck
		site.Walls = []geom.Line{{Name: "wall", Points: vecs(0, [2]float64{0, 0}, [2]float64{0, 20}), Top: 7}}
		s := mustBuild(t, site, spec)
		if s.Count(RoofPt) != 66 {
			t.Errorf("%d roof nodes, want 66", s.Count(RoofPt))
		}
		for i, n := range s.Nodes {
			if n.Role == RoofPt && n.At.X == 0 && n.Fixed != c.want {
				t.Errorf("deck %s: roof node %v on the wall is fixed in %v", c.deck, n.At, n.Fixed)
			}
			for _, o := range s.Nodes[:i] {
				if o.At.Sub(n.At).Norm() < sameNode {
					t.Errorf("two nodes at %v", n.At)
				}
			}
		}
	}
}

func TestKeptMembers(t *testing.T) {
	site := hall()
	site.Kept = []geom.Line{
		// From a pad, not on any of its foot positions, to a roof node 5 cm beside it.
		{Name: "post", Area: 0.002, Points: []geom.Vec{{X: 10.4, Y: 10.3}, {X: 12, Y: 12.05, Z: 7}}},
		// A polyline in mid-air.
		{Name: "frame", Area: 0.003, Points: []geom.Vec{{X: 5, Y: 5, Z: 3.1}, {X: 9.1, Y: 5, Z: 4}, {X: 12, Y: 4, Z: 7}}},
	}
	s, issues := Build(site, plainSpec())
	if s == nil {
		t.Fatal(issues)
	}
	if len(s.Kept) != 3 {
		t.Fatalf("%d kept members, want 3: %v", len(s.Kept), issues)
	}
	foot, head := s.Nodes[s.Kept[0].A], s.Nodes[s.Kept[0].B]
	if foot.Role != Footing || foot.Fixed != [3]bool{true, true, true} || foot.At != (geom.Vec{X: 10.4, Y: 10.3}) {
		t.Errorf("the foot of the post is %v", foot)
	}
	if got := len(s.Zones[0].Nodes); got != 5 {
		t.Errorf("the west pad has %d feet, want its 4 and the post's", got)
	}
	if head.Role != RoofPt || head.At != (geom.Vec{X: 12, Y: 12, Z: 7}) {
		t.Errorf("the head of the post is %v", head)
	}
	if s.Kept[1].B != s.Kept[2].A || s.Nodes[s.Kept[1].B].Role != Inner || s.Kept[2].Area != 0.003 {
		t.Errorf("the frame is %v", s.Kept[1:])
	}
	if s.Nodes[s.Kept[2].B].Role != RoofPt {
		t.Errorf("the frame ends at %v", s.Nodes[s.Kept[2].B])
	}
	for _, n := range s.Nodes {
		if n.Role == Inner && n.At != s.Nodes[s.Kept[1].A].At && n.At.Sub(s.Nodes[s.Kept[1].A].At).Norm() < 0.5 {
			t.Errorf("inner node %v crowds the end of a kept member", n.At)
		}
	}
}

func TestKeptMemberOutside(t *testing.T) {
	site := hall()
	site.Kept = []geom.Line{{Name: "stray", Area: 0.002, Points: []geom.Vec{{X: 70, Y: 10, Z: 2}, {X: 40, Y: 8, Z: 9}}}}
	_, issues := Build(site, plainSpec())
	text := joined(issues)
	for _, want := range []string{"outside roofs and supports at (70.00, 10.00)", "2.00 m above the roof at (40.00, 8.00)"} {
		if !strings.Contains(text, want) {
			t.Errorf("no issue says %q:\n%s", want, text)
		}
	}
	site.Kept[0].Area = 0
	if _, issues = Build(site, plainSpec()); issues.Err() == nil {
		t.Error("a kept member without area is accepted")
	}
}

func TestBadInput(t *testing.T) {
	nan := math.NaN()
	for _, c := range []struct {
		name   string
		change func(*geom.Site, *Spec)
		want   string
	}{
		{"deck spacing 0", func(_ *geom.Site, s *Spec) { s.DeckSpacing = 0 }, "grid.deck_spacing_m"},
		{"inner spacing NaN", func(_ *geom.Site, s *Spec) { s.InnerSpacing = nan }, "grid.inner_spacing_m"},
		{"rise below 0", func(_ *geom.Site, s *Spec) { s.InnerRise = -1 }, "grid.inner_rise_m"},
		{"foot spacing 0", func(_ *geom.Site, s *Spec) { s.FootSpacing = 0 }, "grid.foot_spacing_m"},
		{"longest below shortest", func(_ *geom.Site, s *Spec) { s.MaxLength = 0.1 }, "grid.longest_m"},
		{"deck far too fine", func(_ *geom.Site, s *Spec) { s.DeckSpacing = 0.05 }, "would fit"},
		{"inner too fine", func(_ *geom.Site, s *Spec) { s.InnerSpacing = 0.1 }, "would fit"},
		{"rise far too fine", func(_ *geom.Site, s *Spec) { s.InnerRise = 0.001 }, "grid.inner_rise_m"},
		{"no roof", func(s *geom.Site, _ *Spec) { s.Roofs = nil }, "no roof"},
		{"no place to stand", func(s *geom.Site, _ *Spec) { s.Footings = nil }, "no place to stand"},
		{"no action", func(_ *geom.Site, s *Spec) { s.Actions = nil }, "no load case"},
		{"psi0 above 1", func(_ *geom.Site, s *Spec) { v := 1.5; s.Actions[0].Psi0 = &v }, "loads.actions[0].psi0"},
		{"names twice", func(_ *geom.Site, s *Spec) { s.Actions = append(s.Actions, s.Actions[0]) }, `two actions are called "dead"`},
		{"pressure NaN", func(_ *geom.Site, s *Spec) { s.Actions[0].Area[0].Pressure = nan }, "loads.actions[0].area[0]"},
		{"point off the roof", func(_ *geom.Site, s *Spec) {
			s.Actions[0].Point = []PointLoad{{At: [2]float64{50, 5}, Force: geom.Vec{Z: -1}}}
		}, "loads.actions[0].point[0]"},
		{"normal load on an edge", func(_ *geom.Site, s *Spec) { s.Actions[0].Edge = []EdgeLoad{{Force: 1, Direction: Normal}} }, "loads.actions[0].edge[0]"},
		{"polygon of two corners", func(_ *geom.Site, s *Spec) {
			s.Actions[0].Area[0].Pattern.Polygon = [][2]float64{{0, 0}, {1, 1}}
		}, "2 corners"},
		{"share above 1", func(_ *geom.Site, s *Spec) { s.SidewaysShare = 1.1 }, "sideways_share"},
		{"unknown action in a case", func(_ *geom.Site, s *Spec) {
			s.Combination, s.Cases = CombineListed, []UserCase{{Name: "a", Factors: map[string]float64{"daed": 1}}}
		}, "did you mean dead?"},
		{"roof all in a keep-clear", func(s *geom.Site, _ *Spec) {
			s.KeepClear = []geom.Prism{{Polygon: geom.Region{Rings: [][]geom.Vec{vecs(0, box(-1, -1, 41, 21)...)}}.Polygon(), From: 5, To: 9}}
		}, "only 0 roof nodes are left"},
	} {
		site, spec := hall(), plainSpec()
		c.change(site, &spec)
		s, issues := Build(site, spec)
		if s != nil || !strings.Contains(joined(issues), c.want) {
			t.Errorf("%s: structure %v, issues %v; want an error with %q", c.name, s != nil, issues, c.want)
		}
	}
}

func TestWarnings(t *testing.T) {
	half := HalfPlane{Through: &[2]float64{60, 0}, Bearing: 90}
	site, spec := hall(), plainSpec()
	spec.Actions = append(spec.Actions,
		Action{Name: "nothing", Kind: Snow},
		Action{Name: "elsewhere", Kind: Snow, Area: []AreaLoad{{Pressure: 100, Pattern: Pattern{Half: &half}}}},
		Action{Name: "zero", Kind: Snow, Area: []AreaLoad{{}}},
	)
	s, issues := Build(site, spec)
	if s == nil {
		t.Fatal(issues)
	}
	text := joined(issues)
	for _, want := range []string{"nothing: loads.actions[1]", "loads.actions[2].area[0]: the pattern covers no part", "zero: loads.actions[3]"} {
		if !strings.Contains(text, want) {
			t.Errorf("no warning says %q:\n%s", want, text)
		}
	}
	if len(s.Cases) != 1 {
		t.Errorf("%d cases, want dead load alone", len(s.Cases))
	}
}
