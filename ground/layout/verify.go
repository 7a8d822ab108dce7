package layout

import (
	"fmt"
	"math"

	"boughwork/geom"
	"boughwork/ground"
	"boughwork/lp"
)

// Tolerances of Verify, each a share: of the largest load, of the strength, of the volume, of the cost of a candidate, of
// the largest displacement.
const (
	balanceShare  = 1e-8
	strengthShare = 1e-8
	volumeShare   = 1e-9
	priceShare    = 1e-9
	rigidShare    = 1e-9
)

// Report is what Verify found.
type Report struct {
	Checks []Check
	Bound  float64 // recomputed from the record's displacements, m3
	Gap    float64 // recomputed
}

// Check is one finding: Value is to be at most Limit.
type Check struct {
	Name         string
	Value, Limit float64
	OK           bool
	Text         string // where it is worst
}

// OK reports whether all checks passed.
func (r *Report) OK() bool {
	for _, c := range r.Checks {
		if !c.OK {
			return false
		}
	}
	return true
}

func (r *Report) add(name string, value, limit float64, format string, args ...any) {
	r.Checks = append(r.Checks, Check{name, value, limit, value <= limit, fmt.Sprintf(format, args...)})
}

// judge holds a record while it is judged, in SI units. It knows nothing of rows, blocks and solvers: everything is done
// node by node.
type judge struct {
	rec  *Record
	s    *ground.Structure
	load float64 // the largest load or bar force, N
	u    [][]geom.Vec
	rep  *Report
}

// Verify judges a record by the record alone: equilibrium in every case, strength, footing limits, volume, every
// candidate against the displacements, the bound and the gap; for a record without a layout, the motion that proves it.
// An error means that the record cannot be judged; what is wrong with a layout is in the report.
//
// It shares with the rest of the program only the geometry that says which pairs of nodes are candidates.
func Verify(rec *Record) (*Report, error) {
	if err := rec.consistent(); err != nil {
		return nil, fmt.Errorf("layout: record: %w", err)
	}
	s, err := rec.Structure()
	if err != nil {
		return nil, err
	}
	j := &judge{rec: rec, s: s, rep: &Report{}}
	for _, c := range s.Cases {
		for _, l := range c.Loads {
			j.load = math.Max(j.load, l.Force.Norm())
		}
	}
	if rec.claimsNothing() {
		return j.rep, nil // the study ended before it began
	}
	j.rep.add("candidates (by which the record's count is off)", math.Abs(float64(ground.NewCandidates(s).Count()-rec.Candidates.Count)), 0,
		"record %d", rec.Candidates.Count)
	if rec.Collapse != nil {
		j.collapse()
		return j.rep, nil
	}
	if len(rec.Bars) > 0 || rec.Status == "optimal" {
		j.balance()
		j.strength()
		j.volume()
	}
	j.dual()
	return j.rep, nil
}

// claimsNothing reports whether a record is that of a study which was stopped before its candidates were counted.
func (rec *Record) claimsNothing() bool {
	c := rec.Certificate
	return rec.Status == lp.Cancelled.String() && rec.Candidates.Count == uncounted && len(rec.Bars) == 0 && rec.Collapse == nil &&
		c.ObjectiveM3 == 0 && c.VolumeM3 == 0 && c.BoundM3 == 0
}

// balance sums all forces at every node in every case. What is left must be a reaction where one can act.
func (j *judge) balance() {
	worst, where := 0.0, "every node in every case"
	note := func(v float64, format string, args ...any) {
		if v = math.Abs(v) / math.Max(j.load, 1e-300); v > worst {
			worst, where = v, fmt.Sprintf(format, args...)
		}
	}
	for k, c := range j.s.Cases {
		left := j.left(k)
		deck := make([]bool, len(left))
		for _, d := range j.s.Diaphragms {
			var sum geom.Vec
			turn, arm := 0.0, 1.0
			centre := j.centre(d)
			for _, n := range d {
				deck[n] = true
				v := j.s.Nodes[n].At.Sub(centre)
				if !j.s.Nodes[n].Fixed[0] {
					sum.X += left[n].X
					turn -= v.Y * left[n].X
				}
				if !j.s.Nodes[n].Fixed[1] {
					sum.Y += left[n].Y
					turn += v.X * left[n].Y
				}
				arm = math.Max(arm, math.Hypot(v.X, v.Y))
			}
			note(math.Max(math.Max(math.Abs(sum.X), math.Abs(sum.Y)), math.Abs(turn)/arm), "deck in case %q", c.Name)
		}
		for i, n := range j.s.Nodes {
			for x, v := range left[i].Array() {
				if !n.Fixed[x] && !(deck[i] && x < 2) {
					note(v, "node %d, %c, in case %q: %.6g kN", i, 'x'+x, c.Name, v/kilo)
				}
			}
		}
		j.reactions(k, left, note)
	}
	j.rep.add("equilibrium (largest unbalanced force / largest load)", worst, balanceShare, "%s", where)
}

