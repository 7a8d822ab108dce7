package ground

import (
	"math"
	"math/rand/v2"
	"testing"

	"boughwork/geom"
)

// What must hold of every structure, on random roofs with keep-clears, walls and kept members anywhere: nodes are finite,
// apart and numbered in range, nothing stands in a keep-clear, and every case keeps its load even where roof nodes had
// to go.
func TestInvariants(t *testing.T) {
	rnd := rand.New(rand.NewPCG(17, 18))
	built := 0
	for i := range 60 {
		st := newStudy(rnd)
		near := func(z float64) geom.Vec {
			return geom.Vec{X: st.centre.X + 20*rnd.NormFloat64(), Y: st.centre.Y + 20*rnd.NormFloat64(), Z: z}
		}
		prism := func(r, from, to float64) geom.Prism {
			c := near(0)
			return geom.Prism{From: from, To: to, Polygon: geom.Region{Rings: [][]geom.Vec{vecs(0, circle(c.X, c.Y, r, 5)...)}}.Polygon()}
		}
		for range rnd.IntN(4) {
			st.site.KeepClear = append(st.site.KeepClear, prism(3, -30, 30))
		}
		for range 3 {
			c := near(0)
			st.site.Footings = append(st.site.Footings, pad("pad", -20*rnd.Float64(), circle(c.X, c.Y, 0.2+4*rnd.Float64(), 3+rnd.IntN(6))))
		}
		st.site.Walls = []geom.Line{{Name: "wall", Points: []geom.Vec{near(-20), near(-15)}, Top: -5}}
		st.site.Kept = []geom.Line{{Name: "kept", Area: 0.001, Points: []geom.Vec{near(-3), near(2), near(4)}}}
		st.spec.InnerSpacing, st.spec.InnerRise, st.spec.FootSpacing = 3+5*rnd.Float64(), 2+5*rnd.Float64(), 0.5+4*rnd.Float64()
		st.spec.Actions[0].Area = []AreaLoad{{Pressure: 700}}
		s, issues := Build(st.site, st.spec)
		if s == nil {
			if issues.Err() == nil {
				t.Errorf("roof %d: no structure and no error", i)
			}
			continue
		}
		built++
		kept := map[int]bool{}
		for _, k := range s.Kept {
			kept[k.A], kept[k.B] = true, true
		}
		clear := geom.NewObstacles(st.site.KeepClear)
		for n, d := range s.Nodes {
			if !d.At.Finite() {
				t.Fatalf("roof %d: node %v", i, d.At)
			}
			if clear.BlockedAt(d.At) && !kept[n] {
				t.Errorf("roof %d: %s node %v is in a keep-clear", i, d.Role, d.At)
			}
			if d.Role == Inner && !kept[n] && d.At.Z > st.plane.Height(d.At.X, d.At.Y) && geom.ContainsPoint(st.site.Roofs[0].Regions[0].Polygon(), [2]float64{d.At.X, d.At.Y}) {
				t.Errorf("roof %d: inner node %v is above the roof", i, d.At)
			}
			for _, o := range s.Nodes[:n] {
				if o.At.Sub(d.At).Norm() < sameNode {
					t.Errorf("roof %d: two nodes at %v", i, d.At)
				}
			}
		}
		for _, z := range s.Zones {
			for _, n := range z.Nodes {
				if !s.Nodes[n].Fixed[2] {
					t.Errorf("roof %d: foot %d is not held", i, n)
				}
			}
		}
		a, mx, my := st.moments()
		q := geom.Vec{Z: -700}
		arm := geom.Vec{X: mx, Y: my, Z: st.plane.SlopeX*mx + st.plane.SlopeY*my}
		st.judge(t, "roof with gaps", s, q.Scale(a), arm.Cross(q))
		var sum float64
		for _, v := range s.Tributary {
			sum += v
		}
		if math.Abs(sum-a) > conserved*a {
			t.Errorf("roof %d: tributary areas %v m2, roof %v", i, sum, a)
		}
	}
	if built < 40 {
		t.Errorf("only %d of 60 random sites could be built", built)
	}
}
