package layout

import (
	"context"
	"math"
	"testing"

	"boughwork/geom"
	"boughwork/ground"
	"boughwork/lp"
)

// feetGap is the gap of the layouts that are compared with values by hand; sameValue is how far they may be off.
const (
	feetGap   = 1e-8
	sameValue = 1e-7
)

func newtons(v float64) *float64 { return &v }

// frame makes plane structures (y = 0) of strength 1 Pa, whose loads in N and lengths in m give volumes by hand.
type frame struct{ ground.Structure }

func newFrame() *frame {
	f := &frame{}
	f.Material = ground.Material{Name: "unit", Tension: 1, Compression: 1}
	return f
}

func (f *frame) free(x, z float64) int {
	f.Nodes = append(f.Nodes, ground.Node{At: geom.Vec{X: x, Z: z}, Fixed: [3]bool{false, true, false}})
	return len(f.Nodes) - 1
}

func (f *frame) held(x, z float64) int {
	f.Nodes = append(f.Nodes, ground.Node{At: geom.Vec{X: x, Z: z}, Fixed: [3]bool{true, true, true}, Role: ground.Footing})
	return len(f.Nodes) - 1
}

func (f *frame) load(gravity float64, n int, fx, fz float64) {
	f.Cases = append(f.Cases, ground.Case{Name: string(rune('A' + len(f.Cases))), Gravity: gravity,
		Loads: []ground.NodeLoad{{Node: n, Force: geom.Vec{X: fx, Z: fz}}}})
}

// post puts a node 1 m above a foot, with two legs at 45 degrees beside it, and returns the node and its foot. A load of
// 1 N down or up costs 1 m3 by the post and 2 m3 by the legs.
func (f *frame) post(x float64) (top, foot int) {
	foot = f.held(x, 0)
	f.held(x-1, 0)
	f.held(x+1, 0)
	return f.free(x, 1), foot
}

