package layout_test

import (
	"bytes"
	"context"
	"fmt"
	"math"
	"runtime"
	"testing"

	"boughwork/geom"
	"boughwork/ground"
	"boughwork/ground/layout"
)

// rich is a structure with one of everything that a record holds: unequal strengths, weight, joint cost, two cases,
// a deck, a zone with limits and a cost, a kept member, a keep-clear and costed roof bars.
func rich() *builder {
	b := tripod()
	b.strengths(2, 1)
	weigh(b, 0.01)
	b.newCase()
	b.Cases[1].Gravity = 1.35
	b.load(4, -0.2, 0, -0.5)
	b.load(6, -0.2, 0.1, -1.5)
	b.JointCost = 0.1
	b.Deck, b.Diaphragms = ground.DeckDiaphragm, [][]int{{4, 5, 6}}
	feet(b, geom.FootLimits{Vertical: newton(3.3), Sideways: newton(2), Cost: 0.05})
	b.Kept = []ground.Kept{{A: 0, B: 4, Area: 0.3}}
	b.Rules = ground.Rules{MinLength: 0.1, MaxLength: 6, RoofBars: ground.RoofBarsCosted, RoofFactor: 1.5,
		KeepClear: []geom.Prism{box("lane", -0.4, 1, 0.6, 2, 0, 1)}}
	return b
}

// box is a prism on a rectangle.
func box(name string, x0, y0, x1, y1, from, to float64) geom.Prism {
	ring := []geom.Vec{{X: x0, Y: y0}, {X: x1, Y: y0}, {X: x1, Y: y1}, {X: x0, Y: y1}}
	return geom.Prism{Name: name, Polygon: geom.Region{Rings: [][]geom.Vec{ring}}.Polygon(), From: from, To: to}
}

// falsehood changes a record so that it no longer says the truth.
type falsehood struct {
	what string
	tell func(r *layout.Record)
}

// falsehoods lists changes of single numbers of a record. Each is small: a part in a thousand, where it is a number that
// can be changed a little.
func falsehoods(r *layout.Record) []falsehood {
	var out []falsehood
	add := func(what string, tell func(r *layout.Record)) { out = append(out, falsehood{what, tell}) }
	for i, b := range r.Bars {
		for _, by := range []float64{0.999, 1.001} {
			if !b.Kept || by > 1 { // a kept member may be thinner than it is as long as it is strong enough
				add(fmt.Sprintf("area of bar %d x %g", i, by), func(r *layout.Record) { r.Bars[i].AreaM2 *= by })
			}
			for k, q := range b.ForceKN {
				if math.Abs(q) > 1e-6*1e-3 { // 1e-6 of the loads of 1 N: less than this is nothing
					add(fmt.Sprintf("force of bar %d in case %d x %g", i, k, by), func(r *layout.Record) { r.Bars[i].ForceKN[k] *= by })
				}
			}
		}
		add(fmt.Sprintf("a force of bar %d in case 0 more", i), func(r *layout.Record) { r.Bars[i].ForceKN[0] += 1e-6 })
		add(fmt.Sprintf("bar %d ends elsewhere", i), func(r *layout.Record) {
			n := 0
			for n == r.Bars[i].Nodes[0] || n == r.Bars[i].Nodes[1] {
				n++
			}
			r.Bars[i].Nodes[1] = n
		})
		add(fmt.Sprintf("bar %d is left out", i), func(r *layout.Record) { r.Bars = append(r.Bars[:i:i], r.Bars[i+1:]...) })
	}
	for k := range r.Cases {
		for i, l := range r.Cases[k].Loads {
			for x := 1; x < 4; x++ {
				if l[x] != 0 {
					add(fmt.Sprintf("component %d of load %d in case %d", x, i, k), func(r *layout.Record) { r.Cases[k].Loads[i][x] *= 1.001 })
				}
			}
			add(fmt.Sprintf("node of load %d in case %d", i, k), func(r *layout.Record) { r.Cases[k].Loads[i][0] = 3 })
		}
		add(fmt.Sprintf("gravity of case %d", k), func(r *layout.Record) { r.Cases[k].Gravity += 0.1 })
	}
	used := map[int]bool{}
	for _, b := range r.Bars {
		used[b.Nodes[0]], used[b.Nodes[1]] = true, true
	}
	for i := range r.Nodes {
		for x := range 3 {
			if used[i] {
				add(fmt.Sprintf("coordinate %d of node %d", x, i), func(r *layout.Record) { r.Nodes[i].XYZ[x] += 0.01 })
			}
		}
	}
	add("a support that is none", func(r *layout.Record) { r.Nodes[0].Fixed[2] = false })
	add("tension strength up", func(r *layout.Record) { r.Material.TensionMPa *= 1.01 })
	add("tension strength down", func(r *layout.Record) { r.Material.TensionMPa *= 0.99 })
	add("compression strength up", func(r *layout.Record) { r.Material.CompressionMPa *= 1.01 })
	add("compression strength down", func(r *layout.Record) { r.Material.CompressionMPa *= 0.99 })
	add("density", func(r *layout.Record) { r.Material.DensityKgM3 *= 1.01 })
	add("joint cost up", func(r *layout.Record) { r.JointCostM *= 1.1 })
	add("joint cost down", func(r *layout.Record) { r.JointCostM *= 0.9 })
	add("no deck", func(r *layout.Record) { r.Diaphragms = []layout.RecordDiaphragm{} })
	add("a smaller deck", func(r *layout.Record) { r.Diaphragms[0].Nodes = r.Diaphragms[0].Nodes[1:] })
	add("vertical limit down", func(r *layout.Record) { *r.Footings[0].VerticalKN = 2e-3 })
	add("sideways limit down", func(r *layout.Record) { *r.Footings[0].SidewaysKN = 1e-5 })
	add("feet may not lift", func(r *layout.Record) { r.Footings[0].NoUplift, r.Footings[0].VerticalKN = true, newton(1e-3) })
	add("cost of feet up", func(r *layout.Record) { r.Footings[0].CostM3PerKN *= 1.1 })
	add("kept member thinner", func(r *layout.Record) { r.Candidates.Kept[0].AreaM2 *= 0.9 })
	add("kept member left out", func(r *layout.Record) { r.Candidates.Kept = nil })
	add("bars that cost called kept", func(r *layout.Record) { r.Bars[0].Kept = !r.Bars[0].Kept })
	add("shortest bar longer", func(r *layout.Record) { r.Candidates.MinLengthM = 5.9 })
	add("longest bar shorter", func(r *layout.Record) { r.Candidates.MaxLengthM = 1 })
	add("volume up", func(r *layout.Record) { r.Certificate.VolumeM3 *= 1.001 })
	add("volume down", func(r *layout.Record) { r.Certificate.VolumeM3 *= 0.999 })
	add("objective down", func(r *layout.Record) { r.Certificate.ObjectiveM3 *= 0.999 })
	add("bound up", func(r *layout.Record) { r.Certificate.BoundM3 *= 1.001 })
	add("gap down", func(r *layout.Record) { r.Certificate.Gap /= 2 })
	for k := range r.Certificate.Displacement {
		for i, v := range r.Certificate.Displacement[k] {
			for x := range 3 {
				if r.Nodes[i].Fixed[x] && v[x] == 0 {
					add(fmt.Sprintf("a support moves: node %d, case %d", i, k), func(r *layout.Record) { r.Certificate.Displacement[k][i][x] = 1 })
				}
			}
		}
		for j, l := range r.Cases[k].Loads {
			for x := range 3 {
				if l[x+1] != 0 {
					for _, by := range []float64{-1, 1} {
						add(fmt.Sprintf("displacement of load %d in direction %d of case %d %+g %%", j, x, k, by), func(r *layout.Record) {
							r.Certificate.Displacement[k][int(l[0])][x] *= 1 + by/100
						})
					}
				}
			}
		}
		add(fmt.Sprintf("all displacements of case %d up", k), func(r *layout.Record) { stretch(r, k, 1.01) })
		add(fmt.Sprintf("all displacements of case %d down", k), func(r *layout.Record) { stretch(r, k, 0.99) })
	}
	return out
}

