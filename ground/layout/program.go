package layout

import (
	"math"

	"boughwork/geom"
	"boughwork/ground"
	"boughwork/lp"
)

// program knows how a ground structure becomes a linear program. Its rows are the directions in which something can
// move: those of every node that are not held, the plan motion of a diaphragm instead of that of its nodes, and the
// motion of a footing zone whose reactions are limited. Every displacement of a node is a sum of rows:
// u[node][dir] = sum of term.coef x u[term.row].
type program struct {
	s     *ground.Structure
	term  [][3][]term
	block []int32
	at    [][3]float64
	rows  int
	feet  lp.Bars // the reactions that are limited or cost something
}

// term is one row's share of a node's displacement.
type term struct {
	row  int32
	coef float64
}

// nowhere places a block that many bars touch: it is eliminated last.
var nowhere = [3]float64{math.NaN(), math.NaN(), math.NaN()}

func newProgram(s *ground.Structure) *program {
	p := &program{s: s, term: make([][3][]term, len(s.Nodes)), block: []int32{0}}
	plan := make([]bool, len(s.Nodes)) // moves in plan with a diaphragm
	for _, d := range s.Diaphragms {
		for _, n := range d {
			plan[n] = true
		}
	}
	for i, n := range s.Nodes {
		for x := range 3 {
			if !n.Fixed[x] && !(plan[i] && x < 2) {
				p.term[i][x] = []term{{p.row(), 1}}
			}
		}
		p.close(n.At.Array())
	}
	for _, d := range s.Diaphragms {
		p.diaphragm(d)
	}
	for _, z := range s.Zones {
		p.zone(z)
	}
	return p
}

// row makes a new row in the block that is open.
func (p *program) row() int32 {
	p.rows++
	return int32(p.rows - 1)
}

// close ends the open block, if it has rows.
func (p *program) close(at [3]float64) {
	if int(p.block[len(p.block)-1]) == p.rows {
		return
	}
	p.block = append(p.block, int32(p.rows))
	p.at = append(p.at, at)
}

// diaphragm gives the nodes of a deck that is stiff in plan one motion: two translations and a rotation about z through
// their centroid, measured in metres at the radius of gyration so that all three rows are alike.
func (p *program) diaphragm(nodes []int) {
	if len(nodes) == 0 {
		return
	}
	var centre geom.Vec
	for _, n := range nodes {
		centre = centre.Add(p.s.Nodes[n].At.Scale(1 / float64(len(nodes))))
	}
	radius := 0.0
	for _, n := range nodes {
		v := p.s.Nodes[n].At.Sub(centre)
		radius += (v.X*v.X + v.Y*v.Y) / float64(len(nodes))
	}
	if radius = math.Sqrt(radius); radius == 0 {
		radius = 1
	}
	dx, dy, turn := p.row(), p.row(), p.row()
	p.close(nowhere)
	for _, n := range nodes {
		v := p.s.Nodes[n].At.Sub(centre)
		if !p.s.Nodes[n].Fixed[0] {
			p.term[n][0] = []term{{dx, 1}, {turn, -v.Y / radius}}
		}
		if !p.s.Nodes[n].Fixed[1] {
			p.term[n][1] = []term{{dy, 1}, {turn, v.X / radius}}
		}
	}
}

// entry adds terms to a bar's column.
type column struct {
	row  []int32
	b, h []float64
}

func (c *column) add(ts []term, b, h float64) {
	for _, t := range ts {
		at := -1
		for j, r := range c.row {
			if r == t.row {
				at = j
			}
		}
		if at < 0 {
			at = len(c.row)
			c.row, c.b, c.h = append(c.row, t.row), append(c.b, 0), append(c.h, 0)
		}
		c.b[at] += t.coef * b
		c.h[at] += t.coef * h
	}
}

// column returns the column of the bar from node i to node j: b = n on i and -n on j, h = half the weight of a unit area
// downwards on each end.
func (p *program) column(i, j int) (c column, length float64) {
	d := p.s.Nodes[j].At.Sub(p.s.Nodes[i].At)
	length = d.Norm()
	n := d.Scale(1 / length).Array()
	half := p.s.Material.Density * ground.Gravity * length / 2
	for x := range 3 {
		h := 0.0
		if x == 2 {
			h = half
		}
		c.add(p.term[i][x], n[x], h)
		c.add(p.term[j][x], -n[x], h)
	}
	return c, length
}

// problem returns the linear program over the given bars and cases: first the bars, then the kept members, then the
// reactions of limited feet.
func (p *program) problem(bars []pair, cases []int) *lp.Problem {
	q := &lp.Problem{Rows: p.rows, Block: p.block, At: p.at}
	for _, b := range bars {
		c, _ := p.column(int(b.i), int(b.j))
		q.Bars.Add(c.row, c.b, c.h, p.s.Material.Tension, p.s.Material.Compression, b.cost, math.Inf(1), false)
	}
	p.addKept(q)
	p.addFeet(q)
	for _, k := range cases {
		q.Cases = append(q.Cases, lp.Case{Name: p.s.Cases[k].Name, Gravity: p.s.Cases[k].Gravity, Load: p.load(k)})
	}
	return q
}

func (p *program) addKept(q *lp.Problem) {
	for _, k := range p.s.Kept {
		c, _ := p.column(k.A, k.B)
		q.Bars.Add(c.row, c.b, c.h, p.s.Material.Tension, p.s.Material.Compression, 0, k.Area, true)
	}
}

func (p *program) addFeet(q *lp.Problem) {
	f := &p.feet
	for i := range f.Len() {
		lo, hi := f.Ptr[i], f.Ptr[i+1]
		q.Bars.Add(f.Row[lo:hi], f.B[lo:hi], f.H[lo:hi], f.Tension[i], f.Compression[i], f.Cost[i], f.Upper[i], f.Fixed[i])
	}
}

// load returns the loads of case k on the rows.
func (p *program) load(k int) []float64 {
	f := make([]float64, p.rows)
	for _, l := range p.s.Cases[k].Loads {
		for x, v := range l.Force.Array() {
			for _, t := range p.term[l.Node][x] {
				f[t.row] += t.coef * v
			}
		}
	}
	return f
}

// expand returns the displacement of every node.
func (p *program) expand(u []float64) []geom.Vec {
	out := make([]geom.Vec, len(p.s.Nodes))
	for i := range out {
		var v [3]float64
		for x := range 3 {
			for _, t := range p.term[i][x] {
				v[x] += t.coef * u[t.row]
			}
		}
		out[i] = geom.FromArray(v)
	}
	return out
}
