package export

import (
	"math"

	"boughwork/geom"
	"boughwork/ground/layout"
)

// Summary is a record in a few plain numbers, the same on the terminal and on the sheet.
type Summary struct {
	Title, Status string

	Bars   int // all bars, kept members with them
	Kept   int // kept members among them
	Joints int // nodes that the layout uses, feet and wall supports with them
	Feet   int // feet among them

	VolumeM3     float64 // of the bars that cost
	KeptVolumeM3 float64 // of the kept members
	MassKg       float64 // VolumeM3 x density
	LengthM      float64 // of all bars together
	ObjectiveM3  float64 // what was made least: volume with joint cost, cost factors and costs of feet
	BoundM3      float64 // no layout on the same ground structure has a smaller objective
	Gap          float64 // (objective - bound) / objective

	// WeightShare is the largest share that the weight of the bars has in the loads of a case, by sums of magnitudes; 0 where
	// bars do not weigh. A large one means that the bars serve as ballast.
	WeightShare float64

	Cases, Governing int // all cases; cases in which the layout was solved
	Omitted          int // combinations that cannot govern and were left out

	LargestReaction Extreme // by magnitude of the force, at a mark of a node
	LargestDown     Extreme // largest pressing of a support, as a positive number
	LargestUplift   Extreme // largest pull on a support, as a positive number
	LargestTension  Extreme // at a mark of a bar
	LargestPressure Extreme // largest compression, as a positive number, at a mark of a bar
}

// Extreme is the largest of some forces: its size in kN (never negative), the mark where it acts, the name of the case. All
// three are empty if there is none.
type Extreme struct {
	KN   float64
	Mark string
	Case string
}

func (e *Extreme) take(kn float64, mark, name string) {
	if kn > e.KN {
		*e = Extreme{kn, mark, name}
	}
}

// Summarise takes a record together. The record must hold together as layout.Read promises.
func Summarise(rec *layout.Record) Summary {
	m := newMarks(rec)
	c := rec.Certificate
	s := Summary{Title: rec.Title, Status: rec.Status, Bars: len(rec.Bars), Joints: len(m.used), Cases: len(rec.Cases),
		ObjectiveM3: c.ObjectiveM3, BoundM3: c.BoundM3, Gap: c.Gap}
	for i, b := range rec.Bars {
		l := lengthOf(rec, b)
		s.LengthM += l
		if b.Kept {
			s.Kept++
			s.KeptVolumeM3 += l * b.AreaM2
		} else {
			s.VolumeM3 += l * b.AreaM2
		}
		e := extremesOf(b)
		if e.tensionCase >= 0 {
			s.LargestTension.take(e.tension, barMark(i), rec.Cases[e.tensionCase].Name)
		}
		if e.compressionCase >= 0 {
			s.LargestPressure.take(e.compression, barMark(i), rec.Cases[e.compressionCase].Name)
		}
	}
	s.MassKg = s.VolumeM3 * rec.Material.DensityKgM3
	for _, i := range m.used {
		if rec.Nodes[i].Role == "footing" {
			s.Feet++
		}
	}
	s.Omitted = len(rec.OmittedCases)
	s.WeightShare = weightShare(rec)
	for _, cs := range rec.Cases {
		if cs.Governs {
			s.Governing++
		}
	}
	if len(rec.Bars) > 0 {
		s.largestReactions(rec, m, Reactions(rec))
	}
	return s
}

func weightShare(rec *layout.Record) float64 {
	top := 0.0
	for k, cs := range rec.Cases {
		loads := 0.0
		for _, l := range cs.Loads {
			loads += geom.Vec{X: l[1], Y: l[2], Z: l[3]}.Norm()
		}
		if weight := math.Abs(weightOf(rec, k).Force.Z); weight > 0 {
			top = math.Max(top, weight/(weight+loads))
		}
	}
	return top
}

func (s *Summary) largestReactions(rec *layout.Record, m marks, reactions [][]geom.Vec) {
	for k, cs := range rec.Cases {
		for _, i := range m.used {
			r := reactions[k][i]
			s.LargestReaction.take(r.Norm(), m.node[i], cs.Name)
			s.LargestDown.take(math.Max(r.Z, 0), m.node[i], cs.Name)
			s.LargestUplift.take(math.Max(-r.Z, 0), m.node[i], cs.Name)
		}
	}
}
