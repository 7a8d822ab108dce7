package ground

import (
	"fmt"
	"math"

	"boughwork/geom"
)

// effect is what an action does to the nodes, at its characteristic value.
type effect struct {
	force []geom.Vec // per node of the structure
	total geom.Vec   // resultant force
	gross float64    // sum of magnitudes, N
	// whole is true if the action presses down on every part of the roof and nowhere up or sideways.
	whole bool
	used  bool // some node has a force
}

// netShare is the share of the gross load from which a net upward or sideways force counts as one.
const netShare = 1e-9

// relieves reports whether a net force of the action acts upwards or sideways, so that a heavy roof may help.
func (e effect) relieves() bool {
	return e.total.Z > netShare*e.gross || math.Hypot(e.total.X, e.total.Y) > netShare*e.gross
}

// apply puts every action on the nodes, and says which of its loads have no place on the roof.
func (b *builder) apply(decks []*deck) []effect {
	out := make([]effect, len(b.spec.Actions))
	for i, a := range b.spec.Actions {
		e := effect{force: make([]geom.Vec, len(b.nodes))}
		path := fmt.Sprintf("loads.actions[%d]", i)
		put := func(f []geom.Vec, d *deck) {
			for k, n := range d.nodes {
				e.force[n] = e.force[n].Add(f[k])
			}
		}
		for j, l := range a.Area {
			covers := false
			for _, d := range decks {
				f := make([]geom.Vec, len(d.nodes))
				covers = d.loadArea(l, f) || covers
				put(f, d)
			}
			if !covers {
				b.issues.Add(geom.Warning, a.Name, fmt.Sprintf("%s.area[%d]", path, j), "the pattern covers no part of the roof; move it, or leave the load out")
			}
		}
		for j, l := range a.Edge {
			covers := false
			for _, d := range decks {
				f := make([]geom.Vec, len(d.nodes))
				covers = d.loadEdges(l, f) || covers
				put(f, d)
			}
			if !covers {
				b.issues.Add(geom.Warning, a.Name, fmt.Sprintf("%s.edge[%d]", path, j), "no edge of the roof carries this load; check its pattern and bearing")
			}
		}
		for j, l := range a.Point {
			d := highest(decks, l.At)
			if d == nil {
				b.issues.Add(geom.Error, a.Name, fmt.Sprintf("%s.point[%d]", path, j), "the place (%.3f, %.3f) is not on the roof; move the load onto it",
					l.At[0], l.At[1])
				continue
			}
			f := make([]geom.Vec, len(d.nodes))
			d.loadPoint(l, f)
			put(f, d)
		}
		e.finish(decks)
		out[i] = e
	}
	return out
}

// highest returns the highest roof over a place, or nil.
func highest(decks []*deck, at [2]float64) *deck {
	var best *deck
	for _, d := range decks {
		if d.covers(at) && (best == nil || d.surface.Height(at[0], at[1]) > best.surface.Height(at[0], at[1])) {
			best = d
		}
	}
	return best
}

// finish clears forces that are only rounding and fills in the sums.
func (e *effect) finish(decks []*deck) {
	var largest float64
	for _, f := range e.force {
		largest = math.Max(largest, f.Norm())
	}
	for n, f := range e.force {
		f = geom.Vec{X: snap(f.X, largest), Y: snap(f.Y, largest), Z: snap(f.Z, largest)}
		e.force[n] = f
		e.total = e.total.Add(f)
		e.gross += f.Norm()
		e.used = e.used || f != geom.Vec{}
	}
	e.whole = e.used
	for _, d := range decks {
		for k, n := range d.nodes {
			f := e.force[n]
			e.whole = e.whole && (d.plan[k] == 0 || f.Z < 0) && f.X == 0 && f.Y == 0
		}
	}
}

// snap returns 0 for a component that is rounding beside the largest force.
func snap(f, largest float64) float64 {
	if math.Abs(f) <= noForce*largest {
		return 0
	}
	return f
}

// noForce is the force, as a share of the largest on any node, below which a component is rounding. A thousand nodes
// leave the resultant right to 1e-10.
const noForce = 1e-13
