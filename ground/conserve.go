package ground

import (
	"math"

	"boughwork/geom"
)

const (
	// spread is the least radius of gyration in plan, as a share of the deck spacing, of the nodes that are to take up a
	// moment: nodes in one line or in one place cannot. On a narrow roof it is at most narrow times the radius of the
	// whole roof.
	spread = 0.25
	narrow = 0.5
	// flat is the share of the second moments below which nodes lie in one line.
	flat = 1e-12
	// balanced is the residual, as a share of the load (times its lever), that is rounding.
	balanced = 1e-13
)

// wrench is a force and its moment about the deck's origin.
type wrench struct{ force, moment geom.Vec }

func (w *wrench) add(at, f geom.Vec) {
	w.force = w.force.Add(f)
	w.moment = w.moment.Add(at.Cross(f))
}

// sub returns w less the resultant of forces at places.
func (w wrench) sub(at, f []geom.Vec) wrench {
	for i := range at {
		w.force = w.force.Sub(f[i])
		w.moment = w.moment.Sub(at[i].Cross(f[i]))
	}
	return w
}

// carry is a load on its way to the nodes of a deck.
type carry struct {
	parts  []part
	force  []geom.Vec // on each node
	weight []float64  // loaded area, or length, of each node
	target wrench     // resultant of the load itself
	gross  float64    // sum of the magnitudes of its parts, N
	down   bool       // all parts press down
}

// part is a force at a place, with the area or length that it stands for.
type part struct {
	at, force geom.Vec
	weight    float64
}

func (d *deck) newCarry() *carry {
	return &carry{force: make([]geom.Vec, len(d.nodes)), weight: make([]float64, len(d.nodes)), down: true}
}

// put gives a part of the load to nodes, by shares.
func (c *carry) put(p part, nodes []int, share []float64) {
	c.parts = append(c.parts, p)
	c.share(p, nodes, share)
	c.target.add(p.at, p.force)
	c.gross += p.force.Norm()
	c.down = c.down && p.force.X == 0 && p.force.Y == 0 && p.force.Z <= 0
}

func (c *carry) share(p part, nodes []int, share []float64) {
	for k, n := range nodes {
		c.force[n] = c.force[n].Add(p.force.Scale(share[k]))
		c.weight[n] += p.weight * share[k]
	}
}

// settle corrects the forces on the nodes so that force and moment of the load are conserved: first the horizontal part by
// a rigid field in plan, then the vertical part by an affine field, both in proportion to the loaded area. If the loaded
// nodes lie in a place too narrow to take up the moment, or if the correction would lift a node under a load that presses
// down, every part of the load goes to the triangle of nodes around it instead, which needs next to no correction.
func (c *carry) settle(d *deck) {
	if c.settled(d) {
		return
	}
	if d.gyration(c.weight) >= d.needed {
		given := append([]geom.Vec(nil), c.force...)
		if c.correct(d); !c.lifts() {
			return
		}
		c.force = given
	}
	clear(c.force)
	clear(c.weight)
	for _, p := range c.parts {
		nodes, share := d.triangle(pt{p.at.X, p.at.Y})
		c.share(p, nodes[:], share[:])
	}
	for n, w := range c.weight {
		c.weight[n] = math.Abs(w) // beyond the outermost nodes a share may be negative
	}
	if !c.settled(d) {
		c.correct(d)
	}
}

// correct applies the two fields, the second time to the rounding of the first.
func (c *carry) correct(d *deck) {
	for range 2 {
		d.correct(c.force, c.weight, c.target, c.gross)
	}
}

// settled reports whether the forces on the nodes have the resultant of the load.
func (c *carry) settled(d *deck) bool {
	r := c.target.sub(d.at, c.force)
	return r.force.Norm() <= balanced*c.gross && r.moment.Norm() <= balanced*c.gross*d.reach
}

// lifts reports whether a load that presses down has come to lift a node.
func (c *carry) lifts() bool {
	for _, f := range c.force {
		if c.down && f.Z > balanced*c.gross {
			return true
		}
	}
	return false
}

// second are the second moments of weights in plan about their centroid.
type second struct{ w, x, y, xx, xy, yy float64 }

func (d *deck) second(w []float64) second {
	var s second
	for i, v := range d.at {
		s.w += w[i]
		s.x += w[i] * v.X
		s.y += w[i] * v.Y
	}
	if s.w <= 0 {
		return second{}
	}
	s.x, s.y = s.x/s.w, s.y/s.w
	for i, v := range d.at {
		x, y := v.X-s.x, v.Y-s.y
		s.xx += w[i] * x * x
		s.xy += w[i] * x * y
		s.yy += w[i] * y * y
	}
	return s
}

// gyration returns the smaller radius of gyration of weights in plan, m.
func (d *deck) gyration(w []float64) float64 {
	s := d.second(w)
	if s.w <= 0 {
		return 0
	}
	least := (s.xx+s.yy)/2 - math.Hypot((s.xx-s.yy)/2, s.xy)
	return math.Sqrt(math.Max(0, least) / s.w)
}

// correct adds the two fields to the forces f so that their resultant becomes the target.
func (d *deck) correct(f []geom.Vec, w []float64, target wrench, gross float64) {
	s := d.second(w)
	if s.w <= 0 {
		return
	}
	r := target.sub(d.at, f)
	if polar := s.xx + s.yy; polar > 0 && math.Hypot(r.force.X, r.force.Y)+math.Abs(r.moment.Z)/d.reach > balanced*gross {
		cx, cy := r.force.X/s.w, r.force.Y/s.w
		turn := (r.moment.Z - s.x*r.force.Y + s.y*r.force.X) / polar
		for i, v := range d.at {
			f[i].X += w[i] * (cx - turn*(v.Y-s.y))
			f[i].Y += w[i] * (cy + turn*(v.X-s.x))
		}
		r = target.sub(d.at, f)
	}
	// With g = a + b x + c y about the centroid: sum w g = Fz, sum w g y = Mx, sum w g x = -My.
	my := r.moment.X - s.y*r.force.Z
	mx := -r.moment.Y - s.x*r.force.Z
	det := s.xx*s.yy - s.xy*s.xy
	if det <= flat*(s.xx+s.yy)*(s.xx+s.yy) {
		return // all nodes in one line: nothing can take up the moment about it
	}
	a := r.force.Z / s.w
	b := (mx*s.yy - my*s.xy) / det
	c := (my*s.xx - mx*s.xy) / det
	for i, v := range d.at {
		f[i].Z += w[i] * (a + b*(v.X-s.x) + c*(v.Y-s.y))
	}
}
