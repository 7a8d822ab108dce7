package layout

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"

	"boughwork/geom"
	"boughwork/ground"
	"boughwork/lp"
)

// scattered is a structure with every kind of row: free and held nodes, a deck, zones of every kind of limit.
func scattered(seed uint64) *ground.Structure {
	rng := rand.New(rand.NewPCG(seed, 77))
	s := &ground.Structure{Material: ground.Material{Name: "m", Tension: 2, Compression: 1, Density: 0.01}}
	at := func(z float64) geom.Vec { return geom.Vec{X: 8 * rng.Float64(), Y: 8 * rng.Float64(), Z: z} }
	for range 6 {
		s.Nodes = append(s.Nodes, ground.Node{At: at(0), Fixed: [3]bool{true, true, true}, Role: ground.Footing})
	}
	for range 5 {
		s.Nodes = append(s.Nodes, ground.Node{At: at(4), Role: ground.RoofPt})
	}
	for range 4 {
		s.Nodes = append(s.Nodes, ground.Node{At: at(2)})
	}
	s.Nodes[10].Fixed = [3]bool{true, false, false} // a roof node of the deck that a wall holds in x
	s.Diaphragms = [][]int{{6, 7, 8, 9, 10}}
	s.Zones = []ground.Zone{
		{Name: "total", Nodes: []int{0, 1}, Limits: geom.FootLimits{Vertical: newtons(3), Sideways: newtons(2)}},
		{Name: "each", Nodes: []int{2, 3}, Limits: geom.FootLimits{NoUplift: true, Cost: 0.1, Vertical: newtons(5)}},
		{Name: "plain", Nodes: []int{4, 5}, Limits: geom.FootLimits{NoUplift: true}},
	}
	c := ground.Case{Name: "A", Gravity: 1}
	for n := range s.Nodes {
		c.Loads = append(c.Loads, ground.NodeLoad{Node: n, Force: geom.Vec{X: rng.NormFloat64(), Y: rng.NormFloat64(), Z: rng.NormFloat64()}})
	}
	s.Cases = []ground.Case{c}
	return s
}

// Loads, bars and displacements go through the same rows. If one of the three used other coefficients, forces would
// balance that are not in equilibrium, or the bound would be of another structure. Virtual work tells.
func TestRowsAreAdjoint(t *testing.T) {
	for seed := range uint64(20) {
		s := scattered(seed)
		p := newProgram(s)
		rng := rand.New(rand.NewPCG(seed, 78))
		u := make([]float64, p.rows)
		for r := range u {
			u[r] = rng.NormFloat64()
		}
		v := p.expand(u)
		inRows, atNodes := 0.0, 0.0
		for r, f := range p.load(0) {
			inRows += f * u[r]
		}
		for _, l := range s.Cases[0].Loads {
			atNodes += l.Force.Dot(v[l.Node])
		}
		if math.Abs(inRows-atNodes) > 1e-12*(1+math.Abs(atNodes)) {
			t.Errorf("seed %d: the loads work %.15g in rows and %.15g at nodes", seed, inRows, atNodes)
		}
		var bars lp.Bars
		for j := range s.Nodes {
			for i := range j {
				c, l := p.column(i, j)
				b := bars.Add(c.row, c.b, c.h, 1, 1, l, math.Inf(1), false)
				n := s.Nodes[j].At.Sub(s.Nodes[i].At).Scale(1 / l)
				if e, want := bars.Elongation(b, u), n.Dot(v[j].Sub(v[i])); math.Abs(e-want) > 1e-12*(1+math.Abs(want)) {
					t.Errorf("seed %d: bar %d-%d lengthens by %.15g in rows and %.15g at nodes", seed, i, j, e, want)
				}
				half := s.Material.Density * ground.Gravity * l / 2
				if h, want := bars.Lift(b, u), half*(v[i].Z+v[j].Z); math.Abs(h-want) > 1e-12*(1+math.Abs(want)) {
					t.Errorf("seed %d: the weight of bar %d-%d is lifted by %.15g in rows and %.15g at nodes", seed, i, j, h, want)
				}
			}
		}
	}
}

// A deck that is stiff in plan must move as one: no two of its nodes change their distance in plan, and what it can do
// is all rigid motions, not fewer.
func TestDeckMovesAsOne(t *testing.T) {
	s := scattered(3)
	deck := s.Diaphragms[0][:4] // the fifth is held in x
	p := newProgram(s)
	rng := rand.New(rand.NewPCG(5, 5))
	u := make([]float64, p.rows)
	for r := range u {
		u[r] = rng.NormFloat64()
	}
	v := p.expand(u)
	turned := false
	for _, i := range deck {
		for _, j := range deck {
			d, w := s.Nodes[j].At.Sub(s.Nodes[i].At), v[j].Sub(v[i])
			if e := d.X*w.X + d.Y*w.Y; math.Abs(e) > 1e-12 {
				t.Errorf("nodes %d and %d of the deck part by %g", i, j, e)
			}
			turned = turned || math.Abs(d.X*w.Y-d.Y*w.X) > 1e-3
		}
	}
	if !turned {
		t.Error("the deck does not turn")
	}
	if v[10].X != 0 {
		t.Errorf("a node that is held in x moves by %g with the deck", v[10].X)
	}
	rows := map[int32]bool{}
	for _, n := range deck {
		for _, tm := range append(p.term[n][0], p.term[n][1]...) {
			rows[tm.row] = true
		}
	}
	if len(rows) != 3 {
		t.Errorf("the deck has %d rows, a rigid motion in plan three", len(rows))
	}
}

// The deck carries a push from a node on a mere post to one with legs; without the deck nothing holds it.
func TestDeckCarriesAPush(t *testing.T) {
	pushed := func(deck bool) *frame {
		f := newFrame()
		f.Rules.MaxLength = 1.5
		braced, _ := f.post(0)
		f.held(10, 0)
		loose := f.free(10, 1)
		if deck {
			f.Deck, f.Diaphragms = ground.DeckDiaphragm, [][]int{{braced, loose}}
		}
		f.load(0, loose, 1, 0)
		return f
	}
	f := pushed(true)
	wants(t, f, f.solve(t), 2)
	if r := pushed(false).solve(t); r.Status != lp.NoEquilibrium {
		t.Errorf("without a deck: status %v, want %v", r.Status, lp.NoEquilibrium)
	}
}

// A study that is cancelled says so and keeps what is sound: no claim of a gap that it has not reached.
func TestCancelledStudy(t *testing.T) {
	s := canopy(4)
	for _, stage := range []string{"candidates", "layout", "cases", "tidying"} {
		t.Run(stage, func(t *testing.T) {
			ctx, cancel := context.WithCancel(context.Background())
			defer cancel()
			reached := false
			r, err := Solve(ctx, s, Options{Progress: func(p Progress) {
				if p.Stage == stage {
					reached = true
					cancel()
				}
			}})
			if err != nil {
				t.Fatal(err)
			}
			if !reached {
				t.Fatalf("the study has no stage %q", stage)
			}
			if r.Status != lp.Cancelled && !(r.Status == lp.Optimal && r.Gap <= 1e-3) {
				t.Errorf("status %v, gap %g", r.Status, r.Gap)
			}
			verified(t, s, r)
		})
	}
}
