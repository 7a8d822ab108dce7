package export

import (
	"math"
	"math/rand"
	"testing"

	"boughwork/geom"
	"boughwork/ground"
	"boughwork/ground/layout"
)

// balanceTolerance is what rounding may leave of forces of some 10 kN, kN.
const balanceTolerance = 1e-9

// Three legs share a load that stands over the middle of their feet, and each passes it on along itself (statics).
func TestReactionsOfTripod(t *testing.T) {
	rec := tripod()
	reactions := Reactions(rec)
	share := 0.0
	for k, c := range rec.Cases {
		weight := 0.0
		for _, b := range rec.Bars {
			weight += rec.Material.DensityKgM3 * ground.Gravity * b.AreaM2 * lengthOf(rec, b) / 1e3
		}
		down := -c.Loads[0][3] + c.Gravity*weight
		share = math.Max(share, c.Gravity*weight/down)
		for i := range 3 {
			r := reactions[k][i]
			if math.Abs(r.Z-down/3) > balanceTolerance {
				t.Errorf("case %q, foot %d: %.9g kN up, want a third of %.9g", c.Name, i, r.Z, down)
			}
			// The ground pushes a spreading leg inwards.
			if in := r.X*rec.Nodes[i].XYZ[0] + r.Y*rec.Nodes[i].XYZ[1]; in >= 0 {
				t.Errorf("case %q, foot %d: reaction %v points outwards", c.Name, i, r)
			}
		}
	}
	if got := Summarise(rec).WeightShare; math.Abs(got-share) > 1e-12 || share == 0 {
		t.Errorf("the bars weigh %g of what acts, want %g", got, share)
	}
}

// A bar in tension pulls its support towards the other end, so the support pulls back.
func TestReactionSigns(t *testing.T) {
	rec := newRecord("hanger")
	rec.Nodes = []layout.RecordNode{{XYZ: [3]float64{0, 0, 10}, Fixed: [3]bool{true, true, true}, Role: "wall"}, {XYZ: [3]float64{0, 0, 4}, Role: "inner"}}
	rec.Cases = []layout.RecordCase{{Name: "lamp", Loads: [][4]float64{{1, 0, 0, -3}}}}
	rec.Bars = []layout.RecordBar{{Nodes: [2]int{1, 0}, AreaM2: 1e-5, ForceKN: []float64{3}}}
	if r := Reactions(rec)[0][0]; r != (geom.Vec{Z: 3}) {
		t.Errorf("reaction %v, want 3 kN up", r)
	}
}

// With every node held, reactions close equilibrium whatever the bars carry: forces and moments.
func TestReactionsCloseEquilibrium(t *testing.T) {
	rng := rand.New(rand.NewSource(3))
	for range 50 {
		rec := randomRecord(rng)
		reactions := Reactions(rec)
		for k := range rec.Cases {
			sum := loadsOf(rec, k).plus(weightOf(rec, k))
			for i := range rec.Nodes {
				sum.add(reactions[k][i], at(rec, i))
			}
			if sum.Force.Norm() > balanceTolerance || sum.Moment.Norm() > 100*balanceTolerance {
				t.Fatalf("left over: %v kN, %v kNm", sum.Force, sum.Moment)
			}
		}
	}
}

func randomRecord(rng *rand.Rand) *layout.Record {
	rec := newRecord("random")
	for range 8 {
		rec.Nodes = append(rec.Nodes, layout.RecordNode{XYZ: [3]float64{20 * rng.Float64(), 20 * rng.Float64(), 10 * rng.Float64()},
			Fixed: [3]bool{true, true, true}, Role: "footing"})
	}
	for range 3 {
		rec.Cases = append(rec.Cases, layout.RecordCase{Name: "c", Gravity: rng.Float64(), Loads: [][4]float64{{float64(rng.Intn(8)), rng.NormFloat64(), rng.NormFloat64(), rng.NormFloat64()}}})
	}
	for range 12 {
		a := rng.Intn(8)
		b := (a + 1 + rng.Intn(7)) % 8
		bar := layout.RecordBar{Nodes: [2]int{a, b}, AreaM2: 1e-3 * rng.Float64()}
		for range rec.Cases {
			bar.ForceKN = append(bar.ForceKN, 50*rng.NormFloat64())
		}
		rec.Bars = append(rec.Bars, bar)
	}
	return rec
}

func TestStates(t *testing.T) {
	for _, c := range []struct {
		forces []float64
		want   State
	}{
		{[]float64{0, 0}, Idle}, {[]float64{3, 0}, Tension}, {[]float64{-3, 0}, Compression}, {[]float64{-3, 2}, Both},
		{[]float64{-3, 0.01}, Compression}, {[]float64{-0.01, 3}, Tension},
	} {
		if got := extremesOf(layout.RecordBar{ForceKN: c.forces}).state(); got != c.want {
			t.Errorf("%v: %s, want %s", c.forces, got, c.want)
		}
	}
}

func TestSummary(t *testing.T) {
	rec := tripod()
	s := Summarise(rec)
	if s.Bars != 4 || s.Joints != 5 || s.Feet != 3 || s.Cases != 2 || s.Governing != 1 {
		t.Errorf("counts: %+v", s)
	}
	if want := s.VolumeM3 * 7850; math.Abs(s.MassKg-want) > 1e-9 || s.VolumeM3 <= 0 {
		t.Errorf("mass %g kg, want %g", s.MassKg, want)
	}
	if s.LargestTension != (Extreme{}) {
		t.Errorf("a tripod under its load has no tension, got %+v", s.LargestTension)
	}
	if s.LargestPressure.Mark != "B4" || s.LargestPressure.Case != "1.35 Roofing" {
		t.Errorf("largest compression %+v, want the post in the heavier case", s.LargestPressure)
	}
	if s.LargestUplift != (Extreme{}) || s.LargestDown.KN <= 0 || s.LargestReaction.KN < s.LargestDown.KN || s.LargestReaction.Case != "1.35 Roofing" {
		t.Errorf("reactions: %+v", s)
	}
	rec.Bars[3].Kept = true
	if k := Summarise(rec); k.Kept != 1 || math.Abs(k.VolumeM3+k.KeptVolumeM3-s.VolumeM3) > 1e-12 || !(k.VolumeM3 < s.VolumeM3) {
		t.Errorf("a kept bar costs nothing: %+v", k)
	}
}