func (j *judge) centre(nodes []int) (c geom.Vec) {
	for _, n := range nodes {
		c = c.Add(j.s.Nodes[n].At.Scale(1 / float64(len(nodes))))
	}
	return c
}

// left returns, node by node, the sum of bar forces, loads and weights in case k, N. A supported node passes it on to
// the ground: the reaction is its opposite.
func (j *judge) left(k int) []geom.Vec {
	left := make([]geom.Vec, len(j.s.Nodes))
	for _, l := range j.s.Cases[k].Loads {
		left[l.Node] = left[l.Node].Add(l.Force)
	}
	for _, b := range j.rec.Bars {
		a, e := b.Nodes[0], b.Nodes[1]
		d := j.s.Nodes[e].At.Sub(j.s.Nodes[a].At)
		l := d.Norm()
		f := d.Scale(b.ForceKN[k] * kilo / l)
		w := geom.Vec{Z: -j.s.Cases[k].Gravity * j.s.Material.Density * ground.Gravity * l * b.AreaM2 / 2}
		left[a] = left[a].Add(f).Add(w)
		left[e] = left[e].Sub(f).Add(w)
	}
	return left
}

func (j *judge) strength() {
	worst, where := 0.0, "every bar in every case"
	for i, b := range j.rec.Bars {
		for k, q := range b.ForceKN {
			limit := j.s.Material.Tension
			if q < 0 {
				limit = j.s.Material.Compression
			}
			over := math.Abs(q)*kilo - limit*b.AreaM2
			if v := over / math.Max(limit*b.AreaM2, balanceShare*j.load); v > worst {
				worst, where = v, fmt.Sprintf("bar %d in case %q: %.6g kN on %.6g m2", i, j.s.Cases[k].Name, q, b.AreaM2)
			}
		}
		if !(b.AreaM2 >= 0) {
			worst, where = math.Inf(1), fmt.Sprintf("bar %d has area %g m2", i, b.AreaM2)
		}
	}
	j.rep.add("strength (largest share by which a bar is overloaded)", worst, strengthShare, "%s", where)
}

// volume sums the bars that cost, and checks that each is a candidate.
func (j *judge) volume() {
	can := ground.NewCandidates(j.s)
	kept := map[[2]int]float64{}
	for _, k := range j.rec.Candidates.Kept {
		kept[ordered(k.Nodes)] += k.AreaM2
	}
	volume, objective := 0.0, 0.0
	bad, where := 0.0, "every bar is a candidate or a kept member"
	for i, b := range j.rec.Bars {
		if b.Kept {
			if a := kept[ordered(b.Nodes)]; b.AreaM2 > a*(1+volumeShare) {
				bad, where = bad+1, fmt.Sprintf("kept bar %d has %g m2, given are %g m2", i, b.AreaM2, a)
			}
			continue
		}
		if !can.Allowed(b.Nodes[0], b.Nodes[1]) {
			bad, where = bad+1, fmt.Sprintf("bar %d between nodes %d and %d is no candidate", i, b.Nodes[0], b.Nodes[1])
		}
		l := j.s.Nodes[b.Nodes[1]].At.Sub(j.s.Nodes[b.Nodes[0]].At).Norm()
		volume += l * b.AreaM2
		objective += (l + 2*j.s.JointCost) * can.Factor(b.Nodes[0], b.Nodes[1]) * b.AreaM2
	}
	j.rep.add("bars that are no candidates", bad, 0, "%s", where)
	objective += j.footCost()
	c := j.rec.Certificate
	j.rep.add("volume (share by which the record differs)", off(volume, c.VolumeM3), volumeShare, "sum %.9g m3, record %.9g m3", volume, c.VolumeM3)
	// A costed foot may be charged for a little more than it carries.
	j.rep.add("objective (share by which the record is too low)", math.Max(0, objective-c.ObjectiveM3)/math.Max(objective, 1e-300), volumeShare,
		"sum %.9g m3, record %.9g m3", objective, c.ObjectiveM3)
}

func ordered(p [2]int) [2]int { return [2]int{min(p[0], p[1]), max(p[0], p[1])} }

func off(a, b float64) float64 {
	if a == b {
		return 0
	}
	return math.Abs(a-b) / math.Max(math.Abs(a), math.Abs(b))
}
