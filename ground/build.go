package ground

import (
	"fmt"

	"boughwork/geom"
)

// Build makes the ground structure of a study from its site and brief: nodes and supports, tributary loads, load cases.
// The rings of the site are open, without crossings, as geom reads them; site and spec are not changed. Issues of severity
// Error come with a nil structure, warnings with a structure. The same input gives the same structure, bit for bit.
func Build(site *geom.Site, spec Spec) (*Structure, geom.Issues) {
	b := &builder{site: site, spec: spec}
	if b.validate(); b.failed() {
		return nil, b.issues
	}
	b.prepare()
	if b.tooFine(); b.failed() {
		return nil, b.issues
	}
	if b.placeNodes(); b.failed() {
		return nil, b.issues
	}
	decks := make([]*deck, len(site.Roofs))
	for i := range decks {
		decks[i] = b.newDeck(i)
		for k, n := range decks[i].nodes {
			b.nodes[n].area += decks[i].plan[k]
		}
	}
	effects := b.apply(decks)
	b.reportEmpty(effects)
	cases := b.combine(effects)
	if len(cases) == 0 && !b.failed() {
		b.issues.Add(geom.Error, "", "loads", "there is no load case: give at least one action with a load on the roof")
	}
	if b.failed() {
		return nil, b.issues
	}
	return b.structure(cases), b.issues
}

func (b *builder) failed() bool { return b.issues.Err() != nil }

// prepare lays the grid.
func (b *builder) prepare() {
	s := b.spec
	b.keepClear, b.envelope = geom.NewObstacles(b.site.KeepClear), geom.NewEnvelope(b.site.Envelope)
	b.grid = newGridFrame(b.site.Roofs, s.GridBearing)
	b.near = index{size: max(s.InnerSpacing, keptSnap), cells: map[[2]int][]int{}}
	var all []area
	for _, r := range b.site.Roofs {
		var p roofPlan
		for _, reg := range r.Regions {
			p.areas = append(p.areas, b.grid.area(reg))
		}
		all = append(all, p.areas...)
		b.plans = append(b.plans, p)
	}
	b.extent = all
}

// placeNodes makes all nodes and kept members and puts them in order.
func (b *builder) placeNodes() {
	for k := range b.axes {
		b.axes[k] = fitAxis(k, b.extent, b.spec.DeckSpacing)
	}
	b.placeRoofNodes()
	b.placeFeet()
	b.placeWalls()
	b.placeKept()
	for k := range b.axes {
		lo, hi := b.supportRange(k)
		b.axes[k].fitInner(b.spec.InnerSpacing, lo, hi)
	}
	b.placeInner()
	b.order()
	if n := len(b.nodes); n > MaxNodes {
		b.tooMany(n)
	}
}

// reportEmpty warns of actions that put no load on any node.
func (b *builder) reportEmpty(effects []effect) {
	for i, a := range b.spec.Actions {
		switch loads := len(a.Area) + len(a.Edge) + len(a.Point); {
		case loads == 0 && a.Kind == Permanent && b.spec.SelfWeight:
			// Stands for the weight of the bars.
		case loads == 0:
			b.issues.Add(geom.Warning, a.Name, fmt.Sprintf("loads.actions[%d]", i), "the action has no loads and is left out; give it area, edge or point loads")
		case !effects[i].used:
			b.issues.Add(geom.Warning, a.Name, fmt.Sprintf("loads.actions[%d]", i), "the loads of the action come to nothing and it is left out; check its values")
		}
	}
}

// structure puts the result together.
func (b *builder) structure(cases []Case) *Structure {
	s := &Structure{
		Title: b.spec.Title, Frame: b.site.Frame, Cases: cases, Material: b.spec.Material, JointCost: b.spec.JointCost,
		Kept: b.kept, Deck: b.spec.Deck, Omitted: b.omitted,
		Rules: Rules{
			MinLength: b.spec.MinLength, MaxLength: b.spec.MaxLength, KeepClear: b.site.KeepClear, Envelope: b.site.Envelope,
			RoofBars: b.spec.RoofBars, RoofFactor: 1,
		},
	}
	if b.spec.RoofBars == RoofBarsCosted {
		s.Rules.RoofFactor = b.spec.RoofFactor
	}
	s.Zones = make([]Zone, len(b.site.Footings))
	for i, z := range b.site.Footings {
		s.Zones[i] = Zone{Name: z.Name, Limits: z.Limits}
	}
	for n, d := range b.nodes {
		s.Nodes = append(s.Nodes, d.Node)
		s.Tributary = append(s.Tributary, d.area)
		for _, z := range d.zones {
			s.Zones[z].Nodes = append(s.Zones[z].Nodes, n)
		}
	}
	if b.spec.Deck == DeckDiaphragm {
		s.Diaphragms = b.diaphragms()
	}
	return s
}