func stretch(r *layout.Record, k int, by float64) {
	for i := range r.Certificate.Displacement[k] {
		for x := range 3 {
			r.Certificate.Displacement[k][i][x] *= by
		}
	}
}

// TestVerifyFindsFalsehoods breaks if Verify lets a record pass in which one number that matters is not true.
func TestVerifyFindsFalsehoods(t *testing.T) {
	b := rich()
	r := solve(t, &b.Structure, 1e-7)
	verified(t, &b.Structure, r)
	list := falsehoods(passThroughFile(t, &b.Structure, r))
	if len(list) < 150 {
		t.Errorf("only %d numbers to change: the record is not rich", len(list))
	}
	for _, f := range list {
		rec := passThroughFile(t, &b.Structure, r)
		f.tell(rec)
		if rep, err := layout.Verify(rec); err == nil && rep.OK() {
			t.Errorf("%s: passes", f.what)
		}
	}
}

// TestSameRecordOnAnyCores breaks if the number of processors can be seen in a record.
func TestSameRecordOnAnyCores(t *testing.T) {
	record := func(s *ground.Structure, cores int) []byte {
		defer runtime.GOMAXPROCS(runtime.GOMAXPROCS(cores))
		r, err := layout.Solve(context.Background(), s, layout.Options{Gap: 1e-4})
		if err != nil {
			t.Fatal(err)
		}
		var out bytes.Buffer
		if err := layout.Write(&out, layout.NewRecord(s, r, layout.Meta{MadeBy: "test"})); err != nil {
			t.Fatal(err)
		}
		return out.Bytes()
	}
	structures := []*ground.Structure{&rich().Structure}
	for seed := range uint64(6) {
		structures = append(structures, randomStructure(seed, everything))
	}
	large := newBuilder()
	cantilever(large, 2, 6, 1, 1)
	large.newCase()
	large.load(large.node(2, 0, 0, ""), 0, 0.3, -0.8)
	structures = append(structures, &large.Structure)
	for i, s := range structures {
		one, two := record(s, 1), record(s, 2)
		if !bytes.Equal(one, two) {
			t.Errorf("structure %d: the record differs with the number of processors", i)
		}
		if again := record(s, 2); !bytes.Equal(two, again) {
			t.Errorf("structure %d: the record differs from run to run", i)
		}
	}
}