func (f *frame) solve(t *testing.T) *Result {
	t.Helper()
	r, err := Solve(context.Background(), &f.Structure, Options{Gap: feetGap})
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// verified fails unless the record of r passes Verify.
func verified(t *testing.T, s *ground.Structure, r *Result) {
	t.Helper()
	rep, err := Verify(NewRecord(s, r, Meta{MadeBy: "test"}))
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range rep.Checks {
		if !c.OK {
			t.Errorf("verify: %s: %.3g, limit %.3g: %s", c.Name, c.Value, c.Limit, c.Text)
		}
	}
}

// wants fails unless r is a verified layout of the given objective.
func wants(t *testing.T, f *frame, r *Result, objective float64) {
	t.Helper()
	if r.Status != lp.Optimal || math.Abs(r.Objective-objective) > sameValue*objective {
		t.Errorf("status %v, objective %.10g, by hand %.10g", r.Status, r.Objective, objective)
	}
	verified(t, &f.Structure, r)
}

// reaction returns the force of the ground on a node in case k, as the bars of r say. Bars must not weigh.
func reaction(s *ground.Structure, r *Result, n, k int) (sum geom.Vec) {
	for _, b := range r.Bars {
		far := b.A + b.B - n
		if b.A != n && b.B != n {
			continue
		}
		d := s.Nodes[far].At.Sub(s.Nodes[n].At)
		sum = sum.Sub(d.Scale(b.Force[k] / d.Norm()))
	}
	return sum
}

// A limit that became a wrong bar would change the least volume, or let the foot carry more than it may: each is
// compared with the value by hand, and the foot's reaction with its limit.
func TestVerticalLimits(t *testing.T) {
	for _, c := range []struct {
		name      string
		limits    geom.FootLimits
		forces    []float64 // vertical loads, one a case
		objective float64
		down, up  float64 // most that the foot may take
	}{
		{"no limit", geom.FootLimits{}, []float64{-1}, 1, 1, 0},
		{"vertical", geom.FootLimits{Vertical: newtons(0.4)}, []float64{-1}, 0.4 + 0.6*2, 0.4, 0},
		{"vertical that is enough", geom.FootLimits{Vertical: newtons(3)}, []float64{-1}, 1, 1, 0},
		{"vertical of nothing", geom.FootLimits{Vertical: newtons(0)}, []float64{-1}, 2, 0, 0},
		{"uplift", geom.FootLimits{Uplift: newtons(0.25)}, []float64{1}, 0.25 + 0.75*2, 0, 0.25},
		{"uplift does not bind down", geom.FootLimits{Uplift: newtons(0.25)}, []float64{-1}, 1, 1, 0},
		{"no uplift", geom.FootLimits{NoUplift: true}, []float64{1}, 2, 0, 0},
		{"no uplift does not bind down", geom.FootLimits{NoUplift: true}, []float64{-1}, 1, 1, 0},
		{"down and up, both limited", geom.FootLimits{Vertical: newtons(0.5), Uplift: newtons(0.25)}, []float64{-1, 1}, 0.25 + 0.75*2, 0.5, 0.25},
		{"no uplift and vertical", geom.FootLimits{NoUplift: true, Vertical: newtons(0.4)}, []float64{-1}, 0.4 + 0.6*2, 0.4, 0},
		{"cheap", geom.FootLimits{Cost: 0.5}, []float64{-1}, 1.5, 1, 0},
		{"cheap, pulled", geom.FootLimits{Cost: 0.5}, []float64{1}, 1.5, 0, 1},
		{"charged once for all cases", geom.FootLimits{Cost: 0.5}, []float64{-1, 1, -0.5}, 1.5, 1, 1},
		{"dearer than legs", geom.FootLimits{Cost: 1.5}, []float64{-1}, 2, 0, 0},
		{"cheap and limited", geom.FootLimits{Cost: 0.5, Vertical: newtons(0.4)}, []float64{-1}, 0.4*1.5 + 0.6*2, 0.4, 0},
		{"cheap and no uplift", geom.FootLimits{Cost: 0.5, NoUplift: true}, []float64{-1}, 1.5, 1, 0},
	} {
		t.Run(c.name, func(t *testing.T) {
			f := newFrame()
			top, foot := f.post(0)
			f.Zones = []ground.Zone{{Name: "zone", Nodes: []int{foot}, Limits: c.limits}}
			for _, v := range c.forces {
				f.load(0, top, 0, v)
			}
			r := f.solve(t)
			wants(t, f, r, c.objective)
			for k := range c.forces {
				if z := reaction(&f.Structure, r, foot, k).Z; z > c.down+sameValue || -z > c.up+sameValue {
					t.Errorf("case %d: the foot is pressed by %.9g N, may be by %g; and pulled by %g", k, z, c.down, c.up)
				}
			}
		})
	}
}

// A limit is of the total of a zone, so a foot that is pulled helps one that is pressed; no uplift is of every foot, so
// there it cannot.
func TestLimitsAreTotals(t *testing.T) {
	for _, c := range []struct {
		name      string
		limits    geom.FootLimits
		objective float64
	}{
		{"pull and push cancel", geom.FootLimits{Vertical: newtons(0.5)}, 2},
		{"no foot may lift", geom.FootLimits{Vertical: newtons(0.5), NoUplift: true}, 0.5 + 0.5*2 + 2},
	} {
		t.Run(c.name, func(t *testing.T) {
			f := newFrame()
			f.Rules.MaxLength = 1.5
			top, foot := f.post(0)
			other, second := f.post(10)
			f.Zones = []ground.Zone{{Name: "zone", Nodes: []int{foot, second}, Limits: c.limits}}
			f.load(0, top, 0, -1)
			f.Cases[0].Loads = append(f.Cases[0].Loads, ground.NodeLoad{Node: other, Force: geom.Vec{Z: 1}})
			wants(t, f, f.solve(t), c.objective)
		})
	}
}

// A sideways limit of R leaves R cos 15 degrees towards x, where a side of the 12-gon faces; the rest takes the dearer
// way of a tie of 3 m to a wall.
func TestSidewaysLimit(t *testing.T) {
	for _, c := range []struct {
		name           string
		limit          *float64
		objective, top float64
	}{
		{"no limit", nil, 2, 1},
		{"half", newtons(0.5 / math.Cos(math.Pi/12)), 0.5*2 + 0.5*3, 0.5},
		{"nothing", newtons(0), 3, 0},
		{"more than enough", newtons(2), 2, 1},
	} {
		t.Run(c.name, func(t *testing.T) {
			f := newFrame()
			left, right := f.held(-1, 0), f.held(1, 0)
			f.held(-3, 1)
			f.Zones = []ground.Zone{{Name: "zone", Nodes: []int{left, right}, Limits: geom.FootLimits{Sideways: c.limit}}}
			f.load(0, f.free(0, 1), 1, 0)
			r := f.solve(t)
			wants(t, f, r, c.objective)
			if x := reaction(&f.Structure, r, left, 0).X + reaction(&f.Structure, r, right, 0).X; math.Abs(x+c.top) > sameValue {
				t.Errorf("the zone is pushed by %.9g N, by hand %g", -x, c.top)
			}
		})
	}
}

// The program limits a sideways reaction by six forces, Verify by the sides of a polygon: were they not the same set,
// layouts would fail their own check, or the check would let pass what the program forbids.
func TestSixForcesFillThePolygon(t *testing.T) {
	const radius = 7.0
	side := radius * math.Sin(math.Pi/(2*sideSectors))
	farthest := 0.0
	for signs := range 1 << sideSectors {
		var f geom.Vec
		for j := range sideSectors {
			s := side * float64(2*(signs>>j&1)-1)
			a := math.Pi * float64(j) / sideSectors
			f = f.Add(geom.Vec{X: s * math.Cos(a), Y: s * math.Sin(a)})
		}
		if v := beyondPolygon(f, radius); v > 1e-12*radius {
			t.Errorf("signs %06b: the sum %v is %.3g outside", signs, f, v)
		}
		farthest = math.Max(farthest, f.Norm())
	}
	if math.Abs(farthest-radius) > 1e-12*radius {
		t.Errorf("the farthest corner is at %.15g, the circle at %g", farthest, radius)
	}
	for k := range 4 * sideSectors { // corners and middles of sides
		a := math.Pi / (2 * sideSectors) * float64(k)
		reach := 0.0
		for j := range sideSectors {
			reach += side * math.Abs(math.Cos(a-math.Pi*float64(j)/sideSectors))
		}
		at := geom.Vec{X: reach * math.Cos(a), Y: reach * math.Sin(a)}
		if v := beyondPolygon(at, radius); math.Abs(v) > 1e-12*radius {
			t.Errorf("towards %g degrees six forces reach %.9g, which is %.3g beyond the polygon", a*180/math.Pi, reach, v)
		}
	}
}
