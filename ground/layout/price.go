package layout

import (
	"cmp"
	"math"
	"slices"

	"boughwork/geom"
	"boughwork/ground"
)

// pair is a candidate bar between nodes i < j; ratio is its price over its cost.
type pair struct {
	i, j  int32
	cost  float64
	ratio float64
}

// key orders pairs by nodes.
func (p pair) key() int64 { return int64(p.i)<<32 | int64(p.j) }

// pricer prices every candidate of a structure with the displacements of some cases.
type pricer struct {
	s   *ground.Structure
	can *ground.Candidates
}

// Violating candidates that are remembered per node, the worst first: more than a round could add anyway.
const keepPerNode = 48

// found is what pricing says: the worst violators, in order of nodes, and the largest ratio of any allowed candidate.
type found struct {
	pairs []pair
	worst float64
}

// price looks at all candidates and returns those whose price exceeds limit times their cost.
func (pr *pricer) price(u [][]geom.Vec, gravity []float64, limit float64) found {
	n := len(pr.s.Nodes)
	rows := make([]found, n)
	flat := flatten(u, n)
	pr.can.EachRow(func(i int) { rows[i] = pr.priceRow(i, flat, gravity, limit) })
	var all found
	for _, r := range rows {
		all.pairs = append(all.pairs, r.pairs...)
		all.worst = math.Max(all.worst, r.worst)
	}
	return all
}

// flatten lays displacements out as [node][case][xyz], so that one node's are side by side.
func flatten(u [][]geom.Vec, n int) []float64 {
	k := len(u)
	flat := make([]float64, 3*k*n)
	for c, uc := range u {
		for i, v := range uc {
			copy(flat[(i*k+c)*3:], []float64{v.X, v.Y, v.Z})
		}
	}
	return flat
}

func (pr *pricer) priceRow(i int, u, gravity []float64, limit float64) found {
	s, k := pr.s, len(gravity)
	st, sc := s.Material.Tension, s.Material.Compression
	half := s.Material.Density * ground.Gravity / 2
	at := s.Nodes[i].At
	ui := u[i*k*3 : (i+1)*k*3]
	var out found
	for j := i + 1; j < len(s.Nodes); j++ {
		d := s.Nodes[j].At.Sub(at)
		l2 := d.Dot(d)
		uj := u[j*k*3 : (j+1)*k*3]
		price := 0.0 // times l
		for c := range k {
			e := d.X*(uj[3*c]-ui[3*c]) + d.Y*(uj[3*c+1]-ui[3*c+1]) + d.Z*(uj[3*c+2]-ui[3*c+2])
			price += math.Max(st*e, -sc*e)
			if g := gravity[c]; g != 0 {
				price += g * half * (ui[3*c+2] + uj[3*c+2]) * l2
			}
		}
		if price <= 0 {
			continue
		}
		l := math.Sqrt(l2)
		cost := (l + 2*s.JointCost) * pr.can.Factor(i, j)
		ratio := price / (l * cost)
		if ratio > limit && pr.can.Plausible(i, j) {
			out.pairs = append(out.pairs, pair{int32(i), int32(j), cost, ratio})
		} else if ratio > out.worst && pr.can.Plausible(i, j) && pr.can.Clear(i, j) {
			out.worst = ratio
		}
	}
	pr.sift(&out)
	return out
}

// sift keeps the largest violators of a row that the geometry allows.
func (pr *pricer) sift(f *found) {
	slices.SortFunc(f.pairs, func(a, b pair) int {
		return cmp.Or(cmp.Compare(b.ratio, a.ratio), cmp.Compare(a.j, b.j))
	})
	kept := f.pairs[:0]
	for _, p := range f.pairs {
		if len(kept) == keepPerNode {
			break
		}
		if pr.can.Clear(int(p.i), int(p.j)) {
			kept = append(kept, p)
			f.worst = math.Max(f.worst, p.ratio)
		}
	}
	f.pairs = kept
}
