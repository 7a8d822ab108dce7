package ground

import (
	"math"

	"boughwork/geom"
)

const (
	// spread is the least radius of gyration in plan, as a share of the deck spacing, of the nodes that are to take up a
	// moment. Nodes in one line or in one place cannot; then nodes around them help. On a narrow roof it is at most
	// narrow times the radius of the whole roof.
	spread = 0.25
	narrow = 0.5
	// helping is the weight of a node that helps, as a share of its tributary area.
	helping = 0.25
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
	force  []geom.Vec // on each node
	weight []float64  // loaded area, or length, of each node
	target wrench     // resultant of the load itself
	gross  float64    // sum of the magnitudes of its parts, N
	down   bool       // all parts press down
}

func (d *deck) newCarry() *carry {
	return &carry{force: make([]geom.Vec, len(d.nodes)), weight: make([]float64, len(d.nodes)), down: true}
}

// put gives a part of the load at a place to one node, or a share of it.
func (c *carry) put(node int, at, f geom.Vec, weight float64) {
	c.force[node] = c.force[node].Add(f)
	c.weight[node] += weight
	c.target.add(at, f)
	c.gross += f.Norm()
	c.down = c.down && f.X == 0 && f.Y == 0 && f.Z <= 0
}

// settle corrects the forces on the nodes so that force and moment of the load are conserved: first the horizontal part by
// a rigid field in plan, then the vertical part by an affine field, both in proportion to the loaded area. A load in a
// place too narrow for that is shared with nodes around it, and so is a downward load that would lift a node.
func (c *carry) settle(d *deck) {
	if c.within(d, c.force) {
		return
	}
	given := c.force
	for help := 0; ; help++ {
		w := c.weight
		last := help >= helpSteps
		if help > 0 {
			w = d.help(w, d.reach*(1+fitSlack)*math.Pow(2, float64(help-1)))
		}
		if !last && d.gyration(w) < d.needed {
			continue
		}
		c.force = append([]geom.Vec(nil), given...)
		for range refinements {
			d.correct(c.force, w, c.target, c.gross)
		}
		if last || !c.down || !lifted(c.force, c.gross) {
			return
		}
	}
}

const (
	// helpSteps is how often the circle of helping nodes is doubled.
	helpSteps = 5
	// refinements is how often the correction is applied: the second time to the rounding of the first.
	refinements = 2
)

// within reports whether forces on the nodes have the resultant of the load already.
func (c *carry) within(d *deck, f []geom.Vec) bool {
	r := c.target.sub(d.at, f)
	return r.force.Norm() <= balanced*c.gross && r.moment.Norm() <= balanced*c.gross*d.reach
}

// lifted reports whether any force points up.
func lifted(f []geom.Vec, gross float64) bool {
	for _, v := range f {
		if v.Z > balanced*gross {
			return true
		}
	}
	return false
}

// help returns weights that also count the nodes within a radius of loaded ones.
func (d *deck) help(w []float64, radius float64) []float64 {
	out := append([]float64(nil), w...)
	for i, p := range d.at {
		for j, q := range d.at {
			if w[j] > 0 && math.Hypot(p.X-q.X, p.Y-q.Y) <= radius {
				out[i] += helping * d.plan[i]
				break
			}
		}
	}
	return out
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
