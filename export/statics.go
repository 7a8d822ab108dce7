package export

import (
	"boughwork/geom"
	"boughwork/ground"
	"boughwork/ground/layout"
)

// newtonPerKilo turns N into kN.
const newtonPerKilo = 1e3

// Reactions returns the force of the support on the structure in kN as [case][node]; it is zero at nodes and in directions that
// are not held. It is the opposite of all that pulls and presses on the node: the forces of its bars (a bar in tension
// pulls its node towards the other end), the loads, and half of the weight of each of its bars (density x standard
// gravity x area x length) times the gravity factor of the case. A diaphragm deck carries its horizontal forces inside
// itself: they are no reactions.
func Reactions(rec *layout.Record) [][]geom.Vec {
	out := make([][]geom.Vec, len(rec.Cases))
	for k := range rec.Cases {
		out[k] = leftOver(rec, k)
		for i, n := range rec.Nodes {
			r := out[k][i].Scale(-1).Array()
			for x := range r {
				if !n.Fixed[x] {
					r[x] = 0
				}
			}
			out[k][i] = geom.FromArray(r)
		}
	}
	return out
}

// leftOver returns the sum of bar forces, loads and weights at every node in case k, kN.
func leftOver(rec *layout.Record, k int) []geom.Vec {
	sum := make([]geom.Vec, len(rec.Nodes))
	for _, l := range rec.Cases[k].Loads {
		sum[int(l[0])] = sum[int(l[0])].Add(geom.Vec{X: l[1], Y: l[2], Z: l[3]})
	}
	for _, b := range rec.Bars {
		i, j := b.Nodes[0], b.Nodes[1]
		along := at(rec, j).Sub(at(rec, i))
		l := along.Norm()
		if l == 0 {
			continue
		}
		pull := along.Scale(b.ForceKN[k] / l)
		half := geom.Vec{Z: -barWeight(rec, b) * rec.Cases[k].Gravity / 2}
		sum[i] = sum[i].Add(pull).Add(half)
		sum[j] = sum[j].Sub(pull).Add(half)
	}
	return sum
}

// barWeight is the weight of a bar before any factor, kN.
func barWeight(rec *layout.Record, b layout.RecordBar) float64 {
	return rec.Material.DensityKgM3 * ground.Gravity * b.AreaM2 * lengthOf(rec, b) / newtonPerKilo
}

// resultant is a force in kN with its moment about the local origin (0, 0, 0) in kNm.
type resultant struct{ Force, Moment geom.Vec }

// add adds a force at a place.
func (r *resultant) add(force, place geom.Vec) {
	r.Force = r.Force.Add(force)
	r.Moment = r.Moment.Add(place.Cross(force))
}

// plus returns the sum of two resultants.
func (r resultant) plus(s resultant) resultant {
	return resultant{r.Force.Add(s.Force), r.Moment.Add(s.Moment)}
}

// loadsOf sums the loads of case k.
func loadsOf(rec *layout.Record, k int) (sum resultant) {
	for _, l := range rec.Cases[k].Loads {
		sum.add(geom.Vec{X: l[1], Y: l[2], Z: l[3]}, at(rec, int(l[0])))
	}
	return sum
}

// weightOf sums the weight of the bars in case k, with the gravity factor of the case.
func weightOf(rec *layout.Record, k int) (sum resultant) {
	for _, b := range rec.Bars {
		half := geom.Vec{Z: -barWeight(rec, b) * rec.Cases[k].Gravity / 2}
		sum.add(half, at(rec, b.Nodes[0]))
		sum.add(half, at(rec, b.Nodes[1]))
	}
	return sum
}
